import { useFetcher, useLocation } from "react-router";

/** Two buttons; pressing the one that is on gives the choice back to the system. */
export function ThemeSwitch({ theme }: { theme: "auto" | "light" | "dark" }) {
  const fetcher = useFetcher();
  const { pathname, search } = useLocation();
  const button = (name: "light" | "dark", label: string) => (
    <button
      type="submit"
      name="theme"
      value={theme === name ? "auto" : name}
      aria-pressed={theme === name}
      className="min-h-6 cursor-pointer px-0.5 hover:text-ink aria-pressed:text-ink aria-pressed:underline aria-pressed:underline-offset-4"
    >
      {label}
    </button>
  );
  return (
    <fetcher.Form method="post" action="/theme" className="flex items-center gap-0.5">
      <input type="hidden" name="to" value={pathname + search} />
      <fieldset className="flex items-center gap-0.5">
        <legend className="sr-only">Colours</legend>
        {button("light", "Light")}
        <span aria-hidden="true">/</span>
        {button("dark", "dark")}
      </fieldset>
    </fetcher.Form>
  );
}
