/** What the page and its workers say to each other. */
import type {
  Arc,
  Bias,
  CurrentVoltageCurve,
  Curve,
  Fault,
  HarmonicProfiles,
  Profiles,
  ResultDocument,
  SpectrumResult,
  Technique,
} from "@demilune/solver";
import type { NumberedAnswer } from "./latestWins";

export interface SolveQuestion {
  /** A scenario document, checked by the worker. */
  document: unknown;
  /** Index of the spectrum on screen: its operating point is solved first. */
  shown: number;
}

type Refusal =
  | { kind: "refused"; faults: readonly Fault[] }
  /** A defect of the solver, said as it came. */
  | { kind: "defect"; message: string };

export type SolveAnswer = NumberedAnswer & { milliseconds: number } & (
    | { kind: "solved"; result: ResultDocument }
    /** The spectra solved so far; others are null. */
    | { kind: "partly"; more: true; spectra: (SpectrumResult | null)[] }
    | Refusal
  );

export interface ArcsOfCurve {
  arcs: Arc[];
  /** Frequencies between neighbouring arcs: one fewer than arcs, Hz. */
  valleysHz: number[];
  /** Standard deviation of Re and of Im, unit of the spectrum. */
  noise: number;
}

interface At {
  bias: Bias;
  fluxPerCm2S: number;
}

/** Slower questions about one scenario, and what answers them. */
export interface Details {
  /** Under the scenario's light with ions that follow and with ions held, and in the dark. */
  currentVoltage: {
    /** Where the ions are held; null where none move. */
    ask: { heldAt: At | null };
    answer: { light: CurrentVoltageCurve; held: CurrentVoltageCurve | null; dark: CurrentVoltageCurve };
  };
  profiles: { ask: At; answer: Profiles };
  harmonicProfiles: { ask: At & { technique: Technique; frequencyHz: number }; answer: HarmonicProfiles };
  /** Of a curve whatever it comes from: needs no document. */
  arcs: { ask: { curve: Curve }; answer: ArcsOfCurve };
  /** One spectrum of the document by another model. */
  otherModel: { ask: { shown: number; model: unknown }; answer: SpectrumResult };
}
export type DetailName = keyof Details;

export type DetailQuestion = { document: unknown } & {
  [Name in DetailName]: { name: Name } & Details[Name]["ask"];
}[DetailName];

export type DetailAnswer = NumberedAnswer & ({ kind: "answered"; value: Details[DetailName]["answer"] } | Refusal);
