/** The table of layers as a form: cells by name, read into a scenario document on the server. */
import type { ScenarioDocument } from "@demilune/solver";
import { readQuantity } from "./quantityText";
import { interfaceAfter, setInterfaceNumber, setLayerNumber } from "./stackEdits";
import { interfaceFields, layerFields, type NumberField, numberAt, quantityOf } from "./stackFields";

export type RefusedCells = Record<string, { text: string; error: string }>;

/** Path keys of a cell's name from its index on: ["0", "recombination", "trapDepthEV"]. */
const keysBehind = (name: string, prefix: string): string[] | null =>
  name.startsWith(prefix) ? name.slice(prefix.length).split(".") : null;

const fieldFor = (fields: readonly NumberField[], keys: readonly string[]): NumberField | undefined =>
  fields.find((field) => field.path.join(".") === keys.join("."));

const same = (one: number | null | undefined, other: number | null | undefined): boolean =>
  (one ?? null) === (other ?? null);

/**
 * The document with every cell that differs from it taken over; cells that cannot be read come back as typed with
 * their reason. Layer names are taken as they are.
 */
export function readStackForm(
  start: ScenarioDocument,
  form: FormData,
): { document: ScenarioDocument; refused: RefusedCells } {
  const refused: RefusedCells = {};
  let document = start;
  for (const [name, entry] of form) {
    const text = String(entry);
    const layerKeys = keysBehind(name, "stack.layers.");
    const interfaceKeys = keysBehind(name, "interfaces.");
    const [indexText, ...keys] = layerKeys ?? interfaceKeys ?? [];
    const index = Number(indexText);
    const layer = start.stack.layers[index];
    if (indexText === undefined || layer === undefined) continue;
    if (layerKeys && keys.join(".") === "name") {
      if ((layer.name ?? "") !== text)
        document = {
          ...document,
          stack: {
            ...document.stack,
            layers: document.stack.layers.with(index, { ...document.stack.layers[index], name: text }),
          },
        };
      continue;
    }
    const field = fieldFor(layerKeys ? layerFields : interfaceFields, keys);
    if (!field) continue;
    const before = layerKeys ? numberAt(layer, field) : numberAt(interfaceAfter(start, index), field);
    const reading = readQuantity(text, quantityOf(field), field.emptyMeans);
    if (!reading.ok) {
      refused[name] = { text, error: reading.error };
      continue;
    }
    if (same(reading.value, before)) continue;
    if (interfaceKeys) {
      document = setInterfaceNumber(document, index, field, reading.value);
      continue;
    }
    const edit = setLayerNumber(document, index, field, reading.value);
    if ("refused" in edit) refused[name] = { text, error: edit.refused };
    else document = edit.document;
  }
  return { document, refused };
}
