/** A thread of the server's pool: one run from document to numbers. Results and refusals both travel as values. */
import { type Fault, parseScenario, type ResolvedScenario, ScenarioError, solve } from "@demilune/solver";
import { type PackedResult, packResult } from "./packedResult";

export interface SolveTask {
  /** A scenario document of any origin; it is checked here. */
  document: unknown;
  /** One Int32: anything but 0 asks the solver to stop between steps. */
  cancel: SharedArrayBuffer;
}

export type SolveOutcome =
  | ({ ok: true } & PackedResult)
  | { ok: false; code: "refused"; faults: readonly Fault[] }
  | { ok: false; code: "tooLarge"; message: string };

/** Points of all spectra together; a result then stays below 12 MB. */
const mostPoints = 500_000;

function pointCount({ spectra, frequencies }: ResolvedScenario): number {
  const each =
    "listHz" in frequencies
      ? frequencies.listHz.length
      : Math.round(frequencies.pointsPerDecade * Math.log10(frequencies.toHz / frequencies.fromHz)) + 1;
  return spectra.length * each;
}

export default function run({ document, cancel }: SolveTask): SolveOutcome {
  const flag = new Int32Array(cancel);
  try {
    const scenario = parseScenario(document);
    const points = pointCount(scenario);
    if (points > mostPoints)
      return {
        ok: false,
        code: "tooLarge",
        message: `${points} points in all spectra together; at most ${mostPoints} are computed in one run`,
      };
    const result = solve(scenario, {
      signal: {
        get aborted() {
          return Atomics.load(flag, 0) !== 0;
        },
      },
    });
    return { ok: true, ...packResult(result) };
  } catch (error) {
    if (error instanceof ScenarioError) return { ok: false, code: "refused", faults: error.faults };
    throw error;
  }
}
