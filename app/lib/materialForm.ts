/** The form of a material: a number and a source for each field of a layer. It is read in `materialForm.server.ts`. */
import type { LayerDocument } from "@demilune/solver";
import { typedForm } from "./quantityText";
import { type LayerField, layerFields, numberAt } from "./stackFields";

/** What stands for the source of a value that has none. */
export const noSource = "typical value, no source";

export const fieldKey = (field: LayerField): string => field.path.join(".");
/** Names in the form; without dots, which would mean nesting. */
export const numberName = (field: LayerField): string => `number-${field.path.join("-")}`;
export const sourceName = (field: LayerField): string => `source-${field.path.join("-")}`;

export interface MaterialValues {
  name: string;
  note: string;
  layer: LayerDocument;
  sources: Record<string, string>;
}

/** Texts a form begins with for a material that is kept. */
export function formTexts({ name, note, layer, sources }: MaterialValues): Record<string, string> {
  const texts: Record<string, string> = { name, note, trapKind: layer.traps?.kind ?? "acceptor" };
  for (const field of layerFields) {
    const value = numberAt(layer, field);
    if (typeof value === "number") texts[numberName(field)] = typedForm(value);
    texts[sourceName(field)] = sources[fieldKey(field)] ?? "";
  }
  return texts;
}

/** How many of a material's values name a source. */
export function countSourced(sources: Record<string, string>): { sourced: number; all: number } {
  const all = Object.values(sources);
  return { sourced: all.filter((source) => source !== noSource).length, all: all.length };
}

/** The numbers a material gives, each with its source. */
export function valuesOf({ layer, sources }: Pick<MaterialValues, "layer" | "sources">) {
  return layerFields.flatMap((field) => {
    const value = numberAt(layer, field);
    return typeof value === "number" ? [{ field, value, source: sources[fieldKey(field)] ?? noSource }] : [];
  });
}
