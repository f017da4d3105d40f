/** Whatever is put in: finite numbers or a refusal with a path. Ours: "nothing the solver accepts makes it return NaN". */
import {
  modelKinds,
  parametersOf,
  parseScenario,
  type Quantity,
  quantities,
  type ScenarioDocument,
  ScenarioError,
  solve,
  withNumber,
} from "@demilune/solver";
import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { scenario } from "./support/scenarios.ts";

/** Numbers over the whole permitted range: by powers of ten where it spans them, its end points often. */
function within({ min, max, aboveMin, integer, linear }: Quantity, narrow = max): fc.Arbitrary<number> {
  if (integer) return fc.integer({ min, max });
  if (linear || min < 0) return fc.double({ min, max, noNaN: true });
  const lowest = Math.max(min, narrow * 1e-40);
  const powers = fc.double({ min: Math.log10(lowest), max: Math.log10(max), noNaN: true });
  const inside = powers.map((power) => Math.min(max, Math.max(lowest, 10 ** power)));
  return fc.oneof({ weight: 8, arbitrary: inside }, fc.constantFrom(max, aboveMin ? lowest : min));
}

const number = (name: keyof typeof quantities) => within(quantities[name]);
const optional = <Value>(value: fc.Arbitrary<Value>) => fc.option(value, { nil: undefined });

const layer = fc.record(
  {
    thicknessNm: number("thicknessNm"),
    relativePermittivity: number("relativePermittivity"),
    affinityEV: number("affinityEV"),
    gapEV: number("gapEV"),
    conductionStatesPerCm3: number("conductionStatesPerCm3"),
    valenceStatesPerCm3: number("valenceStatesPerCm3"),
    electronMobilityCm2PerVs: number("electronMobilityCm2PerVs"),
    holeMobilityCm2PerVs: number("holeMobilityCm2PerVs"),
    donorsPerCm3: number("donorsPerCm3"),
    acceptorsPerCm3: number("acceptorsPerCm3"),
    absorptionPerCm: number("absorptionPerCm"),
    modulationAbsorptionPerCm: number("modulationAbsorptionPerCm"),
    recombination: fc.record({
      electronLifetimeNs: number("electronLifetimeNs"),
      holeLifetimeNs: number("holeLifetimeNs"),
      radiativeCm3PerS: number("radiativeCm3PerS"),
      augerHoleCm6PerS: number("augerHoleCm6PerS"),
    }),
  },
  {
    requiredKeys: [
      "thicknessNm",
      "relativePermittivity",
      "affinityEV",
      "gapEV",
      "conductionStatesPerCm3",
      "valenceStatesPerCm3",
      "electronMobilityCm2PerVs",
      "holeMobilityCm2PerVs",
    ],
  },
);

const side = fc.constantFrom("front" as const, "back" as const);
const bias = fc.oneof(
  fc.constantFrom("shortCircuit" as const, "openCircuit" as const),
  fc.double({ min: -5, max: 2, noNaN: true }).map((voltageV) => ({ voltageV })),
  number("voltageV").map((voltageV) => ({ voltageV })),
);

/** Any scenario of the models with closed or linear solutions; overrides are set by their paths afterwards. */
const base = fc.record({
  format: fc.constant("demilune.scenario/1" as const),
  stack: fc.record({
    temperatureK: number("temperatureK"),
    electronContact: side,
    front: fc.record({ workFunctionEV: fc.oneof(fc.constant("ohmic" as const), number("workFunctionEV")) }),
    back: fc.record({
      workFunctionEV: fc.oneof(fc.constant("ohmic" as const), number("workFunctionEV")),
      holeVelocityCmPerS: number("holeVelocityCmPerS"),
    }),
    layers: fc.array(layer, { minLength: 1, maxLength: 3 }),
  }),
  light: fc.record({ side, fluxPerCm2S: number("fluxPerCm2S"), frontReflectance: number("frontReflectance") }),
  circuit: fc.record({
    seriesResistanceOhmCm2: number("seriesResistanceOhmCm2"),
    shuntResistanceOhmCm2: fc.option(number("shuntResistanceOhmCm2")),
    parallelCapacitanceFPerCm2: number("parallelCapacitanceFPerCm2"),
  }),
  spectra: fc.array(
    fc.record({ technique: fc.constantFrom("imps" as const, "imvs" as const, "impedance" as const), bias }),
    { minLength: 1, maxLength: 3 },
  ),
  frequencies: fc.record({ listHz: fc.uniqueArray(number("frequencyHz"), { minLength: 1, maxLength: 4 }) }),
});

