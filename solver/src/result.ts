/** The result document of a scenario, and the vocabulary of outcomes. */
import type { Bias, Technique } from "./scenario/schema.ts";

export const resultFormatName = "demilune.result/1";

export type SpectrumStatus = "solved" | "notConverged" | "singular" | "budgetExhausted" | "aborted";

/** Words for people, one table. */
export const statusMessages: Record<SpectrumStatus, string> = {
  solved: "solved",
  notConverged: "the steady state did not converge",
  singular: "the linear system is singular",
  budgetExhausted: "the iteration budget was used up",
  aborted: "stopped on request",
};

export interface Failure {
  /** What was being computed, in words: "steady state at open circuit". */
  step: string;
  operatingPoint: { voltageV: number | null; fluxPerCm2S: number };
  residual: number;
  iterations: number;
  message: string;
}

interface SpectrumBase {
  technique: Technique;
  bias: Bias;
  fluxPerCm2S: number;
  unit: "1" | "Ω·cm²";
}

export interface SolvedSpectrum extends SpectrumBase {
  status: "solved";
  operatingPoint: { voltageV: number | null; currentMAPerCm2: number };
  /** driftDiffusion: largest spread of the terminal current over depth, relative. */
  currentSpread?: number;
  /** Closed forms: override names of the model with the values used, bench units. */
  derived?: Record<string, number | string | null>;
  frequencyHz: number[];
  re: number[];
  im: number[];
}

export interface UnsolvedSpectrum extends SpectrumBase {
  status: Exclude<SpectrumStatus, "solved">;
  failure: Failure;
}

export type SpectrumResult = SolvedSpectrum | UnsolvedSpectrum;

export interface Warning {
  path: string;
  message: string;
}

export interface ResultDocument {
  format: "demilune.result/1";
  solver: string;
  hash: string;
  status: "solved" | "notSolved";
  warnings: Warning[];
  spectra: SpectrumResult[];
}

/** Unit of a technique's spectrum. */
export const unitOf = (technique: Technique): "1" | "Ω·cm²" => (technique === "imps" ? "1" : "Ω·cm²");
