/** What the full model gives back: starter stacks, failures as values, refusals, profiles and curves. */

import { readFileSync } from "node:fs";
import {
  currentVoltageCurve,
  harmonicProfilesOf,
  operatingPointsOf,
  parseScenario,
  profilesOf,
  type ScenarioDocument,
  ScenarioError,
  type SolvedSpectrum,
  solve,
} from "@demilune/solver";
import { describe, expect, test } from "vitest";
import type { OperatingPoints } from "../../solver/src/driftDiffusion/operatingPoints.ts";
import { randomScenario } from "../bench/randomStacks.ts";
import { document, layer } from "./driftDiffusionStacks.ts";

const perovskite: ScenarioDocument = JSON.parse(
  readFileSync(new URL("./cases/perovskite-cations.json", import.meta.url), "utf8"),
);

describe("failures are values", () => {
  const scenario = parseScenario(perovskite);
  const pointsWith = (options: ConstructorParameters<typeof OperatingPoints>[2]) =>
    operatingPointsOf(scenario, options).at("openCircuit", 1e17);

  test("a budget of four iterations is used up, and the best iterate is handed over", () => {
    const { steady, problem } = pointsWith({ iterations: 4 });
    expect(steady.status).toBe("budgetExhausted");
    expect(steady.step).not.toBe("");
    expect(steady.state.potential).toHaveLength(problem.nodes);
    expect(steady.state.potential.every(Number.isFinite)).toBe(true);
  });
  test("a request to stop is heeded", () => {
    expect(pointsWith({ signal: { aborted: true } }).steady.status).toBe("aborted");
    const { spectra, status } = solve(perovskite, { signal: { aborted: true } });
    expect(status).toBe("notSolved");
    for (const spectrum of spectra) {
      expect(spectrum.status).toBe("aborted");
      expect(spectrum).not.toHaveProperty("re");
      expect(spectrum).toHaveProperty("failure.operatingPoint.fluxPerCm2S", 9e16);
    }
  });
});

describe("refusals name what is wrong", () => {
  const refusal = (given: ScenarioDocument) => {
    try {
      solve(given);
    } catch (error) {
      if (error instanceof ScenarioError) return error.faults[0];
      throw error;
    }
    return null;
  };
  const closed = { holeVelocityCmPerS: 0 };

  test("holes that can neither leave nor recombine, at the electron contact", () => {
    const given = document([layer({ absorptionPerCm: 1e4 })], {
      stack: { front: closed, back: closed },
      light: { fluxPerCm2S: 1e15 },
      spectra: [{ technique: "imps" }],
    });
    expect(refusal(given)?.path).toBe("stack.front.holeVelocityCmPerS");
    expect(refusal(given)?.message).toMatch(/holes/);
    const recombining = layer({ absorptionPerCm: 1e4, recombination: { radiativeCm3PerS: 1e-10 } });
    expect(refusal({ ...given, stack: { ...given.stack, layers: [recombining] } })).toBeNull();
    expect(refusal({ ...given, stack: { ...given.stack, back: {} } })).toBeNull();
  });
  test("fewer nodes than the layers need", () => {
    const given = document(
      Array.from({ length: 6 }, () => layer({ thicknessNm: 50 })),
      { spectra: [{ technique: "impedance", bias: "shortCircuit" }], model: { kind: "driftDiffusion", nodes: 12 } },
    );
    expect(refusal(given)?.path).toBe("model.nodes");
  });
});

test("forty random stacks are solved, with the same current at every depth and finite numbers", () => {
  for (let seed = 1001; seed <= 1040; seed++)
    for (const spectrum of solve({ ...randomScenario(seed), frequencies: { listHz: [0.1, 1e3, 1e7] } }).spectra) {
      expect(spectrum.status, `seed ${seed}`).toBe("solved");
      const { currentSpread, re, im } = spectrum as SolvedSpectrum;
      expect(currentSpread, `seed ${seed}`).toBeLessThan(1e-4);
      expect([...re, ...im].every(Number.isFinite)).toBe(true);
    }
}, 120_000);

