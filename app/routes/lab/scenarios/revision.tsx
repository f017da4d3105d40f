import { useState } from "react";
import { Form, Link } from "react-router";
import { ContactNumbers } from "~/components/stack/ContactNumbers";
import { CrossSection } from "~/components/stack/CrossSection";
import { StackTable } from "~/components/stack/StackTable";
import type { Picked } from "~/components/stack/stackProps";
import { Moment } from "~/components/ui/moment";
import { formatQuantity } from "~/lib/numberFormat";
import { modelOf, scenarioPath } from "~/lib/scenarioWords";
import { findRevision, findScenario } from "~/models/scenarios.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/revision";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const { scenarioId } = args.params;
  const number = Number(args.params.number);
  if (!Number.isInteger(number)) throw notFound();
  const [scenario, revision, latest] = await Promise.all([
    findScenario(lab.id, scenarioId),
    findRevision(lab.id, scenarioId, number),
    findRevision(lab.id, scenarioId),
  ]);
  if (!scenario || !revision || !latest) throw notFound();
  return { name: scenario.name, revision, latest: latest.number, canEdit: canActAs(role, "researcher") };
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Revision ${loaderData?.revision.number ?? ""} of ${loaderData?.name ?? "a scenario"} · Demilune` },
];

const unchanged = () => {};

export default function RevisionPage({ loaderData, params: { labId, scenarioId } }: Route.ComponentProps) {
  const { name, revision, latest, canEdit } = loaderData;
  const { document, number } = revision;
  const path = scenarioPath(labId, scenarioId);
  const [picked, setPicked] = useState<Picked | null>(null);
  return (
    <>
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <h1 className="font-semibold text-title">{name}</h1>
        <span className="text-ink-soft">
          revision {number} of {latest}, {revision.authorName ?? "Demilune"}, <Moment at={revision.createdAt} />
        </span>
        <div className="not-printed ml-auto flex flex-wrap items-center gap-x-5">
          <Link to={`${path}/revisions`} className="action">
            Revisions
          </Link>
          {number !== latest && (
            <Link to={`${path}/difference?from=${number}&to=${latest}`} className="action">
              Compare with the newest
            </Link>
          )}
          <a href={`${path}/document.json?revision=${number}`} download className="action">
            Download
          </a>
          {canEdit && number !== latest && (
            <Form method="post" action={`${path}/revisions`}>
              <input type="hidden" name="number" value={number} />
              <button type="submit" name="intent" value="restore" className="button">
                Restore
              </button>
            </Form>
          )}
        </div>
      </div>
      {revision.note && <p className="mt-1">{revision.note}</p>}
      <p className="mt-1 text-ink-soft">
        {modelOf(document)}; light from the {document.light.side ?? "front"},{" "}
        {formatQuantity(document.light.fluxPerCm2S, "cm⁻² s⁻¹")}
      </p>
      <div className="mt-4 grid items-start gap-8 md:grid-cols-[200px_minmax(0,1fr)]">
        <div className="grid gap-4">
          <CrossSection document={document} onChange={unchanged} picked={picked} onPick={setPicked} readOnly />
          <ContactNumbers document={document} side="front" onChange={unchanged} readOnly />
          <ContactNumbers document={document} side="back" onChange={unchanged} readOnly />
        </div>
        <StackTable document={document} onChange={unchanged} readOnly />
      </div>
    </>
  );
}
