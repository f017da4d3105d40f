import type { KeyboardEvent } from "react";
import { type Cursor, nearestIndex, placesOf, type Series } from "./series";

interface PlotKeys {
  series: readonly Series[];
  cursor: Cursor | null;
  onCursor: (cursor: Cursor | null) => void;
  /** Magnify (above 1) or reduce about the cursor; null shows the whole. */
  onZoom: (factor: number | null) => void;
  onLeave: () => void;
}

const steps: Record<string, number> = {
  ArrowRight: 1,
  ArrowLeft: -1,
  PageUp: 10,
  PageDown: -10,
  Home: Number.NEGATIVE_INFINITY,
  End: Number.POSITIVE_INFINITY,
};

/** Keyboard reading of a plot that is one tab stop: ←/→, PgUp/PgDn, Home/End, ↑/↓, +/−/0, Esc. */
export function plotKeyHandler({ series, cursor, onCursor, onZoom, onLeave }: PlotKeys) {
  const readable = series.filter((one) => one.x.length > 0);

  const moveTo = (one: Series, index: number) => onCursor({ seriesId: one.id, at: placesOf(one)[index] });

  const handle = (key: string): boolean => {
    if (key === "+" || key === "=") onZoom(2);
    else if (key === "-" || key === "−") onZoom(0.5);
    else if (key === "0") onZoom(null);
    else if (key === "Escape") onLeave();
    else if (readable.length === 0) return false;
    else {
      const row = readable.findIndex(({ id }) => id === cursor?.seriesId);
      // Reading begins at the prediction, which lies above what it is laid over.
      const one = readable.at(row) as Series;
      const places = placesOf(one);
      const index = cursor && row >= 0 ? nearestIndex(places, cursor.at) : Math.floor(places.length / 2);
      if (key in steps) {
        const step = row >= 0 ? steps[key] : Number.isFinite(steps[key]) ? 0 : steps[key];
        moveTo(one, Math.min(places.length - 1, Math.max(0, index + step)));
      } else if (key === "ArrowUp" || key === "ArrowDown") {
        const turn = key === "ArrowUp" ? -1 : 1;
        const next = readable[(Math.max(0, row) + turn + readable.length) % readable.length];
        moveTo(next, nearestIndex(placesOf(next), places[index]));
      } else return false;
    }
    return true;
  };

  return (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    if (handle(event.key)) event.preventDefault();
  };
}
