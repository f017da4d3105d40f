import { useMemo } from "react";
import { formatPrefixed } from "~/lib/numberFormat";
import type { Column } from "./columns";
import { type Geometry, pixelsOf } from "./geometry";
import { legendHeight } from "./Legend";
import { PlotFrame, type PlotFrameProps } from "./PlotFrame";
import { SvgText } from "./SvgText";
import { placesOf, type Series } from "./series";
import { inPlane, type SpectrumSeries } from "./spectrum";
import { boundsOf, complexView } from "./view";

interface ComplexPlaneProps
  extends Pick<
    PlotFrameProps,
    | "title"
    | "titleShown"
    | "height"
    | "initialWidth"
    | "legend"
    | "cursor"
    | "onCursor"
    | "dragging"
    | "tools"
    | "arcs"
    | "below"
    | "above"
  > {
  spectra: readonly SpectrumSeries[];
  /** Symbol of the transfer function, notation of `richText.ts`. */
  symbol: string;
  unit: string;
  /** Which way Im points; −Im upwards is written at the axis. */
  imUp: boolean;
  /** Name some decades of the frequency along the first prediction. */
  decades?: boolean;
}

/** Distance in px that names of decades keep from each other. */
const apart = 58;

/** Names of decades along a curve, on the inner side of the arc, as many as have room. */
function decadeNames(series: Series, geometry: Geometry) {
  const points = pixelsOf(series, geometry);
  const places = placesOf(series);
  const { width, height } = geometry.frame;
  const names: { x: number; y: number; left: number; top: number; frequency: number }[] = [];
  for (let index = points.length - 2; index > 0; index--) {
    const here = points[index];
    const after = points[index + 1];
    const power = Math.floor(Math.log10(places[after.index]) + 1e-9);
    const from = Math.log10(places[here.index]);
    const weight = (power - from) / (Math.log10(places[after.index]) - from);
    // The decade must lie between this point and the next; a point that is one belongs to one interval only.
    if (!(weight > 1e-9 && weight <= 1 + 1e-9)) continue;
    const x = here.x + weight * (after.x - here.x);
    const y = here.y + weight * (after.y - here.y);
    const before = points[index - 1];
    const next = points[Math.min(points.length - 1, index + 2)];
    const bend = { x: before.x + next.x - here.x - after.x, y: before.y + next.y - here.y - after.y };
    const size = Math.hypot(bend.x, bend.y) || 1;
    const left = x + (28 * bend.x) / size;
    const top = y + (17 * bend.y) / size;
    const clear = names.every((name) => Math.hypot(name.left - left, (name.top - top) * 2) > apart);
    if (clear && left > 20 && left < width - 20 && top > 40 && top < height - 4)
      names.push({ x, y, left, top, frequency: 10 ** power });
  }
  return names;
}

/** A spectrum in the complex plane: equal scales on both axes at every size and zoom. */
export function ComplexPlane({ spectra, symbol, unit, imUp, decades, ...plot }: ComplexPlaneProps) {
  const series = useMemo(() => spectra.map((spectrum) => inPlane(spectrum, imUp)), [spectra, imUp]);
  const sign = imUp ? 1 : -1;
  const columns: Column[] = [
    { label: "*f*", unit: "Hz", value: (one, index) => placesOf(one)[index] },
    { label: `Re ${symbol}`, unit, value: (one, index) => one.x[index] },
    { label: `Im ${symbol}`, unit, value: (one, index) => sign * one.y[index] },
  ];
  const bounds = boundsOf(series, "linear", "linear");
  const above = (geometry: Geometry) => {
    const first = decades ? series.find(({ kind }) => kind === "prediction") : undefined;
    return (
      <>
        {first &&
          decadeNames(first, geometry).map(({ x, y, left, top, frequency }) => (
            <g key={frequency}>
              <circle cx={x} cy={y} r={3} fill="var(--series-1)" />
              <SvgText
                className="fill-ink-soft"
                paintOrder="stroke"
                stroke="var(--sheet)"
                strokeWidth={3}
                x={left}
                y={top + 4}
                textAnchor="middle"
                text={formatPrefixed(frequency, "Hz")}
              />
            </g>
          ))}
        {plot.above?.(geometry)}
      </>
    );
  };
  return (
    <PlotFrame
      {...plot}
      series={series}
      columns={columns}
      xAxis={{ label: `Re ${symbol}`, unit, scale: "linear" }}
      yAxis={{ label: `${imUp ? "" : "−"}Im ${symbol}`, unit, scale: "linear" }}
      equalScales
      whole={(frame) =>
        bounds
          ? complexView(bounds, frame, plot.legend === "none" ? 0 : legendHeight(series))
          : { x: [0, 1], y: [0, 1] }
      }
      above={above}
    />
  );
}
