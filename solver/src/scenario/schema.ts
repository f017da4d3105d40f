/**
 * The scenario document as a schema (zod, the small build, so that a browser can carry it).
 * It checks shapes and ranges; conditions between fields and defaults are in `resolve.ts`.
 */
import * as z from "zod/mini";
import { isPermitted, type Quantity, type QuantityName, quantities } from "./quantities.ts";

export const formatName = "demilune.scenario/1";

export const limits = { layers: 100, spectra: 50, frequencies: 5000 } as const;

/** Which row of the table a number of the schema belongs to. */
export const quantityRegistry = z.registry<{ quantity: QuantityName }>();

/** A number within the range of its row in the table. */
function quantity(name: QuantityName) {
  const row: Quantity = quantities[name];
  const schema = z.number().check(z.refine((value) => isPermitted(row, value)));
  quantityRegistry.add(schema, { quantity: name });
  return schema;
}

const number = (name: QuantityName) => z.optional(quantity(name));
/** null where the row gives it a meaning ("none", "ideal", "infinite"). */
const numberOrNull = (name: QuantityName) => z.optional(z.nullable(quantity(name)));
/** null as the resolved document writes an absent part; the same as leaving it out. */
const absent = <Schema extends z.core.$ZodType>(schema: Schema) => z.optional(z.nullable(schema));

const contact = z.strictObject({
  workFunctionEV: z.optional(z.union([z.literal("ohmic"), quantity("workFunctionEV")])),
  electronVelocityCmPerS: number("electronVelocityCmPerS"),
  holeVelocityCmPerS: number("holeVelocityCmPerS"),
});

const layer = z.strictObject({
  name: z.optional(z.string()),
  thicknessNm: quantity("thicknessNm"),
  relativePermittivity: quantity("relativePermittivity"),
  affinityEV: quantity("affinityEV"),
  gapEV: quantity("gapEV"),
  conductionStatesPerCm3: quantity("conductionStatesPerCm3"),
  valenceStatesPerCm3: quantity("valenceStatesPerCm3"),
  electronMobilityCm2PerVs: quantity("electronMobilityCm2PerVs"),
  holeMobilityCm2PerVs: quantity("holeMobilityCm2PerVs"),
  donorsPerCm3: number("donorsPerCm3"),
  acceptorsPerCm3: number("acceptorsPerCm3"),
  absorptionPerCm: number("absorptionPerCm"),
  modulationAbsorptionPerCm: number("modulationAbsorptionPerCm"),
  carrierYield: number("carrierYield"),
  recombination: z.optional(
    z.strictObject({
      electronLifetimeNs: numberOrNull("electronLifetimeNs"),
      holeLifetimeNs: numberOrNull("holeLifetimeNs"),
      trapDepthEV: number("trapDepthEV"),
      radiativeCm3PerS: number("radiativeCm3PerS"),
      augerElectronCm6PerS: number("augerElectronCm6PerS"),
      augerHoleCm6PerS: number("augerHoleCm6PerS"),
    }),
  ),
  ions: z.optional(
    z.strictObject({
      cationsPerCm3: number("cationsPerCm3"),
      anionsPerCm3: number("anionsPerCm3"),
      cationMobilityCm2PerVs: number("cationMobilityCm2PerVs"),
      anionMobilityCm2PerVs: number("anionMobilityCm2PerVs"),
    }),
  ),
  traps: absent(z.strictObject({ densityPerCm3: quantity("densityPerCm3"), kind: z.enum(["acceptor", "donor"]) })),
});

/** An operating point: two names, or a terminal voltage. */
export const biasSchema = z.union([
  z.enum(["shortCircuit", "openCircuit"]),
  z.strictObject({ voltageV: quantity("voltageV") }),
]);

const interfaceRow = z.strictObject({
  afterLayer: quantity("afterLayer"),
  electronVelocityCmPerS: quantity("interfaceElectronVelocityCmPerS"),
  holeVelocityCmPerS: quantity("interfaceHoleVelocityCmPerS"),
});

const side = z.enum(["front", "back"]);

