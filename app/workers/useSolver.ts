import type { Fault, ResultDocument, ScenarioDocument, SpectrumResult } from "@demilune/solver";
import { useEffect, useRef, useState } from "react";
import { LatestWins } from "./latestWins";
import type { SolveAnswer, SolveQuestion } from "./solverMessages";

export interface Solved {
  /** The latest spectra, some of an earlier document while `busy`; null before the first. */
  spectra: readonly SpectrumResult[] | null;
  /** The latest whole result; the spectra may already be ahead of it. */
  result: ResultDocument | null;
  /** Time the worker took for what is shown. */
  milliseconds: number | null;
  /** A newer document is being solved. */
  busy: boolean;
  /** Why the present document cannot be solved; the spectra are then those of the last one that could. */
  faults: readonly Fault[];
  /** A defect of the solver, or a worker that could not start. */
  defect: string | null;
}

const startWorker = () => new Worker(new URL("./solver.worker.ts", import.meta.url), { type: "module" });

/**
 * Solve a document in a Web Worker whenever it changes.
 *
 * @param initial result the server sent along, shown until the worker answers
 * @param shown index of the spectrum on screen, solved first
 */
export function useSolver(document: ScenarioDocument, initial: ResultDocument | null, shown: number): Solved {
  const [solved, setSolved] = useState<Solved>({
    spectra: initial?.spectra ?? null,
    result: initial,
    milliseconds: null,
    busy: false,
    faults: [],
    defect: null,
  });
  const client = useRef<LatestWins<SolveQuestion, SolveAnswer> | null>(null);
  const shownNow = useRef(shown);

  useEffect(() => {
    client.current = new LatestWins(
      startWorker,
      (answer) => setSolved((previous) => taken(previous, answer)),
      (defect) => setSolved((previous) => ({ ...previous, busy: false, defect })),
    );
    return () => client.current?.close();
  }, []);

  useEffect(() => {
    shownNow.current = shown;
  }, [shown]);

  useEffect(() => {
    client.current?.ask({ document, shown: shownNow.current });
    setSolved((previous) => (previous.busy ? previous : { ...previous, busy: true }));
  }, [document]);

  return solved;
}

/** What is shown after an answer to the present document. */
function taken(previous: Solved, answer: SolveAnswer): Solved {
  const { milliseconds } = answer;
  switch (answer.kind) {
    case "solved": {
      const { result } = answer;
      return { spectra: result.spectra, result, milliseconds, busy: false, faults: [], defect: null };
    }
    case "partly": {
      const old = previous.spectra;
      const spectra = answer.spectra.map((spectrum, index) => spectrum ?? old?.[index]);
      // Until every spectrum of a longer list is there once, the old list stays.
      if (spectra.some((spectrum) => spectrum === undefined)) return previous;
      return { ...previous, spectra: spectra as SpectrumResult[], milliseconds, faults: [], defect: null };
    }
    case "refused":
      return { ...previous, milliseconds, busy: false, faults: answer.faults };
    case "defect":
      return { ...previous, milliseconds, busy: false, defect: answer.message };
  }
}
