import { type ScenarioDocument, ScenarioError, scenarioSchema } from "@demilune/solver";
import {
  data,
  Form,
  href,
  Link,
  redirect,
  type ShouldRevalidateFunctionArgs,
  useActionData,
  useNavigation,
} from "react-router";
import { Bench } from "~/components/bench/Bench";
import { Faults } from "~/components/bench/Messages";
import { OverlayPanel } from "~/components/bench/OverlayPanel";
import { SaveRevision } from "~/components/bench/SaveRevision";
import { useBenchDocument } from "~/components/bench/useBenchDocument";
import { useDraft } from "~/components/bench/useDraft";
import { Moment } from "~/components/ui/moment";
import { countDifferences } from "~/lib/documentNumbers";
import { formatFixed } from "~/lib/numberFormat";
import { listAttachable, listOverlays } from "~/models/overlays.server";
import { findRun } from "~/models/runs.server";
import { dropDraft, findDraft, findRevision, findScenario, saveDraft, saveRevision } from "~/models/scenarios.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import { computeAndKeep, keptRunOf, quickPrediction } from "~/services/predictions.server";
import type { Route } from "./+types/bench";
import { benchAction, benchAddress } from "./bench.schema";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role, user } = await requireLab(args);
  const { scenarioId } = args.params;
  const { revision: number } = benchAddress.parse(Object.fromEntries(new URL(args.request.url).searchParams));
  const [scenario, revision, latest, draft] = await Promise.all([
    findScenario(lab.id, scenarioId),
    findRevision(lab.id, scenarioId, number),
    findRevision(lab.id, scenarioId),
    findDraft({ labId: lab.id, userId: user.id }, scenarioId),
  ]);
  if (!scenario || !revision || !latest) throw notFound();
  const drafted = number === undefined && draft ? scenarioSchema.safeParse(draft.document) : undefined;
  const document = drafted?.success ? drafted.data : revision.document;
  const [overlays, attachable] = await Promise.all([listOverlays(lab.id, scenarioId), listAttachable(lab.id)]);
  const run =
    (await keptRunOf(lab.id, document)) ?? (drafted?.success ? undefined : await findRun(lab.id, revision.hash));
  return {
    scenario: { id: scenario.id, name: scenario.name, archived: scenario.archivedAt !== null },
    revision: { number: revision.number, document: revision.document },
    latestNumber: latest.number,
    /** What the next revision is based on: a draft keeps the revision it began from. */
    baseRevisionNumber: drafted?.success ? (draft?.baseRevisionNumber ?? latest.number) : latest.number,
    draftAt: drafted?.success ? (draft?.updatedAt ?? null) : null,
    document,
    result: run?.result ?? quickPrediction(document),
    run: run ? { outdated: run.outdated, solver: run.result.solver, finishedAt: run.finishedAt } : null,
    canEdit: canActAs(role, "researcher"),
    overlays,
    attachable,
  };
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const { scenarioId } = args.params;
  const actor = { labId: lab.id, userId: user.id };
  const parsed = benchAction.safeParse(Object.fromEntries(await args.request.formData()));
  if (!parsed.success) {
    const faults = parsed.error.issues.map(({ path, message }) => ({
      path: path.join("."),
      message,
      allowed: "a scenario document",
    }));
    return data({ faults }, { status: 400 });
  }
  if (!(await findScenario(lab.id, scenarioId))) throw notFound();
  const bench = href("/lab/:labId/scenarios/:scenarioId", { labId: lab.id, scenarioId });
  switch (parsed.data.intent) {
    case "draft": {
      const latest = await findRevision(lab.id, scenarioId);
      const unchanged = countDifferences(latest?.document, parsed.data.document) === 0;
      if (unchanged) await dropDraft(actor, scenarioId);
      return { draft: unchanged || (await saveDraft(actor, scenarioId, parsed.data)) };
    }
    case "discard":
      await dropDraft(actor, scenarioId);
      return redirect(bench, 303);
    case "revision":
      try {
        const outcome = await saveRevision(actor, scenarioId, parsed.data);
        if (!outcome) throw notFound();
        if (outcome.ok) return redirect(bench, 303);
        await saveDraft(actor, scenarioId, parsed.data);
        return data({ conflict: outcome.conflict.latest }, { status: 409 });
      } catch (error) {
        if (!(error instanceof ScenarioError)) throw error;
        return data({ faults: error.faults }, { status: 400 });
      }
    case "compute": {
      const kept = await computeAndKeep(actor, parsed.data.document, args.request.signal);
      if (kept.ok) return { kept };
      const faults =
        kept.code === "refused"
          ? kept.faults
          : [{ path: "document", message: kept.message, allowed: "a smaller request" }];
      return data({ faults }, { status: kept.code === "busy" ? 503 : 422 });
    }
  }
}

