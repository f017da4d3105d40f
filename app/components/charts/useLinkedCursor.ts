import { useCallback, useMemo, useState } from "react";
import type { Cursor } from "./series";

export interface LinkedCursor {
  cursor: Cursor | null;
  onCursor: (cursor: Cursor | null) => void;
}

/** One cursor for several plots: give its two values to each of them, and the cursor to the readout line. */
export function useLinkedCursor(initial: Cursor | null = null): LinkedCursor {
  const [cursor, setCursor] = useState<Cursor | null>(initial);
  const onCursor = useCallback(
    (next: Cursor | null) =>
      setCursor((previous) =>
        previous && next && previous.seriesId === next.seriesId && previous.at === next.at ? previous : next,
      ),
    [],
  );
  return useMemo(() => ({ cursor, onCursor }), [cursor, onCursor]);
}
