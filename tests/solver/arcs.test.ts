import { describe, expect, test } from "vitest";
import { fitRational, poles, residue } from "../../solver/src/analysis/aaa.ts";
import { arcsOf } from "../../solver/src/analysis/arcs.ts";
import { coleCole, constant, diffusion, farSheet, logarithmic, relaxation, sampled, sum } from "./spectra.ts";

const within = (value: number, expected: number, relative: number) =>
  expect(Math.abs(value / expected - 1), `${value} against ${expected}`).toBeLessThan(relative);

describe("rational approximation", () => {
  test("finds the poles −((n + ½)π)² of tanh√s/√s, all with residue 2", () => {
    const omega = logarithmic(1e-2, 1e4, 10);
    const { re, im } = sampled(
      omega.map((value) => value / (2 * Math.PI)),
      diffusion(1),
    );
    const fit = fitRational({ omega, re, im }, 1e-11, 20);
    const found = poles(fit)
      .filter((pole) => pole.im === 0 && pole.re < 0 && Math.abs(residue(fit, pole).re) > 1e-3)
      .sort((a, b) => b.re - a.re)
      .slice(0, 3);
    // partial fractions of tanh: M. Abramowitz, I. Stegun, Handbook of Mathematical Functions, 4.5 (from memory)
    [2.467401, 22.20661, 61.685028].forEach((expected, k) => {
      within(-found[k].re, expected, k === 2 ? 1e-3 : 1e-5);
      within(residue(fit, found[k]).re, 2, k === 2 ? 1e-2 : 1e-3);
    });
  });

  test("keeps poles exact over fifteen decades", () => {
    const frequency = logarithmic(1e-5, 1e10, 5);
    const curve = sampled(frequency, sum(relaxation(1e-3), relaxation(1e8, -0.4)));
    const { arcs } = arcsOf(curve);
    expect(arcs).toHaveLength(2);
    within(arcs[0].peakHz, 1e-3, 1e-6);
    within(arcs[1].peakHz, 1e8, 1e-6);
  });
});

