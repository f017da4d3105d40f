import type { ScenarioDocument } from "@demilune/solver";
import { useEffect, useRef } from "react";
import { useFetcher } from "react-router";

/** Quiet time before a draft is sent, ms. */
const quiet = 1000;

/**
 * Keep the document on the server as this person's draft while it is changed.
 *
 * @returns "saved" once the last change is kept, "saving" or "waiting" before, "failed" where the server did not take it
 */
export function useDraft(document: ScenarioDocument, baseRevisionNumber: number, enabled: boolean) {
  const fetcher = useFetcher<{ draft?: boolean }>();
  const sent = useRef(document);
  const { submit } = fetcher;
  useEffect(() => {
    if (!enabled || sent.current === document) return;
    const timer = setTimeout(() => {
      sent.current = document;
      void submit(
        { intent: "draft", document: JSON.stringify(document), baseRevisionNumber: String(baseRevisionNumber) },
        { method: "post" },
      );
    }, quiet);
    return () => clearTimeout(timer);
  }, [document, baseRevisionNumber, enabled, submit]);
  if (!enabled) return "saved";
  if (fetcher.state !== "idle") return "saving";
  return fetcher.data?.draft === false ? "failed" : "saved";
}
