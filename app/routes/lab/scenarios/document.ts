import { findRevision } from "~/models/scenarios.server";
import { notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/document";

/** A name that every file system takes. */
const fileName = (name: string): string =>
  name
    .normalize("NFKD")
    .replace(/[^\w.-]+/g, "-")
    .replace(/^-+|-+$/g, "")
    .slice(0, 80) || "scenario";

/** The scenario document of a revision as a file, the latest where none is named. */
export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args);
  const asked = new URL(args.request.url).searchParams.get("revision");
  const number = asked === null ? undefined : Number(asked);
  if (number !== undefined && !Number.isInteger(number)) throw notFound();
  const revision = await findRevision(lab.id, args.params.scenarioId, number);
  if (!revision) throw notFound();
  return new Response(`${JSON.stringify(revision.document, null, 2)}\n`, {
    headers: {
      "Content-Type": "application/json; charset=utf-8",
      "Content-Disposition": `attachment; filename="${fileName(revision.document.name ?? "")}-revision-${revision.number}.json"`,
    },
  });
}