describe("arcs", () => {
  test.each([5, 10])("a single relaxation on an offset, %i points a decade", (perDecade) => {
    const { arcs } = arcsOf(sampled(logarithmic(0.1, 1e5, perDecade), sum(relaxation(100, 0.7), constant(2))));
    expect(arcs).toHaveLength(1);
    within(arcs[0].peakHz, 100, 1e-3);
    within(arcs[0].timeConstantS, 1 / (200 * Math.PI), 1e-3);
    within(arcs[0].spanRe, 0.7, 1e-3);
    within(arcs[0].spanIm, 0.35, 1e-3);
    expect(arcs[0].quadrant).toBe(4);
    expect(Math.abs(arcs[0].depression)).toBeLessThan(1e-3);
  });

  test.each([
    // ω d²/D at the largest lag of tanh√(iu)/√(iu) and of 1/cosh√(iu), J. van de Lagemaat, A. J. Frank,
    // J. Phys. Chem. B 105, 11194 (2001) for the constant of the second (from memory); digits computed at 30 places
    ["uniform generation", diffusion(1e-3), 2.540646888, 0.4172265576],
    ["generation at the far face", farSheet(1e-3), 2.331564481, 0.5987114651],
  ])("a diffusion film is one arc with its whole span: %s", (_, response, constantOfPeak, height) => {
    const { arcs } = arcsOf(sampled(logarithmic(1, 1e6, 6), response));
    expect(arcs).toHaveLength(1);
    within(2 * Math.PI * arcs[0].peakHz * 1e-3, constantOfPeak, 5e-3);
    within(arcs[0].spanRe, 1, 1e-2);
    within(arcs[0].spanIm, height, 1e-2);
  });

  test.each([0.9, 0.7, 0.5])("a depressed arc with β = %f has depression 1 − β", (beta) => {
    const { arcs } = arcsOf(sampled(logarithmic(0.01, 1e6, 7), coleCole(100, beta)));
    expect(arcs).toHaveLength(1);
    within(arcs[0].peakHz, 100, 5e-3);
    expect(Math.abs(arcs[0].depression - (1 - beta))).toBeLessThan(0.02 * (1 - beta));
  });

  test("names loops of both signs with their quadrants", () => {
    const response = sum(relaxation(3, -0.5), relaxation(400, 1.2), relaxation(5e4, -0.2), constant(0.1));
    const { arcs } = arcsOf(sampled(logarithmic(0.01, 1e7, 8), response));
    expect(arcs.map(({ quadrant }) => quadrant)).toEqual([1, 4, 1]);
    [3, 400, 5e4].forEach((expected, k) => {
      within(arcs[k].peakHz, expected, 1e-3);
    });
  });

  test("merges relaxations within a factor two and parts those a factor thirty apart", () => {
    const merged = arcsOf(sampled(logarithmic(0.1, 1e5, 8), sum(relaxation(100), relaxation(190, 0.5))));
    expect(merged.arcs).toHaveLength(1);
    within(merged.arcs[0].spanRe, 1.5, 1e-2);
    const parted = arcsOf(sampled(logarithmic(0.1, 1e5, 8), sum(relaxation(10), relaxation(300, 0.06))));
    expect(parted.arcs).toHaveLength(2);
    within(parted.arcs[1].spanRe, 0.06, 1e-2);
  });

  test("a diffusion tail that reaches under the next arc keeps its span", () => {
    const { arcs } = arcsOf(sampled(logarithmic(0.01, 1e6, 8), sum(diffusion(0.1), relaxation(5000, 0.4))));
    expect(arcs).toHaveLength(2);
    within(arcs[0].spanRe, 1, 1e-2);
    within(arcs[1].spanRe, 0.4, 1e-2);
    within(arcs[1].peakHz, 5000, 1e-2);
  });

  test("a blocking capacitor is no arc", () => {
    const blocking = (omega: number) => ({ re: 0.3, im: -1 / (omega * 0.5) });
    const { arcs } = arcsOf(sampled(logarithmic(0.1, 1e5, 8), sum(relaxation(1000), blocking)));
    expect(arcs).toHaveLength(1);
    within(arcs[0].peakHz, 1000, 1e-3);
  });

  test.each([
    [0.002, 1],
    [0.005, 2],
    [0.01, 3],
  ])("with noise %f the same arcs come out, none of noise", { timeout: 60_000 }, (noise, seed) => {
    const response = sum(relaxation(2, -0.4), diffusion(2.540646888 / (2 * Math.PI * 300)), relaxation(4e4, 0.5));
    const { arcs, noise: estimated } = arcsOf(sampled(logarithmic(0.02, 4e6, 8), response, noise, seed));
    expect(arcs).toHaveLength(3);
    [2, 300, 4e4].forEach((expected, k) => {
      within(arcs[k].peakHz, expected, 20 * noise);
    });
    // largest modulus of the three: 0.4 below 1.5
    within(estimated, noise * 1.37, 0.3);
  });

  test("noise about a constant is no arc", () => {
    for (const seed of [1, 2, 3, 4, 5]) {
      expect(arcsOf(sampled(logarithmic(0.1, 1e5, 8), constant(1), 0.005, seed)).arcs).toEqual([]);
    }
  });

  test("contributions and the rest add up to the spectrum", () => {
    const curve = sampled(logarithmic(0.1, 1e6, 8), sum(relaxation(20), relaxation(2e4, -0.3), constant(0.5)));
    const { arcs, approximation } = arcsOf(curve);
    curve.frequencyHz.forEach((frequency, k) => {
      const parts = arcs.map((_, arc) => approximation.contribution(arc, frequency));
      expect(parts.reduce((total, part) => total + part.re, 0.5)).toBeCloseTo(curve.re[k], 6);
      expect(parts.reduce((total, part) => total + part.im, 0)).toBeCloseTo(curve.im[k], 6);
    });
    expect(approximation.valleysHz).toHaveLength(1);
  });
});
