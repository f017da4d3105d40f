/**
 * Free parameters of a fit: where they stand in the document, how they move, and between which bounds.
 *
 * A parameter moves in ln(value), except where the table of quantities says linear or where its value or a bound is zero
 * or negative. Tied paths keep the ratio of their start values.
 */
import { refuse } from "../scenario/errors.ts";
import { numberAt, quantityAt, tiedPaths, withNumber } from "../scenario/paths.ts";
import { permitted, type Quantity } from "../scenario/quantities.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { ScenarioDocument } from "../scenario/schema.ts";

export interface FreeParameter {
  /** As the caller wrote it; tied paths joined by "+". */
  path: string;
  /** One entry per tied path: its value is `ratio` times that of the first. */
  parts: { path: string; ratio: number }[];
  start: number;
  low: number;
  high: number;
  logarithmic: boolean;
  /** Of a parameter that moves linearly: the change that counts as large. */
  size: number;
}

export type Bounds = Readonly<Record<string, readonly [number, number]>>;

/** Default bounds: a factor this large each way. */
const defaultFactor = 1e3;

const inRange = (value: number, row: Quantity): boolean => value >= row.min && value <= row.max;

/** What a closed form derived from the stack, for overrides that the document does not give. */
export type Derived = Readonly<Record<string, number | string | null>>;

function startOf(scenario: ResolvedScenario, path: string, derived: Derived): number {
  const given = numberAt(scenario, path);
  if (given !== null) return given;
  const name = path.startsWith("model.overrides.") ? path.slice("model.overrides.".length) : "";
  const value = derived[name];
  return typeof value === "number"
    ? value
    : refuse(path, "has no number to start from", "a path whose value the document gives or the model derives");
}

/**
 * The free parameters of a fit.
 * @throws ScenarioError for a path that is no number, is named twice, has no start value, or has bounds that do not hold it.
 */
export function freeParameters(
  scenario: ResolvedScenario,
  paths: readonly string[],
  bounds: Bounds,
  derived: Derived,
): FreeParameter[] {
  const seen = new Set<string>();
  const parameters = paths.map((path) => {
    const parts = tiedPaths(path);
    for (const part of parts) {
      quantityAt(scenario, part);
      if (seen.has(part)) refuse(part, "is free twice", "each path once");
      seen.add(part);
    }
    const row = quantityAt(scenario, parts[0]);
    if (row.integer) refuse(path, "is a whole number and cannot be fitted", "a quantity that varies continuously");
    const starts = parts.map((part) => startOf(scenario, part, derived));
    const [start] = starts;
    if (parts.length > 1 && start === 0)
      refuse(path, "starts at 0, so that its ratios are not defined", "a first path whose value is not 0");
    const ratios = starts.map((value) => (parts.length > 1 ? value / start : 1));
    // every tied value has to stay within its own range
    let least = -Infinity;
    let most = Infinity;
    parts.forEach((part, k) => {
      const { min, max } = quantityAt(scenario, part);
      if (ratios[k] === 0) return;
      const ends = [min / ratios[k], max / ratios[k]].sort((a, b) => a - b);
      least = Math.max(least, ends[0]);
      most = Math.min(most, ends[1]);
    });
    const given = bounds[path];
    const [low, high] = given ?? defaultBounds(start, least, most);
    if (!(low < high) || !inRange(low, row) || !inRange(high, row))
      refuse(path, `has the bounds ${low}:${high}`, `low below high, within ${permitted(row)}`);
    if (start < low || start > high)
      refuse(path, `starts at ${start}`, `a start value within its bounds, ${low} to ${high}`);
    const logarithmic = !row.linear && low > 0;
    return {
      path,
      parts: parts.map((part, k) => ({ path: part, ratio: ratios[k] })),
      start,
      low,
      high,
      logarithmic,
      size: logarithmic ? 1 : Math.max(Math.abs(start), 1e-3 * (high - low)),
    };
  });
  for (const path of Object.keys(bounds)) {
    if (!paths.includes(path)) refuse(path, "has bounds but is not free", paths.join(", "));
  }
  return parameters;
}

function defaultBounds(start: number, least: number, most: number): [number, number] {
  if (start <= 0) return [least, most];
  return [Math.max(least, start / defaultFactor), Math.min(most, start * defaultFactor)];
}

/** From the coordinate of the minimiser to the value and back. */
export const valueAt = ({ logarithmic, size }: FreeParameter, coordinate: number): number =>
  logarithmic ? Math.exp(coordinate) : coordinate * size;
export const coordinateOf = ({ logarithmic, size }: FreeParameter, value: number): number =>
  logarithmic ? Math.log(value) : value / size;

/** The document with the values of all free parameters. */
export const withValues = (
  document: ScenarioDocument,
  parameters: readonly FreeParameter[],
  values: ArrayLike<number>,
): ScenarioDocument =>
  parameters.reduce(
    (changed, { parts }, k) =>
      parts.reduce((inner, { path, ratio }) => withNumber(inner, path, values[k] * ratio), changed),
    document,
  );
