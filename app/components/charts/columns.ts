/** The numbers behind a plot: columns for its table, its CSV file, its spoken readout and its summary. */
import { formatQuantity, formatUnit } from "~/lib/numberFormat";
import { plainText } from "~/lib/richText";
import type { Series } from "./series";

export interface Column {
  /** Notation of `richText.ts`. */
  label: string;
  unit: string;
  value: (series: Series, index: number) => number;
}

/** "quantity / unit", the way axes and table heads are labelled; pure numbers stand alone. */
export function labelled(label: string, unit: string, exponent = 0): string {
  const printed = formatUnit(unit);
  const power = exponent === 0 ? "" : `10^{${String(exponent).replace("-", "−")}}`;
  if (!printed && !power) return label;
  return `${label} / ${[power, printed].filter(Boolean).join("\u2009")}`;
}

/** One point in words, for the live region of a plot that is read by keyboard. */
export function pointInWords(series: Series, index: number, columns: readonly Column[]): string {
  const numbers = columns.map(
    ({ label, unit, value }) => `${plainText(label)} ${formatQuantity(value(series, index), unit, 4)}`,
  );
  const masked = series.masked?.[index] ? ", masked" : "";
  return `${plainText(series.label)}: ${numbers.join(", ")}${masked}`;
}

/** What a plot shows, in words: each series with its number of points and its ranges. */
export function summaryOf(series: readonly Series[], columns: readonly Column[]): string {
  if (series.length === 0) return "No curve to show yet.";
  return series
    .map((one) => {
      const ranges = columns.map(({ label, unit, value }) => {
        let low = Number.POSITIVE_INFINITY;
        let high = Number.NEGATIVE_INFINITY;
        for (let index = 0; index < one.x.length; index++) {
          low = Math.min(low, value(one, index));
          high = Math.max(high, value(one, index));
        }
        return `${plainText(label)} from ${formatQuantity(low, "1", 3)} to ${formatQuantity(high, unit, 3)}`;
      });
      return `${plainText(one.label)}: ${one.x.length} points, ${ranges.join(", ")}.`;
    })
    .join(" ");
}

/** Text cells must not be read as formulas by a spreadsheet; numbers stay numbers. */
function textCell(text: string): string {
  const harmless = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\n;]/.test(harmless) ? `"${harmless.replaceAll('"', '""')}"` : harmless;
}

/** All points in full precision, units in the head, the title as a comment line. */
export function csvOf(title: string, series: readonly Series[], columns: readonly Column[]): string {
  const head = ["series", ...columns.map(({ label, unit }) => textCell(plainText(labelled(label, unit)))), "masked"];
  const rows = series.flatMap((one) =>
    Array.from({ length: one.x.length }, (_, index) =>
      [
        textCell(plainText(one.label)),
        ...columns.map(({ value }) => String(value(one, index))),
        one.masked?.[index] ? "1" : "0",
      ].join(","),
    ),
  );
  return `# ${plainText(title).replaceAll("\n", " ")}\n${head.join(",")}\n${rows.join("\n")}\n`;
}
