/** The scenario document: what is refused and how, and every default. Ours: the contract of the document. */
import { type Fault, frequenciesOf, parseScenario, ScenarioError, solve, solverVersion } from "@demilune/solver";
import { describe, expect, test } from "vitest";
import packageFile from "../../solver/package.json" with { type: "json" };
import { scenario } from "./support/scenarios.ts";

function faultsOf(document: unknown, run: (document: unknown) => unknown = parseScenario): readonly Fault[] {
  try {
    run(document);
  } catch (error) {
    if (error instanceof ScenarioError) return error.faults;
    throw error;
  }
  return [];
}

const pathsOf = (document: unknown) => faultsOf(document).map(({ path }) => path);

test("the version is that of the package", () => expect(solverVersion).toBe(packageFile.version));

describe("faults", () => {
  test("all at once, each with path, what is wrong and what is allowed", () => {
    const document = scenario({ layer: { thicknessNm: -1, gapEV: "wide" as unknown as number } });
    expect(faultsOf({ ...document, format: "demilune.scenario/2", unknown: 1 })).toEqual([
      { path: "format", message: 'is "demilune.scenario/2"', allowed: '"demilune.scenario/1"' },
      { path: "stack.layers.0.thicknessNm", message: "is -1 nm", allowed: "0.1 to 1e7 nm" },
      { path: "stack.layers.0.gapEV", message: 'is "wide", not a number', allowed: "0.05 to 10 eV" },
      {
        path: "unknown",
        message: "is not a field of the scenario",
        allowed: "format, name, stack, light, circuit, model, spectra, frequencies",
      },
    ]);
  });

  test.each([
    ["a missing field", scenario({ light: {} as { fluxPerCm2S: number } }), "light.fluxPerCm2S"],
    [
      "an unknown bias",
      scenario({ spectra: [{ technique: "imps", bias: "maximumPower" as "shortCircuit" }] }),
      "spectra.0.bias",
    ],
    [
      "a voltage out of range",
      scenario({ spectra: [{ technique: "imps", bias: { voltageV: 1001 } }] }),
      "spectra.0.bias.voltageV",
    ],
    [
      "a work function in words",
      scenario({ stackChange: { front: { workFunctionEV: "low" as "ohmic" } } }),
      "stack.front.workFunctionEV",
    ],
    ["another technique", scenario({ spectra: [{ technique: "eis" as "imps" }] }), "spectra.0.technique"],
    ["another model", scenario({ model: { kind: "ohm" as "transit" } }), "model.kind"],
    ["an empty stack", scenario({ stackChange: { layers: [] } }), "stack.layers"],
    [
      "one lifetime",
      scenario({ layer: { recombination: { electronLifetimeNs: 3 } } }),
      "stack.layers.0.recombination.holeLifetimeNs",
    ],
    [
      "a trap below the valence band",
      scenario({ layer: { recombination: { trapDepthEV: 1.6 } } }),
      "stack.layers.0.recombination.trapDepthEV",
    ],
    [
      "traps without lifetimes",
      scenario({ layer: { recombination: {}, traps: { densityPerCm3: 1e15, kind: "donor" } } }),
      "stack.layers.0.traps",
    ],
    [
      "ions that cannot move",
      scenario({ layer: { ions: { anionsPerCm3: 1e17 } } }),
      "stack.layers.0.ions.anionMobilityCm2PerVs",
    ],
    [
      "an interface behind the last layer",
      scenario({ stackChange: { interfaces: [{ afterLayer: 0, electronVelocityCmPerS: 1, holeVelocityCmPerS: 1 }] } }),
      "stack.interfaces.0.afterLayer",
    ],
    [
      "an interface velocity of zero",
      scenario({ stackChange: { interfaces: [{ afterLayer: 0, electronVelocityCmPerS: 0, holeVelocityCmPerS: 1 }] } }),
      "stack.interfaces.0.electronVelocityCmPerS",
    ],
    ["an absorber that is not there", scenario({ model: { kind: "diffusion", absorber: 1 } }), "model.absorber"],
    ["a range upside down", scenario({ frequencies: { fromHz: 10, toHz: 1 } }), "frequencies.fromHz"],
    ["range and list", scenario({ frequencies: { fromHz: 10, listHz: [20] } }), "frequencies.fromHz"],
    ["a frequency twice", scenario({ frequencies: { listHz: [2, 1, 2] } }), "frequencies.listHz.2"],
    [
      "a list of 5001 frequencies",
      scenario({ frequencies: { listHz: Array.from({ length: 5001 }, (_, k) => k + 1) } }),
      "frequencies.listHz",
    ],
    [
      "a surface rate without transfer",
      scenario({ model: { kind: "gaertner", overrides: { surfaceRecombinationPerS: 1 } } }),
      "model.overrides.surfaceRecombinationPerS",
    ],
    [
      "one carrier of both",
      scenario({ model: { kind: "transit", overrides: { carrier: "hole" } } }),
      "model.overrides.carrier",
    ],
    ["a list for a document", [1], "document"],
    ["nothing", null, "document"],
  ])("%s", (_, document, path) => expect(pathsOf(document)).toContain(path));

  test("an override of another model names its owner", () => {
    const [fault] = faultsOf(scenario({ model: { kind: "transit", overrides: { lifetimeNs: 1 } as object } }));
    expect(fault.path).toBe("model.overrides.lifetimeNs");
    expect(fault.message).toContain("gaertner");
    expect(fault.allowed).toContain("holeTransitTimeNs");
  });

  test("a key that is a member of every object is no field", () => {
    expect(pathsOf(JSON.parse('{"__proto__": {}, "constructor": 1}'))).toEqual(
      expect.arrayContaining(["__proto__", "constructor", "format", "stack", "light"]),
    );
  });

  test("values at both ends of a range are permitted", () => {
    for (const thicknessNm of [0.1, 1e7]) expect(pathsOf(scenario({ layer: { thicknessNm } }))).toEqual([]);
    expect(pathsOf(scenario({ layer: { ions: { cationsPerCm3: 0, cationMobilityCm2PerVs: 0 } } }))).toEqual([]);
  });
});