describe("deep reverse, strong light, cold and hot", () => {
  const asked = (changes: Partial<ScenarioDocument>, temperatureK = 300) =>
    solve({
      ...perovskite,
      ...changes,
      stack: { ...perovskite.stack, temperatureK },
      frequencies: { listHz: [1, 1e5] },
    }).spectra.map(({ status }) => status);
  const at = (voltageV: number) => [{ technique: "impedance" as const, bias: { voltageV } }];

  test("−1000 V", () => expect(asked({ spectra: at(-1000) })).toEqual(["solved"]));
  test("0.3 V above open circuit", () => expect(asked({ spectra: at(1.27) })).toEqual(["solved"]));
  test("10¹⁸ photons cm⁻² s⁻¹", () =>
    expect(asked({ light: { fluxPerCm2S: 1e18 } })).toEqual(["solved", "solved", "solved", "solved"]));
  test("150 K and 1000 K", () => {
    for (const temperature of [150, 1000])
      expect(asked({}, temperature)).toEqual(["solved", "solved", "solved", "solved"]);
  });
});

test("two contacts of one metal and an even layer answer light from both sides alike", () => {
  const contact = { workFunctionEV: 4.56 };
  const given = (side: "front" | "back") =>
    document([layer({ absorptionPerCm: 3e4, holeMobilityCm2PerVs: 0.05, recombination: { radiativeCm3PerS: 1e-9 } })], {
      stack: { front: contact, back: contact },
      light: { side, fluxPerCm2S: 1e16 },
      spectra: [{ technique: "imps", bias: "shortCircuit" }],
      frequencies: { listHz: [1e3] },
    });
  const [front, back] = (["front", "back"] as const).map((side) => solve(given(side)).spectra[0] as SolvedSpectrum);
  expect(front.re[0]).toBeCloseTo(-back.re[0], 9);
  expect(Math.abs(front.re[0])).toBeGreaterThan(1e-3);
});

describe("frozen ions", () => {
  const frozen = (bias: "shortCircuit" | { voltageV: number }): ScenarioDocument => ({
    ...perovskite,
    stack: { ...perovskite.stack, ionsFrozenAt: { bias, fluxPerCm2S: 9e16 } },
    spectra: [{ technique: "imps", bias: "shortCircuit" }],
    frequencies: { listHz: [1e-2, 3.16, 1e4] },
  });
  test("left where they stand give the same current and no slow arc", () => {
    const [held] = solve(frozen("shortCircuit")).spectra as SolvedSpectrum[];
    const [free] = solve({ ...frozen("shortCircuit"), stack: perovskite.stack }).spectra as SolvedSpectrum[];
    expect(held.operatingPoint.currentMAPerCm2).toBeCloseTo(free.operatingPoint.currentMAPerCm2, 6);
    expect(held.re[2]).toBeCloseTo(free.re[2], 5);
    expect(Math.abs(held.im[1])).toBeLessThan(0.05 * Math.abs(free.im[1]));
  });
  test("left at another bias change the operating point", () => {
    const [held] = solve(frozen({ voltageV: 1 })).spectra as SolvedSpectrum[];
    const [free] = solve({ ...frozen("shortCircuit"), stack: perovskite.stack }).spectra as SolvedSpectrum[];
    expect(held.operatingPoint.currentMAPerCm2).toBeGreaterThan(free.operatingPoint.currentMAPerCm2 * 1.001);
  });
});

test("profiles hold together: charge of ions, currents, edges that jump at interfaces", () => {
  const points = operatingPointsOf(parseScenario(perovskite));
  const profiles = profilesOf(points, { bias: { voltageV: 0.5 }, fluxPerCm2S: 9e16 });
  if (profiles.status !== "solved") throw new Error(profiles.failure.message);
  const { depthNm, layer: layerOf, cationsPerCm3 } = profiles;
  let ions = 0;
  for (let k = 1; k < depthNm.length; k++)
    if (layerOf[k] === layerOf[k - 1])
      ions += 0.5 * (cationsPerCm3[k] + cationsPerCm3[k - 1]) * (depthNm[k] - depthNm[k - 1]) * 1e-7;
  expect(ions / (3e17 * 400e-7)).toBeCloseTo(1, 9);
  profiles.electronCurrentMAPerCm2.forEach((electrons, k) => {
    const inside = k > 0 && k < depthNm.length - 1 && layerOf[k] === layerOf[k - 1] && layerOf[k] === layerOf[k + 1];
    if (!inside) return;
    const total = electrons + profiles.holeCurrentMAPerCm2[k];
    expect(total).toBeCloseTo(profiles.currentMAPerCm2 + (0.5 + 2e-3 * profiles.currentMAPerCm2) / 5, 4);
  });
  const face = layerOf.indexOf(1);
  expect(profiles.conductionEdgeEV[face] - profiles.conductionEdgeEV[face - 1]).toBeCloseTo(0.1, 9);
  expect(profiles.electronFermiEV[0] - profiles.holeFermiEV[depthNm.length - 1]).toBeCloseTo(
    0.5 + 2e-3 * profiles.currentMAPerCm2,
    4,
  );
});

