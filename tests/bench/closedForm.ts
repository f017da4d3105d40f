/** The closed forms: IMPS of one absorber at 61 frequencies, the operating point included. */
import { parseScenario } from "../../solver/src/scenario/resolve.ts";
import { solveSpectra } from "../../solver/src/solve.ts";
import { time, words } from "./timing.ts";

const absorber = {
  thicknessNm: 300,
  relativePermittivity: 10,
  affinityEV: 4,
  gapEV: 1.5,
  conductionStatesPerCm3: 1e19,
  valenceStatesPerCm3: 1e19,
  electronMobilityCm2PerVs: 0.1,
  holeMobilityCm2PerVs: 0.1,
  acceptorsPerCm3: 1e16,
  absorptionPerCm: 5e4,
  recombination: { electronLifetimeNs: 100, holeLifetimeNs: 100 },
};

export function run(say: (line: string) => void): object {
  const results: Record<string, object> = {};
  for (const kind of ["transit", "gaertner", "diffusion", "diffusionLayers"]) {
    const scenario = parseScenario({
      format: "demilune.scenario/1",
      stack: { front: { workFunctionEV: 4.1 }, back: { workFunctionEV: 5.3 }, layers: [absorber] },
      light: { fluxPerCm2S: 1e16 },
      spectra: [{ technique: "imps", bias: "shortCircuit" }],
      frequencies: { fromHz: 1e-3, toHz: 1e7, pointsPerDecade: 6 },
      model: { kind },
    });
    const timing = time(() => {
      const [spectrum] = solveSpectra(scenario).spectra;
      if (spectrum.status !== "solved") throw new Error(`${kind} is ${spectrum.status}`);
    });
    say(`${kind}: ${words(timing)}`);
    results[kind] = timing;
  }
  return results;
}
