import { describe, expect, test } from "vitest";
import { type FitRequest, fitScenario } from "../../solver/src/fit/fit.ts";
import type { FitData } from "../../solver/src/fit/fitProblem.ts";
import { minimise } from "../../solver/src/fit/levenbergMarquardt.ts";
import { profileLikelihood } from "../../solver/src/fit/profile.ts";
import type { Technique } from "../../solver/src/scenario/schema.ts";
import { diffusion, logarithmic, type Response, relaxation, sampled } from "./spectra.ts";

const patient = { timeout: 60_000 };
const o = (name: string) => `model.overrides.${name}`;

const layer = {
  thicknessNm: 10_000,
  relativePermittivity: 10,
  affinityEV: 4,
  gapEV: 2,
  conductionStatesPerCm3: 1e19,
  valenceStatesPerCm3: 1e19,
  electronMobilityCm2PerVs: 0.01,
  holeMobilityCm2PerVs: 0.01,
  absorptionPerCm: 1,
};

/** A film 10 µm thick, α d = 10⁻³: generation is uniform to that order. */
const film = (overrides: Record<string, number | null>) => ({
  format: "demilune.scenario/1",
  stack: { layers: [layer] },
  light: { fluxPerCm2S: 1e16 },
  model: {
    kind: "diffusion",
    overrides: {
      thicknessNm: 10_000,
      absorptionPerCm: 1,
      lifetimeNs: 1e12,
      extractionVelocityCmPerS: null,
      ...overrides,
    },
  },
});

const data = (technique: Technique, response: Response, noise: number, seed: number, withSigma = true): FitData => {
  const curve = sampled(logarithmic(1, 1e5, 8), response, noise, seed);
  const largest = Math.max(...curve.re.map((value, k) => Math.hypot(value, curve.im[k])));
  return {
    name: `${technique}.csv`,
    technique,
    ...curve,
    ...(withSigma && { sigma: curve.re.map(() => Math.max(noise, 1e-5) * largest) }),
  };
};

// Uniform generation without recombination: Q = α d tanh√(iωd²/D)/√(iωd²/D), L. Dloczik et al., J. Phys. Chem. B 101,
// 10281 (1997). D = 1e-3 cm²/s and d = 10 µm give d²/D = 1 ms.
const uniformFilm = diffusion(1e-3, 1e-3);