describe("defaults", () => {
  const { name: _, ...bare } = scenario();
  const { spectra: _spectra, frequencies: _frequencies, ...least } = bare;

  test("of a document with required fields only", () => {
    const { stack, light, circuit, model, spectra, frequencies, name } = parseScenario(least);
    expect({ name, spectra, frequencies }).toEqual({
      name: "",
      spectra: [],
      frequencies: { fromHz: 0.1, toHz: 1e6, pointsPerDecade: 10 },
    });
    expect(stack).toMatchObject({ temperatureK: 300, electronContact: "front", interfaces: [], ionsFrozenAt: null });
    expect(stack.back).toEqual({ workFunctionEV: 5, electronVelocityCmPerS: 1e7, holeVelocityCmPerS: 1e7 });
    expect(stack.layers[0]).toMatchObject({
      name: "",
      donorsPerCm3: 0,
      modulationAbsorptionPerCm: 5e4,
      carrierYield: 1,
      recombination: { trapDepthEV: 0.75, radiativeCm3PerS: 0 },
      ions: { cationsPerCm3: 0, cationMobilityCm2PerVs: 0 },
      traps: null,
    });
    expect(light).toMatchObject({
      side: "front",
      modulationDepth: 0.05,
      frontReflectance: 0,
      backMirrorReflectance: 0,
    });
    expect(circuit).toEqual({
      seriesResistanceOhmCm2: 0,
      shuntResistanceOhmCm2: null,
      parallelCapacitanceFPerCm2: 0,
      amplifierBandwidthHz: null,
      sourceBandwidthHz: null,
    });
    expect(model).toEqual({ kind: "driftDiffusion", absorber: 0, overrides: {}, nodes: null });
  });

  test("bias by technique, flux of the light, ions left in the dark at short circuit", () => {
    const spectra = [{ technique: "imps" }, { technique: "imvs" }, { technique: "impedance", fluxPerCm2S: 0 }] as const;
    const resolved = parseScenario({ ...least, spectra, stack: { ...least.stack, ionsFrozenAt: {} } });
    expect(resolved.spectra).toEqual([
      { technique: "imps", bias: "shortCircuit", fluxPerCm2S: 1e16 },
      { technique: "imvs", bias: "openCircuit", fluxPerCm2S: 1e16 },
      { technique: "impedance", bias: "openCircuit", fluxPerCm2S: 0 },
    ]);
    expect(resolved.stack.ionsFrozenAt).toEqual({ bias: "shortCircuit", fluxPerCm2S: 0 });
  });

  test("the absorber takes the largest fraction of the light from its side", () => {
    const layers = [2e4, 8e4].map(
      (absorptionPerCm) => scenario({ layer: { absorptionPerCm, thicknessNm: 800 } }).stack.layers[0],
    );
    const absorber = (side: "front" | "back") =>
      parseScenario(scenario({ stackChange: { layers }, light: { fluxPerCm2S: 1, side } })).model.absorber;
    expect([absorber("front"), absorber("back")]).toEqual([0, 1]);
  });

  test("a resolved scenario is a document and comes back unchanged", () => {
    const resolved = parseScenario(scenario({ frequencies: { listHz: [3, 1, 2] } }));
    expect(parseScenario(structuredClone(resolved))).toEqual(resolved);
  });
});

