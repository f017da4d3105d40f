import { curveMonotoneX } from "@visx/curve";
import { line } from "@visx/shape";
import { memo } from "react";
import { type Geometry, pixelsOf } from "./geometry";
import { colourOf, crossesPath, marksPath, type Pixels, placesOf, type Series } from "./series";
import { smoothPath } from "./smoothPath";

interface CurvesProps {
  series: readonly Series[];
  geometry: Geometry;
  /** Whether x is a function of the order of the points (over frequency) or the curve may turn back (complex plane). */
  monotone: boolean;
  /** Let lines glide to a new place; not while something is dragged. */
  glide: boolean;
}

const overX = line<Pixels>({ x: ({ x }) => x, y: ({ y }) => y, curve: curveMonotoneX });

/** The curves and marks of all series, in their order: later ones lie above. Lines pass through every computed point. */
export const Curves = memo(function Curves({ series, geometry, monotone, glide }: CurvesProps) {
  return series.map((one) => {
    const points = pixelsOf(one, geometry);
    if (one.kind === "measured") {
      const kept = points.filter(({ index }) => !one.masked?.[index]);
      const masked = points.filter(({ index }) => one.masked?.[index]);
      return (
        <g key={one.id}>
          {masked.length > 0 && <path d={crossesPath(masked)} fill="none" stroke="var(--rule)" strokeWidth={1.1} />}
          <path d={marksPath(kept, one.mark ?? "circle")} fill="var(--sheet)" stroke={colourOf(one)} strokeWidth={1} />
        </g>
      );
    }
    const held = one.kind === "held";
    return (
      <path
        key={one.id}
        className={glide ? "plot-glide" : undefined}
        d={monotone ? (overX(points) ?? "") : smoothPath(points, placesOf(one))}
        fill="none"
        stroke={colourOf(one)}
        strokeWidth={one.width ?? (held ? 1.3 : 2.2)}
        strokeDasharray={one.dash ?? (held ? "5 3" : undefined)}
        strokeLinejoin="round"
      />
    );
  });
});