describe("fit", () => {
  test("recovers the diffusion coefficient of a film from a start a factor three away", patient, () => {
    const request: FitRequest = {
      scenarios: [film({ diffusionCm2PerS: 3e-3 })],
      data: [data("imps", uniformFilm, 0.002, 1)],
      free: [o("diffusionCm2PerS")],
    };
    const { status, parameters, unresolved, chiSquare } = fitScenario(request);
    expect(status).toBe("converged");
    expect(unresolved).toEqual([]);
    const [{ value, standardError, interval95, identifiable }] = parameters;
    expect(identifiable).toBe(true);
    expect(Math.abs(value / 1e-3 - 1)).toBeLessThan(0.01);
    expect(interval95![0]).toBeLessThan(1e-3);
    expect(interval95![1]).toBeGreaterThan(1e-3);
    expect(standardError!).toBeLessThan(0.01 * value);
    // χ² of 82 real data and one parameter: within four standard deviations of its mean
    expect(Math.abs(chiSquare! - 81)).toBeLessThan(4 * Math.sqrt(2 * 81));
  });

  test("95 % intervals hold the truth in about 95 of 100 draws, with and without known noise", patient, () => {
    for (const withSigma of [true, false]) {
      let held = 0;
      for (let seed = 1; seed <= 100; seed++) {
        const { parameters } = fitScenario({
          scenarios: [film({ diffusionCm2PerS: 2e-3 })],
          data: [data("imps", uniformFilm, 0.005, seed * 7, withSigma)],
          free: [o("diffusionCm2PerS")],
        });
        const [low, high] = parameters[0].interval95!;
        if (low <= 1e-3 && high >= 1e-3) held += 1;
      }
      // binomial, 95 of 100: three standard deviations
      expect(held, withSigma ? "known noise" : "estimated noise").toBeGreaterThanOrEqual(88);
    }
  });

  test("D and d enter only as D/d² and αd: says so", patient, () => {
    const { parameters, unresolved } = fitScenario({
      scenarios: [film({ diffusionCm2PerS: 2e-3 })],
      data: [data("imps", uniformFilm, 0.002, 4)],
      free: ["diffusionCm2PerS", "thicknessNm", "absorptionPerCm"].map(o),
    });
    expect(unresolved).toHaveLength(1);
    const [{ paths, exponents, text }] = unresolved;
    const power = Object.fromEntries(paths.map((path, k) => [path, exponents[k]]));
    expect(power[o("diffusionCm2PerS")] / power[o("thicknessNm")]).toBeCloseTo(2, 3);
    expect(power[o("absorptionPerCm")] / power[o("thicknessNm")]).toBeCloseTo(-1, 3);
    expect(text).toContain("diffusionCm2PerS · thicknessNm^-2");
    expect(parameters.map(({ identifiable }) => identifiable)).toEqual([false, false, false]);
    // what is determined comes out all the same
    const [d, thickness, alpha] = parameters.map(({ value }) => value);
    expect(d / thickness ** 2 / (1e-3 / 1e4 ** 2)).toBeCloseTo(1, 1);
    expect((alpha * thickness) / 1e4).toBeCloseTo(1, 1);
  });

  test("series resistance and capacitance only as their product", patient, () => {
    // Q(1 + iωRC)^−1, R = 10 Ω·cm², C = 10 µF/cm², far below the transit frequency
    const { unresolved, parameters } = fitScenario({
      scenarios: [
        {
          format: "demilune.scenario/1",
          stack: { layers: [{ ...layer, absorptionPerCm: 1e5 }] },
          light: { fluxPerCm2S: 1e16 },
          circuit: { seriesResistanceOhmCm2: 20, parallelCapacitanceFPerCm2: 1e-5 },
          model: { kind: "transit", overrides: { variant: "collected", electronTransitTimeNs: 1e-3 } },
        },
      ],
      data: [data("imps", relaxation(1 / (2 * Math.PI * 1e-4)), 0.002, 4)],
      free: ["circuit.seriesResistanceOhmCm2", "circuit.parallelCapacitanceFPerCm2"],
    });
    expect(unresolved).toHaveLength(1);
    expect(Math.abs(unresolved[0].exponents[1] / unresolved[0].exponents[0] + 1)).toBeLessThan(0.01);
    const product = parameters[0].value * parameters[1].value;
    expect(Math.abs(product / 1e-4 - 1)).toBeLessThan(0.02);
  });

  test("tied paths keep the ratio of their start values", patient, () => {
    // D and τ tied: with L = √(Dτ) ≫ d only D shows
    const { parameters } = fitScenario({
      scenarios: [film({ diffusionCm2PerS: 2e-3, lifetimeNs: 2e9 })],
      data: [data("imps", uniformFilm, 0.002, 4)],
      free: [`${o("diffusionCm2PerS")}+${o("lifetimeNs")}`],
    });
    expect(Math.abs(parameters[0].value / 1e-3 - 1)).toBeLessThan(0.01);
  });

  test("a bound that cuts the interval makes a parameter not identifiable", patient, () => {
    const { parameters } = fitScenario({
      scenarios: [film({ diffusionCm2PerS: 2e-3 })],
      data: [data("imps", uniformFilm, 0.002, 1)],
      free: [o("diffusionCm2PerS")],
      bounds: { [o("diffusionCm2PerS")]: [1.5e-3, 1e-2] },
    });
    expect(parameters[0].value).toBeCloseTo(1.5e-3, 9);
    expect(parameters[0].identifiable).toBe(false);
  });

  test("stops on request with the best values, and goes on from there", patient, () => {
    const request: FitRequest = {
      scenarios: [film({ diffusionCm2PerS: 5e-2 })],
      data: [data("imps", uniformFilm, 0.002, 1)],
      free: [o("diffusionCm2PerS")],
    };
    const signal = { aborted: false };
    const stopped = fitScenario(request, {
      signal,
      onProgress: ({ iteration }) => {
        if (iteration >= 2) signal.aborted = true;
      },
    });
    expect(stopped.status).toBe("aborted");
    const resumed = fitScenario(request, { resume: stopped.state });
    expect(resumed.status).toBe("converged");
    expect(Math.abs(resumed.parameters[0].value / 1e-3 - 1)).toBeLessThan(0.01);
  });

  test.each([
    [["stack.layers.0.name"], "names no number"],
    [["stack.layers.4.thicknessNm"], "names no number"],
    [["circuit.shuntResistanceOhmCm2"], "has no number to start from"],
    [[o("diffusionCm2PerS"), o("diffusionCm2PerS")], "is free twice"],
    [[], "names no parameter"],
  ])("refuses %j", (free, message) => {
    const request = { scenarios: [film({ diffusionCm2PerS: 1e-3 })], data: [data("imps", uniformFilm, 0.01, 1)], free };
    expect(() => fitScenario(request)).toThrow(message);
  });
});