test("oscillating profiles carry the spectrum's current at every depth", () => {
  const points = operatingPointsOf(parseScenario(perovskite));
  const request = { technique: "imps" as const, bias: "shortCircuit" as const, fluxPerCm2S: 9e16, frequencyHz: 10 };
  const profiles = harmonicProfilesOf(points, request);
  if (profiles.status !== "solved") throw new Error(profiles.failure.message);
  const [spectrum] = solve({
    ...perovskite,
    spectra: [{ technique: "imps", bias: "shortCircuit" }],
    circuit: { seriesResistanceOhmCm2: 2, shuntResistanceOhmCm2: 5000 },
    frequencies: { listHz: [10] },
  }).spectra as SolvedSpectrum[];
  const { electronCurrentMAPerCm2, holeCurrentMAPerCm2, ionCurrentMAPerCm2, displacementCurrentMAPerCm2 } = profiles;
  const total = (k: number) =>
    electronCurrentMAPerCm2.re[k] +
    holeCurrentMAPerCm2.re[k] +
    ionCurrentMAPerCm2.re[k] +
    displacementCurrentMAPerCm2.re[k];
  // Terminal current plus what the shunt takes at δV_i = R_s δJ.
  const delivered = spectrum.re[0] * 1.602176634e-16 * 9e16;
  const expected = delivered * (1 + 2 / 5000);
  for (const k of [0, 50, 200, profiles.depthNm.length - 1]) expect(total(k) / expected).toBeCloseTo(1, 6);
});

describe("current–voltage curves", () => {
  const scenario = parseScenario(perovskite);
  const curve = currentVoltageCurve(scenario, { steps: 12 });

  test("pass through the open-circuit voltage and the short-circuit current of the operating points", () => {
    expect(curve.failures).toEqual([]);
    expect(curve.openCircuitVoltageV).toBeCloseTo(0.96493, 4);
    expect(curve.shortCircuitMAPerCm2).toBeCloseTo(13.386, 3);
    const { maximumPower, fillFactor } = curve;
    expect(maximumPower!.powerMWPerCm2).toBeGreaterThan(
      Math.max(...curve.voltageV.map((voltage, k) => voltage * curve.currentMAPerCm2[k])) * 0.9999,
    );
    expect(fillFactor).toBeCloseTo(maximumPower!.powerMWPerCm2 / (0.96493 * 13.386), 3);
  });
  test("of a fast scan from a pre-bias differ from the slow one", () => {
    const fast = currentVoltageCurve(scenario, { steps: 4, ions: { bias: { voltageV: 1.1 }, fluxPerCm2S: 0 } });
    expect(fast.failures).toEqual([]);
    expect(Math.abs(fast.fillFactor! - curve.fillFactor!)).toBeGreaterThan(1e-3);
  });
  test("in the dark are a diode's: no current at 0 V, forward current negative", () => {
    const dark = currentVoltageCurve(scenario, { fluxPerCm2S: 0, fromV: 0, toV: 1, steps: 4 });
    expect(Math.abs(dark.currentMAPerCm2[0])).toBeLessThan(1e-12);
    expect(dark.currentMAPerCm2[4]).toBeLessThan(-1e-3);
    expect(dark.openCircuitVoltageV).toBeNull();
  });
});

test("a neighbouring scenario begins from the states of the last one and ends at the same numbers", () => {
  const memory = { points: null };
  const asked = { ...perovskite, frequencies: { listHz: [1, 1e5] } };
  solve(asked, { memory });
  const moved = structuredClone(asked);
  moved.stack.layers[1].thicknessNm = 440;
  const [warm, cold] = [solve(moved, { memory }), solve(moved)];
  warm.spectra.forEach((spectrum, k) => {
    const [a, b] = [spectrum as SolvedSpectrum, cold.spectra[k] as SolvedSpectrum];
    const size = Math.max(...b.re.map(Math.abs));
    expect(Math.max(...a.re.map((re, f) => Math.abs(re - b.re[f]))) / size).toBeLessThan(3e-4);
  });
});
