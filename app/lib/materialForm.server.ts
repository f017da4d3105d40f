/** Reads the form of a material. Apart from its words, because the checker tries code that a page may not run. */
import { type LayerDocument, parseScenario, ScenarioError } from "@demilune/solver";
import { z } from "zod";
import { fieldKey, type MaterialValues, noSource, numberName, sourceName } from "./materialForm";
import { readQuantity } from "./quantityText";
import { newScenario, withNumber } from "./stackEdits";
import { type LayerField, layerFields, quantityOf } from "./stackFields";

/** A number as it is typed into a field; an empty one is what the field makes of it. */
const typedNumber = (field: LayerField) =>
  z
    .string()
    .optional()
    .transform((text = "", context) => {
      if (text.trim() === "" && !field.required) return undefined;
      const reading = readQuantity(text, quantityOf(field), field.emptyMeans);
      if (reading.ok) return reading.value ?? undefined;
      context.addIssue({ code: "custom", message: `${quantityOf(field).label}: ${reading.error}` });
      return z.NEVER;
    });

const sourceText = z.string().trim().max(500, "A source has at most 500 characters.").default("");

export const materialSchema = z.object({
  name: z
    .string({ error: "A name is needed." })
    .trim()
    .min(1, "A name is needed.")
    .max(200, "A name has at most 200 characters."),
  note: z.string().trim().max(2000, "A note has at most 2000 characters.").default(""),
  trapKind: z.enum(["acceptor", "donor"]).default("acceptor"),
  ...Object.fromEntries(layerFields.map((field) => [numberName(field), typedNumber(field)])),
  ...Object.fromEntries(layerFields.map((field) => [sourceName(field), sourceText])),
});

type Parsed = z.output<typeof materialSchema> & Record<string, unknown>;

/** The material of a form that was read. Values without a source are said to have none. */
export function materialOf(parsed: Parsed): MaterialValues {
  let layer = { name: parsed.name } as LayerDocument;
  const sources: Record<string, string> = {};
  for (const field of layerFields) {
    const value = parsed[numberName(field)];
    if (typeof value !== "number") continue;
    layer = withNumber(layer, field, value);
    sources[fieldKey(field)] = String(parsed[sourceName(field)] || noSource);
  }
  if (layer.traps) layer = { ...layer, traps: { ...layer.traps, kind: parsed.trapKind } };
  return { name: parsed.name, note: parsed.note, layer, sources };
}

/** What is wrong between the fields of a layer, by the name of the field in the form. */
export function layerErrors(layer: LayerDocument): Record<string, string[]> {
  const start = newScenario("");
  try {
    parseScenario({ ...start, stack: { layers: [layer] } });
    return {};
  } catch (error) {
    if (!(error instanceof ScenarioError)) throw error;
    const errors: Record<string, string[]> = {};
    for (const { path, message, allowed } of error.faults) {
      const key = path.replace("stack.layers.0.", "");
      const field = layerFields.find((one) => fieldKey(one) === key) ?? layerFields.find((one) => one.path[0] === key);
      const words = field ? quantityOf(field).label : key;
      const name = field ? numberName(field) : "name";
      errors[name] = [...(errors[name] ?? []), `${words} ${message}; allowed: ${allowed}`];
    }
    return errors;
  }
}
