/**
 * The solver in the browser. The latest request wins: between operating points the worker looks for a newer one and
 * drops what it was at. It warms up when it loads, so that the first drag runs compiled code.
 */
import {
  hashOf,
  parseScenario,
  type ResolvedScenario,
  type ResultDocument,
  resultFormatName,
  type ScenarioDocument,
  ScenarioError,
  type SpectrumResult,
  solve,
  solverVersion,
  solveSpectra,
  type Warning,
} from "@demilune/solver";
import type { SolveAnswer, SolveRequest } from "./solverMessages";

let latest: SolveRequest | null = null;
let running = false;

/** Spectra that share an operating point share its steady state and are solved together; the shown one's come first. */
function operatingPoints({ spectra, model }: ResolvedScenario, shown: number): number[][] {
  if (model.kind !== "driftDiffusion") return [spectra.map((_, index) => index)];
  const groups = new Map<string, number[]>();
  for (const [index, { bias, fluxPerCm2S }] of spectra.entries()) {
    const key = JSON.stringify([bias, fluxPerCm2S]);
    groups.set(key, [...(groups.get(key) ?? []), index]);
  }
  return [...groups.values()].sort((one, other) => Number(other.includes(shown)) - Number(one.includes(shown)));
}

const channel = new MessageChannel();
/** Let messages that have arrived be handled. */
const breath = () =>
  new Promise<void>((resolve) => {
    channel.port1.onmessage = () => resolve();
    channel.port2.postMessage(null);
  });

async function answer(request: SolveRequest, post: (message: SolveAnswer) => void): Promise<void> {
  const start = performance.now();
  const { sequence } = request;
  const elapsed = () => performance.now() - start;
  try {
    const scenario = parseScenario(request.document);
    const spectra: (SpectrumResult | null)[] = scenario.spectra.map(() => null);
    const warnings: Warning[] = [];
    for (const [position, group] of operatingPoints(scenario, request.shown).entries()) {
      if (position > 0) {
        post({ kind: "partly", sequence, milliseconds: elapsed(), spectra: [...spectra] });
        await breath();
        if (latest !== request) return;
      }
      const part = solveSpectra({ ...scenario, spectra: group.map((index) => scenario.spectra[index]) });
      for (const [place, index] of group.entries()) spectra[index] = part.spectra[place];
      for (const warning of part.warnings)
        if (!warnings.some(({ path, message }) => path === warning.path && message === warning.message))
          warnings.push(warning);
    }
    const solved = spectra as SpectrumResult[];
    const result: ResultDocument = {
      format: resultFormatName,
      solver: solverVersion,
      hash: hashOf(scenario),
      status: solved.every(({ status }) => status === "solved") ? "solved" : "notSolved",
      warnings,
      spectra: solved,
    };
    post({ kind: "solved", sequence, milliseconds: elapsed(), result });
  } catch (error) {
    if (error instanceof ScenarioError)
      post({ kind: "refused", sequence, milliseconds: elapsed(), faults: error.faults });
    else
      post({
        kind: "defect",
        sequence,
        milliseconds: elapsed(),
        message: error instanceof Error ? error.message : String(error),
      });
  }
}

self.onmessage = async ({ data }: MessageEvent<SolveRequest>) => {
  latest = data;
  if (running) return;
  running = true;
  for (let request = latest; ; request = latest) {
    await answer(request, (message) => self.postMessage(message));
    await breath();
    if (latest === request) break;
  }
  running = false;
};

const warmUpLayer = {
  thicknessNm: 300,
  relativePermittivity: 10,
  affinityEV: 4,
  gapEV: 1.5,
  conductionStatesPerCm3: 1e19,
  valenceStatesPerCm3: 1e19,
  electronMobilityCm2PerVs: 1,
  holeMobilityCm2PerVs: 1,
  acceptorsPerCm3: 1e16,
  absorptionPerCm: 5e4,
  recombination: { electronLifetimeNs: 100, holeLifetimeNs: 100 },
};

for (const kind of ["gaertner", "diffusion", "driftDiffusion"] as const) {
  const document: ScenarioDocument = {
    format: "demilune.scenario/1",
    stack: { layers: [{ ...warmUpLayer, donorsPerCm3: 2e16 }, warmUpLayer] },
    light: { fluxPerCm2S: 1e17 },
    model: { kind },
    spectra: [{ technique: "imps" }],
    frequencies: { fromHz: 1, toHz: 1e6, pointsPerDecade: 5 },
  };
  try {
    for (let turn = 0; turn < 3 && !latest; turn++) solve(document);
  } catch (error) {
    // A model may refuse this device; warming up must not keep the worker from serving.
    if (!(error instanceof ScenarioError)) throw error;
  }
}
