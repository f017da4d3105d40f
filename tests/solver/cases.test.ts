/** Scenarios with results of an independent program (60-digit arithmetic for the closed forms). */
import { readFileSync } from "node:fs";
import type { ScenarioDocument, SolvedSpectrum } from "@demilune/solver";
import { describe, expect, test } from "vitest";
import { distance, solved } from "./support/spectra.ts";

const read = (name: string) => JSON.parse(readFileSync(new URL(`./cases/${name}.json`, import.meta.url), "utf8"));

function expectAgreement(document: ScenarioDocument, name: string, tolerance: number): void {
  const expected: { spectra: SolvedSpectrum[] } = read(`expected/${name}`);
  const spectra = solved(document);
  expect(spectra).toHaveLength(expected.spectra.length);
  for (const [k, reference] of expected.spectra.entries()) {
    const { operatingPoint, technique, unit, frequencyHz } = spectra[k];
    expect({ technique, unit }).toEqual({ technique: reference.technique, unit: reference.unit });
    expect(frequencyHz.length).toBe(reference.frequencyHz.length);
    expect(distance(spectra[k], reference)).toBeLessThan(tolerance);
    const { voltageV, currentMAPerCm2 } = reference.operatingPoint;
    if (voltageV === null) expect(operatingPoint.voltageV).toBeNull();
    else expect(Math.abs(operatingPoint.voltageV! - voltageV)).toBeLessThan(tolerance);
    expect(Math.abs(operatingPoint.currentMAPerCm2 - currentMAPerCm2)).toBeLessThanOrEqual(tolerance * currentMAPerCm2);
  }
}

describe("closed forms agree within 10⁻⁹", () => {
  test.each(["diffusion-near-side", "gaertner-oxide"])("%s", (name) => expectAgreement(read(name), name, 1e-9));
});

test("the layered model agrees with the closed form of one layer", () => {
  const document = { ...read("diffusion-near-side"), model: { kind: "diffusionLayers" } };
  expectAgreement(document, "diffusion-near-side", 1e-5);
});
