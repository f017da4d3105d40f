/**
 * Numbers as they are printed: a true minus, a thin space, ×10ⁿ, never 1e+17. Typing is read in `quantityText.ts`;
 * files for other programs carry full precision and use `String(value)`.
 */

/** Stands between a number and its unit, and between units. */
export const thinSpace = "\u2009";

const superscripts: Record<string, string> = {
  "-": "⁻",
  0: "⁰",
  1: "¹",
  2: "²",
  3: "³",
  4: "⁴",
  5: "⁵",
  6: "⁶",
  7: "⁷",
  8: "⁸",
  9: "⁹",
};

/** An integer in superscript characters. */
export const superscript = (integer: number): string =>
  [...String(integer)].map((digit) => superscripts[digit]).join("");

/** Replace the hyphen of a numeral by a true minus. */
const withMinus = (numeral: string): string => numeral.replace("-", "−");

interface NumberParts {
  /** Sign and digits, with a true minus. */
  mantissa: string;
  /** Power of ten, or null where the number is printed without one. */
  exponent: number | null;
}

/** Numbers from 0.001 to 9999 are printed plainly, others with a power of ten. */
const isPlain = (exponent: number): boolean => exponent >= -3 && exponent < 4;

/**
 * Mantissa and power of ten of a number.
 *
 * @param value any finite number; others give "–", since a table must not show NaN
 * @param significant significant digits, at least 1; absent: the shortest text that reads back as the same number
 */
function numberParts(value: number, significant?: number): NumberParts {
  if (!Number.isFinite(value)) return { mantissa: "–", exponent: null };
  if (value === 0) return { mantissa: "0", exponent: null };
  const [digits, power] = value.toExponential(significant === undefined ? undefined : significant - 1).split("e");
  const exponent = Number(power);
  if (!isPlain(exponent)) return { mantissa: withMinus(digits), exponent };
  if (significant === undefined) return { mantissa: withMinus(String(Number(`${digits}e${power}`))), exponent: null };
  return {
    mantissa: withMinus(Number(`${digits}e${power}`).toFixed(Math.max(0, significant - 1 - exponent))),
    exponent: null,
  };
}

/** A number as text with Unicode superscripts: "−6.34×10⁻⁶". */
export function formatNumber(value: number, significant?: number): string {
  const { mantissa, exponent } = numberParts(value, significant);
  return exponent === null ? mantissa : `${mantissa}×10${superscript(exponent)}`;
}

/** A number with a fixed number of decimals and a true minus, for columns that are compared. */
export const formatFixed = (value: number, decimals: number): string =>
  Number.isFinite(value) ? withMinus(value.toFixed(decimals)).replace(/^−(0(?:\.0*)?)$/, "$1") : "–";

/** A number as plain decimal digits, which is what numeric ARIA attributes have to be. */
export const plainDecimal = (value: number): string =>
  value.toLocaleString("en-US", { useGrouping: false, maximumSignificantDigits: 17 });

/** A unit as printed: factors apart by a thin space, nothing for a pure number. */
export const formatUnit = (unit: string): string => (unit === "1" ? "" : unit.replace(/[·\s]+/g, thinSpace));

/** A number with its unit: "7×10⁴ cm⁻¹". */
export function formatQuantity(value: number, unit: string, significant?: number): string {
  const printed = formatUnit(unit);
  return printed ? `${formatNumber(value, significant)}${thinSpace}${printed}` : formatNumber(value, significant);
}

const prefixes: Record<number, string> = {
  [-15]: "f",
  [-12]: "p",
  [-9]: "n",
  [-6]: "µ",
  [-3]: "m",
  0: "",
  3: "k",
  6: "M",
  9: "G",
  12: "T",
};

/** A number with an SI prefix to its unit: "25.1 kHz". Outside femto to tera the power of ten is printed. */
export function formatPrefixed(value: number, unit: string, significant = 3): string {
  if (value === 0 || !Number.isFinite(value)) return formatQuantity(value, unit, significant);
  const exponent = Number(value.toExponential(significant - 1).split("e")[1]);
  const step = Math.floor(exponent / 3) * 3;
  if (prefixes[step] === undefined) return formatQuantity(value, unit, significant);
  const digits = formatFixed(value / 10 ** step, Math.max(0, significant - 1 - (exponent - step)));
  return `${digits.includes(".") ? digits.replace(/\.?0+$/, "") : digits}${thinSpace}${prefixes[step]}${unit}`;
}

/**
 * The power of ten, a multiple of three, by which all ticks of a linear axis are divided, so that they stay short:
 * 0 unless the largest magnitude is below 0.01 or at least 10 000.
 */
export function axisExponent(from: number, to: number): number {
  const largest = Math.max(Math.abs(from), Math.abs(to));
  if (largest === 0 || (largest >= 0.01 && largest < 1e4)) return 0;
  return Math.floor(Math.log10(largest) / 3) * 3;
}

/** Ticks of a linear axis, all with the decimals that the finest of them needs. */
export function formatTicks(ticks: readonly number[], exponent: number): string[] {
  const scaled = ticks.map((tick) => Number((tick / 10 ** exponent).toPrecision(10)));
  const decimals = Math.max(0, ...scaled.map((tick) => (String(tick).split(".")[1] ?? "").length));
  return scaled.map((tick) => formatFixed(tick, decimals));
}
