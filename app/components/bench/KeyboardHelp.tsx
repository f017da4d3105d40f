import { type RefObject, useEffect } from "react";

const keys = [
  ["Ctrl+Z, Ctrl+Shift+Z", "undo, redo"],
  ["Ctrl+S", "save a revision"],
  ["↑ ↓ in a number", "step by a factor 10^0.1, with Shift by 10^0.01"],
  ["Enter, Esc in a number", "take what is typed, or drop it"],
  ["← → in a plot", "from point to point, with Page keys by ten, Home and End to the ends"],
  ["↑ ↓ in a plot", "another curve"],
  ["+ − 0 in a plot", "zoom in, out, show all"],
  ["← → on tabs", "another spectrum or pane"],
  ["?", "this list"],
] as const;

const isTyping = (target: EventTarget | null) =>
  target instanceof HTMLElement && target.matches("input, textarea, select, [contenteditable]");

/** The keys of the bench, on `?` or by whoever opens the dialog. */
export function KeyboardHelp({ dialog }: { dialog: RefObject<HTMLDialogElement | null> }) {
  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent) => {
      if (event.key !== "?" || event.ctrlKey || event.metaKey || isTyping(event.target)) return;
      event.preventDefault();
      dialog.current?.showModal();
    };
    window.addEventListener("keydown", onKeyDown);
    return () => window.removeEventListener("keydown", onKeyDown);
  }, [dialog]);
  return (
    <dialog
      ref={dialog}
      aria-labelledby="keyboard-help"
      className="m-auto max-w-lg rounded border border-rule bg-sheet p-5 whitespace-normal text-ink backdrop:bg-ink/30"
    >
      <h2 id="keyboard-help" className="font-semibold text-large">
        Keys
      </h2>
      <dl className="mt-2 grid grid-cols-[max-content_1fr] gap-x-6">
        {keys.map(([key, meaning]) => (
          <div key={key} className="contents">
            <dt className="border-line border-t py-1">{key}</dt>
            <dd className="border-line border-t py-1 text-ink-soft">{meaning}</dd>
          </div>
        ))}
      </dl>
      <form method="dialog" className="mt-3 text-right">
        <button type="submit" className="button-quiet">
          Close
        </button>
      </form>
    </dialog>
  );
}
