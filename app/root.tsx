import type { ReactNode } from "react";
import {
  isRouteErrorResponse,
  Links,
  Meta,
  Outlet,
  Scripts,
  ScrollRestoration,
  useRouteLoaderData,
} from "react-router";
import type { Route } from "./+types/root";
import "./app.css";
import { ErrorPage } from "~/components/ui/errorPage";
import { useFocusOnNavigation } from "~/components/ui/useFocusOnNavigation";
import { actorContext } from "~/services/context.server";
import { identifyActor } from "~/services/session.server";
import { settings } from "~/services/settings.server";
import { readTheme } from "~/services/theme.server";

export const middleware: Route.MiddlewareFunction[] = [identifyActor];

export async function loader({ request, context }: Route.LoaderArgs) {
  const actor = context.get(actorContext);
  return {
    theme: await readTheme(request),
    user: actor && { name: actor.user.name, email: actor.user.email },
    mailbox: settings().mail === "mailbox",
    demo: settings().demo,
  };
}

export const links: Route.LinksFunction = () => [{ rel: "icon", href: "/favicon.svg", type: "image/svg+xml" }];

export const meta: Route.MetaFunction = () => [{ title: "Demilune" }];

export function Layout({ children }: { children: ReactNode }) {
  const known = useRouteLoaderData<typeof loader>("root");
  return (
    <html lang="en" data-theme={known?.theme ?? "auto"}>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <Meta />
        <Links />
      </head>
      <body>
        <a href="#main" className="button sr-only focus:not-sr-only focus:absolute focus:top-1 focus:left-1 focus:z-20">
          Skip to the content
        </a>
        {children}
        <ScrollRestoration />
        <Scripts />
      </body>
    </html>
  );
}

export default function App() {
  useFocusOnNavigation();
  return <Outlet />;
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  if (isRouteErrorResponse(error)) return <ErrorPage status={error.status} detail={String(error.data)} />;
  return <ErrorPage status={500} />;
}