/** A draft on its way and a change of view in the address load nothing anew. */
export function shouldRevalidate({
  formData,
  currentUrl,
  nextUrl,
  defaultShouldRevalidate,
}: ShouldRevalidateFunctionArgs) {
  if (formData?.get("intent") === "draft") return false;
  const asked = (url: URL) => `${url.pathname} ${url.searchParams.get("revision")}`;
  if (!formData && currentUrl.search !== nextUrl.search && asked(currentUrl) === asked(nextUrl)) return false;
  return defaultShouldRevalidate;
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.scenario.name ?? "Scenario"} · Demilune` },
];

export default function BenchPage({ loaderData, params }: Route.ComponentProps) {
  // Another scenario or revision is another document; saving the one on the bench keeps its undo steps.
  return (
    <BenchOf
      key={`${loaderData.scenario.id} ${loaderData.revision.number === loaderData.latestNumber ? "latest" : loaderData.revision.number}`}
      loaderData={loaderData}
      params={params}
    />
  );
}

function BenchOf({ loaderData, params }: Pick<Route.ComponentProps, "loaderData" | "params">) {
  const { scenario, revision, latestNumber, baseRevisionNumber, canEdit, run } = loaderData;
  const bench = useBenchDocument(loaderData.document as ScenarioDocument);
  const answer = useActionData<typeof action>();
  const navigation = useNavigation();
  const latest = revision.number === latestNumber;
  const editable = canEdit && latest && !scenario.archived;
  const draft = useDraft(bench.document, baseRevisionNumber, editable);
  const changes = countDifferences(bench.document, revision.document);
  const computing = navigation.formData?.get("intent") === "compute";
  const text = JSON.stringify(bench.document);
  const csv = href("/lab/:labId/scenarios/:scenarioId/prediction.csv", params);

  const status = (
    <>
      revision {revision.number}
      {!latest && ` of ${latestNumber}, not to be changed`}
      {scenario.archived && ", archived"}
      {latest && changes > 0 && `, ${changes === 1 ? "one change" : `${changes} changes`} not saved`}
      {editable &&
        changes > 0 &&
        { saved: ", draft kept", saving: ", keeping the draft", failed: ", the draft could not be kept" }[draft]}
      {run?.outdated && `, kept run of solver ${run.solver}`}
    </>
  );

  return (
    <>
      {answer && "conflict" in answer && (
        <div role="alert" className="mb-3 border-wary border-l-2 pl-3">
          <p>
            <span className="font-semibold text-wary">! Not saved.</span> Somebody saved revision {answer.conflict}{" "}
            while you worked on revision {baseRevisionNumber}. Your work is kept as a draft.{" "}
            <Link className="link" to={`?revision=${answer.conflict}`} target="_blank">
              Look at revision {answer.conflict}
            </Link>
          </p>
          <Form method="post" className="mt-1 flex gap-4">
            <input type="hidden" name="document" value={text} />
            <input type="hidden" name="baseRevisionNumber" value={answer.conflict} />
            <input
              type="hidden"
              name="note"
              value={`Saved after revision ${answer.conflict}, based on ${baseRevisionNumber}`}
            />
            <button type="submit" name="intent" value="revision" className="action">
              Save mine as revision {answer.conflict + 1}
            </button>
            <button type="submit" name="intent" value="discard" className="action">
              Give mine up
            </button>
          </Form>
        </div>
      )}
      {answer && "faults" in answer && answer.faults && <Faults faults={answer.faults} stale={false} />}
      <Bench
        name={scenario.name}
        bench={bench}
        initialResult={loaderData.result}
        measurements={loaderData.overlays}
        besideBelow={
          <OverlayPanel
            labId={params.labId}
            scenarioId={params.scenarioId}
            attached={loaderData.overlays}
            attachable={loaderData.attachable}
            readOnly={!canEdit}
          />
        }
        fixedStructure={!editable}
        status={status}
        filledAction={editable && <SaveRevision document={text} baseRevisionNumber={baseRevisionNumber} />}
        actions={
          <>
            {editable && (
              <Form method="post" preventScrollReset>
                <input type="hidden" name="document" value={text} />
                <button type="submit" name="intent" value="compute" className="action" disabled={computing}>
                  {computing ? "Computing …" : "Compute and keep"}
                </button>
              </Form>
            )}
            {canEdit && (
              <Link className="action py-0.5" to={href("/lab/:labId/scenarios/:scenarioId/shares", params)}>
                Share
              </Link>
            )}
            <a className="action" href={latest ? csv : `${csv}?revision=${revision.number}`} download>
              CSV
            </a>
            {editable && changes > 0 && (
              <Form
                method="post"
                onSubmit={() => bench.change(revision.document, { path: "back to the revision", live: false })}
              >
                <button type="submit" name="intent" value="discard" className="action">
                  Back to revision {revision.number}
                </button>
              </Form>
            )}
          </>
        }
      />
      <p role="status" className="mt-4 text-ink-soft">
        {answer && "kept" in answer && answer.kept
          ? answer.kept.already
            ? "This run is kept already."
            : `The run is kept; it took ${formatFixed(answer.kept.milliseconds ?? 0, 0)} ms.`
          : run?.finishedAt && (
              <>
                A run of this document is kept since <Moment at={run.finishedAt} />.
              </>
            )}
      </p>
    </>
  );
}
