import type { Quantity } from "@demilune/solver";
import { type MouseEvent, type PointerEvent, useRef } from "react";
import { moved } from "~/lib/quantityText";

/** Pixels of pointer travel to a decade (or to ten steps of a linear quantity). */
const pixelsPerDecade = 120;
/** Travel below which a press is a click. */
const slack = 3;

interface Gesture {
  pointerId: number;
  startX: number;
  startValue: number;
  last: number;
  dragging: boolean;
}

interface SidewaysDragOptions {
  quantity: Quantity;
  /** Value a drag starts from; null switches dragging off. */
  value: number | null;
  onMove: (value: number, live: boolean) => void;
}

/**
 * Change a value by dragging sideways over an element; Shift makes it ten times finer. The same values can be typed,
 * stepped by key or by button. A press without travel stays a click.
 */
export function useSidewaysDrag({ quantity, value, onMove }: SidewaysDragOptions) {
  const gesture = useRef<Gesture | null>(null);
  const justDragged = useRef(false);

  function finish(event: PointerEvent) {
    const present = gesture.current;
    if (present?.pointerId !== event.pointerId) return;
    gesture.current = null;
    if (present.dragging) {
      justDragged.current = true;
      onMove(present.last, false);
    }
  }
  return {
    onPointerDown(event: PointerEvent<HTMLElement>) {
      justDragged.current = false;
      if (event.button !== 0 || value === null || event.currentTarget === document.activeElement) return;
      gesture.current = {
        pointerId: event.pointerId,
        startX: event.clientX,
        startValue: value,
        last: value,
        dragging: false,
      };
    },
    onPointerMove(event: PointerEvent<HTMLElement>) {
      const present = gesture.current;
      if (present?.pointerId !== event.pointerId) return;
      const travel = event.clientX - present.startX;
      if (!present.dragging && Math.abs(travel) <= slack) return;
      if (!present.dragging) {
        present.dragging = true;
        event.currentTarget.setPointerCapture?.(event.pointerId);
      }
      const next = moved(present.startValue, quantity, (travel / pixelsPerDecade) * (event.shiftKey ? 0.1 : 1));
      if (next !== present.last) onMove(next, true);
      present.last = next;
    },
    onPointerUp: finish,
    onPointerCancel: finish,
    /** The click that ends a drag must not focus the field. */
    onClick(event: MouseEvent<HTMLElement>) {
      if (justDragged.current) event.preventDefault();
      justDragged.current = false;
    },
  };
}
