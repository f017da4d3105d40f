import { ActivityList } from "~/components/ui/activityList";
import { listActivity } from "~/models/activity.server";
import { listPeople } from "~/models/labs.server";
import { requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/index";

export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args);
  const [people, happenings] = await Promise.all([listPeople(lab.id), listActivity(lab.id, 10)]);
  return { name: lab.name, people: people.length, happenings };
}

export default function LabPage({ loaderData: { name, people, happenings } }: Route.ComponentProps) {
  return (
    <>
      <h1 className="font-semibold text-title">{name}</h1>
      <p className="mt-1 text-ink-soft">{people === 1 ? "one person" : `${people} people`}</p>
      <h2 className="mt-6 font-semibold">Lately</h2>
      <ActivityList happenings={happenings} />
    </>
  );
}
