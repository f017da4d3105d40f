/**
 * Transit in a uniform field: G. Lucovsky, R. F. Schwarz, R. B. Emmons, J. Appl. Phys. 35, 622 (1964) and J. E. Bowers,
 * C. A. Burrus, J. Lightwave Technol. 5, 1339 (1987) (both from memory); figures by 30-digit arithmetic.
 */
import type { LayerDocument, ScenarioDocument, TransitOverrides } from "@demilune/solver";
import { describe, expect, test } from "vitest";
import { scenario } from "./support/scenarios.ts";
import { expectClose, responseAt, solved } from "./support/spectra.ts";

const transit = (
  overrides: TransitOverrides,
  layer: Partial<LayerDocument> = {},
  change: Partial<ScenarioDocument> = {},
) => scenario({ layer, model: { kind: "transit", overrides }, ...change });

/** Light through the hole contact, at the back here. */
const holeContactLit = { light: { side: "back", fluxPerCm2S: 1e16 } } as const;

describe("sheet of carriers crossing the whole gap, (1 − e^{−iθ})/(iθ)", () => {
  // All light is absorbed at the lit face; the time is 1 ns.
  const sheet = (theta: number) =>
    responseAt(transit({ variant: "collected", electronTransitTimeNs: 1 }, { absorptionPerCm: 1e8 }), theta / 1e-9);
  test.each([
    [1, 0.8414709848, -0.4596976941],
    [2.783114756503, 0.1260635386, -0.6957786891],
    [10, -0.05440211109, -0.1839071529],
  ])("θ = %d", (theta, re, im) => expectClose(sheet(theta), { re, im }, 1e-9));

  test("3 dB at θ = 2.7831147565, f t = 0.442946", () => {
    const { re, im } = sheet(2.7831147565);
    expect(Math.hypot(re, im)).toBeCloseTo(Math.SQRT1_2, 9);
  });

  test("the induced current of light absorbed at one face is the same factor", () => {
    const overrides = { electronTransitTimeNs: 1, holeTransitTimeNs: 1 };
    const value = responseAt(transit(overrides, { absorptionPerCm: 1e8 }, holeContactLit), 1e9);
    expectClose(value, { re: 0.8414709848, im: -0.4596976941 }, 1e-3);
  });
});

test("uniform generation, equal velocities: 3 dB at θ = 3.47665687616, f t = 0.553327", () => {
  const overrides = { electronTransitTimeNs: 1, holeTransitTimeNs: 1 };
  const thin = transit(overrides, { absorptionPerCm: 1e-3 });
  const [atZero, atCorner] = [1e-3, 3.47665687616e9].map((omega) => {
    const { re, im } = responseAt(thin, omega);
    return Math.hypot(re, im);
  });
  expect(atCorner / atZero).toBeCloseTo(Math.SQRT1_2, 8);
});

describe("both carriers with Beer–Lambert generation", () => {
  test.each([
    [1e4, 6e6, 1e10, 0.8603467867, -0.06995637896],
    [1e4, 6e6, 5e10, 0.762392724, -0.3244642917],
    [1e4, 6e6, 2e11, 0.07653360525, -0.4480737157],
    [1e2, 1e7, 1e10, 0.01973540978, -0.001317455158],
    [1e2, 1e7, 5e10, 0.01820523808, -0.006278188606],
    [1e2, 1e7, 2e11, 0.004092982645, -0.01177384777],
  ])("α = %d /cm, v_p = %d cm/s, v_n = 10⁷ cm/s, 2 µm, at ω = %d", (absorptionPerCm, holes, omega, re, im) => {
    const overrides = { electronTransitTimeNs: (2e-4 / 1e7) * 1e9, holeTransitTimeNs: (2e-4 / holes) * 1e9 };
    const layer = { absorptionPerCm, thicknessNm: 2000 };
    expectClose(responseAt(transit(overrides, layer, holeContactLit), omega), { re, im }, 1e-9);
  });

  test("lit through the electron contact, the carriers change places", () => {
    const layer = { absorptionPerCm: 1e4, thicknessNm: 2000 };
    const slow = { electronTransitTimeNs: 0.02, holeTransitTimeNs: 0.05 };
    const exchanged = { electronTransitTimeNs: 0.05, holeTransitTimeNs: 0.02 };
    expectClose(
      responseAt(transit(slow, layer), 5e10),
      responseAt(transit(exchanged, layer, holeContactLit), 5e10),
      1e-14,
    );
  });
});

test("the induced current of one carrier is half the charge, of both the whole", () => {
  const layer = { absorptionPerCm: 1e8 };
  const at = (carrier: "electron" | "hole" | "both") =>
    responseAt(transit({ variant: "induced", carrier }, layer), 1e-3).re;
  expect([at("electron"), at("hole"), at("both")].map((value) => Number(value.toFixed(9)))).toEqual([0.5, 0.5, 1]);
});

test("the field is that of the inner voltage: V_bi − V − R_s J over the thickness", () => {
  const spectra = [{ technique: "imps" as const, bias: { voltageV: -2 } }];
  const circuit = { seriesResistanceOhmCm2: 100 };
  const [{ derived, operatingPoint }] = solved(transit({}, {}, { spectra, circuit }));
  const inner = -2 + 100 * (operatingPoint.currentMAPerCm2 / 1e3);
  expect(derived?.fieldVPerCm).toBeCloseTo((1 - inner) / 500e-7, 6);
  expect(derived?.electronTransitTimeNs).toBeCloseTo((500e-7 / ((1 - inner) / 500e-7)) * 1e9, 9);
});
