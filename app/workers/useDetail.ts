import type { Fault, ScenarioDocument } from "@demilune/solver";
import { useEffect, useRef, useState } from "react";
import { LatestWins } from "./latestWins";
import type { DetailAnswer, DetailName, DetailQuestion, Details } from "./solverMessages";

export interface Detail<Name extends DetailName> {
  /** The latest answer; of an earlier question while `busy`. */
  value: Details[Name]["answer"] | null;
  busy: boolean;
  faults: readonly Fault[];
}

/** Quiet time before a question is asked, so that a value that is being stepped does not queue them, ms. */
const quiet = 150;

const startWorker = () => new Worker(new URL("./detail.worker.ts", import.meta.url), { type: "module" });

/**
 * Ask the solver something that takes longer than a spectrum.
 *
 * @param document what the question is about; null where it stands for itself
 * @param ask what is asked besides the document; keep it the same object while it means the same; null asks nothing for now
 */
export function useDetail<Name extends DetailName>(
  name: Name,
  document: ScenarioDocument | null,
  ask: Details[Name]["ask"] | null,
): Detail<Name> {
  const [detail, setDetail] = useState<Detail<Name>>({ value: null, busy: ask !== null, faults: [] });
  const client = useRef<LatestWins<DetailQuestion, DetailAnswer> | null>(null);

  useEffect(() => {
    client.current = new LatestWins(
      startWorker,
      (answer) =>
        setDetail((previous) => {
          if (answer.kind === "answered")
            return { value: answer.value as Details[Name]["answer"], busy: false, faults: [] };
          const faults =
            answer.kind === "refused"
              ? answer.faults
              : [{ path: "solver", message: answer.message, allowed: "no defect" }];
          return { ...previous, busy: false, faults };
        }),
      (message) => setDetail({ value: null, busy: false, faults: [{ path: "solver", message, allowed: "no defect" }] }),
    );
    return () => client.current?.close();
  }, []);

  useEffect(() => {
    if (ask === null) return;
    setDetail((previous) => (previous.busy ? previous : { ...previous, busy: true }));
    const timer = setTimeout(() => client.current?.ask({ name, document, ...ask } as DetailQuestion), quiet);
    return () => clearTimeout(timer);
  }, [name, document, ask]);

  return detail;
}
