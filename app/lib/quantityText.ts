/**
 * Numbers with units as a scientist types them, and back.
 *
 * Accepted: a sign (also U+2212), digits with a point or a comma as decimal mark, groups of three set apart by a
 * space, an exponent as e17, ·10^17, ×10¹⁷ or 10^17 alone, and a unit with SI prefix that measures the same kind of
 * thing as the field's own. A comma before exactly three digits is read as a decimal mark, and said so.
 */
import type { Quantity } from "@demilune/solver";
import { formatNumber, formatQuantity, formatUnit, thinSpace } from "./numberFormat";
import { normaliseText, parseUnit, sameDimension, type Unit } from "./units";

export type Reading =
  | {
      ok: true;
      /** In the field's bench unit; null where the quantity gives "nothing" a meaning; undefined = left to its default. */
      value: number | null | undefined;
      /** How the text was read, where that is not plain from it: "read as 1.234", "= 500 nm". */
      note: string | null;
    }
  | { ok: false; error: string };

interface Decimal {
  /** "-1.5": sign, digits, a point. */
  mantissa: string;
  exponent: number;
  ambiguous: boolean;
}

const examples = "write for example 5e17, 5·10^17 or 0,5";
const nullWords = new Set(["none", "no", "off", "ideal", "infinite", "infinity", "∞", "null", "-"]);

/** Plain text a number field starts from and accepts: "0.05", "6e17"; the shortest that reads back exactly. */
export function typedForm(value: number): string {
  const size = Math.abs(value);
  if (value === 0 || (size >= 1e-3 && size < 1e5)) return String(value);
  return value.toExponential().replace("e+", "e");
}

/** A limit in print form; a bare power of ten reads better without its mantissa. */
const limitText = (value: number): string => formatNumber(value).replace(/^1×/, "");

/** The permitted range in words and in print form: "0.1 to 10⁷ nm". */
export function permittedRange(quantity: Quantity): string {
  const unit = quantity.unit === "1" ? "" : `${thinSpace}${formatUnit(quantity.unit)}`;
  const lower = `${quantity.integer ? "whole number " : ""}${quantity.aboveMin ? "above " : ""}${limitText(quantity.min)}`;
  const nothing = quantity.nullMeans ? `, or empty (${quantity.nullMeans})` : "";
  return `${lower} ${quantity.aboveMin ? "up to" : "to"} ${limitText(quantity.max)}${unit}${nothing}`;
}

function splitNumber(text: string): { decimal: Decimal; rest: string } | { error: string } {
  const bare = /^([+-]?) ?10 ?\^ ?\(?([+-]?\d+)\)?/.exec(text);
  if (bare) {
    return {
      decimal: { mantissa: `${bare[1]}1`, exponent: Number(bare[2]), ambiguous: false },
      rest: text.slice(bare[0].length).trim(),
    };
  }
  const match =
    /^([+-]?) ?(\d{1,3}(?: \d{3})+(?!\d)(?:[.,]\d+)?|[\d.,]*\d[.,]?)(?:[eE]([+-]?\d+)| ?[·x] ?10 ?(?:\^|··) ?\(?([+-]?\d+)\)?)?/.exec(
      text,
    );
  if (!match) return { error: `“${text}” does not begin with a number; ${examples}` };
  const digits = match[2].replaceAll(" ", "");
  const marks = digits.replace(/\d/g, "");
  if (marks.length > 1) {
    return {
      error: `“${digits}” has more than one decimal mark; write it without marks between thousands, such as ${digits
        .slice(0, Math.max(digits.lastIndexOf("."), digits.lastIndexOf(",")))
        .replace(/[.,]/g, "")}`,
    };
  }
  const rest = text.slice(match[0].length).trim();
  return {
    decimal: {
      mantissa: match[1] + digits.replace(",", "."),
      exponent: Number(match[3] ?? match[4] ?? 0),
      ambiguous: /^[1-9]\d{0,2},\d{3}$/.test(digits),
    },
    rest,
  };
}

