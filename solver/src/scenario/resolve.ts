/** Every default of the scenario document, those that depend on other fields included. */
import { mostAbsorbing } from "../light/absorption.ts";
import { conditionFaults } from "./conditions.ts";
import { ScenarioError } from "./errors.ts";
import { quantities } from "./quantities.ts";
import type {
  ResolvedCircuit,
  ResolvedContact,
  ResolvedLayer,
  ResolvedModel,
  ResolvedScenario,
  ResolvedSpectrum,
} from "./resolved.ts";
import type { LayerDocument, ScenarioDocument, Technique } from "./schema.ts";
import { parseDocument } from "./validate.ts";

type QuantityWithDefault = {
  [Name in keyof typeof quantities]: (typeof quantities)[Name] extends { default: number | null } ? Name : never;
}[keyof typeof quantities];

/** The field's own value, or its default of the table of quantities. */
function orDefault<Name extends QuantityWithDefault>(
  source: { [name in Name]?: number | null | undefined } | null | undefined,
  name: Name,
): number | (typeof quantities)[Name]["default"] {
  const value = source?.[name];
  return value === undefined || (value === null && quantities[name].default !== null)
    ? quantities[name].default
    : (value as number);
}

type ContactDocument = ScenarioDocument["stack"]["front"];

function resolveContact(contact: ContactDocument): ResolvedContact {
  return {
    workFunctionEV: contact?.workFunctionEV ?? "ohmic",
    electronVelocityCmPerS: orDefault(contact, "electronVelocityCmPerS"),
    holeVelocityCmPerS: orDefault(contact, "holeVelocityCmPerS"),
  };
}

function resolveLayer(layer: LayerDocument): ResolvedLayer {
  const { recombination, ions, traps } = layer;
  const absorptionPerCm = orDefault(layer, "absorptionPerCm");
  return {
    name: layer.name ?? "",
    thicknessNm: layer.thicknessNm,
    relativePermittivity: layer.relativePermittivity,
    affinityEV: layer.affinityEV,
    gapEV: layer.gapEV,
    conductionStatesPerCm3: layer.conductionStatesPerCm3,
    valenceStatesPerCm3: layer.valenceStatesPerCm3,
    electronMobilityCm2PerVs: layer.electronMobilityCm2PerVs,
    holeMobilityCm2PerVs: layer.holeMobilityCm2PerVs,
    donorsPerCm3: orDefault(layer, "donorsPerCm3"),
    acceptorsPerCm3: orDefault(layer, "acceptorsPerCm3"),
    absorptionPerCm,
    modulationAbsorptionPerCm: layer.modulationAbsorptionPerCm ?? absorptionPerCm,
    carrierYield: orDefault(layer, "carrierYield"),
    recombination: {
      electronLifetimeNs: orDefault(recombination, "electronLifetimeNs"),
      holeLifetimeNs: orDefault(recombination, "holeLifetimeNs"),
      trapDepthEV: recombination?.trapDepthEV ?? layer.gapEV / 2,
      radiativeCm3PerS: orDefault(recombination, "radiativeCm3PerS"),
      augerElectronCm6PerS: orDefault(recombination, "augerElectronCm6PerS"),
      augerHoleCm6PerS: orDefault(recombination, "augerHoleCm6PerS"),
    },
    ions: {
      cationsPerCm3: orDefault(ions, "cationsPerCm3"),
      anionsPerCm3: orDefault(ions, "anionsPerCm3"),
      cationMobilityCm2PerVs: orDefault(ions, "cationMobilityCm2PerVs"),
      anionMobilityCm2PerVs: orDefault(ions, "anionMobilityCm2PerVs"),
    },
    traps: traps ?? null,
  };
}

function resolveCircuit(circuit: ScenarioDocument["circuit"]): ResolvedCircuit {
  return {
    seriesResistanceOhmCm2: orDefault(circuit, "seriesResistanceOhmCm2"),
    shuntResistanceOhmCm2: orDefault(circuit, "shuntResistanceOhmCm2"),
    parallelCapacitanceFPerCm2: orDefault(circuit, "parallelCapacitanceFPerCm2"),
    amplifierBandwidthHz: orDefault(circuit, "amplifierBandwidthHz"),
    sourceBandwidthHz: orDefault(circuit, "sourceBandwidthHz"),
  };
}

const defaultBias = (technique: Technique) => (technique === "imps" ? "shortCircuit" : "openCircuit");

function resolveSpectra({ spectra = [], light }: ScenarioDocument): ResolvedSpectrum[] {
  return spectra.map(({ technique, bias, fluxPerCm2S }) => ({
    technique,
    bias: bias ?? defaultBias(technique),
    fluxPerCm2S: fluxPerCm2S ?? light.fluxPerCm2S,
  }));
}

function resolveFrequencies({ frequencies = {} }: ScenarioDocument): ResolvedScenario["frequencies"] {
  if (frequencies.listHz) return { listHz: frequencies.listHz.toSorted((a, b) => a - b) };
  return {
    fromHz: orDefault(frequencies, "fromHz"),
    toHz: orDefault(frequencies, "toHz"),
    pointsPerDecade: orDefault(frequencies, "pointsPerDecade"),
  };
}

function resolveModel({ model }: ScenarioDocument, lit: Pick<ResolvedScenario, "stack" | "light">): ResolvedModel {
  return {
    kind: model?.kind ?? "driftDiffusion",
    absorber: model?.absorber ?? mostAbsorbing(lit.stack.layers, lit.light.side),
    overrides: model?.overrides ?? {},
    nodes: model?.nodes ?? null,
  } as ResolvedModel;
}

/** Apply every default. The document must have passed `parseDocument` and `conditionFaults`. */
function applyDefaults(document: ScenarioDocument): ResolvedScenario {
  const { light, stack } = document;
  const lit = {
    stack: {
      temperatureK: orDefault(stack, "temperatureK"),
      electronContact: stack.electronContact ?? "front",
      front: resolveContact(stack.front),
      back: resolveContact(stack.back),
      layers: stack.layers.map(resolveLayer),
      interfaces: stack.interfaces ?? [],
      ionsFrozenAt: stack.ionsFrozenAt
        ? { bias: stack.ionsFrozenAt.bias ?? "shortCircuit", fluxPerCm2S: stack.ionsFrozenAt.fluxPerCm2S ?? 0 }
        : null,
    },
    light: {
      side: light.side ?? "front",
      fluxPerCm2S: light.fluxPerCm2S,
      modulationDepth: orDefault(light, "modulationDepth"),
      wavelengthNm: light.wavelengthNm ?? null,
      modulationWavelengthNm: light.modulationWavelengthNm ?? null,
      frontReflectance: orDefault(light, "frontReflectance"),
      backMirrorReflectance: orDefault(light, "backMirrorReflectance"),
    },
  } satisfies Pick<ResolvedScenario, "stack" | "light">;
  return {
    format: document.format,
    name: document.name ?? "",
    ...lit,
    circuit: resolveCircuit(document.circuit),
    model: resolveModel(document, lit),
    spectra: resolveSpectra(document),
    frequencies: resolveFrequencies(document),
  };
}

/**
 * The scenario of a document of any origin, with every default applied. A resolved scenario is a document too and
 * comes back unchanged.
 *
 * @throws ScenarioError with every fault and its path.
 */
export function parseScenario(input: unknown): ResolvedScenario {
  const document = parseDocument(input);
  const faults = conditionFaults(document);
  if (faults.length > 0) throw new ScenarioError(faults);
  return applyDefaults(document);
}
