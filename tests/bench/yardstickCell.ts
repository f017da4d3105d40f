/** The yardstick's cell in the product: three layers with cations, 400 nodes, 61 frequencies. */
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { type OperatingPoints, operatingPointsOf } from "../../solver/src/driftDiffusion/operatingPoints.ts";
import { type Linearisation, linearise } from "../../solver/src/driftDiffusion/smallSignal.ts";
import { frequenciesOf } from "../../solver/src/scenario/frequencies.ts";
import { parseScenario } from "../../solver/src/scenario/resolve.ts";
import type { ResolvedScenario } from "../../solver/src/scenario/resolved.ts";

/** The yardstick's scenario, or one whose absorber has another hole lifetime. */
export function yardstickScenario(folder: string, holeLifetimeNs = 150): ResolvedScenario {
  const document = JSON.parse(readFileSync(join(folder, "scenario.json"), "utf8"));
  document.stack.layers[1].recombination.holeLifetimeNs = holeLifetimeNs;
  return parseScenario(document);
}

/** The short-circuit operating point of a scenario solved, from scratch or from those of a neighbouring cell. */
export function solveSteadily(scenario: ResolvedScenario, previous: OperatingPoints | null = null): OperatingPoints {
  const points = operatingPointsOf(scenario, {}, previous);
  const { steady } = points.at("shortCircuit", scenario.light.fluxPerCm2S);
  if (steady.status !== "solved") throw new Error(`The yardstick's steady state is ${steady.status}.`);
  return points;
}

export function linearisedYardstick(folder: string): { linearise: () => Linearisation; frequencies: Float64Array } {
  const scenario = yardstickScenario(folder);
  const points = solveSteadily(scenario);
  const { problem, steady } = points.at("shortCircuit", scenario.light.fluxPerCm2S);
  return {
    linearise: () => linearise(problem, steady.state, steady.drive),
    frequencies: Float64Array.from(frequenciesOf(scenario.frequencies)),
  };
}
