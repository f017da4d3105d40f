/** What plots draw: series of points, and the marks that tell prediction, measurement and held curve apart. */

export type Mark = "circle" | "square" | "triangle" | "dash";

/** A prediction is a line, a measurement hollow marks, a held curve a thin dashed grey line. */
export type SeriesKind = "prediction" | "measured" | "held";

export interface Series {
  id: string;
  /** Notation of `richText.ts`. */
  label: string;
  kind: SeriesKind;
  x: ArrayLike<number>;
  y: ArrayLike<number>;
  /** What the linked cursor runs over (the frequency, as a rule); `x` where absent. */
  at?: ArrayLike<number>;
  /** Masked points are faint crosses and are neither fitted nor counted. */
  masked?: ArrayLike<boolean>;
  /** 1–6 of the series tokens, "ink", or a colour of its own (ordered families). */
  colour?: number | string;
  mark?: Mark;
  /** Stroke width in px where it is not the kind's own. */
  width?: number;
  dash?: string;
  /** Not named in the legend: the other half of something that is. */
  unlisted?: boolean;
}

/** The cursor that all plots of a page share: a series and a place on what it runs over. */
export interface Cursor {
  seriesId: string;
  at: number;
}

export const placesOf = (series: Series): ArrayLike<number> => series.at ?? series.x;

/** Colour of a series as a CSS value. */
export function colourOf(series: Series): string {
  if (series.kind === "held") return "var(--rule)";
  const colour = series.colour ?? (series.kind === "measured" ? "ink" : 1);
  if (typeof colour === "number") return `var(--series-${((colour - 1) % 6) + 1})`;
  return colour === "ink" ? "var(--ink)" : colour;
}

/** Index of the point of a series that lies nearest to a place, by ratio where both are positive; −1 if it is empty. */
export function nearestIndex(places: ArrayLike<number>, at: number): number {
  let best = -1;
  let smallest = Number.POSITIVE_INFINITY;
  for (let index = 0; index < places.length; index++) {
    const place = places[index];
    const distance = place > 0 && at > 0 ? Math.abs(Math.log(place / at)) : Math.abs(place - at);
    if (distance < smallest) {
      smallest = distance;
      best = index;
    }
  }
  return best;
}

const half = 3.4;

function markAt(mark: Mark, x: number, y: number): string {
  switch (mark) {
    case "square":
      return `M${x - 3},${y - 3}h6v6h-6z`;
    case "triangle":
      return `M${x},${y - 3.8}l3.6,6.2h-7.2z`;
    case "dash":
      return `M${x - 3.5},${y}h7`;
    case "circle":
      return `M${x - half},${y}a${half},${half} 0 1 0 ${2 * half},0a${half},${half} 0 1 0 ${-2 * half},0z`;
  }
}

export interface Pixels {
  x: number;
  y: number;
  index: number;
}

const tenth = (value: number) => Math.round(value * 10) / 10;

/** One path with a hollow mark at each point: cheap to repaint, and one element to export. */
export const marksPath = (points: readonly Pixels[], mark: Mark): string =>
  points.map(({ x, y }) => markAt(mark, tenth(x), tenth(y))).join("");

/** One path with a cross at each masked point. */
export const crossesPath = (points: readonly Pixels[]): string =>
  points.map(({ x, y }) => `M${tenth(x - 3.5)},${tenth(y - 3.5)}l7,7m0,-7l-7,7`).join("");
