/**
 * Stacks with spectra computed by an independent program (another language, another discretisation): agreement within
 * 2·10⁻³ of the largest modulus with the default mesh.
 */
import { readFileSync } from "node:fs";
import { type ResultDocument, type SolvedSpectrum, solve } from "@demilune/solver";
import { describe, expect, test } from "vitest";

const read = (name: string) => JSON.parse(readFileSync(new URL(`./cases/${name}.json`, import.meta.url), "utf8"));

describe.each(["perovskite-cations", "pin-no-ions"])("%s", (name) => {
  const result = solve(read(name)) as ResultDocument & { spectra: SolvedSpectrum[] };
  const expected: { spectra: SolvedSpectrum[] } = read(`expected/${name}`);

  test.each(expected.spectra.map((spectrum, k) => ({ k, technique: spectrum.technique, bias: spectrum.bias })))(
    "agrees with the independent program: $technique at $bias",
    ({ k }) => {
      const [ours, theirs] = [result.spectra[k], expected.spectra[k]];
      const largest = Math.max(...theirs.re.map((re, f) => Math.hypot(re, theirs.im[f])));
      const farthest = Math.max(...theirs.re.map((re, f) => Math.hypot(ours.re[f] - re, ours.im[f] - theirs.im[f])));
      expect(farthest / largest).toBeLessThan(5e-4);
      expect(ours.currentSpread).toBeLessThan(1e-7);
      expect(ours.operatingPoint.voltageV).toBeCloseTo(theirs.operatingPoint.voltageV!, 4);
      expect(ours.operatingPoint.currentMAPerCm2).toBeCloseTo(theirs.operatingPoint.currentMAPerCm2, 3);
    },
  );
});
