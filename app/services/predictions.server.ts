/** The prediction of a document: kept already, or computed in a thread. */
import {
  hashOf,
  parseScenario,
  type ResultDocument,
  type ScenarioDocument,
  ScenarioError,
  solve,
} from "@demilune/solver";
import { findRun, type KeptRun, keepRun } from "~/models/runs.server";
import { unpackResult } from "~/queue/packedResult";
import { type PoolOutcome, solveInPool } from "~/queue/pool.server";

type Failure = Extract<PoolOutcome, { ok: false }>;

/** The kept run of a document; undefined where there is none, or the document cannot be solved as written. */
export async function keptRunOf(labId: string, document: ScenarioDocument): Promise<KeptRun | undefined> {
  try {
    return await findRun(labId, hashOf(parseScenario(document)));
  } catch (error) {
    if (error instanceof ScenarioError) return undefined;
    throw error;
  }
}

/** The prediction of a document, computed where it is not kept. Nothing is stored: this may answer a GET. */
export async function predict(
  labId: string,
  document: ScenarioDocument,
  signal: AbortSignal,
): Promise<{ ok: true; result: ResultDocument } | Failure> {
  const run = await keptRunOf(labId, document);
  if (run) return { ok: true, result: run.result };
  const outcome = await solveInPool(document, signal);
  return outcome.ok ? { ok: true, result: unpackResult(outcome) } : outcome;
}

export type KeepOutcome = { ok: true; milliseconds: number | null; already: boolean } | Failure;

/** Compute a document and keep the run under its hash; one that is kept already is not computed again. */
export async function computeAndKeep(
  { labId, userId }: { labId: string; userId: string },
  document: ScenarioDocument,
  signal: AbortSignal,
): Promise<KeepOutcome> {
  const run = await keptRunOf(labId, document);
  if (run) return { ok: true, milliseconds: run.milliseconds, already: true };
  const startedAt = new Date();
  const start = performance.now();
  const outcome = await solveInPool(document, signal);
  if (!outcome.ok) return outcome;
  const milliseconds = performance.now() - start;
  await keepRun(labId, userId, document, outcome, { startedAt, milliseconds });
  return { ok: true, milliseconds, already: false };
}

/** Points that are solved while a page is made; closed forms take a millisecond or two for so many. */
const quickPoints = 1500;

/** A closed-form prediction made on the spot, so that a page shows curves before scripts load; null where it is not quick. */
export function quickPrediction(document: ScenarioDocument): ResultDocument | null {
  try {
    const scenario = parseScenario(document);
    const { kind } = scenario.model;
    if (kind === "driftDiffusion" || kind === "diffusionLayers") return null;
    const { frequencies } = scenario;
    const each =
      "listHz" in frequencies
        ? frequencies.listHz.length
        : frequencies.pointsPerDecade * Math.log10(frequencies.toHz / frequencies.fromHz);
    return each * scenario.spectra.length > quickPoints ? null : solve(scenario);
  } catch (error) {
    // The page says what is wrong as soon as its own solver has looked.
    if (error instanceof ScenarioError) return null;
    throw error;
  }
}
