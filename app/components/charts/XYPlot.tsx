import type { Column } from "./columns";
import { legendHeight } from "./Legend";
import { type AxisDescription, PlotFrame, type PlotFrameProps } from "./PlotFrame";
import type { Series } from "./series";
import { boundsOf, type Frame, padded, type Range, type ScaleKind, type View } from "./view";

interface XYPlotProps
  extends Pick<
    PlotFrameProps,
    | "title"
    | "titleShown"
    | "series"
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
  xAxis: AxisDescription;
  yAxis: AxisDescription;
  /** Fixed ends of an axis; what is left out follows the points. */
  xRange?: Range;
  yRange?: Range;
  /** Columns of the table where they are more than x and y. */
  columns?: readonly Column[];
}

const unitRange = (scale: ScaleKind): Range => (scale === "log" ? [0.1, 10] : [0, 1]);

/** Curves over one quantity: J–V curves, profiles over depth, band edges, residuals; linear or logarithmic axes. */
export function XYPlot({ xRange, yRange, columns, ...plot }: XYPlotProps) {
  const { series, xAxis, yAxis } = plot;
  const bounds = boundsOf(series, xAxis.scale, yAxis.scale);
  const whole = (frame: Frame): View => {
    const room = plot.legend === "none" ? 0 : Math.min(0.45, legendHeight(series) / frame.height);
    return {
      x: xRange ?? bounds?.x ?? unitRange(xAxis.scale),
      y: yRange ?? (bounds ? padded(bounds.y, yAxis.scale, 0.06, 0.06 + room / (1 - room)) : unitRange(yAxis.scale)),
    };
  };
  return (
    <PlotFrame
      {...plot}
      monotone
      whole={whole}
      columns={
        columns ?? [
          { label: xAxis.label, unit: xAxis.unit, value: (one: Series, index) => one.x[index] },
          { label: yAxis.label, unit: yAxis.unit, value: (one: Series, index) => one.y[index] },
        ]
      }
    />
  );
}
