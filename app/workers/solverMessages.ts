/** What the page and its solver worker say to each other. */
import type { Fault, ResultDocument } from "@demilune/solver";

export interface SolveRequest {
  /** Counts up; an answer with a lower number than the last request is out of date. */
  sequence: number;
  /** A scenario document, checked by the worker. */
  document: unknown;
  /** Index of the spectrum on screen: its operating point is solved first. */
  shown: number;
}

export type SolveAnswer = { sequence: number; milliseconds: number } & (
  | { kind: "solved"; result: ResultDocument }
  /** The spectra solved so far; others are null. */
  | { kind: "partly"; spectra: (ResultDocument["spectra"][number] | null)[] }
  | { kind: "refused"; faults: readonly Fault[] }
  | { kind: "defect"; message: string }
);
