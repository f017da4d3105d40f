/**
 * The numbers of a stack in the order and groups in which they are shown, typed and pasted: one row per field of the
 * scenario document. Ranges and units come from the solver's table.
 */
import { type LayerDocument, type Quantity, type QuantityName, quantities } from "@demilune/solver";

export const layerGroups = ["Layer", "Carriers", "Recombination and traps", "Mobile ions"] as const;
type LayerGroup = (typeof layerGroups)[number];

export interface NumberField {
  /** Keys from the layer (contact, interface) to the number. */
  path: readonly [string] | readonly [string, string];
  quantity: QuantityName;
  /** Short name on a number list, in the notation of `richText.ts`. */
  label: string;
  /** What an empty field means where that follows from other fields. */
  emptyMeans?: string;
}

export interface LayerField extends NumberField {
  group: LayerGroup;
  /** The document must hold it. */
  required?: true;
}

const layer = (field: QuantityName & keyof LayerDocument, label: string): LayerField => ({
  group: "Layer",
  path: [field],
  quantity: field,
  label,
  required: true,
});
const carriers = (field: QuantityName & keyof LayerDocument, label: string): LayerField => ({
  ...layer(field, label),
  group: "Carriers",
});
const recombination = (field: QuantityName, label: string): LayerField => ({
  group: "Recombination and traps",
  path: ["recombination", field],
  quantity: field,
  label,
});
const ions = (field: QuantityName, label: string): LayerField => ({
  group: "Mobile ions",
  path: ["ions", field],
  quantity: field,
  label,
});
const optional = (field: LayerField): LayerField => {
  const { required: _, ...rest } = field;
  return rest;
};

/** Every number of a layer. */
export const layerFields: readonly LayerField[] = [
  layer("thicknessNm", "thickness *t*"),
  layer("relativePermittivity", "permittivity *ε*_{r}"),
  layer("affinityEV", "affinity *χ*"),
  layer("gapEV", "gap *E*_{g}"),
  optional(layer("absorptionPerCm", "absorption *α*")),
  {
    ...optional(layer("modulationAbsorptionPerCm", "*α* modulated")),
    emptyMeans: "as the absorption coefficient",
  },
  optional(layer("carrierYield", "yield *η*")),
  carriers("electronMobilityCm2PerVs", "*µ*_{n}"),
  carriers("holeMobilityCm2PerVs", "*µ*_{p}"),
  carriers("conductionStatesPerCm3", "*N*_{c}"),
  carriers("valenceStatesPerCm3", "*N*_{v}"),
  optional(carriers("donorsPerCm3", "donors *N*_{D}")),
  optional(carriers("acceptorsPerCm3", "acceptors *N*_{A}")),
  recombination("electronLifetimeNs", "*τ*_{n}"),
  recombination("holeLifetimeNs", "*τ*_{p}"),
  { ...recombination("trapDepthEV", "trap depth"), emptyMeans: "half the gap" },
  recombination("radiativeCm3PerS", "radiative *B*"),
  recombination("augerElectronCm6PerS", "Auger *C*_{n}"),
  recombination("augerHoleCm6PerS", "Auger *C*_{p}"),
  {
    group: "Recombination and traps",
    path: ["traps", "densityPerCm3"],
    quantity: "densityPerCm3",
    label: "traps *N*_{t}",
    emptyMeans: "none",
  },
  ions("cationsPerCm3", "cations"),
  ions("cationMobilityCm2PerVs", "*µ* of cations"),
  ions("anionsPerCm3", "anions"),
  ions("anionMobilityCm2PerVs", "*µ* of anions"),
];

export const contactFields: readonly NumberField[] = [
  { path: ["electronVelocityCmPerS"], quantity: "electronVelocityCmPerS", label: "*S*_{n}" },
  { path: ["holeVelocityCmPerS"], quantity: "holeVelocityCmPerS", label: "*S*_{p}" },
];

export const interfaceFields: readonly NumberField[] = [
  {
    path: ["electronVelocityCmPerS"],
    quantity: "interfaceElectronVelocityCmPerS",
    label: "*S*_{n}",
    emptyMeans: "none",
  },
  {
    path: ["holeVelocityCmPerS"],
    quantity: "interfaceHoleVelocityCmPerS",
    label: "*S*_{p}",
    emptyMeans: "none",
  },
];

/** The row of the solver's table a field reads its unit and range from. */
export const quantityOf = (field: NumberField): Quantity => quantities[field.quantity];

/** The number of a field in a layer, contact or interface; undefined where it is left to its default. */
export function numberAt(holder: object | undefined, field: NumberField): number | null | undefined {
  let value: unknown = holder;
  for (const key of field.path) value = (value as Record<string, unknown> | undefined)?.[key];
  return value as number | null | undefined;
}

/** The number the solver would use where the field is left empty; undefined where nothing can be said. */
export function defaultOf(layerDocument: LayerDocument, field: NumberField): number | null | undefined {
  if (field.quantity === "modulationAbsorptionPerCm") return layerDocument.absorptionPerCm ?? 0;
  if (field.quantity === "trapDepthEV") return layerDocument.gapEV / 2;
  return quantityOf(field).default;
}

/** Whether a number is left to its default, or says the same. */
export const isUsual = (value: unknown, { default: usual }: Quantity): boolean =>
  value === undefined || value === usual;
