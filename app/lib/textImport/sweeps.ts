/** One table to spectra: columns that belong together, and sweeps of the frequency one after the other. */
import type { Column } from "./roles";
import type { DataTable } from "./table";

/** Columns of one spectrum, as positions in the table's `values`. */
export interface SpectrumColumns {
  frequency: number;
  kind: "cartesian" | "polar";
  /** Real part or modulus. */
  first: number;
  /** Imaginary part or phase. */
  second: number;
  minusImaginary: boolean;
  sigma: number | null;
  time: number | null;
}

type Partial = { -readonly [Key in "real" | "imaginary" | "modulus" | "phase" | "sigma" | "time"]?: number } & {
  minusImaginary?: boolean;
};

function complete(frequency: number, parts: Partial): SpectrumColumns | null {
  const rest = { frequency, sigma: parts.sigma ?? null, time: parts.time ?? null };
  if (parts.real !== undefined && parts.imaginary !== undefined) {
    return {
      ...rest,
      kind: "cartesian",
      first: parts.real,
      second: parts.imaginary,
      minusImaginary: !!parts.minusImaginary,
    };
  }
  if (parts.modulus !== undefined && parts.phase !== undefined) {
    return { ...rest, kind: "polar", first: parts.modulus, second: parts.phase, minusImaginary: false };
  }
  return null;
}

/**
 * Groups columns from left to right: a frequency opens a group, a role that the group has already opens a further one
 * that shares the frequency. Columns in front of the first frequency belong to it.
 */
export function groupColumns(columns: readonly Column[]): SpectrumColumns[] {
  const found: SpectrumColumns[] = [];
  const firstFrequency = columns.findIndex((column) => column.role === "frequency");
  if (firstFrequency < 0) return found;
  let frequency = firstFrequency;
  let parts: Partial = {};
  const close = () => {
    const set = complete(frequency, parts);
    if (set) found.push(set);
    parts = {};
  };
  columns.forEach((column, at) => {
    if (column.role === "notUsed") return;
    if (column.role === "frequency") {
      if (at !== firstFrequency) {
        close();
        frequency = at;
      }
      return;
    }
    const role = column.role === "minusImaginary" ? "imaginary" : column.role;
    if (parts[role] !== undefined && role !== "time") close();
    parts[role] = at;
    if (column.role === "minusImaginary") parts.minusImaginary = true;
  });
  close();
  return found;
}

/** Rows of one sweep in the order of the file. */
export interface Sweep {
  rows: number[];
  /** Lines of text directly in front of it, within the block. */
  textBefore: number[];
}

export interface SweepSplit {
  sweeps: Sweep[];
  /** Rows left out because a value is missing or the frequency is not above zero. */
  unusable: number[];
  direction: "up" | "down" | "mixed";
}

function median(values: number[]): number {
  values.sort((first, second) => first - second);
  return values[Math.floor(values.length / 2)] ?? 0;
}

/**
 * Splits where the frequency starts again: a step back that is much larger than the usual step, or any step back
 * after a line of text. A sweep that turns round in place (up, then down) stays one.
 */
export function splitSweeps(table: DataTable, set: SpectrumColumns): SweepSplit {
  const frequency = table.values[set.frequency];
  const first = table.values[set.first];
  const second = table.values[set.second];
  const unusable: number[] = [];
  const rows: number[] = [];
  for (let row = 0; row < frequency.length; row++) {
    const empty = Number.isNaN(frequency[row]) && Number.isNaN(first[row]) && Number.isNaN(second[row]);
    if (frequency[row] > 0 && Number.isFinite(first[row]) && Number.isFinite(second[row])) rows.push(row);
    // A shorter block beside a longer one simply ends: rows empty in all three are none of its rows.
    else if (!empty || table.values.length <= 4) unusable.push(row);
  }
  const steps: number[] = [];
  for (let at = 1; at < rows.length; at++) steps.push(Math.log(frequency[rows[at]] / frequency[rows[at - 1]]));
  const up = steps.filter((step) => step > 0).length;
  const down = steps.filter((step) => step < 0).length;
  const direction =
    up === 0 && down === 0
      ? "mixed"
      : up > 0 && down > 0 && Math.min(up, down) > 0.2 * (up + down)
        ? "mixed"
        : up >= down
          ? "up"
          : "down";
  const sense = up >= down ? 1 : -1;
  const usual = median(steps.map(Math.abs).filter((step) => step > 0));
  const jump = Math.max(3 * usual, Math.log(1.5));
  const sectionStarts = new Map(table.sections.map((section) => [section.firstRow, section.textBefore]));
  const sweeps: Sweep[] = [];
  let text: number[] = [];
  let previous = -1;
  for (const row of rows) {
    for (let between = previous + 1; between <= row; between++) text.push(...(sectionStarts.get(between) ?? []));
    const step = previous < 0 ? 0 : sense * Math.log(frequency[row] / frequency[previous]);
    const restarts = previous < 0 || step < -jump || (text.length > 0 && step < 0);
    if (restarts) {
      sweeps.push({ rows: [row], textBefore: text });
      text = [];
    } else sweeps[sweeps.length - 1].rows.push(row);
    if (!restarts && text.length > 0) text = [];
    previous = row;
  }
  // Rows in no order at all are one spectrum.
  if (sweeps.length > 2 && sweeps.length > rows.length / 4) {
    return { sweeps: [{ rows, textBefore: [] }], unusable, direction: "mixed" };
  }
  return { sweeps, unusable, direction };
}

/** Whether two sweeps went through the same frequencies. */
export function sameFrequencies(frequency: Float64Array, first: Sweep, second: Sweep): boolean {
  return (
    first.rows.length === second.rows.length &&
    first.rows.every((row, at) => Math.abs(frequency[row] / frequency[second.rows[at]] - 1) < 1e-6)
  );
}

/** A column not otherwise used that stays put within each sweep and differs between them: it names the sweeps. */
export function distinguishingColumn(
  table: DataTable,
  columns: readonly Column[],
  sweeps: readonly Sweep[],
): number | null {
  for (let at = 0; at < columns.length; at++) {
    if (columns[at].role !== "notUsed") continue;
    const values = table.values[at];
    const spans = sweeps.map(({ rows }) => {
      let low = Number.POSITIVE_INFINITY;
      let high = Number.NEGATIVE_INFINITY;
      for (const row of rows) {
        low = Math.min(low, values[row]);
        high = Math.max(high, values[row]);
      }
      return { mean: (low + high) / 2, width: high - low };
    });
    const differs = spans.every(
      (span, index) =>
        index === 0 || Math.abs(span.mean - spans[index - 1].mean) > 10 * Math.max(span.width, spans[index - 1].width),
    );
    if (differs && spans.every((span) => Number.isFinite(span.mean))) return at;
  }
  return null;
}
