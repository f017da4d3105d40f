import type { ScenarioDocument } from "@demilune/solver";
import { Link } from "react-router";
import { Bench } from "~/components/bench/Bench";
import { useBenchDocument } from "~/components/bench/useBenchDocument";
import { CopyToLab } from "~/components/share/CopyToLab";
import { Mark } from "~/components/ui/mark";
import { Moment } from "~/components/ui/moment";
import { ThemeSwitch } from "~/components/ui/themeSwitch";
import { listLabsOf } from "~/models/labs.server";
import { listSharedMeasurements } from "~/models/overlays.server";
import { canActAs } from "~/services/authorisation.server";
import { actorContext } from "~/services/context.server";
import { keptRunOf, quickPrediction } from "~/services/predictions.server";
import { requireShare } from "~/services/shareAccess.server";
import { readTheme } from "~/services/theme.server";
import type { Route } from "./+types/guest";

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const share = await requireShare(request, params.shareId);
  const actor = context.get(actorContext);
  const [measurements, labs, theme, run] = await Promise.all([
    listSharedMeasurements(share.labId, share.measurementIds),
    actor ? listLabsOf(actor.user.id) : [],
    readTheme(request),
    keptRunOf(share.labId, share.document),
  ]);
  return {
    name: share.scenarioName,
    labName: share.labName,
    labInvented: share.labInvented,
    revisionNumber: share.revisionNumber,
    document: share.document,
    exposed: share.exposed,
    expiresAt: share.expiresAt,
    measurements,
    result: run?.result ?? quickPrediction(share.document),
    signedIn: actor !== null,
    labs: labs.filter(({ role }) => canActAs(role, "researcher")).map(({ id, name }) => ({ id, name })),
    theme,
  };
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.name ?? "Shared scenario"} · Demilune` },
  { name: "robots", content: "noindex, nofollow" },
];

/** What a change of the view in the address asks for is on the page already. */
export const shouldRevalidate = () => false;

export default function GuestPage({ loaderData, params: { shareId } }: Route.ComponentProps) {
  const { name, labName, labInvented, revisionNumber, exposed, expiresAt, measurements, signedIn, labs } = loaderData;
  const original = loaderData.document as ScenarioDocument;
  const bench = useBenchDocument(original);
  const reset = (
    <button
      type="button"
      className="action"
      disabled={bench.document === original}
      onClick={() => bench.change(original, { path: "back to the link", live: false })}
    >
      Reset
    </button>
  );
  const copy = (
    <CopyToLab shareId={shareId} document={bench.document} signedIn={signedIn} labs={labs} onReturn={bench.change} />
  );
  return (
    <>
      <header className="not-printed border-line border-b">
        <div className="flex min-h-11 flex-wrap items-center gap-x-6 gap-y-1 px-4 py-1 md:px-6">
          <Link to="/" className="flex min-h-6 items-center gap-2 font-semibold text-large">
            <Mark />
            Demilune
          </Link>
          <span className="ml-auto text-ink-soft">shared by {labName}</span>
          <span className="max-md:hidden">
            <ThemeSwitch theme={loaderData.theme} />
          </span>
        </div>
      </header>
      <main id="main" className="px-4 py-2 md:px-6">
        <Bench
          name={name}
          bench={bench}
          initialResult={loaderData.result}
          measurements={measurements}
          fixedStructure
          exposed={exposed ?? undefined}
          status={`revision ${revisionNumber}`}
          actions={
            <>
              {reset}
              {copy}
            </>
          }
          sheetActions={
            <>
              {reset}
              {copy}
            </>
          }
        />
        <p className="mt-3 text-ink-soft text-small">
          Nothing you change here is stored. The link works until <Moment at={expiresAt} />.
          {labInvented && " The lab and its data are invented for the demo."}
        </p>
      </main>
    </>
  );
}
