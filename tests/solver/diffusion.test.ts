/**
 * Diffusion–recombination film against L. Dloczik et al., J. Phys. Chem. B 101, 10281 (1997) (from memory) and, for the
 * constants of the peak, J. van de Lagemaat and A. J. Frank, J. Phys. Chem. B 105, 11194 (2001) (from memory) and
 * J. Halme, K. Miettunen, P. Lund, J. Phys. Chem. C 112, 20491 (2008); figures by 30-digit arithmetic.
 */
import type { DiffusionOverrides, ScenarioDocument } from "@demilune/solver";
import { describe, expect, test } from "vitest";
import { filmCollection, filmConductance } from "../../solver/src/closedForm/film.ts";
import { scenario } from "./support/scenarios.ts";
import { expectClose, maximumOf, responseAt, solved, valueAt } from "./support/spectra.ts";

/** 5 µm film, α = 10⁴ /cm, D = 10⁻⁴ cm²/s, τ = 5 ms. */
const film = { thickness: 5e-6, diffusion: 1e-8, rate: 200, farVelocity: 0 };
const absorption = 1e6;
const overrides: DiffusionOverrides = {
  diffusionCm2PerS: 1e-4,
  lifetimeNs: 5e6,
  absorptionPerCm: 1e4,
  thicknessNm: 5000,
  extractionVelocityCmPerS: null,
};

const diffusion = (change: DiffusionOverrides = {}, rest: Partial<ScenarioDocument> = {}) =>
  scenario({ model: { kind: "diffusion", overrides: { ...overrides, ...change } }, ...rest });

describe("collected flux", () => {
  test.each([
    ["near", 0, 0.927091037243, 0],
    ["near", 40, 0.9267505974, -0.01117742266],
    ["near", 1e3, 0.8013938892, -0.1758311778],
    ["near", 1e4, 0.5009580166, -0.2032183015],
    ["far", 0, 0.802000060193, 0],
    ["far", 40, 0.800908733, -0.03164199398],
    ["far", 1e3, 0.4036413272, -0.4545302113],
    ["far", 1e4, -0.03973705068, -0.02524653667],
  ] as const)("light from the %s side at ω = %d", (lit, omega, re, im) => {
    expectClose(filmCollection(film, absorption, lit)(omega), { re, im }, 1e-9);
    const light = { side: lit === "near" ? "front" : "back", fluxPerCm2S: 1e16 } as const;
    if (omega > 0) expectClose(responseAt(diffusion({}, { light }), omega), { re, im }, 1e-9);
  });

  test("finite extraction, k_ext = 1 cm/s at ω = 10³", () => {
    const value = responseAt(diffusion({ extractionVelocityCmPerS: 1 }), 1e3);
    expectClose(value, { re: 0.5961407159, im: -0.2669321024 }, 1e-9);
  });

  test("collection efficiency tanh(d/L)/(d/L) of uniform light, L = 2d", () => {
    const uniform = { ...film, rate: film.diffusion / (2 * film.thickness) ** 2 };
    const thin = 1e-9 / film.thickness;
    expect(filmCollection(uniform, thin, "near")(0).re / 1e-9).toBeCloseTo(0.92423431452, 8);
  });
});

describe("density at the contact without flow", () => {
  test.each([
    ["near", 40, 10.3848037, -1.917107745],
    ["near", 1e3, 1.177663552, -2.075603079],
    ["near", 1e4, 0.2152207921, -0.4965638316],
    ["far", 40, 8.932172804, -1.903624951],
    ["far", 1e3, -0.1985863636, -1.756939425],
    ["far", 1e4, -0.04609058661, 0.009845040171],
  ] as const)("light from the %s side at ω = %d, in s/cm", (lit, omega, re, im) => {
    const q = filmCollection(film, absorption, lit)(omega);
    const k = filmConductance(film, omega);
    const size = (k.re ** 2 + k.im ** 2) * 100;
    const density = { re: (q.re * k.re + q.im * k.im) / size, im: (q.im * k.re - q.re * k.im) / size };
    expectClose(density, { re, im }, 1e-9);
  });
});

describe("where −Im Q is largest, as ωd²/D without recombination", () => {
  const unit = { thickness: 1, diffusion: 1, rate: 1e-12, farVelocity: 0 };
  const peak = (depth: number, lit: "near" | "far", from = 1, to = 5) => {
    const collection = filmCollection(unit, depth, lit);
    return maximumOf((omega) => -collection(omega).im, from, to);
  };
  test.each([
    [1e-7, "near", 2.54064688839],
    [1e-7, "far", 2.54064688839],
    [0.5, "near", 2.57334200734],
    [1, "near", 2.61017655997],
    [2.3, "near", 2.72584070365],
    [4, "near", 2.91892090395],
    [1, "far", 2.48685785838],
    [2.3, "far", 2.43676099707],
    [5, "far", 2.38073197139],
    [9.5, "far", 2.34961993613],
    [10, "far", 2.34804384798],
    [1e7, "far", 2.33156448077],
  ] as const)("αd = %d, %s side", (depth, lit, u) => expect(peak(depth, lit)).toBeCloseTo(u, 6));

  test("thick film lit from the near side: ω = Dα²", () => expect(peak(20, "near", 300, 500) / 400).toBeCloseTo(1, 6));

  test.each([
    [1, 3.65702532103],
    [2, 2.81351324913],
  ])("uniform light with recombination, L/d = %d", (length, u) => {
    const collection = filmCollection({ ...unit, rate: 1 / length ** 2 }, 1e-7, "near");
    expect(maximumOf((omega) => -collection(omega).im, 1, 8)).toBeCloseTo(u, 6);
  });
});

