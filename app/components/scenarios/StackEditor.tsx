import {
  deviceOf,
  type Fault,
  type LayerDocument,
  parseScenario,
  type ScenarioDocument,
  warningsOf,
} from "@demilune/solver";
import { useEffect, useMemo, useReducer, useState } from "react";
import { Form, Link, useFetcher } from "react-router";
import { ContactNumbers } from "~/components/stack/ContactNumbers";
import { CrossSection } from "~/components/stack/CrossSection";
import { PasteLayers } from "~/components/stack/PasteLayers";
import { StackTable } from "~/components/stack/StackTable";
import type { ChangeDocument, DocumentChange, Picked } from "~/components/stack/stackProps";
import { Moment } from "~/components/ui/moment";
import { readDocument } from "~/lib/documentText";
import { changed, type History, redone, startHistory, undone } from "~/lib/history";
import { FaultList } from "./FaultList";

interface StackEditorProps {
  /** Address of the scenario. */
  path: string;
  revision: { number: number; document: ScenarioDocument };
  draft: { document: ScenarioDocument; baseRevisionNumber: number; updatedAt: Date } | null;
  canEdit: boolean;
  shelf: readonly { id: string; name: string; layer: LayerDocument }[];
  saved: boolean;
  /** What the server said to the last save. */
  answer?: {
    cells?: Record<string, { text: string; error: string }>;
    faults?: readonly Fault[];
    conflict?: { latest: number };
    note?: string;
    noteError?: string;
  };
}

type Step = { kind: "change"; next: ScenarioDocument; change: DocumentChange } | { kind: "undo" } | { kind: "redo" };

function stepHistory(history: History<ScenarioDocument>, step: Step): History<ScenarioDocument> {
  if (step.kind === "undo") return undone(history);
  if (step.kind === "redo") return redone(history);
  return changed(history, step.next, step.change);
}

/** Warnings about a document that can be solved; none while it cannot. */
function warningsAbout(document: ScenarioDocument) {
  const reading = readDocument(document);
  if (!reading.ok) return { faults: reading.faults, warnings: [] };
  const scenario = parseScenario(document);
  return { faults: [], warnings: warningsOf(scenario, deviceOf(scenario)) };
}

/** Address on this page of the field a fault or warning names. */
function fieldFor(path: string): string | undefined {
  const [part, list, index, ...rest] = path.split(".");
  if (part !== "stack" || list !== "layers") return undefined;
  return rest.length > 0 ? `#stack.layers.${index}.${rest.join(".")}` : undefined;
}

