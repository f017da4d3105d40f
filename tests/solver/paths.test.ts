/** Parameter paths. Ours: the contract of the command line. */
import {
  numberAt,
  parameterAt,
  parametersOf,
  parseScenario,
  quantityAt,
  ScenarioError,
  withNumber,
} from "@demilune/solver";
import { describe, expect, test } from "vitest";
import { scenario } from "./support/scenarios.ts";

const document = scenario({ layer: { name: "absorber" }, model: { kind: "diffusion" } });
const resolved = parseScenario(document);

describe("reading", () => {
  test.each([
    ["stack.layers.0.thicknessNm", 500],
    ["stack.layers.0.recombination.trapDepthEV", 0.75],
    ["circuit.seriesResistanceOhmCm2", 0],
    ["circuit.shuntResistanceOhmCm2", null],
    ["spectra.0.fluxPerCm2S", 1e16],
    ["model.overrides.lifetimeNs", null],
    ["model.nodes", null],
    ["stack.front.workFunctionEV", 4],
    ["frequencies.listHz.0", 1],
  ])("%s is %s", (path, value) => expect(numberAt(resolved, path)).toBe(value));

  test.each([
    "stack.layers.1.thicknessNm",
    "stack.layers.00.thicknessNm",
    "stack.layers.0.name",
    "stack.layers.0.constructor",
    "stack.layers",
    "model.overrides.transferPerS",
    "model.kind",
    "",
    "a.b",
  ])("%s is no number of the scenario", (path) => {
    expect(() => quantityAt(document, path)).toThrow(ScenarioError);
  });
});

describe("setting", () => {
  test("changes a copy, makes the parts on the way, keeps the rest", () => {
    const changed = withNumber(document, "circuit.parallelCapacitanceFPerCm2", 1e-6);
    expect(changed.circuit).toEqual({ parallelCapacitanceFPerCm2: 1e-6 });
    expect(document.circuit).toBeUndefined();
    expect(changed.stack).toBe(document.stack);
  });

  test("tied paths take one value", () => {
    const path = "stack.layers.0.recombination.electronLifetimeNs+stack.layers.0.recombination.holeLifetimeNs";
    const { recombination } = withNumber(document, path, 7).stack.layers[0];
    expect(recombination).toEqual({ electronLifetimeNs: 7, holeLifetimeNs: 7 });
    expect(parameterAt(resolved, path)).toMatchObject({
      value: 10,
      label: "electron lifetime (absorber) + hole lifetime (absorber)",
    });
  });

  test("a voltage takes the place of a named bias", () => {
    expect(withNumber(document, "spectra.0.bias.voltageV", 0.3).spectra?.[0].bias).toEqual({ voltageV: 0.3 });
  });
});

test("every listed number can be read, and set to a permitted value that stays", () => {
  for (const { path, quantity, value } of parametersOf(resolved)) {
    const next = value ?? quantity.min + (quantity.aboveMin ? 1 : 0);
    const changed = withNumber(resolved, path, next);
    expect(numberAt(changed, path), path).toBe(next);
  }
  const paths = parametersOf(resolved).map(({ path }) => path);
  expect(paths).toContain("model.overrides.extractionVelocityCmPerS");
  expect(paths).not.toContain("model.overrides.transferPerS");
  expect(new Set(paths).size).toBe(paths.length);
});
