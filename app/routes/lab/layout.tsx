import { href, Outlet } from "react-router";
import { Header, NavigationLink } from "~/components/ui/header";
import { requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/layout";

/** Stops everybody from outside the lab before any loader or action below runs. */
export const middleware: Route.MiddlewareFunction[] = [
  async (args) => {
    await requireLab(args);
  },
];

/** The middleware runs on client navigations only because there is a loader. */
export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  return { lab: { id: lab.id, name: lab.name, invented: lab.invented }, role };
}

export const meta: Route.MetaFunction = ({ loaderData }) => [{ title: `${loaderData?.lab.name ?? "Lab"} · Demilune` }];

export default function LabLayout({ loaderData: { lab, role } }: Route.ComponentProps) {
  const labId = lab.id;
  return (
    <>
      <Header
        role={role}
        place={
          <NavigationLink to={href("/lab/:labId", { labId })} end>
            {lab.name}
          </NavigationLink>
        }
        navigation={
          <>
            <NavigationLink to={href("/lab/:labId/scenarios", { labId })}>Scenarios</NavigationLink>
            <NavigationLink to={href("/lab/:labId/measurements", { labId })}>Measurements</NavigationLink>
            <NavigationLink to={href("/lab/:labId/materials", { labId })}>Materials</NavigationLink>
            <NavigationLink to={href("/lab/:labId/people", { labId })}>People</NavigationLink>
            <NavigationLink to={href("/lab/:labId/activity", { labId })}>Activity</NavigationLink>
          </>
        }
      />
      <main id="main" className="px-4 py-2 md:px-6">
        <Outlet />
      </main>
      {lab.invented && (
        <footer className="not-printed px-4 py-4 text-ink-soft text-small md:px-6">
          This lab, its people and its data are invented for the demo.
        </footer>
      )}
    </>
  );
}
