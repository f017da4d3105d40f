/** Looks into the scenario schema: which part of it belongs to a path of a document, and what it allows in words. */
import type * as z from "zod/mini";
import { permitted, type Quantity, quantities } from "./quantities.ts";
import { quantityRegistry } from "./schema.ts";

export type Schema = z.core.$ZodType;
type Definition = z.core.$ZodTypes["_zod"]["def"];

export type Key = string | number;

const definition = (schema: Schema) => schema._zod.def as Definition;

/** The schema without its "may be absent" and "may be null". */
export function bare(schema: Schema): Schema {
  const def = definition(schema);
  return def.type === "optional" || def.type === "nullable" ? bare(def.innerType) : schema;
}

/** The fields of an object schema; empty for anything else. */
export function fieldsOf(schema: Schema): Readonly<Record<string, Schema>> {
  const def = definition(bare(schema));
  return def.type === "object" ? def.shape : {};
}

/** Row of the table of quantities for a number of the schema. */
export function quantityOf(schema: Schema): Quantity | undefined {
  const def = definition(schema);
  if (def.type === "union") return def.options.map(quantityOf).find((row) => row !== undefined);
  if (def.type === "optional" || def.type === "nullable") return quantityOf(def.innerType);
  const name = quantityRegistry.get(schema as z.ZodMiniType)?.quantity;
  return name && quantities[name];
}

/** The object that a value is checked as: in a union by its discriminator, else the union's only object. */
export function objectFor(schema: Schema, value: unknown): Schema | undefined {
  const def = definition(bare(schema));
  if (def.type !== "union") return bare(schema);
  if (!("discriminator" in def)) return def.options.find((option) => definition(option).type === "object");
  const name = def.discriminator as string;
  const tag = below(value, name);
  return def.options.find((option) => option._zod.propValues?.[name]?.has(tag as undefined));
}

/** The schema one step below, for the value that stands there (a union's fields depend on it). */
export function step(schema: Schema, value: unknown, key: Key): Schema | undefined {
  const object = objectFor(schema, value);
  if (!object) return undefined;
  const def = definition(object);
  if (def.type === "array") return typeof key === "number" ? def.element : undefined;
  const fields = fieldsOf(object);
  return Object.hasOwn(fields, key) ? fields[key] : undefined;
}

/** The value one step below, undefined where there is none. */
export function below(value: unknown, key: Key): unknown {
  return typeof value === "object" && value !== null && Object.hasOwn(value, key) ? Reflect.get(value, key) : undefined;
}

/** The schema at a path of a document; undefined where the document may have nothing there. */
export function schemaAt(root: Schema, document: unknown, path: readonly Key[]): Schema | undefined {
  let schema: Schema | undefined = root;
  let value = document;
  for (const key of path) {
    schema = schema && step(schema, value, key);
    value = below(value, key);
  }
  return schema;
}

/** What a schema allows, in words. */
export function allowedBy(schema: Schema): string {
  const def = definition(schema);
  const row = quantityOf(schema);
  switch (def.type) {
    case "optional":
      return allowedBy(def.innerType);
    case "nullable":
      return row?.nullMeans ? permitted(row) : `${allowedBy(def.innerType)}, or null`;
    case "number":
      return row ? permitted({ ...row, nullMeans: undefined }) : "a number";
    case "string":
      return "a text";
    case "literal":
      return def.values.map((value) => JSON.stringify(value)).join(", ");
    case "enum":
      return Object.values(def.entries)
        .map((value) => JSON.stringify(value))
        .join(", ");
    case "array":
      return "a list";
    case "object": {
      const names = Object.keys(def.shape);
      return names.length === 0 ? "an empty object" : `an object of ${names.join(", ")}`;
    }
    case "union":
      if ("discriminator" in def) return "an object with kind, absorber, overrides and nodes";
      return def.options.map(allowedBy).join(", or ");
    default:
      return "a value of another type";
  }
}
