/** Scales of a plot and the pixels of its points. */
import { scaleLinear, scaleLog } from "@visx/scale";
import type { Pixels, Series } from "./series";
import type { Frame, Range, ScaleKind, View } from "./view";

export type PlotScale = ReturnType<typeof scaleLinear<number>> | ReturnType<typeof scaleLog<number>>;

export interface Geometry {
  frame: Frame;
  view: View;
  x: PlotScale;
  y: PlotScale;
}

function scaleOf(kind: ScaleKind, domain: Range, range: Range): PlotScale {
  return kind === "log" ? scaleLog<number>({ domain, range }) : scaleLinear<number>({ domain, range });
}

/** Scales that map a view to a frame, y upwards. */
export function geometryOf(view: View, frame: Frame, x: ScaleKind, y: ScaleKind): Geometry {
  return {
    frame,
    view,
    x: scaleOf(x, view.x, [0, frame.width]),
    y: scaleOf(y, view.y, [frame.height, 0]),
  };
}

/** Where the points of a series lie, in px; points that an axis cannot show (zero on a log axis) are left out. */
export function pixelsOf(series: Series, { x, y }: Geometry): Pixels[] {
  const pixels: Pixels[] = [];
  for (let index = 0; index < series.x.length; index++) {
    const point = { x: x(series.x[index]), y: y(series.y[index]), index };
    if (Number.isFinite(point.x) && Number.isFinite(point.y)) pixels.push(point);
  }
  return pixels;
}