const overrides = {
  transit: z.strictObject({
    variant: z.optional(z.enum(["twoCarrier", "collected", "induced"])),
    carrier: z.optional(z.enum(["electron", "hole", "both"])),
    electronTransitTimeNs: number("electronTransitTimeNs"),
    holeTransitTimeNs: number("holeTransitTimeNs"),
    fieldVPerCm: number("fieldVPerCm"),
  }),
  gaertner: z.strictObject({
    depletionWidthNm: number("depletionWidthNm"),
    diffusionCm2PerS: number("diffusionCm2PerS"),
    lifetimeNs: number("lifetimeNs"),
    absorptionPerCm: number("absorptionPerCm"),
    saturationCurrentMAPerCm2: number("saturationCurrentMAPerCm2"),
    depletionTransitTimeNs: number("depletionTransitTimeNs"),
    bulk: z.optional(z.enum(["thick", "finite"])),
    backVelocityCmPerS: number("backVelocityCmPerS"),
    builtInVoltageV: number("builtInVoltageV"),
    transferPerS: number("transferPerS"),
    surfaceRecombinationPerS: number("surfaceRecombinationPerS"),
    helmholtzCapacitanceFPerCm2: number("helmholtzCapacitanceFPerCm2"),
  }),
  diffusion: z.strictObject({
    carrier: z.optional(z.enum(["electron", "hole"])),
    diffusionCm2PerS: number("diffusionCm2PerS"),
    lifetimeNs: number("lifetimeNs"),
    absorptionPerCm: number("absorptionPerCm"),
    thicknessNm: number("thicknessNm"),
    extractionVelocityCmPerS: numberOrNull("extractionVelocityCmPerS"),
    farVelocityCmPerS: number("farVelocityCmPerS"),
    idealityFactor: number("idealityFactor"),
  }),
  diffusionLayers: z.strictObject({
    carrier: z.optional(z.enum(["electron", "hole"])),
    extractionVelocityCmPerS: numberOrNull("extractionVelocityCmPerS"),
    farVelocityCmPerS: number("farVelocityCmPerS"),
    idealityFactor: number("idealityFactor"),
  }),
  driftDiffusion: z.strictObject({}),
};

function modelOf<Kind extends z.core.$ZodType, Overrides extends z.core.$ZodType>(kind: Kind, own: Overrides) {
  return z.strictObject({
    kind,
    absorber: number("absorber"),
    overrides: z.optional(own),
    nodes: absent(quantity("nodes")),
  });
}

const model = z.discriminatedUnion("kind", [
  modelOf(z.literal("transit"), overrides.transit),
  modelOf(z.literal("gaertner"), overrides.gaertner),
  modelOf(z.literal("diffusion"), overrides.diffusion),
  modelOf(z.literal("diffusionLayers"), overrides.diffusionLayers),
  modelOf(z.optional(z.literal("driftDiffusion")), overrides.driftDiffusion),
]);

export const modelKinds = ["transit", "gaertner", "diffusion", "diffusionLayers", "driftDiffusion"] as const;
export const techniques = ["imps", "imvs", "impedance"] as const;

export const spectrumRequestSchema = z.strictObject({
  technique: z.enum(techniques),
  bias: z.optional(biasSchema),
  fluxPerCm2S: number("fluxPerCm2S"),
});

export const scenarioSchema = z.strictObject({
  format: z.literal(formatName),
  name: z.optional(z.string()),
  stack: z.strictObject({
    temperatureK: number("temperatureK"),
    electronContact: z.optional(side),
    front: z.optional(contact),
    back: z.optional(contact),
    layers: z.array(layer).check(z.minLength(1), z.maxLength(limits.layers)),
    interfaces: z.optional(z.array(interfaceRow)),
    ionsFrozenAt: absent(z.strictObject({ bias: z.optional(biasSchema), fluxPerCm2S: number("fluxPerCm2S") })),
  }),
  light: z.strictObject({
    side: z.optional(side),
    fluxPerCm2S: quantity("fluxPerCm2S"),
    modulationDepth: number("modulationDepth"),
    wavelengthNm: absent(quantity("wavelengthNm")),
    modulationWavelengthNm: absent(quantity("modulationWavelengthNm")),
    frontReflectance: number("frontReflectance"),
    backMirrorReflectance: number("backMirrorReflectance"),
  }),
  circuit: z.optional(
    z.strictObject({
      seriesResistanceOhmCm2: number("seriesResistanceOhmCm2"),
      shuntResistanceOhmCm2: numberOrNull("shuntResistanceOhmCm2"),
      parallelCapacitanceFPerCm2: number("parallelCapacitanceFPerCm2"),
      amplifierBandwidthHz: numberOrNull("amplifierBandwidthHz"),
      sourceBandwidthHz: numberOrNull("sourceBandwidthHz"),
    }),
  ),
  model: z.optional(model),
  spectra: z.optional(z.array(spectrumRequestSchema).check(z.maxLength(limits.spectra))),
  frequencies: z.optional(
    z.strictObject({
      fromHz: number("fromHz"),
      toHz: number("toHz"),
      pointsPerDecade: number("pointsPerDecade"),
      listHz: z.optional(z.array(quantity("frequencyHz")).check(z.minLength(1), z.maxLength(limits.frequencies))),
    }),
  ),
});

/** A scenario as a person or a program writes it: fields with a default may be absent. */
export type ScenarioDocument = z.infer<typeof scenarioSchema>;
export type LayerDocument = z.infer<typeof layer>;
export type Bias = z.infer<typeof biasSchema>;
export type Side = "front" | "back";
export type Technique = (typeof techniques)[number];
export type ModelKind = (typeof modelKinds)[number];
export type TransitOverrides = z.infer<typeof overrides.transit>;
export type GaertnerOverrides = z.infer<typeof overrides.gaertner>;
export type DiffusionOverrides = z.infer<typeof overrides.diffusion>;
export type LayeredDiffusionOverrides = z.infer<typeof overrides.diffusionLayers>;
