/**
 * Edits of the layer stack as pure functions on the scenario document. Every edit returns a new document that shares
 * what did not change, and says in words what else moved with it. Interface velocities belong to a pair of
 * neighbouring layers: they follow the pair and are dropped, and said so, when the pair is parted.
 */
import type { LayerDocument, ScenarioDocument, Side } from "@demilune/solver";
import { quantities } from "@demilune/solver";
import { formatQuantity } from "./numberFormat";
import type { NumberField } from "./stackFields";

export interface Edit {
  document: ScenarioDocument;
  /** Where the edited layer stands now. */
  index: number;
  /** What else changed, one sentence each. */
  notes: string[];
}

export type Refusal = { refused: string };

type InterfaceDocument = NonNullable<ScenarioDocument["stack"]["interfaces"]>[number];

/** A new layer with start values; every one is a typical value without source. */
export function newLayer(name = "new layer"): LayerDocument {
  return {
    name,
    thicknessNm: 100,
    relativePermittivity: 10,
    affinityEV: 4,
    gapEV: 1.5,
    conductionStatesPerCm3: 1e19,
    valenceStatesPerCm3: 1e19,
    electronMobilityCm2PerVs: 1,
    holeMobilityCm2PerVs: 1,
  };
}

/** A scenario to start from nothing: one absorbing layer between ohmic contacts, 10¹⁷ photons cm⁻² s⁻¹. */
export function newScenario(name: string): ScenarioDocument {
  return {
    format: "demilune.scenario/1",
    name,
    stack: { layers: [{ ...newLayer("absorber"), thicknessNm: 500, absorptionPerCm: 1e4 }] },
    light: { fluxPerCm2S: 1e17 },
    spectra: [
      { technique: "imps", bias: "shortCircuit" },
      { technique: "imvs", bias: "openCircuit" },
      { technique: "impedance", bias: "openCircuit" },
    ],
  };
}

/** The name a person knows a layer by. */
export const layerName = (layer: LayerDocument, index: number): string => layer.name || `layer ${index + 1}`;

/** Give the layers a new order. `origin[i]` is the old index of the layer now at i, or null for a new one. */
function reorder(
  document: ScenarioDocument,
  layers: LayerDocument[],
  origin: (number | null)[],
  keptWith: Map<number, number>,
): { document: ScenarioDocument; notes: string[] } {
  const notes: string[] = [];
  const old = document.stack.layers;
  const interfaces: InterfaceDocument[] = [];
  for (const face of document.stack.interfaces ?? []) {
    const pair = [face.afterLayer, face.afterLayer + 1];
    const explicit = keptWith.get(face.afterLayer);
    const position =
      explicit ??
      origin.findIndex(
        (one, at) =>
          at + 1 < origin.length &&
          one !== null &&
          origin[at + 1] !== null &&
          one !== origin[at + 1] &&
          pair.includes(one) &&
          pair.includes(origin[at + 1]!),
      );
    if (position >= 0) interfaces.push({ ...face, afterLayer: position });
    else {
      notes.push(
        `The recombination velocities between ${layerName(old[pair[0]], pair[0])} and ${layerName(old[pair[1]], pair[1])} were dropped: the two are no longer neighbours.`,
      );
    }
  }
  interfaces.sort((one, other) => one.afterLayer - other.afterLayer);
  const { interfaces: _, ...stack } = document.stack;
  const next: ScenarioDocument = {
    ...document,
    stack: { ...stack, layers, ...(interfaces.length > 0 ? { interfaces } : {}) },
  };
  const absorber = document.model?.absorber;
  if (document.model && absorber !== undefined) {
    const position = origin.indexOf(absorber);
    if (position >= 0) next.model = { ...document.model, absorber: position };
    else {
      const { absorber: _gone, ...model } = document.model;
      next.model = model as ScenarioDocument["model"];
      notes.push("The model now takes its parameters from the layer that absorbs most.");
    }
  }
  return { document: next, notes };
}

