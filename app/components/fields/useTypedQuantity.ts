import type { Quantity } from "@demilune/solver";
import { type KeyboardEvent, useState } from "react";
import { moved, type Reading, readQuantity, stepped, typedForm } from "~/lib/quantityText";

/** Whether a change is one of a running drag or stands by itself. */
export interface ChangeStep {
  live: boolean;
}

/** A number, null where nothing has a meaning, undefined where the field is left to its default. */
export type FieldValue = number | null | undefined;

interface TypedQuantityOptions {
  quantity: Quantity;
  value: FieldValue;
  /** What the solver uses where the value is undefined: steps start there. */
  fallback?: FieldValue;
  emptyMeans?: string;
  onChange: (value: FieldValue, step: ChangeStep) => void;
  /** Typed text to begin with, where a failed save gave it back. */
  startText?: string;
}

/**
 * The life of a number field: what is typed stays until it can be read, Enter and blur commit, Escape restores,
 * arrows step by 10^0.1, with Shift by 10^0.01, page keys by a decade.
 */
export function useTypedQuantity({ quantity, value, fallback, emptyMeans, onChange, startText }: TypedQuantityOptions) {
  const [text, setText] = useState<string | null>(startText ?? null);
  const [checked, setChecked] = useState(false);
  const reading: Reading | null = text === null ? null : readQuantity(text, quantity, emptyMeans);
  const shown = text ?? (typeof value === "number" ? typedForm(value) : "");

  function commit() {
    if (reading === null) return;
    setChecked(true);
    if (!reading.ok) return;
    setText(null);
    if (reading.value !== value) onChange(reading.value, { live: false });
  }
  function restore() {
    setText(null);
    setChecked(false);
  }
  function change(next: number, live: boolean) {
    restore();
    // The end of a gesture is told even where the value stands already: it settles what was live.
    if (next !== value || !live) onChange(next, { live });
  }
  /** Where a step or a drag begins; null where there is no number to begin from. */
  const present = reading?.ok && typeof reading.value === "number" ? reading.value : (value ?? fallback ?? null);

  function step(direction: 1 | -1, fine: boolean) {
    if (present !== null) change(stepped(present, quantity, direction, fine), false);
  }
  function onKeyDown(event: KeyboardEvent) {
    if (event.altKey || event.ctrlKey || event.metaKey) return;
    const direction = event.key === "ArrowUp" || event.key === "PageUp" ? 1 : -1;
    switch (event.key) {
      case "ArrowUp":
      case "ArrowDown":
        event.preventDefault();
        step(direction, event.shiftKey);
        break;
      case "PageUp":
      case "PageDown":
        event.preventDefault();
        if (present !== null) change(moved(present, quantity, direction), false);
        break;
      case "Enter":
        // Inside a form Enter settles the number and does not send the form.
        event.preventDefault();
        commit();
        break;
      case "Escape":
        if (text !== null) event.stopPropagation();
        restore();
        break;
    }
  }

  return {
    /** What the input holds. */
    shown,
    /** Typed text that is not committed. */
    pending: text !== null,
    error: checked && reading && !reading.ok ? reading.error : null,
    note: reading?.ok ? reading.note : null,
    present,
    setText: (typed: string) => {
      setText(typed);
      setChecked(false);
    },
    commit,
    change,
    step,
    onKeyDown,
  };
}
