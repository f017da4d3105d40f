/**
 * The full model against closed forms and handbook cases. Values of the closed forms were computed at 30 digits; the
 * source of each formula stands beside its check.
 */
import { operatingPointsOf, profilesOf } from "@demilune/solver";
import { describe, expect, test } from "vitest";
import {
  admittance,
  charge,
  document,
  gapFor,
  layer,
  scenario,
  spectrum,
  vacuumPermittivityPerCm,
  voltage300,
} from "./driftDiffusionStacks.ts";

const dark = (bias: number) => ({ technique: "impedance" as const, bias: { voltageV: bias } });
const relative = (value: number, expected: number) => Math.abs(value / expected - 1);

describe("an abrupt p–n junction (exact first integral of Poisson's equation with Boltzmann carriers, derived)", () => {
  const silicon = { gapEV: gapFor(1e10), thicknessNm: 2000 };
  const given = scenario([layer({ ...silicon, donorsPerCm3: 1e18 }), layer({ ...silicon, acceptorsPerCm3: 1e16 })]);
  const profiles = profilesOf(operatingPointsOf(given), { bias: "shortCircuit", fluxPerCm2S: 0 });
  if (profiles.status !== "solved") throw new Error(profiles.failure.message);
  const junction = profiles.layer.indexOf(1);
  const last = profiles.layer.length - 1;

  test("has the built-in voltage V_T ln(N_A N_D/n_i²) = 0.833370 V (Sze, Physics of Semiconductor Devices, ch. 2, from memory)", () => {
    expect(profiles.potentialV[0] - profiles.potentialV[last]).toBeCloseTo(0.833370010653, 8);
  });
  test("has the potential 0.442620 V above the intrinsic one at the junction", () => {
    const intrinsic = profiles.potentialV[last] + voltage300 * Math.asinh(1e16 / 2e10);
    expect(profiles.potentialV[junction] - intrinsic).toBeCloseTo(0.442620167436, 4);
  });
  test("has the peak field 67636 V/cm, a third above the depletion approximation", () => {
    const [before, at] = [junction - 2, junction - 1];
    const slope =
      (profiles.fieldVPerCm[before] - profiles.fieldVPerCm[before - 1]) /
      (profiles.depthNm[before] - profiles.depthNm[before - 1]);
    const field = profiles.fieldVPerCm[before] + slope * (profiles.depthNm[at] - profiles.depthNm[before]);
    expect(relative(Math.abs(field), 67635.6103574)).toBeLessThan(2e-3);
  });
  test("keeps the mass-action law at every depth", () => {
    profiles.electronsPerCm3.forEach((n, k) => {
      expect(relative(n * profiles.holesPerCm3[k], 1e20)).toBeLessThan(1e-9);
    });
  });
});

test("a symmetric junction at −5 V has the depletion capacitance √(qεN/(4(V_bi − V − 2V_T))) (Sze, ch. 2, from memory)", () => {
  const silicon = { gapEV: gapFor(1e10), thicknessNm: 4000, electronMobilityCm2PerVs: 1000, holeMobilityCm2PerVs: 400 };
  const given = document([layer({ ...silicon, donorsPerCm3: 1e16 }), layer({ ...silicon, acceptorsPerCm3: 1e16 })], {
    spectra: [dark(-5)],
    frequencies: { listHz: [1e6] },
  });
  const builtIn = voltage300 * Math.log(1e32 / 1e20);
  const expected = Math.sqrt((charge * 11.7 * vacuumPermittivityPerCm * 1e16) / (4 * (builtIn + 5 - 2 * voltage300)));
  expect(relative(admittance(spectrum(given)).im / (2 * Math.PI * 1e6), expected)).toBeLessThan(2e-3);
});

