import { type PointerEvent, useState } from "react";
import { type Geometry, pixelsOf } from "./geometry";
import { type Cursor, placesOf, type Series } from "./series";
import type { View } from "./view";

interface PlotPointer {
  series: readonly Series[];
  geometry: Geometry;
  /** Distance that counts in picking a point: along x only (over frequency), or in the plane. */
  pick: "x" | "plane";
  onCursor: (cursor: Cursor | null) => void;
  onZoomTo: (view: View) => void;
}

export interface Box {
  from: { x: number; y: number };
  to: { x: number; y: number };
}

/** Boxes smaller than this are clicks. */
const smallestBox = 8;

/** Pointing and drag zoom. The nearest point of any series takes the cursor; a drawn box becomes the view. */
export function usePlotPointer({ series, geometry, pick, onCursor, onZoomTo }: PlotPointer) {
  const [box, setBox] = useState<Box | null>(null);

  const place = (event: PointerEvent<SVGRectElement>) => {
    const area = event.currentTarget.getBoundingClientRect();
    return {
      x: ((event.clientX - area.left) / area.width) * geometry.frame.width,
      y: ((event.clientY - area.top) / area.height) * geometry.frame.height,
    };
  };

  const pointAt = ({ x, y }: { x: number; y: number }) => {
    let best: Cursor | null = null;
    let smallest = Number.POSITIVE_INFINITY;
    for (const one of series) {
      if (one.kind === "held") continue;
      for (const point of pixelsOf(one, geometry)) {
        const across = pick === "x" ? 0.02 * (point.y - y) : point.y - y;
        const distance = Math.hypot(point.x - x, across);
        if (distance < smallest) {
          smallest = distance;
          best = { seriesId: one.id, at: placesOf(one)[point.index] };
        }
      }
    }
    if (best) onCursor(best);
  };

  return {
    box,
    cancel: () => setBox(null),
    handlers: {
      onPointerDown: (event: PointerEvent<SVGRectElement>) => {
        const start = place(event);
        pointAt(start);
        if (event.pointerType === "touch" || event.button !== 0) return;
        event.currentTarget.setPointerCapture(event.pointerId);
        setBox({ from: start, to: start });
      },
      onPointerMove: (event: PointerEvent<SVGRectElement>) => {
        const here = place(event);
        if (box) setBox({ from: box.from, to: here });
        else pointAt(here);
      },
      onPointerUp: () => {
        if (!box) return;
        setBox(null);
        const { from, to } = box;
        if (Math.abs(to.x - from.x) < smallestBox || Math.abs(to.y - from.y) < smallestBox) return;
        const inPlane = (axis: "x" | "y", pixel: number) =>
          geometry[axis].invert(Math.min(geometry.frame[axis === "x" ? "width" : "height"], Math.max(0, pixel)));
        onZoomTo({
          x: [inPlane("x", Math.min(from.x, to.x)), inPlane("x", Math.max(from.x, to.x))],
          y: [inPlane("y", Math.max(from.y, to.y)), inPlane("y", Math.min(from.y, to.y))],
        });
      },
      onPointerCancel: () => setBox(null),
    },
  };
}
