/** Which numbers stand under the thumb, and how a slider runs over them. */
import { type Quantity, type QuantityName, quantities, type ScenarioDocument } from "@demilune/solver";
import { fieldAt, type Keys } from "~/lib/documentNumbers";
import { layerName } from "~/lib/stackEdits";
import { layerFields } from "~/lib/stackFields";

export interface SliderNumber {
  path: string;
  keys: Keys;
  quantity: Quantity;
  /** Notation of `richText.ts`. */
  label: string;
  value: number;
}

/** Most sliders that the sheet of a phone holds. */
const most = 3;

const outside: Record<string, { quantity: QuantityName; label: string }> = {
  "light.fluxPerCm2S": { quantity: "fluxPerCm2S", label: "flux *Φ*" },
  "circuit.seriesResistanceOhmCm2": { quantity: "seriesResistanceOhmCm2", label: "series *R*_{s}" },
};

const keysOf = (path: string): Keys => path.split(".").map((key) => (/^\d+$/.test(key) ? Number(key) : key));

function describe(document: ScenarioDocument, path: string): Omit<SliderNumber, "value" | "path" | "keys"> | null {
  if (outside[path]) return { quantity: quantities[outside[path].quantity], label: outside[path].label };
  const keys = keysOf(path);
  const name = String(keys.at(-1)) as QuantityName;
  const quantity: Quantity | undefined = quantities[name];
  if (!quantity) return null;
  if (keys[0] !== "stack" || keys[1] !== "layers") return { quantity, label: quantity.label };
  const index = Number(keys[2]);
  const layer = document.stack.layers[index];
  if (!layer) return null;
  const field = layerFields.find((one) => one.path.join(".") === keys.slice(3).join("."));
  return { quantity, label: `${field?.label ?? quantity.label}, ${layerName(layer, index)}` };
}

/** The numbers at some paths of a document, as sliders; what holds no number, or zero on a logarithmic one, is left out. */
export function slidersAt(document: ScenarioDocument, paths: readonly string[]): SliderNumber[] {
  return paths
    .flatMap((path) => {
      const keys = keysOf(path);
      const value = fieldAt(document, keys);
      const words = describe(document, path);
      if (!words || typeof value !== "number" || (value <= 0 && !words.quantity.linear)) return [];
      return [{ path, keys, value, ...words }];
    })
    .slice(0, most);
}

/** What one would move first: the ions where there are some, else a lifetime; the series resistance; the light. */
export function usualPaths(document: ScenarioDocument): string[] {
  const { layers } = document.stack;
  const withIons = layers.findIndex(({ ions }) => (ions?.cationsPerCm3 ?? 0) > 0);
  const absorber = layers.findIndex(({ absorptionPerCm }) => (absorptionPerCm ?? 0) > 0);
  const lifetime = layers[absorber]?.recombination?.electronLifetimeNs;
  return [
    ...(withIons >= 0 ? [`stack.layers.${withIons}.ions.cationMobilityCm2PerVs`] : []),
    ...(withIons < 0 && typeof lifetime === "number"
      ? [`stack.layers.${absorber}.recombination.electronLifetimeNs`]
      : []),
    "circuit.seriesResistanceOhmCm2",
    "light.fluxPerCm2S",
    ...(absorber >= 0 ? [`stack.layers.${absorber}.thicknessNm`] : []),
  ];
}

/** Decades to both sides of the start that a logarithmic slider spans. */
const reach = 2;

export interface SliderScale {
  /** 0 to 1 for a value, clipped. */
  positionOf: (value: number) => number;
  valueAt: (position: number) => number;
}

/** How a slider runs: two decades to both sides of where it began, or half to twice the value of a linear quantity. */
export function scaleAround(start: number, quantity: Quantity): SliderScale {
  const clip = (value: number) => Math.min(quantity.max, Math.max(quantity.min, value));
  if (quantity.linear) {
    const span = Math.abs(start) || 1;
    const low = clip(start - span / 2);
    const high = clip(start + span);
    return {
      positionOf: (value) => Math.min(1, Math.max(0, (value - low) / (high - low))),
      valueAt: (position) => Number((low + position * (high - low)).toPrecision(3)),
    };
  }
  const low = Math.log10(clip(start / 10 ** reach) || start / 10 ** reach);
  const high = Math.log10(clip(start * 10 ** reach));
  return {
    positionOf: (value) => Math.min(1, Math.max(0, (Math.log10(value) - low) / (high - low))),
    valueAt: (position) => clip(Number((10 ** (low + position * (high - low))).toPrecision(3))),
  };
}
