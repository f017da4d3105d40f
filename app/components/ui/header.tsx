import type { ReactNode } from "react";
import { Form, Link, NavLink, useRouteLoaderData } from "react-router";
import type { loader } from "~/root";
import { Mark } from "./mark";
import { ThemeSwitch } from "./themeSwitch";

/** The line at the top of every page: mark, whatever the page's part of the site adds, theme, account. */
export function Header({ children, role }: { children?: ReactNode; role?: string }) {
  const known = useRouteLoaderData<typeof loader>("root");
  return (
    <header className="not-printed border-b border-line">
      <div className="flex min-h-11 flex-wrap items-center gap-x-6 gap-y-1 px-4 py-1 md:px-6">
        <Link to="/" className="flex min-h-6 items-center gap-2 font-semibold text-large">
          <Mark />
          Demilune
        </Link>
        {children}
        <div className="ml-auto flex flex-wrap items-center gap-x-5 text-ink-soft">
          {known?.mailbox && (
            <Link to="/mailbox" className="min-h-6 py-0.5 hover:text-ink">
              Mailbox
            </Link>
          )}
          <ThemeSwitch theme={known?.theme ?? "auto"} />
          {known?.user ? (
            <>
              <Link to="/account" className="min-h-6 py-0.5 hover:text-ink">
                {known.user.name}
                {role && `, ${role}`}
              </Link>
              <Form method="post" action="/sign-out">
                <button type="submit" className="min-h-6 cursor-pointer hover:text-ink">
                  Sign out
                </button>
              </Form>
            </>
          ) : (
            <Link to="/sign-in" className="min-h-6 py-0.5 text-tide hover:underline">
              Sign in
            </Link>
          )}
        </div>
      </div>
    </header>
  );
}

/** A link of the navigation; the page one is on is set in bold. */
export function NavigationLink({ to, end, children }: { to: string; end?: boolean; children: ReactNode }) {
  return (
    <NavLink
      to={to}
      end={end}
      className={({ isActive }) =>
        `min-h-6 py-0.5 ${isActive ? "font-semibold text-ink" : "text-ink-soft hover:text-ink"}`
      }
    >
      {children}
    </NavLink>
  );
}