describe("IMVS and impedance", () => {
  const openCircuit = (technique: "imvs" | "impedance", fluxPerCm2S: number, rest: Partial<ScenarioDocument> = {}) =>
    diffusion({}, { spectra: [{ technique }], light: { fluxPerCm2S }, ...rest });
  /** Photons cm⁻² s⁻¹ that hold a density of 10¹⁶ cm⁻³ at the contact. */
  const flux = (1e16 * filmConductance(film, 0).re * 100) / filmCollection(film, absorption, "near")(0).re;

  test("impedance of the film at 10¹⁶ cm⁻³ and ω = 10³, V_T/(q n̄ K) (derived)", () => {
    expectClose(responseAt(openCircuit("impedance", flux), 1e3), { re: 31.37054937, im: -34.90802111 }, 1e-9);
  });

  test("photovoltage of the same film", () => {
    expectClose(responseAt(openCircuit("imvs", flux), 1e3), { re: 19.0022481, im: -33.49099544 }, 1e-9);
  });

  test.each([
    [1, 20, 1.29259998932],
    [1.6, 1, 41.3631996583],
  ])("recombination resistance m kT/(qJ), m = %d, J = %d mA/cm² (derived)", (idealityFactor, current, resistance) => {
    const collected = filmCollection(film, absorption, "near")(0).re;
    const fluxPerCm2S = current / 1e3 / (1.602176634e-19 * collected);
    const document = diffusion({ idealityFactor }, { spectra: [{ technique: "impedance" }], light: { fluxPerCm2S } });
    expect(responseAt(document, 1e-6).re).toBeCloseTo(resistance, 9);
  });

  test("IMVS of uniform light is 1/(1 + iωτ) at any diffusion coefficient (derived)", () => {
    const document = diffusion({ absorptionPerCm: 1e-6 }, { spectra: [{ technique: "imvs" }] });
    const [steady, value] = [1e-6, 200].map((omega) => responseAt(document, omega));
    expectClose({ re: value.re / steady.re, im: value.im / steady.re }, { re: 0.5, im: -0.5 }, 1e-8);
  });

  test("W = QZ at open circuit, with finite extraction, loss at the far side and a circuit", () => {
    const circuit = { seriesResistanceOhmCm2: 12, shuntResistanceOhmCm2: 900, parallelCapacitanceFPerCm2: 1e-6 };
    const spectra = (["imps", "imvs", "impedance"] as const).map((technique) => ({
      technique,
      bias: "openCircuit" as const,
    }));
    const frequencies = { fromHz: 0.1, toHz: 1e6, pointsPerDecade: 3 };
    const document = diffusion(
      { extractionVelocityCmPerS: 0.3, farVelocityCmPerS: 2 },
      { circuit, spectra, frequencies },
    );
    const [q, w, z] = solved(document);
    for (let k = 0; k < q.re.length; k++) {
      const [a, b] = [valueAt(q, k), valueAt(z, k)];
      expectClose(valueAt(w, k), { re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re }, 1e-12);
    }
  });
});

describe("where formulas lose digits", () => {
  test("α = γ is no special point: the values on both sides meet", () => {
    const exact = { thickness: 1, diffusion: 1, rate: 4, farVelocity: 0.5 };
    const at = (absorption: number) => filmCollection(exact, absorption, "near")(0).re;
    expect((at(2 * (1 + 1e-7)) + at(2 * (1 - 1e-7))) / 2 / at(2)).toBeCloseTo(1, 12);
  });

  test("|γ|d = 10⁴: α/(α + γ) of a thick film", () => {
    const thick = { thickness: 1, diffusion: 1, rate: 1e8, farVelocity: 3 };
    expect(filmCollection(thick, 1e4, "near")(0).re).toBeCloseTo(0.5, 13);
    expect(filmCollection(thick, 10, "far")(0).re).toBeGreaterThan(0);
    expect(filmConductance(thick, 0).re / 1e4).toBeCloseTo(1, 13);
  });

  test("γd → 0 between two lossy faces: the steady fraction of a slab with a leak, 1 − (b/(1+b))/2 for uniform light", () => {
    const open = { thickness: 1, diffusion: 1, rate: 1e-24, farVelocity: 7 };
    expect(filmCollection(open, 1e-8, "near")(0).re / 1e-8).toBeCloseTo(1 - 7 / 8 / 2, 8);
  });
});
