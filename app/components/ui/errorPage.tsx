import { Link } from "react-router";
import { Header } from "./header";

const titles: Record<number, string> = {
  403: "Not in your role",
  404: "Not here",
  410: "No longer here",
  429: "Too often",
};

/** A page for what went wrong: what, and where to go from here. */
export function ErrorPage({ status, detail }: { status: number; detail?: string }) {
  return (
    <>
      <Header />
      <main id="main" className="mx-auto max-w-xl px-4 py-10 md:px-6">
        <title>{`${titles[status] ?? "Something went wrong"} · Demilune`}</title>
        <h1 className="font-semibold text-title">{titles[status] ?? "Something went wrong on our side"}</h1>
        <p className="mt-2">
          {detail ??
            "Nothing that you saved is lost. Load the page again; if it stays like this, tell whoever runs this server."}
        </p>
        <p className="mt-4">
          <Link to="/" className="link">
            To the first page
          </Link>
        </p>
      </main>
    </>
  );
}
