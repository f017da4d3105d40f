import { parametersOf, parseScenario, type ScenarioDocument, ScenarioError } from "@demilune/solver";
import { data, Form, href, Link, redirect } from "react-router";
import { ErrorSummary } from "~/components/fields/ErrorSummary";
import { NewShareLink } from "~/components/share/NewShareLink";
import { ShareForm } from "~/components/share/ShareForm";
import { Moment } from "~/components/ui/moment";
import { listOverlays } from "~/models/overlays.server";
import { findRevision, findScenario } from "~/models/scenarios.server";
import { createShare, listShares, revokeShare, shareDays } from "~/models/shares.server";
import { notFound, requireLab } from "~/services/authorisation.server";
import { settings } from "~/services/settings.server";
import type { Route } from "./+types/shares";
import { shareAction } from "./shares.schema";

/** Every number of a document that a slider can move: of the device, its light and circuit, and not zero; with its words; none where the document cannot be solved as written. */
function movable(document: ScenarioDocument) {
  try {
    return parametersOf(parseScenario(document))
      .filter(({ path, value }) => value !== null && value !== 0 && /^(stack|light|circuit)\./.test(path))
      .map(({ path, label }) => ({ path, label }));
  } catch (error) {
    if (error instanceof ScenarioError) return [];
    throw error;
  }
}

export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args, "researcher");
  const { scenarioId } = args.params;
  const [scenario, revision] = await Promise.all([findScenario(lab.id, scenarioId), findRevision(lab.id, scenarioId)]);
  if (!scenario || !revision) throw notFound();
  const [shares, overlays] = await Promise.all([listShares(lab.id, scenarioId), listOverlays(lab.id, scenarioId)]);
  const now = Date.now();
  return {
    scenario: { id: scenario.id, name: scenario.name },
    revisionNumber: revision.number,
    measurements: overlays.map(({ id, name }) => ({ id, name })),
    parameters: movable(revision.document),
    days: shareDays,
    shares: shares.map((share) => ({
      ...share,
      state: share.revokedAt
        ? ("revoked" as const)
        : share.expiresAt.getTime() <= now
          ? ("expired" as const)
          : ("open" as const),
    })),
  };
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const { scenarioId } = args.params;
  if (!(await findScenario(lab.id, scenarioId))) throw notFound();
  const actor = { labId: lab.id, userId: user.id };
  const form = await args.request.formData();
  const parsed = shareAction.safeParse({
    ...Object.fromEntries(form),
    measurementIds: form.getAll("measurementId"),
    exposed: form.getAll("exposed"),
  });
  if (!parsed.success) {
    const faults = parsed.error.issues.map(({ path, message }) => ({ field: String(path[0] ?? ""), message }));
    return data({ faults }, { status: 400 });
  }
  if (parsed.data.intent === "revoke") {
    if (!(await revokeShare(actor, scenarioId, parsed.data.shareId))) throw notFound();
    return redirect(href("/lab/:labId/scenarios/:scenarioId/shares", { labId: lab.id, scenarioId }), 303);
  }
  const { exposed, ...rest } = parsed.data;
  const made = await createShare(actor, scenarioId, { ...rest, exposed: exposed.length > 0 ? exposed : null });
  if (!made) throw notFound();
  return { link: `${settings().origin}/s/${made.token}`, shareId: made.id };
}

export const meta: Route.MetaFunction = () => [{ title: "Share links · Demilune" }];

const stateWords = { open: "open", expired: "expired", revoked: "revoked" };

export default function Shares({ loaderData, actionData, params }: Route.ComponentProps) {
  const { scenario, shares, revisionNumber, measurements, parameters, days } = loaderData;
  const faults = actionData && "faults" in actionData ? actionData.faults : [];
  return (
    <div className="max-w-5xl">
      <ErrorSummary title="No link was made" errors={faults} />
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-2">
        <h1 className="font-semibold text-title">Share links</h1>
        <p className="text-ink-soft">{scenario.name}</p>
        <Link to={href("/lab/:labId/scenarios/:scenarioId", params)} className="action ml-auto py-0.5">
          Back to the bench
        </Link>
      </div>
      {actionData && "link" in actionData && <NewShareLink key={actionData.shareId} link={actionData.link} />}
      <section aria-labelledby="new-heading" className="mt-4">
        <h2 id="new-heading" className="font-semibold">
          New link to revision {revisionNumber}
        </h2>
        <p className="mt-1 max-w-2xl text-ink-soft">
          Whoever has the link sees this revision as it is now, may move its numbers and see the spectra follow. Nothing
          that a guest does is stored.
        </p>
        <ShareForm revisionNumber={revisionNumber} measurements={measurements} parameters={parameters} days={days} />
      </section>
      <section aria-labelledby="links-heading" className="mt-8">
        <h2 id="links-heading" className="font-semibold">
          Links made so far
        </h2>
        {shares.length === 0 ? (
          <p className="mt-1 text-ink-soft">None yet.</p>
        ) : (
          <div className="mt-1 overflow-x-auto">
            <table className="table">
              <thead>
                <tr>
                  <th scope="col">Label</th>
                  <th scope="col">Revision</th>
                  <th scope="col">With</th>
                  <th scope="col">Made</th>
                  <th scope="col">Until</th>
                  <th scope="col" className="!text-right">
                    Opened
                  </th>
                  <th scope="col">Last opened</th>
                  <th scope="col">State</th>
                </tr>
              </thead>
              <tbody>
                {shares.map((share) => (
                  <tr key={share.id}>
                    <td className="font-semibold">{share.note || "–"}</td>
                    <td>{share.revisionNumber}</td>
                    <td>
                      {share.measurementIds.length === 1
                        ? "one measurement"
                        : share.measurementIds.length === 0
                          ? "no measurement"
                          : `${share.measurementIds.length} measurements`}
                      {share.exposed &&
                        `, ${share.exposed.length} ${share.exposed.length === 1 ? "number" : "numbers"} to move`}
                    </td>
                    <td>
                      <Moment at={share.createdAt} />
                      {share.createdBy && <span className="block text-ink-soft text-small">{share.createdBy}</span>}
                    </td>
                    <td>
                      <Moment at={share.expiresAt} />
                    </td>
                    <td className="!text-right">{share.openings}</td>
                    <td>{share.lastOpenedAt ? <Moment at={share.lastOpenedAt} /> : "–"}</td>
                    <td className="whitespace-nowrap">
                      {stateWords[share.state]}
                      {share.state === "open" && (
                        <Form method="post" className="inline">
                          <input type="hidden" name="shareId" value={share.id} />
                          <button type="submit" name="intent" value="revoke" className="action ml-3">
                            Revoke
                          </button>
                        </Form>
                      )}
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </div>
        )}
      </section>
    </div>
  );
}
