import { Form, Link, redirect } from "react-router";
import { z } from "zod";
import { Moment } from "~/components/ui/moment";
import { ScrollRegion } from "~/components/ui/scrollRegion";
import { scenarioPath } from "~/lib/scenarioWords";
import { findScenario, listRevisions, restoreRevision } from "~/models/scenarios.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/revisions";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const { scenarioId } = args.params;
  const [scenario, revisions] = await Promise.all([
    findScenario(lab.id, scenarioId),
    listRevisions(lab.id, scenarioId),
  ]);
  if (!scenario) throw notFound();
  const restored = new URL(args.request.url).searchParams.get("restored");
  return { name: scenario.name, revisions, canEdit: canActAs(role, "researcher"), restored };
}

const restoreAction = z.object({ intent: z.literal("restore"), number: z.coerce.number().int().min(1) });

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const { scenarioId } = args.params;
  if (!(await findScenario(lab.id, scenarioId))) throw notFound();
  const parsed = restoreAction.safeParse(Object.fromEntries(await args.request.formData()));
  if (!parsed.success) throw new Response("This form is not known here.", { status: 400 });
  const outcome = await restoreRevision({ labId: lab.id, userId: user.id }, scenarioId, parsed.data.number);
  if (!outcome) throw notFound();
  // Somebody saved at the same moment: the list shows it, and restoring can be asked for again.
  const query = outcome.ok ? `?restored=${parsed.data.number}` : "";
  return redirect(`${scenarioPath(lab.id, scenarioId)}/revisions${query}`, 303);
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Revisions of ${loaderData?.name ?? "a scenario"} · Demilune` },
];

export default function Revisions({ loaderData, params: { labId, scenarioId } }: Route.ComponentProps) {
  const { name, revisions, canEdit, restored } = loaderData;
  const path = scenarioPath(labId, scenarioId);
  const latest = revisions[0].number;
  return (
    <div className="max-w-4xl">
      <div className="flex flex-wrap items-baseline gap-x-4">
        <h1 className="font-semibold text-title">{name}</h1>
        <span className="text-ink-soft">revisions</span>
        <nav aria-label="Scenario" className="ml-auto flex flex-wrap gap-x-5">
          <Link to={path} className="action">
            Bench
          </Link>
          <Link to={`${path}/stack`} className="action">
            Stack
          </Link>
        </nav>
      </div>
      {restored && (
        <p role="status" className="mt-2 border-tide border-l-2 pl-3">
          Revision {restored} is the newest again, as revision {latest}. Nothing was lost: revision {latest - 1} stays
          in the list.
        </p>
      )}
      <Form method="get" action={`${path}/difference`} className="mt-3">
        <ScrollRegion label="Revisions">
          <table className="table">
            <caption className="sr-only">Revisions, the latest first; pick two to compare</caption>
            <thead>
              <tr>
                <th scope="col">from</th>
                <th scope="col">to</th>
                <th scope="col">revision</th>
                <th scope="col">note</th>
                <th scope="col">who</th>
                <th scope="col">when</th>
                <th scope="col">
                  <span className="sr-only">actions</span>
                </th>
              </tr>
            </thead>
            <tbody>
              {revisions.map((revision, place) => (
                <tr key={revision.id}>
                  <td>
                    <Choice
                      name="from"
                      number={revision.number}
                      checked={place === Math.min(1, revisions.length - 1)}
                    />
                  </td>
                  <td>
                    <Choice name="to" number={revision.number} checked={place === 0} />
                  </td>
                  <td>
                    <Link to={`${path}/revisions/${revision.number}`} className="link font-semibold">
                      {revision.number}
                    </Link>
                  </td>
                  <td className="max-w-80">{revision.note || <span className="text-ink-soft">–</span>}</td>
                  <td>{revision.authorName ?? "Demilune"}</td>
                  <td>
                    <Moment at={revision.createdAt} />
                  </td>
                  <td className="text-right">
                    {canEdit && revision.number !== latest && (
                      <button
                        type="submit"
                        form={`restore-${revision.number}`}
                        className="action"
                        aria-label={`Restore revision ${revision.number}`}
                      >
                        Restore
                      </button>
                    )}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollRegion>
        {revisions.length > 1 && (
          <button type="submit" className="button mt-3">
            Compare the two
          </button>
        )}
      </Form>
      {canEdit &&
        revisions.map(({ number }) => (
          <Form key={number} id={`restore-${number}`} method="post" hidden>
            <input type="hidden" name="intent" value="restore" />
            <input type="hidden" name="number" value={number} />
          </Form>
        ))}
    </div>
  );
}

function Choice({ name, number, checked }: { name: "from" | "to"; number: number; checked: boolean }) {
  return (
    <input
      type="radio"
      name={name}
      value={number}
      defaultChecked={checked}
      aria-label={`Compare ${name} revision ${number}`}
      className="size-6 accent-tide"
    />
  );
}
