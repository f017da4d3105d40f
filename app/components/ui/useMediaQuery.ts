import { useSyncExternalStore } from "react";

/** Whether a media query holds; the server, which cannot know, says it does not. */
export function useMediaQuery(query: string): boolean {
  return useSyncExternalStore(
    (listen) => {
      const list = window.matchMedia(query);
      list.addEventListener("change", listen);
      return () => list.removeEventListener("change", listen);
    },
    () => window.matchMedia(query).matches,
    () => false,
  );
}
