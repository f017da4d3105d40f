import type { Geometry } from "./geometry";
import { placesOf, type Series } from "./series";

/** An arc as plots show it. */
export interface ArcOnPlot {
  /** From 1, low to high frequency. */
  number: number;
  peakHz: number;
  /** The valleys to its sides; the ends of the spectrum for the first and the last. */
  fromHz: number;
  toHz: number;
}

/** The arcs of one of the curves that a plot draws. */
export interface ArcsOfSeries {
  seriesId: string;
  arcs: readonly ArcOnPlot[];
  lit: number | null;
  /** They belong to an earlier curve; the present one's are being looked for. */
  stale: boolean;
}

/** Where a curve passes at a frequency, linear in log f between its points, in px. */
function placeAt(series: Series, { x, y }: Geometry, frequencyHz: number): { x: number; y: number } {
  const places = placesOf(series);
  const at = Math.log(frequencyHz);
  let upper = 1;
  while (upper < places.length - 1 && Math.log(places[upper]) < at) upper++;
  const lower = upper - 1;
  const from = Math.log(places[lower]);
  const weight = Math.min(1, Math.max(0, (at - from) / (Math.log(places[upper]) - from)));
  const between = (values: ArrayLike<number>) => values[lower] + weight * (values[upper] - values[lower]);
  return { x: x(between(series.x)), y: y(between(series.y)) };
}

interface ArcPlotProps {
  series: Series;
  geometry: Geometry;
  arcs: readonly ArcOnPlot[];
}

/** Half-discs with their numbers: at the peaks in the complex plane, over frequency at the edge that the curve leaves free. */
export function ArcMarks({ series, geometry, arcs, stale }: ArcPlotProps & { stale: boolean }) {
  const { width, height } = geometry.frame;
  const plane = series.at !== undefined;
  let previous = Number.NEGATIVE_INFINITY;
  return arcs.map(({ number, peakHz }) => {
    const peak = placeAt(series, geometry, peakHz);
    const below = plane ? peak.y > geometry.y(0) : peak.y < height / 2;
    const left = plane ? peak.x - 10 : geometry.x(peakHz) - 10;
    const crowded = left - previous < 26;
    const row = crowded ? 34 : 16;
    const bottom = plane ? peak.y + (below ? 22 : -12) : below ? height + 8 - row : row;
    previous = plane || crowded ? Number.NEGATIVE_INFINITY : left;
    if (!(left > -10 && left < width - 10 && bottom > 8 && bottom < height + 4)) return null;
    return (
      <g key={number} className="fill-ink" opacity={stale ? 0.4 : 1} data-arc={number}>
        <path d={`M${left},${bottom}a6.5,6.5 0 0 1 13,0z`} />
        <text
          x={left + 18}
          y={bottom}
          className="font-semibold"
          paintOrder="stroke"
          stroke="var(--sheet)"
          strokeWidth={3}
        >
          {number}
        </text>
      </g>
    );
  });
}

/** The wash of a lit arc between its two valleys: under the curve in the complex plane, a band over frequency. */
export function ArcWash({ series, geometry, arcs }: ArcPlotProps) {
  return arcs.map(({ number, fromHz, toHz }) => {
    if (!series.at) {
      const [from, to] = [geometry.x(fromHz), geometry.x(toHz)];
      return (
        <rect
          key={number}
          className="fill-wash"
          x={from}
          width={Math.max(0, to - from)}
          height={geometry.frame.height}
        />
      );
    }
    const axis = geometry.y(0);
    const inside = Array.from(placesOf(series)).filter((place) => place > fromHz && place < toHz);
    const outline = [fromHz, ...inside, toHz].map((place) => placeAt(series, geometry, place));
    const path = outline.map(({ x, y }) => `${x},${y}`).join("L");
    return (
      <path key={number} className="fill-wash" d={`M${outline[0].x},${axis}L${path}L${outline.at(-1)?.x},${axis}Z`} />
    );
  });
}
