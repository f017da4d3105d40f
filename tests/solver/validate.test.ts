import { describe, expect, test } from "vitest";
import type { Measured } from "../../solver/src/analysis/measured.ts";
import { validateMeasured } from "../../solver/src/analysis/validateMeasured.ts";
import { parseDataFile } from "../../solver/src/commands/dataFile.ts";
import { ScenarioError } from "../../solver/src/scenario/errors.ts";
import {
  coleCole,
  constant,
  diffusion,
  farSheet,
  logarithmic,
  type Response,
  relaxation,
  type Sampled,
  sampled,
  sum,
} from "./spectra.ts";

const patient = { timeout: 60_000 };
/** IMPS of a photoelectrode with loops in two quadrants, from low to high: Im > 0, then Im < 0. */
const twoQuadrants = sum(relaxation(4, -0.3), relaxation(2e4, 0.9));

const sweep = (response: Response, noise: number, seed: number): Sampled =>
  sampled(logarithmic(0.1, 1e6, 8), response, noise, seed);

/** High to low, the gain growing linearly from the first point to the last. */
function drifting(response: Response, noise: number, seed: number, drift: number): Measured {
  const { frequencyHz, re, im } = sweep(response, noise, seed);
  const last = frequencyHz.length - 1;
  const gain = frequencyHz.map((_, k) => 1 + (drift * (last - k)) / last);
  return {
    frequencyHz: frequencyHz.toReversed(),
    re: re.map((value, k) => value * gain[k]).toReversed(),
    im: im.map((value, k) => value * gain[k]).toReversed(),
  };
}

const joined = (...parts: Measured[]): Measured => ({
  frequencyHz: parts.flatMap(({ frequencyHz }) => frequencyHz),
  re: parts.flatMap(({ re }) => re),
  im: parts.flatMap(({ im }) => im),
});

const scaled = (data: Measured, factor: number): Measured => ({
  ...data,
  re: data.re.map((value) => value * factor),
  im: data.im.map((value) => value * factor),
});

// The relations are those of H. Kramers and R. Kronig for a linear, causal, stable system: M. Orazem, B. Tribollet,
// Electrochemical Impedance Spectroscopy, ch. 22. Every response below is such a system, so the test must hold.
describe("Kramers–Kronig", () => {
  test.each([
    ["loops in two quadrants", twoQuadrants],
    ["far-side diffusion, residues of alternating sign", farSheet(0.01)],
    ["a diffusion film on an offset", sum(diffusion(0.01), constant(0.5))],
    ["a depressed arc", coleCole(100, 0.7)],
    ["a damped resonance", (omega: number) => resonance(omega / 3000, 2)],
    ["transit", (omega: number) => transit(omega * 1e-5)],
  ])("holds for %s, clean and with noise", patient, (_, response) => {
    for (const noise of [0, 0.0002, 0.005]) {
      const { kramersKronig } = validateMeasured(sweep(response, noise, 5));
      expect(kramersKronig.verdict, `noise ${noise}: ${kramersKronig.reason}`).toBe("holds");
      expect(kramersKronig.rmsResidual!).toBeLessThan(Math.max(1.6 * noise, 1e-5));
    }
  });

  test("fails at 0.02 % noise where the gain drifts by 2 % over the sweep", patient, () => {
    for (const response of [twoQuadrants, diffusion(0.01)]) {
      expect(validateMeasured(drifting(response, 0.0002, 3, 0.02)).kramersKronig.verdict).toBe("fails");
    }
  });

  test.each([
    ["first", 0],
    ["last", 70],
  ])("names a real part that is off by 5 percent at the %s frequency", patient, (_, at) => {
    const data = sampled(logarithmic(0.1, 1e6, 10), relaxation(160, 1), 0.001, 5);
    expect(validateMeasured(data).kramersKronig.verdict).toBe("holds");
    const re = data.re.with(at, data.re[at] + 0.05);
    const { verdict, worstHz } = validateMeasured({ ...data, re }).kramersKronig;
    expect({ verdict, worstHz }).toEqual({ verdict: "fails", worstHz: data.frequencyHz[at] });
  });

  test.each([0, 0.002, 0.005])("names a single outlier at noise %f and holds without it", patient, (noise) => {
    const data = sweep(twoQuadrants, noise, 11);
    for (const at of [6, 30, 50]) {
      const re = data.re.with(at, data.re[at] + 0.06);
      const { kramersKronig } = validateMeasured({ ...data, re });
      expect(kramersKronig.verdict).toBe("fails");
      expect(kramersKronig.worstHz).toBe(data.frequencyHz[at]);
      const rest = (values: number[]) => values.filter((_, k) => k !== at);
      const without = { frequencyHz: rest(data.frequencyHz), re: rest(data.re), im: rest(data.im) };
      expect(validateMeasured(without).kramersKronig.verdict).toBe("holds");
    }
  });

  test("uses the standard deviations of the file", patient, () => {
    const data = sweep(twoQuadrants, 0.005, 2);
    const sigma = (value: number) => data.re.map(() => value);
    expect(validateMeasured({ ...data, sigma: sigma(0.005) }).kramersKronig.verdict).toBe("holds");
    expect(validateMeasured({ ...data, sigma: sigma(0.001) }).kramersKronig.verdict).toBe("fails");
  });

  test("is not tested on a handful of points", () => {
    const { kramersKronig, noise } = validateMeasured(sampled([1, 10, 100], relaxation(10)));
    expect(kramersKronig.verdict).toBe("notTested");
    expect(noise.relative).toBeNull();
  });
});