test("what the model refuses is refused, not fitted", () => {
  const request: FitRequest = {
    scenarios: [film({ diffusionCm2PerS: 2e-3 })],
    data: [{ ...data("imvs", uniformFilm, 0.005, 1), bias: "shortCircuit" }],
    free: ["light.frontReflectance"],
  };
  expect(() => fitScenario(request)).toThrow("short circuit");
});

test("the profile likelihood of a well determined parameter ends where its 95 % interval does", patient, () => {
  const request: FitRequest = {
    scenarios: [film({ diffusionCm2PerS: 2e-3, absorptionPerCm: 1.1 })],
    data: [data("imps", uniformFilm, 0.005, 1)],
    free: [o("diffusionCm2PerS"), o("absorptionPerCm")],
  };
  const result = fitScenario(request);
  const [{ value, interval95 }] = result.parameters;
  const values = logarithmic(0.9 * value, 1.1 * value, 400);
  const profile = profileLikelihood(request, result, o("diffusionCm2PerS"), values);
  const width = interval95![1] - interval95![0];
  expect(Math.abs(profile.interval95[0]! - interval95![0])).toBeLessThan(0.1 * width);
  expect(Math.abs(profile.interval95[1]! - interval95![1])).toBeLessThan(0.1 * width);
});

test("Levenberg–Marquardt finds the minimum of Rosenbrock's valley, and the bound that cuts it off", () => {
  // H. H. Rosenbrock, Comput. J. 3, 175 (1960): minimum at (1, 1)
  const residuals = ([x, y]: Float64Array) => Float64Array.of(10 * (y - x * x), 1 - x);
  const jacobian = ([x]: Float64Array) => [Float64Array.of(-20 * x, -1), Float64Array.of(10, 0)];
  const options = { maximumIterations: 200, tolerance: 1e-12, stepTolerance: 1e-10, damping: 1e-3 };
  const at = (high: number) =>
    minimise(
      { residuals, jacobian, lower: Float64Array.of(-5, -5), upper: Float64Array.of(high, 5) },
      Float64Array.of(-1.2, 1),
      options,
    );
  expect(at(5).status).toBe("converged");
  expect(at(5).parameters[0]).toBeCloseTo(1, 6);
  expect(at(0.5).parameters[0]).toBeCloseTo(0.5, 9);
  expect(at(0.5).parameters[1]).toBeCloseTo(0.25, 6);
});
