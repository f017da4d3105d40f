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
    const frequency = places[points[index].index];
    const power = Math.log10(frequency);
    if (Math.abs(power - Math.round(power)) > 1e-6) continue;
    const { x, y } = points[index];
    const before = points[index - 1];
    const after = points[index + 1];
    const bend = { x: before.x + after.x - 2 * x, y: before.y + after.y - 2 * y };
    const size = Math.hypot(bend.x, bend.y) || 1;
    const left = x + (26 * bend.x) / size;
    const top = y + (17 * bend.y) / size;
    const clear = names.every((name) => Math.hypot(name.left - left, (name.top - top) * 2) > apart);
    if (clear && left > 20 && left < width - 20 && top > 40 && top < height - 4)
      names.push({ x, y, left, top, frequency });
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