/** Put a layer at a position, the others making room. Velocities at the interface it opens stay at its front face. */
export function addLayer(document: ScenarioDocument, at: number, layer: LayerDocument): Edit {
  const layers = document.stack.layers.toSpliced(at, 0, layer);
  const origin = document.stack.layers.map((_, index): number | null => index).toSpliced(at, 0, null);
  const split = (document.stack.interfaces ?? []).some((face) => face.afterLayer === at - 1);
  const edit = reorder(document, layers, origin, new Map(split ? [[at - 1, at - 1]] : []));
  if (split) edit.notes.push(`The recombination velocities stay behind ${layerName(layers[at - 1], at - 1)}.`);
  return { ...edit, index: at };
}

/** Put a copy of a layer behind it; velocities behind the layer move behind the copy. */
export function duplicateLayer(document: ScenarioDocument, index: number): Edit {
  const { layers } = document.stack;
  const copy = structuredClone(layers[index]);
  const origin = layers.map((_, position): number | null => position).toSpliced(index + 1, 0, null);
  const behind = new Map(index + 1 < layers.length ? [[index, index + 1]] : []);
  return { ...reorder(document, layers.toSpliced(index + 1, 0, copy), origin, behind), index: index + 1 };
}

/** Take a layer out. The last one is refused: a stack has at least one. */
export function deleteLayer(document: ScenarioDocument, index: number): Edit | Refusal {
  const { layers } = document.stack;
  if (layers.length === 1) return { refused: "A stack needs at least one layer." };
  const origin = layers.map((_, position) => position).toSpliced(index, 1);
  const edit = reorder(document, layers.toSpliced(index, 1), origin, new Map());
  return { ...edit, index: Math.min(index, layers.length - 2) };
}

/** Move a layer to another position. */
export function moveLayer(document: ScenarioDocument, from: number, to: number): Edit {
  const { layers } = document.stack;
  if (to < 0 || to >= layers.length || to === from) return { document, index: from, notes: [] };
  const order = layers
    .map((_, position) => position)
    .toSpliced(from, 1)
    .toSpliced(to, 0, from);
  const edit = reorder(
    document,
    order.map((position) => layers[position]),
    order,
    new Map(),
  );
  return { ...edit, index: to };
}

/** A holder with the number of a field replaced; undefined takes the field out, and an empty group with it. */
export function withNumber<Holder extends object>(
  holder: Holder,
  { path }: Pick<NumberField, "path">,
  value: number | null | undefined,
): Holder {
  const [key, inner] = path;
  const record = holder as Record<string, unknown>;
  let next: unknown = value;
  if (inner !== undefined) {
    const group: Record<string, unknown> = { ...(record[key] as object | undefined), [inner]: value };
    if (value === undefined) delete group[inner];
    next = Object.keys(group).length > 0 ? group : undefined;
  }
  if (next !== undefined) return { ...holder, [key]: next };
  const { [key]: _, ...rest } = record;
  return rest as Holder;
}

/** Replace a layer. */
export function replaceLayer(document: ScenarioDocument, index: number, layer: LayerDocument): ScenarioDocument {
  return { ...document, stack: { ...document.stack, layers: document.stack.layers.with(index, layer) } };
}

const lifetimeNames = ["electronLifetimeNs", "holeLifetimeNs"];
const lifetimeField = (name: string) => ({ path: ["recombination", name] as const });

const startIonMobility = 1e-10;
const ionMobility: Record<string, "cationMobilityCm2PerVs" | "anionMobilityCm2PerVs" | undefined> = {
  cationsPerCm3: "cationMobilityCm2PerVs",
  anionsPerCm3: "anionMobilityCm2PerVs",
};

/**
 * Set a number of a layer and what belongs to it: lifetimes come and go together, dynamic traps need both lifetimes
 * and a kind, ions need a mobility.
 */
