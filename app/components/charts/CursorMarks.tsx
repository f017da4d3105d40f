import type { Geometry } from "./geometry";
import type { Series } from "./series";

interface CursorMarksProps {
  series: Series;
  index: number;
  geometry: Geometry;
  /** Drop lines to both axes (complex plane), or one vertical hairline (over frequency). */
  dropLines: boolean;
}

/** The cursor in one plot; nothing floats over the curve, the readout has its own line. */
export function CursorMarks({ series, index, geometry, dropLines }: CursorMarksProps) {
  const { frame, x, y } = geometry;
  const left = x(series.x[index]);
  const top = y(series.y[index]);
  if (!Number.isFinite(left) || left < 0 || left > frame.width) return null;
  const visible = Number.isFinite(top) && top >= 0 && top <= frame.height;
  return (
    <g stroke="var(--tide)" data-screen-only="" data-cursor={index}>
      {dropLines && visible && <path d={`M0,${top}H${left}V${frame.height}`} fill="none" />}
      {!dropLines && <path d={`M${left},0V${frame.height}`} fill="none" />}
      {visible && <circle cx={left} cy={top} r={4.5} fill="var(--sheet)" strokeWidth={2} />}
    </g>
  );
}
