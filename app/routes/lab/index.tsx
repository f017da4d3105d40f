import { href, Link } from "react-router";
import { ActivityList } from "~/components/ui/activityList";
import { listActivity } from "~/models/activity.server";
import { listPeople } from "~/models/labs.server";
import { listScenarios } from "~/models/scenarios.server";
import { requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/index";

const shown = 5;

export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args);
  const [people, happenings, latest] = await Promise.all([
    listPeople(lab.id),
    listActivity(lab.id, 10),
    listScenarios(lab.id),
  ]);
  return {
    lab: { id: lab.id, name: lab.name },
    people: people.length,
    happenings,
    scenarios: latest.scenarios.slice(0, shown).map(({ id, name }) => ({ id, name })),
    total: latest.total,
  };
}

export default function LabPage({ loaderData: { lab, people, happenings, scenarios, total } }: Route.ComponentProps) {
  return (
    <>
      <h1 className="font-semibold text-title">{lab.name}</h1>
      <p className="mt-1 text-ink-soft">{people === 1 ? "one person" : `${people} people`}</p>
      <h2 className="mt-6 font-semibold">Scenarios</h2>
      <ul className="mt-1">
        {scenarios.map(({ id, name }) => (
          <li key={id} className="border-line border-t py-1.5">
            <Link className="link" to={href("/lab/:labId/scenarios/:scenarioId", { labId: lab.id, scenarioId: id })}>
              {name || "without a name"}
            </Link>
          </li>
        ))}
      </ul>
      <p className="border-line border-t py-1.5">
        <Link className="link" to={href("/lab/:labId/scenarios", { labId: lab.id })}>
          {total > 0 ? `all ${total}` : "begin with the first one"}
        </Link>
      </p>
      <h2 className="mt-6 font-semibold">Lately</h2>
      <ActivityList happenings={happenings} />
    </>
  );
}