/** Cross-section, contacts and the table of all layers of one scenario, with undo, a kept draft and the save. */
export function StackEditor({ path, revision, draft, canEdit, shelf, saved, answer }: StackEditorProps) {
  const [history, step] = useReducer(stepHistory, draft?.document ?? revision.document, startHistory<ScenarioDocument>);
  const document = history.present;
  const [picked, setPicked] = useState<Picked | null>({ kind: "layer", index: 0 });
  const [notes, setNotes] = useState<readonly string[]>([]);
  const [base, setBase] = useState(draft?.baseRevisionNumber ?? revision.number);
  const readOnly = !canEdit;
  const { faults, warnings } = useMemo(() => warningsAbout(document), [document]);
  const text = JSON.stringify(document);
  const edited = text !== JSON.stringify(revision.document);
  const drafting = useKeptDraft(text, base, history.past.length + history.future.length > 0);

  const onChange: ChangeDocument = (next, change) => {
    setNotes(change.notes ?? []);
    step({ kind: "change", next, change });
  };

  useEffect(() => {
    function onKeyDown(event: KeyboardEvent) {
      if (!(event.ctrlKey || event.metaKey) || event.altKey || event.key.toLowerCase() !== "z") return;
      const target = event.target as HTMLElement;
      // Typed text that is not committed has the browser's own undo.
      if (target instanceof HTMLTextAreaElement) return;
      event.preventDefault();
      step({ kind: event.shiftKey ? "redo" : "undo" });
    }
    globalThis.addEventListener("keydown", onKeyDown);
    return () => globalThis.removeEventListener("keydown", onKeyDown);
  }, []);

  return (
    <Form method="post" className="mt-3 grid gap-4" preventScrollReset>
      <input type="hidden" name="document" value={text} />
      <input type="hidden" name="base" value={base} />
      {answer?.conflict && (
        <div role="alert" className="border-bad border-l-2 pl-3">
          <h2 className="font-semibold text-bad">▲ Not saved: revision {answer.conflict.latest} came in between</h2>
          <p>
            Your work began from revision {base} and is kept here.{" "}
            <Link
              to={`${path}/difference?from=${base}&to=${answer.conflict.latest}`}
              className="link"
              target="_blank"
              rel="noreferrer"
            >
              See what the other revision changed
            </Link>
            {"; then save yours as the next one, or discard it."}
          </p>
          <button
            type="button"
            className="button-quiet mt-2"
            onClick={() => setBase(answer.conflict!.latest)}
            disabled={base === answer.conflict.latest}
          >
            {base === answer.conflict.latest ? "Save will put yours on top" : "Put mine on top of it"}
          </button>
        </div>
      )}
      {answer?.faults && faults.length === 0 && (
        <FaultList faults={answer.faults} title="Not saved" linkTo={fieldFor} />
      )}
      {answer?.cells && (
        <p role="alert" className="border-bad border-l-2 pl-3 font-semibold text-bad">
          ▲ Not saved:{" "}
          {Object.keys(answer.cells).length === 1 ? "one cell" : `${Object.keys(answer.cells).length} cells`} of the
          table cannot be read.
        </p>
      )}
      <FaultList faults={faults} title="This stack cannot be solved yet" linkTo={fieldFor} />

      {canEdit && (
        <div className="not-printed flex flex-wrap items-end gap-x-4 gap-y-2">
          <label className="grid min-w-56 flex-1 gap-1 text-ink-soft text-small sm:max-w-96">
            Note on the revision, one line
            <input
              name="note"
              maxLength={500}
              defaultValue={answer?.note}
              aria-invalid={answer?.noteError !== undefined}
              className="field text-base text-ink"
            />
            {answer?.noteError && <span className="text-bad">{answer.noteError}</span>}
          </label>
          <button type="submit" name="intent" value="save" className="button">
            Save revision
          </button>
          <button
            type="button"
            className="action disabled:text-ink-soft disabled:no-underline"
            aria-keyshortcuts="Control+Z"
            disabled={history.past.length === 0}
            onClick={() => step({ kind: "undo" })}
          >
            Undo
          </button>
          <button
            type="button"
            className="action disabled:text-ink-soft disabled:no-underline"
            aria-keyshortcuts="Control+Shift+Z"
            disabled={history.future.length === 0}
            onClick={() => step({ kind: "redo" })}
          >
            Redo
          </button>
          {draft && (
            <button type="submit" name="intent" value="dropDraft" className="action">
              Discard my draft
            </button>
          )}
          <span role="status" className="self-center text-ink-soft text-small">
            {drafting === "keeping" && "Keeping the draft …"}
            {drafting === "kept" && `Draft of revision ${base} is kept`}
            {drafting === "failed" && "The draft could not be kept; the page still has it"}
            {drafting === null && draft && (
              <>
                Your draft of revision {draft.baseRevisionNumber}, <Moment at={draft.updatedAt} />
              </>
            )}
            {drafting === null && !draft && saved && !edited && `Saved as revision ${revision.number}`}
          </span>
        </div>
      )}

      <div className="grid items-start gap-x-8 gap-y-6 md:grid-cols-[200px_minmax(0,1fr)]">
        <div className="grid gap-4">
          <CrossSection
            document={document}
            onChange={onChange}
            picked={picked}
            onPick={setPicked}
            readOnly={readOnly}
            shelf={shelf}
          />
          {notes.length > 0 && (
            <div role="status" className="border-wary border-l-2 pl-2 text-small">
              {notes.map((note) => (
                <p key={note}>{note}</p>
              ))}
            </div>
          )}
          <ContactNumbers document={document} side="front" onChange={onChange} readOnly={readOnly} />
          <ContactNumbers document={document} side="back" onChange={onChange} readOnly={readOnly} />
        </div>
        <div className="grid min-w-0 gap-4">
          {warnings.length > 0 && (
            <section aria-label="Warnings" className="border-wary border-l-2 pl-3">
              <h2 className="font-semibold text-wary">
                <span aria-hidden="true">△ </span>Worth a look; it is solved all the same
              </h2>
              <ul className="mt-1">
                {warnings.map((warning) => (
                  <li key={`${warning.path} ${warning.message}`}>
                    <span className="text-ink-soft">{placeInWords(warning.path, document)}</span> {warning.message}
                  </li>
                ))}
              </ul>
            </section>
          )}
          <StackTable document={document} onChange={onChange} readOnly={readOnly} refused={answer?.cells} />
          {canEdit && (
            <PasteLayers
              layers={document.stack.layers}
              onTake={(layers, how) => {
                const { interfaces, ...stack } = document.stack;
                const keep = how === "append" && interfaces ? { interfaces } : {};
                const all = how === "append" ? [...stack.layers, ...layers] : layers;
                const { absorber: _, ...model } = document.model ?? { kind: "driftDiffusion" as const };
                const next = {
                  ...document,
                  stack: { ...stack, ...keep, layers: all },
                  ...(document.model ? { model } : {}),
                } as ScenarioDocument;
                onChange(next, { path: "paste layers", live: false });
                setPicked({ kind: "layer", index: 0 });
              }}
            />
          )}
        </div>
      </div>
    </Form>
  );
}

/** "back contact", "perovskite": where a warning belongs. */
function placeInWords(path: string, { stack }: ScenarioDocument): string {
  const [, list, index] = path.split(".");
  if (list === "front" || list === "back") return `${list === "front" ? "Front" : "Back"} contact:`;
  if (list === "layers") return `${stack.layers[Number(index)]?.name || `Layer ${Number(index) + 1}`}:`;
  return `${path}:`;
}

/** Keeps the document as this person's draft on the server, a second after the last change. */
function useKeptDraft(text: string, base: number, edited: boolean): "keeping" | "kept" | "failed" | null {
  const fetcher = useFetcher<{ noteError?: string }>();
  const { submit } = fetcher;
  useEffect(() => {
    if (!edited) return;
    const timer = setTimeout(
      () => submit({ intent: "draft", document: text, base: String(base) }, { method: "post" }),
      1000,
    );
    return () => clearTimeout(timer);
  }, [text, base, edited, submit]);
  if (!edited) return null;
  if (fetcher.state !== "idle") return "keeping";
  return fetcher.data === undefined ? null : fetcher.data.noteError ? "failed" : "kept";
}