/** Units a field of this unit takes, in words for an error message. */
function unitExamples(unit: string): string {
  const more: Record<string, string> = {
    nm: ", µm, mm, cm, m or Å",
    ns: ", ps, µs, ms or s",
    "cm⁻³": " or m⁻³",
    "cm⁻¹": ", 1/cm, 1/µm or 1/m",
    "cm²/Vs": " or m²/Vs",
    "cm/s": " or m/s",
    eV: " or meV",
    V: " or mV",
    K: " or °C",
    Hz: ", mHz, kHz, MHz or GHz",
    "Ω·cm²": ", kΩ·cm² or Ω·m²",
    "F/cm²": ", µF/cm², nF/cm² or F/m²",
    "cm⁻² s⁻¹": " or m⁻² s⁻¹",
  };
  return unit === "1" ? "no unit, or %" : `${unit}${more[unit] ?? ""}`;
}

/** A decimal number with the unit's power of ten taken into its exponent, rounded once. */
const scaled = ({ mantissa, exponent }: Decimal, power: number): number =>
  Number(`${mantissa}e${exponent + power}`) + 0;

interface TypedNumber {
  decimal: Decimal;
  unitText: string;
  /** Null where none was typed. */
  unit: Unit | null;
}

/** Split typed text into number and unit. Unknown units and malformed numbers are an error in words. */
export function splitTyped(text: string): TypedNumber | { error: string } {
  const clean = normaliseText(text).replaceAll("··", "^");
  const split = splitNumber(clean);
  if ("error" in split) return split;
  const { decimal, rest } = split;
  if (rest === "") return { decimal, unitText: "", unit: null };
  if (/^[\d.,]/.test(rest) && !/^1 ?\//.test(rest)) {
    return { error: `“${text.trim()}” holds more than one number; ${examples}` };
  }
  const unit = parseUnit(rest.replace(/^· ?/, ""));
  return unit ? { decimal, unitText: rest, unit } : { error: `“${rest}” is not a unit known here` };
}

/** Value of a typed number in the unit of the given text, which must measure the same kind of thing. */
export function valueIn(typed: TypedNumber, unitText: string): number {
  const unit = unitOf(unitText);
  return scaled(typed.decimal, typed.unit ? typed.unit.power - unit.power : 0);
}

/** The unit a bench-unit text stands for. */
export function unitOf(unitText: string): Unit {
  return parseUnit(normaliseText(unitText))!;
}

function outside(value: number, quantity: Quantity): string | null {
  const low = quantity.aboveMin ? value <= quantity.min : value < quantity.min;
  const said = Number.isFinite(value) ? `${formatQuantity(value, quantity.unit)} is` : "this number is";
  if (low) return `${said} too small; permitted: ${permittedRange(quantity)}`;
  if (value > quantity.max) return `${said} too large; permitted: ${permittedRange(quantity)}`;
  if (quantity.integer && !Number.isInteger(value))
    return `${said} not a whole number; permitted: ${permittedRange(quantity)}`;
  return null;
}

/**
 * Read what was typed into the field of a quantity.
 * @param text as typed
 * @param quantity the row of the solver's table: bench unit, range, what nothing means
 * @param emptyMeans words for an empty field whose default follows from other fields ("half the gap")
 */
