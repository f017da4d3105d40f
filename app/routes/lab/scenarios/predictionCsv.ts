import { data } from "react-router";
import { predictionCsv } from "~/lib/predictionCsv";
import { findRevision, findScenario } from "~/models/scenarios.server";
import { notFound, requireLab } from "~/services/authorisation.server";
import { predict } from "~/services/predictions.server";
import type { Route } from "./+types/predictionCsv";
import { benchAddress } from "./bench.schema";

/** The prediction of a revision, the latest where none is named, as a CSV file. */
export async function loader(args: Route.LoaderArgs) {
  const { lab } = await requireLab(args);
  const { revision: number } = benchAddress.parse(Object.fromEntries(new URL(args.request.url).searchParams));
  const { scenarioId } = args.params;
  const [scenario, revision] = await Promise.all([
    findScenario(lab.id, scenarioId),
    findRevision(lab.id, scenarioId, number),
  ]);
  if (!scenario || !revision) throw notFound();
  const outcome = await predict(lab.id, revision.document, args.request.signal);
  if (!outcome.ok)
    throw data(
      outcome.code === "refused"
        ? outcome.faults.map(({ path, message }) => `${path} ${message}`).join("; ")
        : outcome.message,
      {
        status: outcome.code === "busy" ? 503 : 422,
      },
    );
  const name = `${scenario.name}, revision ${revision.number}`;
  return new Response(predictionCsv(name, outcome.result), {
    headers: {
      "Content-Type": "text/csv; charset=utf-8",
      "Content-Disposition": `attachment; filename*=UTF-8''${encodeURIComponent(`${name}.csv`)}`,
      "Content-Security-Policy": "sandbox",
      "Cache-Control": "private, no-store",
    },
  });
}
