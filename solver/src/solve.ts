/** From a scenario to its result document. */
import { solveDiffusion } from "./closedForm/diffusion.ts";
import { solveGaertner } from "./closedForm/gaertner.ts";
import { solveTransit } from "./closedForm/transit.ts";
import type { OperatingPoints } from "./driftDiffusion/operatingPoints.ts";
import { solveDriftDiffusion } from "./driftDiffusion/solve.ts";
import { solveLayeredDiffusion } from "./layeredDiffusion/layeredDiffusion.ts";
import type { ResultDocument, SpectrumResult, Warning } from "./result.ts";
import { resultFormatName } from "./result.ts";
import { type Device, deviceOf } from "./scenario/device.ts";
import { hashOf } from "./scenario/hash.ts";
import { parseScenario } from "./scenario/resolve.ts";
import type { ResolvedScenario } from "./scenario/resolved.ts";
import type { ModelKind } from "./scenario/schema.ts";
import { warningsOf } from "./scenario/warnings.ts";
import { solverVersion } from "./version.ts";

export interface SolveOptions {
  /** Looked at between steps; a spectrum stopped on request has the status "aborted". */
  signal?: { readonly aborted: boolean };
  /** Called with the fraction done, 0 to 1. */
  onProgress?: (fraction: number) => void;
  /** Carries states from one call to the next of a scenario that differs little, so that they begin near the answer. */
  memory?: SolverMemory;
}

/** States that the full model left behind; begin with `{ points: null }`. */
export interface SolverMemory {
  points: OperatingPoints | null;
}

export interface SolvedSpectra {
  spectra: SpectrumResult[];
  warnings: Warning[];
}

/** One model: all spectra of a scenario in their order; throws ScenarioError for what the model refuses. */
type ModelSolver = (scenario: ResolvedScenario, device: Device, options: SolveOptions) => SolvedSpectra;

/** Where a model is plugged in. */
const models: Record<ModelKind, ModelSolver> = {
  transit: solveTransit,
  gaertner: solveGaertner,
  diffusion: solveDiffusion,
  diffusionLayers: solveLayeredDiffusion,
  driftDiffusion: solveDriftDiffusion,
};

/**
 * The spectra of a scenario that has been parsed, without hash: for sweeps and fits, which solve many.
 *
 * @throws ScenarioError where the model refuses what is asked.
 */
export function solveSpectra(scenario: ResolvedScenario, options: SolveOptions = {}): SolvedSpectra {
  const solver = models[scenario.model.kind];
  const device = deviceOf(scenario);
  const { spectra, warnings } = solver(scenario, device, options);
  return { spectra, warnings: [...warningsOf(scenario, device), ...warnings] };
}

/**
 * Solve a scenario: a document of any origin, or one that `parseScenario` returned.
 *
 * @throws ScenarioError with every fault of the document, or where the model refuses what is asked.
 */
export function solve(document: unknown, options: SolveOptions = {}): ResultDocument {
  const scenario = parseScenario(document);
  const { spectra, warnings } = solveSpectra(scenario, options);
  return {
    format: resultFormatName,
    solver: solverVersion,
    hash: hashOf(scenario),
    status: spectra.every(({ status }) => status === "solved") ? "solved" : "notSolved",
    warnings,
    spectra,
  };
}
