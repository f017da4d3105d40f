/** Figures of the starter stacks of closed forms, from an independent program, ± half a step of its grid. */
import { readFileSync } from "node:fs";
import type { ScenarioDocument, SolvedSpectrum } from "@demilune/solver";
import { expect, test } from "vitest";
import { solved } from "./support/spectra.ts";

const starter = (name: string): ScenarioDocument =>
  JSON.parse(readFileSync(new URL(`../../drizzle/starters/${name}.json`, import.meta.url), "utf8"));

/** Frequency of the largest −Im or Im. */
function apex({ frequencyHz, im }: SolvedSpectrum, sign: 1 | -1): { frequency: number; height: number } {
  const height = Math.max(...im.map((value) => sign * value));
  return { frequency: frequencyHz[im.findIndex((value) => sign * value === height)], height: sign * height };
}

const expectNear = (value: number, expected: number, step: number) =>
  expect(Math.abs(Math.log10(value / expected)), `${value} against ${expected}`).toBeLessThan(step);

test("dye-film from both sides", () => {
  const [imps, imvs] = solved(starter("dye-film"));
  expectNear(apex(imps, -1).frequency, 22, 0.07);
  expectNear(apex(imvs, -1).frequency, 2.9, 0.07);
  expect(imps.re[0]).toBeCloseTo(0.704, 3);
  expect(imvs.re[0]).toBeCloseTo(80.7, 1);
  const film = starter("dye-film");
  const [fromBack, voltage] = solved({ ...film, light: { ...film.light, side: "back" } });
  expect(fromBack.re[0]).toBeCloseTo(0.672, 3);
  expect(voltage.re.at(-1)).toBeLessThan(0);
});

test("oxide-photoanode: k_tr + k_rec above, RC below", () => {
  const [imps] = solved(starter("oxide-photoanode"));
  const [surface, circuit] = [apex(imps, 1), apex(imps, -1)];
  expectNear(surface.frequency, 4.2, 0.07);
  expect(surface.height).toBeCloseTo(0.222, 3);
  expectNear(circuit.frequency, 17.8e3, 0.07);
  expect(circuit.height).toBeCloseTo(-0.314, 3);
});

test("photodiode: transit against RC", () => {
  const spectra = solved(starter("photodiode"));
  expect(spectra.map((spectrum) => Number((apex(spectrum, -1).frequency / 1e9).toFixed(2)))).toEqual([0.25, 0.5]);
});
