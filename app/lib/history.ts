/** Undo and redo of a value, in memory. Steps of one gesture on one field count as one. */

export interface Change {
  /** What is changed; equal paths of one gesture belong together. */
  path: string;
  /** More of the same gesture may follow. */
  live: boolean;
}

export interface History<Value> {
  past: readonly Value[];
  present: Value;
  future: readonly Value[];
  /** The gesture that is still open, if any. */
  open: string | null;
}

/** Steps that are kept. */
const depth = 200;

export const startHistory = <Value>(present: Value): History<Value> => ({ past: [], present, future: [], open: null });

/** Take a new value as a step of its own, or as more of the open gesture. */
export function changed<Value>(history: History<Value>, next: Value, { path, live }: Change): History<Value> {
  const goesOn = history.open === path;
  if (next === history.present) return { ...history, open: live ? history.open : null };
  return {
    past: goesOn ? history.past : [...history.past, history.present].slice(-depth),
    present: next,
    future: [],
    open: live ? path : null,
  };
}

export function undone<Value>(history: History<Value>): History<Value> {
  const previous = history.past.at(-1);
  if (previous === undefined) return history;
  return {
    past: history.past.slice(0, -1),
    present: previous,
    future: [history.present, ...history.future],
    open: null,
  };
}

export function redone<Value>(history: History<Value>): History<Value> {
  const [next, ...future] = history.future;
  if (next === undefined) return history;
  return { past: [...history.past, history.present], present: next, future, open: null };
}
