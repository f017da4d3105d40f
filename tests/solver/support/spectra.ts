import { type ScenarioDocument, type SolvedSpectrum, solve } from "@demilune/solver";
import { expect } from "vitest";

export interface Value {
  re: number;
  im: number;
}

/** Solve a document all of whose spectra must come out solved. */
export function solved(document: ScenarioDocument): SolvedSpectrum[] {
  return solve(document).spectra.map((spectrum) => {
    if (spectrum.status !== "solved") throw new Error(spectrum.failure.message);
    return spectrum;
  });
}

export const valueAt = ({ re, im }: { re: number[]; im: number[] }, k: number): Value => ({ re: re[k], im: im[k] });

/** The one value of the first spectrum at an angular frequency in rad/s. */
export function responseAt(document: ScenarioDocument, omega: number): Value {
  const [spectrum] = solved({ ...document, frequencies: { listHz: [omega / (2 * Math.PI)] } });
  return valueAt(spectrum, 0);
}

/** Distance of two complex values, relative to the modulus of the second. */
export function expectClose(value: Value, expected: Value, relative: number): void {
  const distance = Math.hypot(value.re - expected.re, value.im - expected.im) / Math.hypot(expected.re, expected.im);
  expect(distance, `${value.re} ${value.im}i against ${expected.re} ${expected.im}i`).toBeLessThan(relative);
}

/** Largest distance of two spectra, relative to the largest modulus of the second. */
export function distance(spectrum: { re: number[]; im: number[] }, expected: { re: number[]; im: number[] }): number {
  const largest = Math.max(...expected.re.map((re, k) => Math.hypot(re, expected.im[k])));
  return (
    Math.max(...expected.re.map((re, k) => Math.hypot(spectrum.re[k] - re, spectrum.im[k] - expected.im[k]))) / largest
  );
}

/** Where a function with one maximum between two points has it (golden section, about seven digits). */
export function maximumOf(f: (x: number) => number, from: number, to: number): number {
  const golden = (Math.sqrt(5) - 1) / 2;
  let [low, high] = [from, to];
  while (high - low > 1e-9 * high) {
    const [left, right] = [high - golden * (high - low), low + golden * (high - low)];
    if (f(left) > f(right)) high = right;
    else low = left;
  }
  return (low + high) / 2;
}
