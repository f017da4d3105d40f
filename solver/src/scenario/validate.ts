/** From a value of unknown origin to a scenario document, or every fault in it with its path. */
import type * as z from "zod/mini";
import { type Fault, ScenarioError } from "./errors.ts";
import { modelKinds, type ScenarioDocument, scenarioSchema } from "./schema.ts";
import { allowedBy, bare, below, fieldsOf, type Key, objectFor, quantityOf, type Schema, schemaAt } from "./walk.ts";

type Issue = z.core.$ZodIssue;

/** What stands for the whole document where a path would be empty. */
const wholeDocument = "document";

/** A key as it stands in a path, in quotes where a plain one could be misread. */
const keyText = (key: PropertyKey): string =>
  /^[^\s."]+$/.test(String(key)) ? String(key) : JSON.stringify(String(key));

const dotted = (path: readonly PropertyKey[]): string =>
  path.length === 0 ? wholeDocument : path.map(keyText).join(".");

/** A value as it is quoted in a message, cut where it is long. */
function quoted(value: unknown): string {
  if (Array.isArray(value)) return "a list";
  if (typeof value === "object" && value !== null) return "an object";
  const text = typeof value === "string" ? JSON.stringify(value) : String(value);
  return text.length > 60 ? `${text.slice(0, 60)}…` : text;
}

const keysOf = (path: readonly PropertyKey[]): Key[] =>
  path.map((key) => (typeof key === "number" ? key : String(key)));

/** The model whose overrides have this name, if another than the document's has it. */
function modelWithOverride(name: string): string | undefined {
  return modelKinds.find((kind) => {
    const overrides = schemaAt(scenarioSchema, { model: { kind } }, ["model", "overrides"]);
    return overrides && Object.hasOwn(fieldsOf(overrides), name);
  });
}

function unknownField(parent: Schema | undefined, path: readonly Key[], name: string): Fault {
  const names = parent ? Object.keys(fieldsOf(parent)) : [];
  const owner = path.join(".") === "model.overrides" ? modelWithOverride(name) : undefined;
  return {
    path: dotted([...path, name]),
    message: owner ? `is an override of the model ${owner}` : "is not a field of the scenario",
    allowed: names.length > 0 ? names.join(", ") : "no fields here",
  };
}

function listLength(issue: Extract<Issue, { code: "too_big" | "too_small" }>, value: unknown): Omit<Fault, "path"> {
  const length = Array.isArray(value) ? value.length : 0;
  const allowed = issue.code === "too_big" ? `at most ${issue.maximum} entries` : `at least ${issue.minimum} entry`;
  return { message: `has ${length} entries`, allowed };
}

function valueFault(schema: Schema | undefined, value: unknown): Omit<Fault, "path"> {
  const allowed = schema ? allowedBy(schema) : "another value";
  if (value === undefined) return { message: "is missing", allowed };
  const row = schema && quantityOf(schema);
  const unit = row && row.unit !== "1" && typeof value === "number" ? ` ${row.unit}` : "";
  const note = schema && typeof value !== "number" && bare(schema)._zod.def.type === "number" ? ", not a number" : "";
  return { message: `is ${quoted(value)}${unit}${note}`, allowed };
}

/** Faults of one issue of the schema; an issue about several unknown fields gives one each. */
function faultsOf(issue: Issue, document: unknown, base: readonly Key[] = []): Fault[] {
  const path = [...base, ...keysOf(issue.path)];
  const schema = schemaAt(scenarioSchema, document, path);
  const value = path.reduce<unknown>(below, document);
  switch (issue.code) {
    case "unrecognized_keys":
      return issue.keys.map((name) => unknownField(schema && objectFor(schema, value), path, name));
    case "too_big":
    case "too_small":
      return [{ path: dotted(path), ...listLength(issue, value) }];
    case "invalid_union": {
      if ("discriminator" in issue)
        return [{ path: dotted(path), message: `is ${quoted(value)}`, allowed: modelKinds.join(", ") }];
      const insideObject = (branch: Issue[]) =>
        branch.length > 0 && branch.every(({ path, code }) => path.length > 0 || code === "unrecognized_keys");
      const branch = issue.errors.find(insideObject);
      if (branch) return branch.flatMap((inner) => faultsOf(inner, document, path));
    }
  }
  return [{ path: dotted(path), ...valueFault(schema, value) }];
}

/**
 * Check shapes and ranges of a document.
 *
 * @throws ScenarioError with every fault found; conditions between fields are `conditions.ts`.
 */
export function parseDocument(input: unknown): ScenarioDocument {
  const parsed = scenarioSchema.safeParse(input);
  if (parsed.success) return parsed.data;
  throw new ScenarioError(parsed.error.issues.flatMap((issue) => faultsOf(issue, input)));
}
