/** Which part of the plane a plot shows, and how that part is chosen, kept and zoomed. */
import type { Series } from "./series";

export type ScaleKind = "linear" | "log";
export type Range = [number, number];

export interface View {
  x: Range;
  y: Range;
}

export interface Frame {
  width: number;
  height: number;
}

const forward = (scale: ScaleKind, value: number) => (scale === "log" ? Math.log10(value) : value);
const backward = (scale: ScaleKind, value: number) => (scale === "log" ? 10 ** value : value);

/** Smallest and largest value that an axis can show; null where there is none. Log axes show positive values only. */
export function extent(lists: readonly ArrayLike<number>[], scale: ScaleKind): Range | null {
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (const list of lists)
    for (let index = 0; index < list.length; index++) {
      const value = list[index];
      if (!Number.isFinite(value) || (scale === "log" && value <= 0)) continue;
      low = Math.min(low, value);
      high = Math.max(high, value);
    }
  return low <= high ? [low, high] : null;
}

/** Bounds of all points of some series. */
export function boundsOf(series: readonly Series[], x: ScaleKind, y: ScaleKind): View | null {
  const horizontal = extent(
    series.map((one) => one.x),
    x,
  );
  const vertical = extent(
    series.map((one) => one.y),
    y,
  );
  return horizontal && vertical && { x: horizontal, y: vertical };
}

/** A range with some room at both ends; a single value gets room around it. */
export function padded([low, high]: Range, scale: ScaleKind, before = 0.06, after = before): Range {
  const from = forward(scale, low);
  const to = forward(scale, high);
  const span = to - from || Math.abs(scale === "log" ? 1 : from) || 1;
  return [backward(scale, from - before * span), backward(scale, to + after * span)];
}

/**
 * Widen a view so that one unit is as many pixels in both directions. The centre stays horizontally; vertically
 * the lower edge stays, so that the room gained lies above the arcs.
 */
export function withEqualScales(view: View, frame: Frame): View {
  const width = view.x[1] - view.x[0];
  const height = view.y[1] - view.y[0];
  const unit = Math.max(width / frame.width, height / frame.height);
  const spare = (unit * frame.width - width) / 2;
  return { x: [view.x[0] - spare, view.x[1] + spare], y: [view.y[0], view.y[0] + unit * frame.height] };
}

/** The whole of a complex plane: all points, the real axis where it is near, room for the legend above the arcs. */
export function complexView(bounds: View, frame: Frame, legendHeight: number): View {
  const width = bounds.x[1] - bounds.x[0] || Math.abs(bounds.x[1]) || 1;
  const [low, high] = bounds.y;
  const near = 0.5 * width;
  const bottom = low > 0 && low < near ? 0 : low;
  const top = high < 0 && -high < near ? 0 : high;
  const reach = Math.max(top - bottom, 1e-3 * width);
  const below = Math.max(0.06 * reach, 0.035 * width);
  const room = 1 - Math.min(legendHeight, 0.4 * frame.height) / frame.height;
  const view = {
    x: [bounds.x[0] - 0.045 * width, bounds.x[1] + 0.045 * width] as Range,
    y: [bottom - below, bottom - below + (reach + 2 * below) / room] as Range,
  };
  return withEqualScales(view, frame);
}

const spanOf = ([low, high]: Range, scale: ScaleKind) => forward(scale, high) - forward(scale, low);
const inside = (inner: Range, outer: Range) => inner[0] >= outer[0] && inner[1] <= outer[1];

/**
 * Whether a view that was chosen for earlier points still serves: nothing leaves it and it is not half empty.
 * Axes that stand still while a value is dragged show the movement in the curve instead of in the ticks.
 */
export function stillServes(kept: View, bounds: View, fresh: View, x: ScaleKind, y: ScaleKind): boolean {
  return (
    inside(bounds.x, kept.x) &&
    inside(bounds.y, kept.y) &&
    spanOf(fresh.x, x) > 0.6 * spanOf(kept.x, x) &&
    spanOf(fresh.y, y) > 0.6 * spanOf(kept.y, y)
  );
}

function zoomedRange(range: Range, scale: ScaleKind, centre: number, factor: number): Range {
  const about = forward(scale, centre);
  return [
    backward(scale, about + (forward(scale, range[0]) - about) / factor),
    backward(scale, about + (forward(scale, range[1]) - about) / factor),
  ];
}

/** Zoom by a factor about a point of the plane; a factor above 1 magnifies, both directions alike. */
export function zoomed(view: View, x: ScaleKind, y: ScaleKind, centre: { x: number; y: number }, factor: number): View {
  return { x: zoomedRange(view.x, x, centre.x, factor), y: zoomedRange(view.y, y, centre.y, factor) };
}

/** The middle of a view, in the sense of its scales. */
export const middleOf = (view: View, x: ScaleKind, y: ScaleKind) => ({
  x: backward(x, (forward(x, view.x[0]) + forward(x, view.x[1])) / 2),
  y: backward(y, (forward(y, view.y[0]) + forward(y, view.y[1])) / 2),
});