describe("noise", () => {
  test.each([0.0005, 0.005, 0.02])("%f of the largest modulus is found", patient, (noise) => {
    const found = [1, 2, 3, 4].map((seed) => validateMeasured(sweep(twoQuadrants, noise, seed)).noise.relative!);
    const typical = found.reduce((total, value) => total + value, 0) / found.length;
    expect(Math.abs(typical / noise - 1)).toBeLessThan(0.15);
  });
});

describe("drift", () => {
  test("is not tested without repeats", patient, () => {
    expect(validateMeasured(sweep(twoQuadrants, 0.005, 1)).drift.verdict).toBe("notTested");
  });

  test("fails where two sweeps at 0.5 % noise lie 2 % apart, and says by how much", patient, () => {
    const data = joined(sweep(twoQuadrants, 0.005, 1), scaled(sweep(twoQuadrants, 0.005, 2), 1.02));
    const { drift } = validateMeasured(data);
    expect(drift.verdict).toBe("fails");
    expect(Math.abs(drift.gainChange! - 0.02)).toBeLessThan(0.006);
    expect(drift.smallestDetectable!).toBeLessThan(0.02);
  });

  test("holds where they differ by noise only, Kramers–Kronig with it", patient, () => {
    const { drift, kramersKronig } = validateMeasured(
      joined(sweep(twoQuadrants, 0.005, 1), sweep(twoQuadrants, 0.005, 2)),
    );
    expect(drift.verdict).toBe("holds");
    expect(kramersKronig.verdict).toBe("holds");
  });
});

describe("data files", () => {
  test("columns and rows in any order, bias in volts, windows line ends", () => {
    const file = parseDataFile(
      "# technique: impedance\r\n# bias: 0.8\r\n# note: x\r\nre,frequencyHz,im\r\n2,10,-1\r\n3,1,-2\r\n",
      "a.csv",
    );
    expect(file.technique).toBe("impedance");
    expect(file.bias).toEqual({ voltageV: 0.8 });
    expect(file.fluxPerCm2S).toBeUndefined();
    expect(file.frequencyHz).toEqual([10, 1]);
    expect(file.im).toEqual([-1, -2]);
    expect(file.sigma).toBeUndefined();
  });

  test.each([
    ["frequencyHz,re,im\n1,1,1\n", "a.csv: has no technique"],
    ["# technique: eis\nfrequencyHz,re,im\n1,1,1\n", 'a.csv, line 1: technique is "eis"'],
    ["# technique: imps\n# bias: dark\nfrequencyHz,re,im\n1,1,1\n", 'a.csv, line 2: bias is "dark"'],
    ["# technique: imps\nfrequencyHz,re\n1,1\n", "a.csv, line 2: column im is missing"],
    ["# technique: imps\nfrequencyHz,re,im,phase\n1,1,1,1\n", 'a.csv, line 2: column "phase" is not known'],
    ["# technique: imps\nfrequencyHz,re,im\n1,1,NaN\n", 'a.csv, line 3: im is "NaN"'],
    ["# technique: imps\nfrequencyHz,re,im\n1,1\n", "a.csv, line 3: has 2 values"],
    ["# technique: imps\nfrequencyHz,re,im\n0,1,1\n", "a.csv, line 3: frequencyHz is 0"],
    ["# technique: imps\nfrequencyHz,re,im,sigma\n1,1,1,0\n", "a.csv, line 3: sigma is 0"],
    ["# technique: imps\nfrequencyHz,re,im\n", "a.csv: has no rows"],
  ])("a fault names its line: %j", (text, message) => {
    expect(() => parseDataFile(text, "a.csv")).toThrow(ScenarioError);
    expect(() => parseDataFile(text, "a.csv")).toThrow(message);
  });
});

/** 1/(1 + ix/Q − x²). */
function resonance(x: number, quality: number) {
  const re = 1 - x * x;
  const im = x / quality;
  return { re: re / (re * re + im * im), im: -im / (re * re + im * im) };
}

/** (1 − e^{−iθ})/(iθ). */
const transit = (theta: number) => ({ re: Math.sin(theta) / theta, im: (Math.cos(theta) - 1) / theta });