describe("frequencies", () => {
  const of = (frequencies: object) => frequenciesOf(parseScenario(scenario({ frequencies })).frequencies);
  test("a range has its end points exactly and round(n log₁₀(to/from)) equal steps", () => {
    const frequencies = of({ fromHz: 0.3, toHz: 700, pointsPerDecade: 7 });
    expect(frequencies).toHaveLength(Math.round(7 * Math.log10(700 / 0.3)) + 1);
    expect([frequencies[0], frequencies.at(-1)]).toEqual([0.3, 700]);
    const ratios = frequencies.slice(1).map((frequency, k) => Math.log10(frequency / frequencies[k]));
    expect(Math.max(...ratios) - Math.min(...ratios)).toBeLessThan(1e-12);
  });
  test("one point where both ends are one", () => expect(of({ fromHz: 5, toHz: 5 })).toEqual([5]));
  test("both ends of a range shorter than a step", () =>
    expect(of({ fromHz: 5, toHz: 5.1, pointsPerDecade: 1 })).toEqual([5, 5.1]));
  test("a list is sorted", () => expect(of({ listHz: [3, 1e-9, 2] })).toEqual([1e-9, 2, 3]));
});

describe("what a model refuses", () => {
  const refused = (change: Parameters<typeof scenario>[0]) => faultsOf(scenario(change), solve).map(({ path }) => path);
  const voltage = { technique: "imps", bias: { voltageV: 0.2 } } as const;
  const doped = { acceptorsPerCm3: 1e16 };
  test.each([
    [
      "diffusion: a voltage",
      { model: { kind: "diffusion" }, spectra: [{ technique: "imps" }, voltage] },
      "spectra.1.bias",
    ],
    ["layers: a voltage", { model: { kind: "diffusionLayers" }, spectra: [voltage] }, "spectra.0.bias"],
    [
      "diffusion: impedance at short circuit",
      { model: { kind: "diffusion" }, spectra: [{ technique: "impedance", bias: "shortCircuit" }] },
      "spectra.0.technique",
    ],
    [
      "diffusion: photovoltage in the dark",
      { model: { kind: "diffusion" }, spectra: [{ technique: "imvs", fluxPerCm2S: 0 }] },
      "spectra.0.technique",
    ],
    [
      "diffusion: open circuit without recombination",
      { model: { kind: "diffusion" }, layer: { recombination: {} }, spectra: [{ technique: "imvs" }] },
      "spectra.0.bias",
    ],
    [
      "layers: fewer nodes than faces",
      {
        model: { kind: "diffusionLayers", nodes: 10 },
        stackChange: { layers: Array.from({ length: 12 }, () => scenario().stack.layers[0]) },
      },
      "model.nodes",
    ],
    [
      "transit: impedance",
      { model: { kind: "transit" }, spectra: [{ technique: "impedance", bias: "shortCircuit" }] },
      "spectra.0.technique",
    ],
    [
      "transit: open circuit",
      { model: { kind: "transit" }, spectra: [{ technique: "imps", bias: "openCircuit" }] },
      "spectra.0.bias",
    ],
    [
      "transit: no field",
      { model: { kind: "transit" }, spectra: [{ technique: "imps", bias: { voltageV: 1 } }] },
      "spectra.0.bias",
    ],
    [
      "depletion: at the built-in voltage",
      {
        model: { kind: "gaertner" },
        layer: doped,
        spectra: [{ technique: "imps" }, { technique: "imps", bias: { voltageV: 1 } }],
      },
      "spectra.1.bias",
    ],
    [
      "depletion: light from the other side",
      { model: { kind: "gaertner" }, layer: doped, light: { fluxPerCm2S: 1, side: "back" } },
      "light.side",
    ],
    ["depletion: no doping", { model: { kind: "gaertner" } }, "stack.layers.0.acceptorsPerCm3"],
    [
      "depletion: through a finite bulk",
      {
        model: { kind: "gaertner", overrides: { bulk: "finite" } },
        layer: doped,
        spectra: [{ technique: "imps", bias: { voltageV: -50 } }],
      },
      "spectra.0.bias",
    ],
    [
      "surface: photovoltage",
      { model: { kind: "gaertner", overrides: { transferPerS: 1 } }, layer: doped, spectra: [{ technique: "imvs" }] },
      "spectra.0.technique",
    ],
    [
      "surface: no rate at all",
      { model: { kind: "gaertner", overrides: { transferPerS: 0 } }, layer: doped },
      "model.overrides.transferPerS",
    ],
  ] as [string, Parameters<typeof scenario>[0], string][])("%s", (_, change, path) =>
    expect(refused(change)).toEqual([path]),
  );
});

describe("warnings", () => {
  const warned = (change: Parameters<typeof scenario>[0]) => solve(scenario(change)).warnings.map(({ path }) => path);
  test("built-in voltage below half the gap, ohmic contact of an undoped layer, mirror left out", () => {
    const ohmic = { front: {}, back: { workFunctionEV: 6 } };
    expect(warned({ model: { kind: "transit" }, stackChange: { front: { workFunctionEV: 4.5 } } })).toEqual([
      "stack.back.workFunctionEV",
    ]);
    expect(warned({ model: { kind: "transit" }, stackChange: ohmic })).toEqual(["stack.front.workFunctionEV"]);
    expect(warned({ model: { kind: "diffusion" }, light: { fluxPerCm2S: 1, backMirrorReflectance: 0.5 } })).toEqual([
      "light.backMirrorReflectance",
    ]);
  });
});
