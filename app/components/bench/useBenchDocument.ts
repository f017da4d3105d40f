import type { ScenarioDocument } from "@demilune/solver";
import { useCallback, useEffect, useState } from "react";
import type { ChangeDocument, DocumentChange } from "~/components/stack/stackProps";
import { changed, redone, startHistory, undone } from "~/lib/history";

export interface BenchDocument {
  document: ScenarioDocument;
  change: ChangeDocument;
  undo: () => void;
  redo: () => void;
  canUndo: boolean;
  canRedo: boolean;
  /** A value is being dragged or a key is held. */
  dragging: boolean;
  /** What else the last change moved, in words. */
  notes: readonly string[];
}

/** The document on the bench, with undo and redo by button and by Ctrl+Z, Ctrl+Shift+Z. */
export function useBenchDocument(initial: ScenarioDocument): BenchDocument {
  const [history, setHistory] = useState(() => startHistory(initial));
  const [last, setLast] = useState<DocumentChange | null>(null);

  const change = useCallback((next: ScenarioDocument, step: DocumentChange) => {
    setHistory((previous) => changed(previous, next, step));
    setLast(step);
  }, []);
  const undo = useCallback(() => {
    setHistory(undone);
    setLast(null);
  }, []);
  const redo = useCallback(() => {
    setHistory(redone);
    setLast(null);
  }, []);

  useEffect(() => {
    const onKeyDown = (event: KeyboardEvent) => {
      if (!(event.ctrlKey || event.metaKey) || event.altKey || event.key.toLowerCase() !== "z") return;
      // Text that is being typed has an undo of its own.
      if (event.target instanceof HTMLTextAreaElement) return;
      event.preventDefault();
      if (event.shiftKey) redo();
      else undo();
    };
    window.addEventListener("keydown", onKeyDown);
    return () => window.removeEventListener("keydown", onKeyDown);
  }, [undo, redo]);

  return {
    document: history.present,
    change,
    undo,
    redo,
    canUndo: history.past.length > 0,
    canRedo: history.future.length > 0,
    dragging: last?.live ?? false,
    notes: last?.notes ?? [],
  };
}