test("a short base has the diffusion admittance √(1+iωτ) coth(W√(1+iωτ)/L) (Shockley 1949; Sze, ch. 2, from memory)", () => {
  const lifetimeNs = 1e5;
  const mobility = 30 / voltage300;
  const length = Math.sqrt(30 * lifetimeNs * 1e-9);
  const silicon = { gapEV: gapFor(1e10), electronMobilityCm2PerVs: mobility, holeMobilityCm2PerVs: 1e5 };
  const recombination = { electronLifetimeNs: lifetimeNs, holeLifetimeNs: lifetimeNs, trapDepthEV: gapFor(1e10) / 2 };
  const given = document(
    [
      layer({ ...silicon, thicknessNm: 1000, donorsPerCm3: 1e20 }),
      layer({ ...silicon, thicknessNm: 0.5 * length * 1e7, acceptorsPerCm3: 1e17, recombination }),
    ],
    {
      // Nothing is injected into the emitter, and the base's majority carriers offer no resistance.
      stack: { front: { holeVelocityCmPerS: 0 }, back: { electronVelocityCmPerS: 1e9 } },
      spectra: [dark(0.7)],
      frequencies: { listHz: [1e-2, 10 / (2 * Math.PI * lifetimeNs * 1e-9)] },
    },
  );
  const solved = spectrum(given);
  const [low, high] = [admittance(solved, 0), admittance(solved, 1)];
  expect(relative(high.re / low.re, 1.113277908)).toBeLessThan(2e-3);
  // The depletion capacitance adds half a per cent.
  expect(relative(high.im / low.re, 0.7192841425)).toBeLessThan(1e-2);
});

describe("space-charge-limited current of one carrier (Mott and Gurney, Electronic Processes in Ionic Crystals, 1940)", () => {
  const transit = (voltage: number) => (4 * 1e-4 ** 2) / (3 * 1e-4 * voltage);
  const contact = { workFunctionEV: 3, electronVelocityCmPerS: 1e9 };
  const solved = (voltage: number) =>
    spectrum(
      document(
        [
          layer({
            thicknessNm: 1000,
            relativePermittivity: 3,
            gapEV: 4,
            electronMobilityCm2PerVs: 1e-4,
            affinityEV: 3,
          }),
        ],
        {
          stack: { front: contact, back: contact },
          spectra: [dark(voltage)],
          frequencies: { listHz: [1e-2, 1, 3].map((theta) => theta / (2 * Math.PI * transit(voltage))) },
          model: { kind: "driftDiffusion", nodes: 4000 },
        },
      ),
    );
  test("tends to 9/8 εµV²/L³ where diffusion, a part of about 35 V_T/V, fades", () => {
    const excess = [10, 30, 100].map((voltage) => {
      const expected = (9 / 8) * 3 * vacuumPermittivityPerCm * 1e-4 * (voltage ** 2 / 1e-12) * 1e3;
      return -solved(voltage).operatingPoint.currentMAPerCm2 / expected - 1;
    });
    expect(excess[2]).toBeLessThan(0.035);
    expect(excess[2]).toBeGreaterThan(0);
    expect(excess[1] / excess[2]).toBeGreaterThan(2);
    expect(excess[0] / excess[1]).toBeGreaterThan(2);
  });
  test("has the admittance θ³/{2i[1−e^{−iθ}] + 2θ − iθ²} (H. C. F. Martens et al., Phys. Rev. B 60, R8489 (1999), from memory)", () => {
    const found = solved(100);
    const conductance = admittance(found, 0).re;
    for (const [k, re, im] of [
      [1, 0.9875083934, 0.2510509844],
      [2, 0.8888733804, 0.7804031162],
    ]) {
      const here = admittance(found, k);
      expect(Math.abs(here.re / conductance - re)).toBeLessThan(1e-2);
      expect(Math.abs(here.im / conductance - im)).toBeLessThan(1e-2);
    }
  });
});

test("a slab between contacts of density N₀ has the conductance q µ n_m/(L/2 + sin(kL)/2k) at zero bias (derived; de Levie 1972, from memory)", () => {
  // N₀ = 10¹⁸ cm⁻³, ε_r = 3, µ = 10⁻⁴ cm²/Vs, 100 nm, 300 K.
  const workFunctionEV = 3 + voltage300 * Math.log(1e19 / 1e18);
  const contact = { workFunctionEV, electronVelocityCmPerS: 1e9 };
  const given = document(
    [layer({ thicknessNm: 100, relativePermittivity: 3, gapEV: 4, affinityEV: 3, electronMobilityCm2PerVs: 1e-4 })],
    { stack: { front: contact, back: contact }, spectra: [dark(0)], frequencies: { listHz: [1] } },
  );
  expect(relative(admittance(spectrum(given)).re, 0.0228566447339)).toBeLessThan(1e-3);
});

