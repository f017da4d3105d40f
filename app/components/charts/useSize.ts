import { type RefObject, useEffect, useRef, useState } from "react";

/**
 * Width in px of an element, followed by a ResizeObserver.
 *
 * @param initial what the server draws with, before anything can be measured
 */
export function useWidth<Element extends HTMLElement>(initial: number): [RefObject<Element | null>, number] {
  const element = useRef<Element>(null);
  const [width, setWidth] = useState(initial);
  useEffect(() => {
    const target = element.current;
    if (!target) return;
    const measure = () => setWidth((previous) => Math.round(target.clientWidth) || previous);
    measure();
    if (typeof ResizeObserver === "undefined") return;
    const observer = new ResizeObserver(measure);
    observer.observe(target);
    return () => observer.disconnect();
  }, []);
  return [element, width];
}
