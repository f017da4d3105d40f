/** What each column is, from its name, its unit, and where there are no names from its numbers. */
import type { Heading } from "./headings";
import type { ColumnRole, ImportSettings } from "./settings";
import { hasDimensions, parseUnit, type Unit } from "./units";

export interface Column {
  /** Column number of the file, from 0. */
  index: number;
  name: string;
  role: ColumnRole;
  /** As written or chosen; null where nothing says it. */
  unit: string | null;
  reason: string;
}

const rules: readonly [RegExp, ColumnRole][] = [
  [/^(?:f|freq\w*|frequenz|ν|nu|ω|omega|angular freq\w*|lo?g.?f(?:req\w*)?)$/, "frequency"],
  [/freq/, "frequency"],
  [/sigma|σ|std|stdev|uncert|standard dev|standard error|^error|^err\b/, "sigma"],
  [/^t$|^time|^zeit|elapsed/, "time"],
  [/^(?:\|.*\||.*\bmod(?:ulus)?\b.*|.*magn.*|.*ampl.*|.*\bgain\b.*|abs\b.*|r|betrag.*)$/, "modulus"],
  [/phase|phi|φ|ϕ|theta|θ|\barg\b|angle|winkel/, "phase"],
  [
    /^[-−]\s*\(?(?:im|z(?:''|"|″|_?im)|[a-z]*''|[a-z]*″|imag)|^(?:minus|neg(?:ative)?)[\s_.-]*(?:im|z'')/,
    "minusImaginary",
  ],
  [/(?:^|[^a-z])im(?:ag\w*)?(?:[^a-z]|$)|im$|imag|''|"|″|quadrature|out.of.phase|^y$/, "imaginary"],
  [/(?:^|[^a-z])re(?:al\w*)?(?:[^a-z]|$)|re$|real|'|′|in.?phase|^x$/, "real"],
];

const plainName = (name: string) =>
  name.trim().toLowerCase().replaceAll("’", "'").replaceAll("´", "'").replaceAll("`", "'");

function roleOfName(name: string): ColumnRole | null {
  const plain = plainName(name);
  return rules.find(([pattern]) => pattern.test(plain))?.[1] ?? null;
}

function fromHeading(heading: Heading): { role: ColumnRole; reason: string } | null {
  const unit = heading.unit === null ? null : parseUnit(heading.unit);
  if (unit && (unit.scale === "degree" || unit.scale === "radian")) {
    return { role: "phase", reason: "an angle by its unit" };
  }
  const named = roleOfName(heading.name);
  if (named === "phase" && unit && unit.scale !== "linear") return { role: "phase", reason: "from the heading" };
  if (named) return { role: named, reason: "from the heading" };
  if (unit && isFrequency(unit)) return { role: "frequency", reason: "a frequency by its unit" };
  if (unit?.scale === "decibel") return { role: "modulus", reason: "decibels are a modulus" };
  if (unit && hasDimensions(unit, [0, 0, 0, 1]) && unit.scale === "linear")
    return { role: "time", reason: "a time by its unit" };
  return null;
}

const isFrequency = (unit: Unit) => hasDimensions(unit, [0, 0, 0, -1]);

/** Strictly ascending in equal steps, as sampled time is. */
export function evenSteps(values: Float64Array): boolean {
  const step = (values[values.length - 1] - values[0]) / (values.length - 1);
  if (!(step > 0)) return false;
  for (let row = 1; row < values.length; row++) {
    if (Math.abs(values[row] - values[row - 1] - step) > 0.05 * step) return false;
  }
  return true;
}

/** Geometric steps over more than a factor of five, all positive: what a frequency column looks like. */
function looksLikeFrequency(values: Float64Array): boolean {
  if (evenSteps(values)) return false;
  let low = Number.POSITIVE_INFINITY;
  let high = 0;
  let turns = 0;
  let steps = 0;
  let direction = 0;
  let even = 0;
  let previousRatio = 0;
  const rows = Math.min(values.length, 2000);
  for (let row = 0; row < rows; row++) {
    const value = values[row];
    if (!(value > 0)) return false;
    low = Math.min(low, value);
    high = Math.max(high, value);
    if (row === 0) continue;
    const ratio = Math.log(value / values[row - 1]);
    if (ratio === 0) continue;
    steps++;
    if (direction !== 0 && Math.sign(ratio) !== direction) turns++;
    direction = Math.sign(ratio);
    if (Math.abs(ratio - previousRatio) < 0.2 * Math.abs(ratio)) even++;
    previousRatio = ratio;
  }
  return steps >= 2 && high > 5 * low && turns <= steps / 8 && even >= steps / 3;
}

function looksLikeDegrees(values: Float64Array, modulus: Float64Array): boolean {
  let widest = 0;
  let positive = true;
  for (let row = 0; row < values.length; row++) {
    if (Math.abs(values[row]) > widest) widest = Math.abs(values[row]);
    if (modulus[row] <= 0) positive = false;
  }
  return positive && widest > 2 * Math.PI && widest <= 360;
}

/** Names that say nothing. */
const unnamed = /^(?:|x|y|z|col(?:umn)?\s*\d*|c\d+|\d+)$/i;

/** Roles for a table without headings, or whose headings name nothing known. */
function fromNumbers(columns: Column[], values: readonly Float64Array[]): void {
  if (!columns.some((column) => column.role === "frequency")) {
    const found = columns.findIndex(
      (column, index) =>
        column.role === "notUsed" &&
        unnamed.test(column.name) &&
        column.unit === null &&
        looksLikeFrequency(values[index]),
    );
    if (found < 0) return;
    columns[found] = { ...columns[found], role: "frequency", reason: "positive, in even steps of its logarithm" };
  }
  if (columns.some(({ role }) => role !== "frequency" && role !== "notUsed" && role !== "time")) return;
  const start = columns.findIndex((column) => column.role === "frequency") + 1;
  const next = columns.slice(start).filter((column) => column.role === "notUsed" && column.name === "");
  if (next.length < 2) return;
  const [first, second] = next.map((column) => columns.indexOf(column));
  const polar = looksLikeDegrees(values[second], values[first]);
  columns[first] = {
    ...columns[first],
    role: polar ? "modulus" : "real",
    reason: "no heading; first column after the frequency",
  };
  columns[second] = {
    ...columns[second],
    role: polar ? "phase" : "imaginary",
    unit: polar ? "deg" : null,
    reason: polar
      ? "no heading; values as of an angle beside a positive column"
      : "no heading; second column after the frequency",
  };
}

/** Assigns a role and a unit to each column; what a person chose stands. */
export function assignRoles(
  indices: readonly number[],
  headings: readonly Heading[],
  values: readonly Float64Array[],
  chosen: ImportSettings["columns"],
): Column[] {
  const columns = indices.map((index, at): Column => {
    const found = fromHeading(headings[at]);
    return {
      index,
      name: headings[at].name,
      unit: headings[at].unit,
      role: found?.role ?? "notUsed",
      reason: found?.reason ?? (headings[at].name === "" ? "no heading" : "the heading names nothing that is needed"),
    };
  });
  // X and Y are a lock-in amplifier's names for the two parts only beside a frequency.
  if (!columns.some(({ role }) => role === "frequency")) {
    columns.forEach((column, at) => {
      if (/^[xy]$/i.test(column.name)) columns[at] = { ...column, role: "notUsed", reason: "the heading says nothing" };
    });
  }
  fromNumbers(columns, values);
  return columns.map((column) => {
    const choice = chosen?.[String(column.index)];
    if (!choice) return column;
    return {
      ...column,
      role: choice.role ?? column.role,
      unit: choice.unit ?? column.unit,
      reason: choice.role ? "chosen by you" : column.reason,
    };
  });
}