export function setLayerNumber(
  document: ScenarioDocument,
  index: number,
  field: Pick<NumberField, "path">,
  value: number | null | undefined,
): Edit | Refusal {
  const notes: string[] = [];
  const before = document.stack.layers[index];
  let layer = withNumber(before, field, value);
  const name = field.path.at(-1)!;
  const lifetimes = (one: LayerDocument) => [
    one.recombination?.electronLifetimeNs ?? null,
    one.recombination?.holeLifetimeNs ?? null,
  ];
  if (lifetimeNames.includes(name)) {
    const other = lifetimeNames.find((one) => one !== name)!;
    const present = typeof value === "number";
    const otherValue = other === "electronLifetimeNs" ? lifetimes(layer)[0] : lifetimes(layer)[1];
    if (present && otherValue === null) {
      layer = withNumber(layer, lifetimeField(other), value);
      notes.push("The other lifetime was set to the same value: both are needed.");
    }
    if (!present) {
      if (otherValue !== null) notes.push("Both lifetimes were taken out: the layer has no SRH recombination now.");
      layer = withNumber(withNumber(layer, lifetimeField(other), undefined), lifetimeField(name), undefined);
      if (layer.traps) {
        const { traps: _, ...rest } = layer;
        layer = rest;
        notes.push("The dynamic traps were taken out with the lifetimes they need.");
      }
    }
  }
  const mobility = ionMobility[name];
  if (mobility && typeof value === "number" && value > 0 && !layer.ions?.[mobility]) {
    layer = withNumber(layer, { path: ["ions", mobility] }, startIonMobility);
    notes.push(
      `Their mobility was set to ${formatQuantity(startIonMobility, "cm²/Vs")}, a typical value without source: ions that cannot move would be doping.`,
    );
  }
  if (field.path[0] === "traps") {
    if (typeof value === "number" && value > 0) {
      if (lifetimes(before).includes(null)) return { refused: "Dynamic traps need both lifetimes: set those first." };
      layer = { ...layer, traps: { densityPerCm3: value, kind: before.traps?.kind ?? "acceptor" } };
    } else {
      const { traps: _, ...rest } = layer;
      layer = rest;
    }
  }
  return { document: replaceLayer(document, index, layer), index, notes };
}

/** Set a number of a contact. */
export function setContactNumber(
  document: ScenarioDocument,
  side: Side,
  field: Pick<NumberField, "path">,
  value: number | null | undefined | "ohmic",
): ScenarioDocument {
  const contact = withNumber(document.stack[side] ?? {}, field, value as number | undefined);
  const { [side]: _, ...stack } = document.stack;
  return {
    ...document,
    stack: Object.keys(contact).length > 0 ? { ...stack, [side]: contact } : (stack as typeof document.stack),
  };
}

/** Recombination velocities at the interface behind a layer; undefined where it has none. */
export function interfaceAfter(document: ScenarioDocument, afterLayer: number): InterfaceDocument | undefined {
  return document.stack.interfaces?.find((face) => face.afterLayer === afterLayer);
}

/** Set one velocity of an interface; the first sets both, an empty one takes the interface's recombination away. */
export function setInterfaceNumber(
  document: ScenarioDocument,
  afterLayer: number,
  field: Pick<NumberField, "path">,
  value: number | null | undefined,
): ScenarioDocument {
  const others = (document.stack.interfaces ?? []).filter((face) => face.afterLayer !== afterLayer);
  const present = interfaceAfter(document, afterLayer);
  const face =
    typeof value === "number"
      ? {
          ...(present ?? { afterLayer, electronVelocityCmPerS: value, holeVelocityCmPerS: value }),
          [field.path[0]]: value,
        }
      : undefined;
  const interfaces = face ? [...others, face].sort((one, other) => one.afterLayer - other.afterLayer) : others;
  const { interfaces: _, ...stack } = document.stack;
  return { ...document, stack: interfaces.length > 0 ? { ...stack, interfaces } : stack };
}

/** Height of each layer in a drawing: in proportion to the cube root of thickness, never below the least height. */
export function drawnHeights(thicknessesNm: readonly number[], total: number, least: readonly number[]): number[] {
  const roots = thicknessesNm.map((thickness) => Math.cbrt(Math.max(thickness, quantities.thicknessNm.min)));
  const pinned = new Set<number>();
  for (;;) {
    const free = roots.reduce((sum, root, index) => (pinned.has(index) ? sum : sum + root), 0);
    const room = total - [...pinned].reduce((sum, index) => sum + least[index], 0);
    const tooThin = roots.findIndex((root, index) => !pinned.has(index) && (root / free) * room < least[index]);
    if (tooThin < 0) return roots.map((root, index) => (pinned.has(index) ? least[index] : (root / free) * room));
    pinned.add(tooThin);
  }
}