test("a doped slab is a resistance beside its geometric capacitance (elementary)", () => {
  const contact = { electronVelocityCmPerS: 1e9 };
  const given = document([layer({ thicknessNm: 1000, gapEV: 3, donorsPerCm3: 1e15, electronMobilityCm2PerVs: 1400 })], {
    stack: { front: contact, back: contact },
    spectra: [dark(0)],
    frequencies: { listHz: [1, 1e12 / (2 * Math.PI)] },
  });
  const { re, im } = spectrum(given);
  const resistance = 1e-4 / (charge * 1400 * 1e15);
  // The contacts add 2 V_T/(q S n) and their Debye layers nothing: the doping is uniform.
  const contacts = (2 * voltage300) / (charge * 1e9 * 1e15);
  expect(relative(re[0], resistance + contacts)).toBeLessThan(1e-3);
  expect(relative(re[1], 1.996509791e-5)).toBeLessThan(2e-2);
  expect(relative(im[1], -9.22077886e-5)).toBeLessThan(2e-2);
});

describe("photocarriers in a uniform field with diffusion and absorbing contacts (exact solution of the linear problem, derived)", () => {
  const contact = { workFunctionEV: 5, electronVelocityCmPerS: 1e9, holeVelocityCmPerS: 1e9 };
  const given = document([layer({ gapEV: 2, absorptionPerCm: 5e4, relativePermittivity: 3 })], {
    stack: { electronContact: "back", front: contact, back: contact },
    light: { fluxPerCm2S: 1e8 },
    spectra: [{ technique: "imps", bias: { voltageV: -1 } }],
    frequencies: { listHz: [1, 1e8] },
  });
  const solved = spectrum(given);
  test("yield 0.85154 at low frequency: some diffuse to the wrong contact", () => {
    expect(solved.re[0]).toBeCloseTo(0.5721274634 + 0.2794092855, 3);
  });
  test("lag at 10⁸ Hz as diffusion and drift say", () => {
    expect(solved.re[1]).toBeCloseTo(0.4221858051 + 0.2380328397, 3);
    expect(solved.im[1]).toBeCloseTo(-0.3015446335 - 0.1073368911, 3);
  });
});

describe("ions between blocking contacts (linear Poisson–Nernst–Planck, derived; M. Z. Bazant, K. Thornton, A. Ajdari, Phys. Rev. E 70, 021506 (2004), from memory)", () => {
  const contact = { workFunctionEV: 5.5 };
  const slab = (ions: NonNullable<ReturnType<typeof layer>["ions"]>, thicknessNm = 500) =>
    layer({ thicknessNm, relativePermittivity: 24.1, gapEV: 3, affinityEV: 4, ions });
  test("one species has the impedance of two Debye layers and the bulk", () => {
    const given = document([slab({ cationsPerCm3: 1e18, cationMobilityCm2PerVs: 1e-11 / voltage300 })], {
      stack: { front: contact, back: contact },
      spectra: [dark(0)],
      frequencies: { listHz: [1e-2, 1, 1e4].map((omega) => omega / (2 * Math.PI)) },
    });
    const { re, im } = spectrum(given);
    for (const [k, expectedRe, expectedIm] of [
      [0, 778373.3484, -54997263.57],
      [1, 777467.1767, -576494.662],
      [2, 6.79924572, -2343.146513],
    ]) {
      const size = Math.hypot(expectedRe, expectedIm);
      expect(Math.hypot(re[k] - expectedRe, im[k] - expectedIm) / size).toBeLessThan(1e-3);
    }
  });
  test("two species have the Gouy–Chapman capacitance (ε/λ) cosh(ψ₀/2V_T) at each contact", () => {
    const mobility = 1e-9;
    const given = document(
      [
        slab(
          {
            cationsPerCm3: 1e18,
            cationMobilityCm2PerVs: mobility,
            anionsPerCm3: 1e18,
            anionMobilityCm2PerVs: mobility,
          },
          20_000,
        ),
      ],
      { stack: { front: contact, back: contact }, spectra: [dark(0.2)], frequencies: { listHz: [1e-5] } },
    );
    const capacitance = admittance(spectrum(given)).im / (2 * Math.PI * 1e-5);
    expect(relative(capacitance, 0.5 * 5.14287547819e-6 * 3.53113854914)).toBeLessThan(5e-3);
  });
});
