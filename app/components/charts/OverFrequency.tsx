import { useMemo } from "react";
import type { PlotFrameProps } from "./PlotFrame";
import { overFrequency, type Part, type SpectrumSeries } from "./spectrum";
import { extent } from "./view";
import { XYPlot } from "./XYPlot";

interface OverFrequencyProps
  extends Pick<
    PlotFrameProps,
    | "title"
    | "titleShown"
    | "height"
    | "initialWidth"
    | "legend"
    | "xLabelsHidden"
    | "cursor"
    | "onCursor"
    | "dragging"
    | "tools"
    | "arcs"
    | "below"
    | "above"
  > {
  spectra: readonly SpectrumSeries[];
  part: Part;
  symbol: string;
  unit: string;
}

/** Modulus (both axes logarithmic), phase, real or imaginary part over frequency. */
export function OverFrequency({ spectra, part, symbol, unit, legend = "none", ...plot }: OverFrequencyProps) {
  const series = useMemo(() => spectra.map((spectrum) => overFrequency(spectrum, part)), [spectra, part]);
  const yAxis = {
    modulus: { label: `|${symbol}|`, unit, scale: "log" },
    phase: { label: "phase", unit: "°", scale: "linear", step: 45 },
    re: { label: `Re ${symbol}`, unit, scale: "linear" },
    im: { label: `Im ${symbol}`, unit, scale: "linear" },
  } as const;
  const values = extent(
    series.map(({ y }) => y),
    "linear",
  );
  const fine = part === "phase" && values !== null && values[1] - values[0] < 60;
  const wide = part === "phase" && values !== null && values[1] - values[0] > 300;
  const axis = yAxis[part];
  return (
    <XYPlot
      {...plot}
      legend={legend}
      series={series}
      xAxis={{ label: "*f*", unit: "Hz", scale: "log" }}
      yAxis={part === "phase" ? { ...axis, step: wide ? 90 : fine ? undefined : 45 } : axis}
    />
  );
}
