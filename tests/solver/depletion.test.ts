/** Depletion layer and surface of a photoelectrode against published forms; figures to 10 digits by 30-digit arithmetic. */
import type { GaertnerOverrides, ScenarioDocument } from "@demilune/solver";
import { describe, expect, test } from "vitest";
import { filmCollection } from "../../solver/src/closedForm/film.ts";
import { scenario } from "./support/scenarios.ts";
import { expectClose, responseAt, solved, valueAt } from "./support/spectra.ts";

/** Near zero frequency for every time constant here. */
const steady = 1e-6;

const gaertner = (overrides: GaertnerOverrides, change: Partial<ScenarioDocument> = {}) =>
  scenario({ layer: { acceptorsPerCm3: 1e16 }, model: { kind: "gaertner", overrides }, ...change });

/** Absorption (1/cm), depletion width (cm) and diffusion length (cm); the lifetime is 1 µs. */
const withLengths = (absorptionPerCm: number, width: number, length: number) =>
  gaertner({ absorptionPerCm, depletionWidthNm: width * 1e7, diffusionCm2PerS: length ** 2 / 1e-6, lifetimeNs: 1000 });

describe("W. W. Gärtner, Phys. Rev. 116, 84 (1959) (from memory)", () => {
  test.each([
    [1e4, 5e-5, 1e-4, 0.696734670144],
    [1e3, 1e-4, 1e-2, 0.917742052906],
    [1.5e5, 1e-6, 4e-7, 0.188011342995],
    [5e2, 2e-4, 3e-2, 0.943447661373],
  ])("steady yield for α = %d /cm, w = %d cm, L = %d cm", (absorption, width, length, yielded) => {
    expectClose(responseAt(withLengths(absorption, width, length), steady), { re: yielded, im: 0 }, 1e-10);
  });

  test.each([
    [1e4, 5e-5, 1e-4, 0.1, 0.6963572373, -0.00755806424],
    [1e4, 5e-5, 1e-4, 1, 0.6694952936, -0.05985494044],
    [1e4, 5e-5, 1e-4, 10, 0.522489943, -0.08191309531],
    [1e3, 1e-4, 1e-2, 0.1, 0.917631932, -0.003733421316],
    [1e3, 1e-4, 1e-2, 1, 0.909059651, -0.03337299268],
    [1e3, 1e-4, 1e-2, 10, 0.8066864409, -0.1225492281],
  ])(
    "modulated, complex diffusion length: α = %d, w = %d, L = %d, ωτ = %d",
    (absorption, width, length, angle, re, im) => {
      expectClose(responseAt(withLengths(absorption, width, length), angle / 1e-6), { re, im }, 1e-9);
    },
  );
});

describe("H. J. Hovel, Semiconductors and Semimetals 11 (1975) (from memory): bulk with a back surface", () => {
  const base = { thickness: 180e-6, diffusion: 30e-4, rate: 1e5, farVelocity: 10 };
  test.each([
    [0, 0.949174608619, 0],
    [1e5, 0.9451618194, -0.02364434513],
  ])("α = 10³ /cm, H = 180 µm, D = 30 cm²/s, τ = 10 µs, S = 1000 cm/s at ω = %d", (omega, re, im) => {
    expectClose(filmCollection(base, 1e5, "near")(omega), { re, im }, 1e-9);
  });
});

