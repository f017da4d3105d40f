/**
 * Parameter paths: "stack.layers.1.thicknessNm", list indices from 0; several joined by "+" are tied. Sweeps, fits,
 * attribution and sliders name the numbers of a document this way; a permitted field that the document leaves out
 * may be named too.
 */
import { refuse } from "./errors.ts";
import type { Quantity } from "./quantities.ts";
import type { ResolvedScenario } from "./resolved.ts";
import { scenarioSchema } from "./schema.ts";
import { bare, below, fieldsOf, type Key, objectFor, quantityOf, type Schema, schemaAt, step } from "./walk.ts";

const keysOf = (path: string): Key[] => path.split(".").map((key) => (/^(0|[1-9]\d*)$/.test(key) ? Number(key) : key));

/** The paths that a tied path joins; one path is itself. */
export const tiedPaths = (path: string): string[] => path.split("+").map((one) => one.trim());

const valueAt = (document: unknown, keys: readonly Key[]): unknown => keys.reduce<unknown>(below, document);

/** A list index is good only where the document has that entry. */
function entriesExist(document: unknown, keys: readonly Key[]): boolean {
  return keys.every((key, k) => {
    if (typeof key !== "number") return true;
    const list = valueAt(document, keys.slice(0, k));
    return Array.isArray(list) && key < list.length;
  });
}

/**
 * Row of the table of quantities of the number at one path (not tied) of a document.
 *
 * @throws ScenarioError where the document may not have a number there.
 */
export function quantityAt(document: unknown, path: string): Quantity {
  const keys = keysOf(path);
  const schema = schemaAt(scenarioSchema, document, keys);
  const row = schema && quantityOf(schema);
  if (!row || !entriesExist(document, keys))
    refuse(path || "path", "names no number of this scenario", `a dotted path such as ${examplePath}`);
  return row;
}

const examplePath = "stack.layers.0.thicknessNm";

/**
 * The number at one path (not tied), default applied; null where it stands for "none", where the text "ohmic" stands,
 * or where an override is not given and so derived from the stack.
 *
 * @throws ScenarioError where the scenario may not have a number there.
 */
export function numberAt(scenario: ResolvedScenario, path: string): number | null {
  quantityAt(scenario, path);
  const value = valueAt(scenario, keysOf(path));
  return typeof value === "number" ? value : null;
}

function withValue(container: unknown, keys: readonly Key[], value: number): unknown {
  const [key, ...rest] = keys;
  if (key === undefined) return value;
  const inner = withValue(below(container, key), rest, value);
  if (Array.isArray(container)) return container.with(Number(key), inner);
  return { ...(typeof container === "object" ? container : {}), [key]: inner };
}

/**
 * A copy of the document with one value at a path, or at every one of tied paths. The copy is not yet checked: pass it
 * to `parseScenario`.
 *
 * @throws ScenarioError where the document may not have a number at a path.
 */
export function withNumber<Document>(document: Document, path: string, value: number): Document {
  return tiedPaths(path).reduce((changed, one) => {
    quantityAt(changed, one);
    return withValue(changed, keysOf(one), value) as Document;
  }, document);
}

export interface Parameter {
  path: string;
  /** Words with the place: "thickness (absorber)". */
  label: string;
  quantity: Quantity;
  /** Default applied; null as in `numberAt`. */
  value: number | null;
}

function placeOf(scenario: ResolvedScenario, keys: readonly Key[]): string | undefined {
  const [part, list, index] = keys;
  if (part === "stack" && list === "layers" && typeof index === "number")
    return scenario.stack.layers[index].name || `layer ${index + 1}`;
  if (part === "stack" && list === "interfaces" && typeof index === "number")
    return `behind layer ${scenario.stack.interfaces[index].afterLayer + 1}`;
  if (part === "stack" && (list === "front" || list === "back")) return `${list} contact`;
  if (part === "stack" && list === "ionsFrozenAt") return "where the ions were left";
  return part === "spectra" ? `spectrum ${Number(list) + 1}` : undefined;
}

/** "thickness (absorber)": the words of a quantity with the place where it stands. */
function labelOf(scenario: ResolvedScenario, keys: readonly Key[], quantity: Quantity): string {
  const place = placeOf(scenario, keys);
  return place ? `${quantity.label} (${place})` : quantity.label;
}

function collect(
  schema: Schema,
  value: unknown,
  keys: readonly Key[],
  visit: (keys: readonly Key[], row: Quantity) => void,
) {
  const row = quantityOf(schema);
  const overrides = keys.join(".").startsWith("model.overrides.");
  if (row && (typeof value === "number" || value === null || overrides)) return visit(keys, row);
  if (Array.isArray(value)) {
    for (const [k, entry] of value.entries()) {
      const element = step(schema, value, k);
      if (element) collect(element, entry, [...keys, k], visit);
    }
    return;
  }
  if (typeof value !== "object" || value === null) return;
  for (const [key, field] of Object.entries(fieldsOf(objectFor(schema, value) ?? bare(schema))))
    collect(field, below(value, key), [...keys, key], visit);
}

/** Every number of a scenario in the order of the document, overrides of its model that are not given included. */
export function parametersOf(scenario: ResolvedScenario): Parameter[] {
  const parameters: Parameter[] = [];
  collect(scenarioSchema, scenario, [], (keys, quantity) => {
    const path = keys.join(".");
    parameters.push({ path, label: labelOf(scenario, keys, quantity), quantity, value: numberAt(scenario, path) });
  });
  return parameters;
}

/**
 * One parameter by its path; for tied paths the label joins theirs and quantity and value are those of the first.
 *
 * @throws ScenarioError where the scenario may not have a number at a path.
 */
export function parameterAt(scenario: ResolvedScenario, path: string): Parameter {
  const parts = tiedPaths(path).map((one) => ({ one, quantity: quantityAt(scenario, one) }));
  const labels = parts.map(({ one, quantity }) => labelOf(scenario, keysOf(one), quantity));
  return { path, label: labels.join(" + "), quantity: parts[0].quantity, value: numberAt(scenario, parts[0].one) };
}
