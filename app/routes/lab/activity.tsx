import { ActivityList } from "~/components/ui/activityList";
import { listActivity } from "~/models/activity.server";
import { requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/activity";

export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args);
  return { happenings: await listActivity(lab.id) };
}

export const meta: Route.MetaFunction = () => [{ title: "Activity · Demilune" }];

export default function Activity({ loaderData: { happenings } }: Route.ComponentProps) {
  return (
    <>
      <h1 className="font-semibold text-title">Activity</h1>
      <ActivityList happenings={happenings} />
    </>
  );
}