describe("surface transfer: E. A. Ponomarev and L. M. Peter, J. Electroanal. Chem. 396, 219 (1995) (from memory)", () => {
  // All light is absorbed in the depletion layer, so that the yield before the surface is 1.
  const surface = (overrides: GaertnerOverrides, change: Partial<ScenarioDocument> = {}) =>
    gaertner({ absorptionPerCm: 1e8, depletionWidthNm: 1e4, ...overrides }, change);

  test.each([
    [1, 0.2504684572, 0.01873828857],
    [40, 0.625, 0.375],
    [1e4, 0.9999880002, 0.002999952001],
  ])("k_tr = 10, k_rec = 30 /s at ω = %d", (omega, re, im) => {
    expectClose(responseAt(surface({ transferPerS: 10, surfaceRecombinationPerS: 30 }), omega), { re, im }, 1e-9);
  });

  test.each([
    [1, 0.9523761423, -0.0005940585828],
    [40, 0.9456577408, -0.02120837354],
    [1e4, 0.4497279175, -0.4502778569],
  ])("k_tr = 100, k_rec = 5 /s, C_H/(C_H + C_w) = 0.9, RC = 0.1 ms at ω = %d", (omega, re, im) => {
    const depletion = (10 * 8.8541878128e-14) / 1e-3;
    const overrides = { transferPerS: 100, surfaceRecombinationPerS: 5, helmholtzCapacitanceFPerCm2: 9 * depletion };
    const circuit = { seriesResistanceOhmCm2: 1e-4 / (0.9 * depletion) };
    const light = { fluxPerCm2S: 0 };
    expectClose(responseAt(surface(overrides, { circuit, light }), omega), { re, im }, 1e-9);
  });

  test("the steady current is the transferred part", () => {
    const [{ operatingPoint }] = solved(surface({ transferPerS: 10, surfaceRecombinationPerS: 30 }));
    expect(operatingPoint.currentMAPerCm2 / (1.602176634e-19 * 1e16 * 1e3 * 0.25)).toBeCloseTo(1, 12);
  });
});

describe("admittance", () => {
  // dJ/dV of the operating points themselves: five-point formula (Abramowitz and Stegun, 25.3.6; from memory).
  const slope = (document: ScenarioDocument, voltage: number) => {
    const step = 3e-4;
    const current = (offset: number) => {
      const spectra = [{ technique: "imps" as const, bias: { voltageV: voltage + offset * step } }];
      return solved({ ...document, spectra })[0].operatingPoint.currentMAPerCm2 / 1e3;
    };
    return (8 * (current(1) - current(-1)) - (current(2) - current(-2))) / (12 * step);
  };
  const bulks: [string, GaertnerOverrides][] = [
    ["thick bulk", {}],
    ["finite bulk", { bulk: "finite" }],
    ["finite bulk, slow back", { bulk: "finite", backVelocityCmPerS: 100 }],
    ["finite bulk, passive back", { bulk: "finite", backVelocityCmPerS: 0 }],
    ["given saturation current", { saturationCurrentMAPerCm2: 1e-9 }],
  ];
  const stack = scenario({ layer: { acceptorsPerCm3: 2e16, thicknessNm: 800, absorptionPerCm: 2e4 } }).stack;
  const expectSlope = (document: ScenarioDocument, voltage: number) => {
    const spectra = [{ technique: "impedance" as const, bias: { voltageV: voltage } }];
    const { re, im } = responseAt({ ...document, spectra }, steady);
    const conductance = re / (re * re + im * im);
    expect(Math.abs(conductance / -slope(document, voltage) - 1)).toBeLessThan(1e-8);
  };
  test.each(bulks)("Y(0) = −dJ/dV under light with a %s", (_, overrides) => {
    for (const voltage of [-0.3, 0.1, 0.4, 0.6]) expectSlope(gaertner(overrides, { stack }), voltage);
  });
  test("Y(0) = −dJ/dV in the dark with a given width, where only the diode carries current", () => {
    const document = gaertner({ depletionWidthNm: 150 }, { stack, light: { fluxPerCm2S: 0 } });
    for (const voltage of [0.3, 0.6]) expectSlope(document, voltage);
  });

  test("W = QZ with series and shunt resistance and parallel capacitance", () => {
    const circuit = { seriesResistanceOhmCm2: 7, shuntResistanceOhmCm2: 500, parallelCapacitanceFPerCm2: 1e-7 };
    const spectra = (["imps", "imvs", "impedance"] as const).map((technique) => ({
      technique,
      bias: { voltageV: 0.5 },
    }));
    const document = gaertner({}, { circuit, spectra, frequencies: { fromHz: 1, toHz: 1e9, pointsPerDecade: 3 } });
    const [q, w, z] = solved(document);
    for (let k = 0; k < q.re.length; k++) {
      const [a, b] = [valueAt(q, k), valueAt(z, k)];
      expectClose(valueAt(w, k), { re: a.re * b.re - a.im * b.im, im: a.re * b.im + a.im * b.re }, 1e-12);
    }
  });
});