export function readQuantity(text: string, quantity: Quantity, emptyMeans?: string): Reading {
  const clean = normaliseText(text);
  if (clean === "") {
    if (quantity.nullMeans) return { ok: true, value: null, note: quantity.nullMeans };
    if (emptyMeans) return { ok: true, value: undefined, note: emptyMeans };
    if (typeof quantity.default === "number") {
      return {
        ok: true,
        value: undefined,
        note: `left empty: ${formatQuantity(quantity.default, quantity.unit)}`,
      };
    }
    return { ok: false, error: `a value is needed; permitted: ${permittedRange(quantity)}` };
  }
  if (quantity.nullMeans && (nullWords.has(clean.toLowerCase()) || clean === quantity.nullMeans)) {
    return { ok: true, value: null, note: quantity.nullMeans };
  }
  const celsius = quantity.unit === "K" ? / ?°\s*C$/.exec(clean) : null;
  const typed = splitTyped(celsius ? clean.slice(0, celsius.index) : clean);
  if ("error" in typed) {
    const help = typed.error.includes("unit known") ? `; this field takes ${unitExamples(quantity.unit)}` : "";
    return { ok: false, error: typed.error + help };
  }
  const own = unitOf(quantity.unit);
  if (typed.unit && !sameDimension(typed.unit, own)) {
    return {
      ok: false,
      error: `“${typed.unitText}” does not fit here; this field takes ${unitExamples(quantity.unit)}`,
    };
  }
  const read = valueIn(typed, quantity.unit);
  const value = celsius ? Number((read + 273.15).toFixed(6)) : read;
  if (value === 0 && /[1-9]/.test(typed.decimal.mantissa)) {
    return { ok: false, error: `this number is too small to be told from 0; permitted: ${permittedRange(quantity)}` };
  }
  const problem = outside(value, quantity);
  if (problem) return { ok: false, error: problem };
  const converted = celsius || (typed.unit && typed.unit.power !== own.power);
  if (typed.decimal.ambiguous) {
    return {
      ok: true,
      value,
      note: `read as ${typed.decimal.mantissa}${converted ? `, = ${formatQuantity(value, quantity.unit)}` : ""}; a comma is a decimal mark`,
    };
  }
  return { ok: true, value, note: converted ? `= ${formatQuantity(value, quantity.unit)}` : null };
}

/** One step of the arrow keys: a factor 10^0.1 (fine: 10^0.01), or a decimal step for linear quantities; kept in range. */
export function stepped(value: number, quantity: Quantity, direction: 1 | -1, fine: boolean): number {
  const limit = (next: number) => Math.min(quantity.max, Math.max(quantity.min, next));
  if (quantity.integer) return limit(value + direction);
  if (quantity.linear) {
    const step = linearStep(quantity) * (fine ? 0.1 : 1);
    return limit(rounded((Math.round(value / step) + direction) * step, step));
  }
  if (value === 0) return direction > 0 ? limit(firstStep(quantity)) : 0;
  return limit(moved(value, quantity, direction * (fine ? 0.01 : 0.1)));
}

/**
 * A value moved by a distance of the pointer or slider: decades for quantities that move by a factor, ten steps for
 * linear ones. Three significant digits are kept, so that what is shown is what is used.
 */
export function moved(value: number, quantity: Quantity, decades: number): number {
  const limit = (next: number) => Math.min(quantity.max, Math.max(quantity.min, next));
  if (quantity.linear) {
    const step = linearStep(quantity) * (quantity.integer ? 1 : 0.1);
    return limit(rounded(Math.round((value + decades * 10 * linearStep(quantity)) / step) * step, step));
  }
  if (value === 0) return decades > 0 ? limit(firstStep(quantity)) : 0;
  return limit(Number((value * 10 ** decades).toPrecision(4)));
}

function linearStep(quantity: Quantity): number {
  if (quantity.integer) return 1;
  if (quantity.unit === "K" || quantity.unit === "nm") return 10;
  return quantity.unit === "eV" || quantity.unit === "V" ? 0.05 : quantity.max <= 1 ? 0.01 : 0.1;
}

/** Where an upward step from zero begins: a small value of the kind. */
function firstStep(quantity: Quantity): number {
  if (quantity.min > 0) return quantity.min;
  return quantity.max / 10 ** (Math.log10(quantity.max) > 9 ? 8 : 6);
}

const rounded = (value: number, step: number): number =>
  Number(value.toFixed(Math.max(0, Math.ceil(-Math.log10(step)) + 1)));
