import { useEffect, useRef } from "react";
import { Form, useNavigation } from "react-router";

interface SaveRevisionProps {
  /** The document as JSON text. */
  document: string;
  baseRevisionNumber: number;
}

/** The one filled button of the page, which opens a line for the note. Works without scripts. */
export function SaveRevision({ document, baseRevisionNumber }: SaveRevisionProps) {
  const details = useRef<HTMLDetailsElement>(null);
  const saving = useNavigation().formData?.get("intent") === "revision";
  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent) => {
      if ((event.ctrlKey || event.metaKey) && event.key.toLowerCase() === "s") {
        event.preventDefault();
        if (details.current) details.current.open = true;
        details.current?.querySelector<HTMLInputElement>("input[name=note]")?.focus();
      } else if (event.key === "Escape" && details.current?.open) {
        details.current.open = false;
        details.current.querySelector("summary")?.focus();
      }
    };
    window.addEventListener("keydown", onKeyDown);
    return () => window.removeEventListener("keydown", onKeyDown);
  }, []);
  return (
    <details ref={details} className="relative">
      <summary className="button list-none">Save revision</summary>
      <Form
        method="post"
        className="absolute right-0 z-20 mt-1 grid w-80 gap-2 rounded border border-rule bg-sheet p-3"
        onSubmit={() => details.current?.removeAttribute("open")}
      >
        <input type="hidden" name="document" value={document} />
        <input type="hidden" name="baseRevisionNumber" value={baseRevisionNumber} />
        <label className="grid gap-1">
          Note, one line
          <input className="field" name="note" maxLength={200} autoComplete="off" />
        </label>
        <button type="submit" name="intent" value="revision" className="button-quiet" disabled={saving}>
          {saving ? "Saving …" : `Save as revision ${baseRevisionNumber + 1}`}
        </button>
      </Form>
    </details>
  );
}
