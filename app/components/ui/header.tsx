import type { ReactNode } from "react";
import { Form, Link, NavLink, useRouteLoaderData } from "react-router";
import type { loader } from "~/root";
import { Mark } from "./mark";
import { Menu } from "./menu";
import { ThemeSwitch } from "./themeSwitch";

interface HeaderProps {
  /** Where one is, behind the mark. */
  place?: ReactNode;
  /** Links of the navigation; on a phone they stand in the menu. */
  navigation?: ReactNode;
  role?: string;
}

/** The one line at the top of every page: mark, place, navigation, theme, account; what has no room goes into a menu. */
export function Header({ place, navigation, role }: HeaderProps) {
  const known = useRouteLoaderData<typeof loader>("root");
  const account = (
    <>
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
    </>
  );
  return (
    <header className="not-printed border-line border-b">
      <div className="flex h-11 items-center gap-x-6 px-4 md:px-6">
        <Link to="/" className="flex min-h-6 items-center gap-2 font-semibold text-large">
          <Mark />
          Demilune
        </Link>
        {place && <div className="min-w-0 truncate">{place}</div>}
        {navigation && (
          <nav aria-label="Lab" className="flex gap-x-5 max-md:hidden">
            {navigation}
          </nav>
        )}
        <div className="ml-auto flex items-center gap-x-5 text-ink-soft max-xl:hidden">{account}</div>
        <Menu label="Menu" className="ml-auto xl:hidden">
          {navigation && (
            <nav aria-label="Lab" className="grid gap-y-1.5 border-line border-b pb-2 md:hidden">
              {navigation}
            </nav>
          )}
          <div className="grid gap-y-1.5 text-ink-soft">{account}</div>
        </Menu>
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
