/**
 * The solver in the browser. The latest request wins: between operating points the worker looks for a newer one and
 * drops what it was at. It warms up when it loads, so that the first drag runs compiled code.
 */
import {
  hashOf,
  parseScenario,
  type ResolvedScenario,
  resultFormatName,
  type ScenarioDocument,
  ScenarioError,
  type SolverMemory,
  type SpectrumResult,
  solve,
  solverVersion,
  solveSpectra,
  type Warning,
} from "@demilune/solver";
import type { NumberedRequest } from "./latestWins";
import { breath, serveLatest } from "./serveLatest";
import type { SolveAnswer, SolveQuestion } from "./solverMessages";

const post = (answer: SolveAnswer) => self.postMessage(answer);

interface Group {
  key: string;
  /** Indices of the spectra. */
  members: number[];
}

/** Spectra that share an operating point share its steady state and are solved together; the shown one's come first. */
function operatingPoints({ spectra, model }: ResolvedScenario, shown: number): Group[] {
  if (model.kind !== "driftDiffusion") return [{ key: "all", members: spectra.map((_, index) => index) }];
  const groups = new Map<string, number[]>();
  for (const [index, { bias, fluxPerCm2S }] of spectra.entries()) {
    const key = JSON.stringify(bias === "openCircuit" ? [bias, fluxPerCm2S] : [bias]);
    groups.set(key, [...(groups.get(key) ?? []), index]);
  }
  return [...groups]
    .map(([key, members]) => ({ key, members }))
    .sort((one, other) => Number(other.members.includes(shown)) - Number(one.members.includes(shown)));
}

/** The states each operating point was left in: the next document begins there. */
const memories = new Map<string, SolverMemory>();
/** Operating points that are remembered at most. */
const mostMemories = 50;

function memoryOf(key: string): SolverMemory {
  const known = memories.get(key);
  if (known) return known;
  if (memories.size >= mostMemories) memories.clear();
  const fresh = { points: null };
  memories.set(key, fresh);
  return fresh;
}

type SolveRequest = SolveQuestion & NumberedRequest;

const { asked } = serveLatest<SolveRequest>(async ({ sequence, document, shown }, isLatest) => {
  const start = performance.now();
  const elapsed = () => performance.now() - start;
  try {
    const scenario = parseScenario(document);
    const spectra: (SpectrumResult | null)[] = scenario.spectra.map(() => null);
    const warnings: Warning[] = [];
    for (const [position, { key, members }] of operatingPoints(scenario, shown).entries()) {
      if (position > 0) {
        post({ kind: "partly", more: true, sequence, milliseconds: elapsed(), spectra: [...spectra] });
        await breath();
        if (!isLatest()) return;
      }
      const asked = { ...scenario, spectra: members.map((index) => scenario.spectra[index]) };
      const part = solveSpectra(asked, { memory: memoryOf(key) });
      for (const [place, index] of members.entries()) spectra[index] = part.spectra[place];
      for (const warning of part.warnings)
        if (!warnings.some(({ path, message }) => path === warning.path && message === warning.message))
          warnings.push(warning);
    }
    const solved = spectra as SpectrumResult[];
    post({
      kind: "solved",
      sequence,
      milliseconds: elapsed(),
      result: {
        format: resultFormatName,
        solver: solverVersion,
        hash: hashOf(scenario),
        status: solved.every(({ status }) => status === "solved") ? "solved" : "notSolved",
        warnings,
        spectra: solved,
      },
    });
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
});

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
    for (let turn = 0; turn < 3 && !asked(); turn++) solve(document);
  } catch (error) {
    // A model may refuse this device; warming up must not keep the worker from serving.
    if (!(error instanceof ScenarioError)) throw error;
  }
}
