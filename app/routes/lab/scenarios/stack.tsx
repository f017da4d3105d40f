import type { Fault } from "@demilune/solver";
import { data, Link, redirect, type ShouldRevalidateFunctionArgs } from "react-router";
import { StackEditor } from "~/components/scenarios/StackEditor";
import { readDocument } from "~/lib/documentText";
import { scenarioPath } from "~/lib/scenarioWords";
import { type RefusedCells, readStackForm } from "~/lib/stackForm.server";
import { listMaterials } from "~/models/materials.server";
import { dropDraft, findDraft, findRevision, findScenario, saveDraft, saveRevision } from "~/models/scenarios.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/stack";
import { stackAction } from "./stack.schema";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role, user } = await requireLab(args);
  const { scenarioId } = args.params;
  const [scenario, revision, draft, shelf] = await Promise.all([
    findScenario(lab.id, scenarioId),
    findRevision(lab.id, scenarioId),
    findDraft({ labId: lab.id, userId: user.id }, scenarioId),
    listMaterials(lab.id),
  ]);
  if (!scenario || !revision) throw notFound();
  const drafted = draft && readDocument(draft.document);
  return {
    name: scenario.name,
    canEdit: canActAs(role, "researcher"),
    revision,
    draft: draft && drafted?.ok ? { ...draft, document: drafted.document } : null,
    shelf: shelf.map(({ id, name, layer }) => ({ id, name, layer })),
    saved: new URL(args.request.url).searchParams.has("saved"),
  };
}

interface Refused {
  cells?: RefusedCells;
  faults?: readonly Fault[];
  conflict?: { latest: number };
  note?: string;
  noteError?: string;
}

const refusal = (answer: Refused, status = 400) => data(answer, { status });

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const actor = { labId: lab.id, userId: user.id };
  const { scenarioId } = args.params;
  if (!(await findScenario(lab.id, scenarioId))) throw notFound();
  const form = await args.request.formData();
  const parsed = stackAction.safeParse(Object.fromEntries(form));
  if (!parsed.success)
    return refusal({ noteError: parsed.error.issues[0].message, note: String(form.get("note") ?? "") });
  if (parsed.data.intent === "dropDraft") {
    await dropDraft(actor, scenarioId);
    return redirect(`${scenarioPath(lab.id, scenarioId)}/stack`, 303);
  }
  const { base, intent } = parsed.data;
  const input = readJson(parsed.data.document);
  const received = readDocument(input);
  if (intent === "draft") {
    if (!(await saveDraft(actor, scenarioId, { document: input, baseRevisionNumber: base }))) throw notFound();
    return {};
  }
  if (!received.ok) return refusal({ faults: received.faults, note: parsed.data.note });
  const { document, refused } = readStackForm(received.document, form);
  if (Object.keys(refused).length > 0) return refusal({ cells: refused, note: parsed.data.note });
  const checked = readDocument(document);
  if (!checked.ok) return refusal({ faults: checked.faults, note: parsed.data.note });
  const outcome = await saveRevision(actor, scenarioId, { document, baseRevisionNumber: base, note: parsed.data.note });
  if (!outcome) throw notFound();
  if (!outcome.ok) return refusal({ conflict: outcome.conflict, note: parsed.data.note }, 409);
  return redirect(`${scenarioPath(lab.id, scenarioId)}/stack?saved`, 303);
}

/** JSON of the page's own form; anything else is no document and is refused as one. */
function readJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/** Keeping a draft changes nothing that the page shows. */
export function shouldRevalidate({ formData, defaultShouldRevalidate }: ShouldRevalidateFunctionArgs) {
  return formData?.get("intent") === "draft" ? false : defaultShouldRevalidate;
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `Stack of ${loaderData?.name ?? "a scenario"} · Demilune` },
];

export default function StackPage({ loaderData, actionData, params: { labId, scenarioId } }: Route.ComponentProps) {
  const { name, revision, draft, canEdit, shelf, saved } = loaderData;
  const path = scenarioPath(labId, scenarioId);
  return (
    <>
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <h1 className="font-semibold text-title">{name}</h1>
        <span className="text-ink-soft">stack, revision {revision.number}</span>
        <nav aria-label="Scenario" className="ml-auto flex flex-wrap gap-x-5">
          <Link to={path} className="action">
            Bench
          </Link>
          <Link to={`${path}/revisions`} className="action">
            Revisions
          </Link>
          <a href={`${path}/document.json`} download className="action">
            Download
          </a>
        </nav>
      </div>
      <StackEditor
        key={`${revision.number} ${draft ? "draft" : ""}`}
        path={path}
        revision={revision}
        draft={draft}
        canEdit={canEdit}
        shelf={shelf}
        saved={saved}
        answer={actionData}
      />
    </>
  );
}