const closed = modelKinds.filter((kind) => kind !== "driftDiffusion");
const words = { variant: ["twoCarrier", "collected", "induced"], bulk: ["thick", "finite"] } as const;
const document: fc.Arbitrary<ScenarioDocument> = fc
  .record({
    base,
    kind: fc.constantFrom(...closed),
    variant: optional(fc.constantFrom(...words.variant)),
    bulk: optional(fc.constantFrom(...words.bulk)),
    chosen: fc.array(fc.tuple(fc.nat(), fc.double({ min: 0, max: 1, noNaN: true })), { maxLength: 4 }),
  })
  .map(({ base, kind, variant, bulk, chosen }) => {
    const overrides = kind === "transit" && variant ? { variant } : kind === "gaertner" && bulk ? { bulk } : {};
    const nodes = kind === "diffusionLayers" ? { nodes: 50 } : {};
    const whole = { ...base, model: { kind, overrides, ...nodes } } as ScenarioDocument;
    const free = parametersOf(parseScenario(whole)).filter(({ path }) => path.startsWith("model.overrides."));
    return chosen.reduce((changed, [index, part]) => {
      if (free.length === 0) return changed;
      const { path, quantity } = free[index % free.length];
      const { min, max, linear } = quantity;
      const low = Math.max(min, max * 1e-30);
      const value = linear ? min + part * (max - min) : Math.min(max, low * (max / low) ** part);
      return withNumber(changed, path, value);
    }, whole);
  });

describe("any permitted scenario", () => {
  test("gives finite numbers or is refused with a path", { timeout: 60_000 }, () => {
    let solvedCount = 0;
    fc.assert(
      fc.property(document, (input) => {
        try {
          const result = solve(input);
          solvedCount++;
          for (const spectrum of result.spectra) {
            if (spectrum.status !== "solved") throw new Error(`closed form not solved: ${spectrum.failure.message}`);
            const { re, im, operatingPoint, derived = {} } = spectrum;
            const numbers = [...re, ...im, operatingPoint.currentMAPerCm2, operatingPoint.voltageV ?? 0];
            expect(numbers.filter((value) => !Number.isFinite(value))).toEqual([]);
            expect(
              Object.values(derived).filter((value) => typeof value === "number" && !Number.isFinite(value)),
            ).toEqual([]);
          }
        } catch (error) {
          if (!(error instanceof ScenarioError)) throw error;
          for (const { path, message, allowed } of error.faults) expect(path && message && allowed).toBeTruthy();
        }
      }),
      { numRuns: 600 },
    );
    expect(solvedCount).toBeGreaterThan(50);
  });

  test("solved twice is the same, and its resolved form gives the same hash", () => {
    fc.assert(
      fc.property(document, (input) => {
        try {
          const result = solve(input);
          expect(solve(parseScenario(input))).toEqual(result);
        } catch (error) {
          if (!(error instanceof ScenarioError)) throw error;
        }
      }),
      { numRuns: 100 },
    );
  });
});

describe("any value at all", () => {
  const refusedOrParsed = (input: unknown) => {
    try {
      parseScenario(input);
    } catch (error) {
      if (!(error instanceof ScenarioError)) throw error;
      expect(error.faults.length).toBeGreaterThan(0);
      for (const { path, message, allowed } of error.faults) expect(path && message && allowed).toBeTruthy();
    }
  };

  test("JSON of any shape", () => fc.assert(fc.property(fc.jsonValue(), refusedOrParsed), { numRuns: 500 }));

  test("a scenario with one value replaced by anything: the faults point to it", () => {
    const paths = [
      "stack",
      "light",
      "model",
      "spectra",
      "frequencies",
      "stack.front",
      "stack.layers.0",
      "stack.layers.0.gapEV",
      "spectra.0",
      "spectra.0.bias",
      "frequencies.listHz",
    ];
    fc.assert(
      fc.property(fc.constantFrom(...paths), fc.jsonValue(), (path, value) => {
        const input = structuredClone(scenario({ model: { kind: "diffusion" } })) as unknown as Record<string, unknown>;
        const keys = path.split(".");
        const parent = keys.slice(0, -1).reduce<unknown>((part, key) => Reflect.get(part as object, key), input);
        Reflect.set(parent as object, keys.at(-1) as string, value);
        refusedOrParsed(input);
      }),
      { numRuns: 500 },
    );
  });
});
