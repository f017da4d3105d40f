/** One cell to one number. */
import type { DecimalMark } from "./settings";

const longest = 48;
const withPoint = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eEdD][+-]?\d+)?$/;
const withComma = /^[+-]?(?:\d+,?\d*|,\d+)(?:[eEdD][+-]?\d+)?$/;
const groupedWithPoint = /^[+-]?\d{1,3}(?:,\d{3})+\.\d+$/;
const groupedWithComma = /^[+-]?\d{1,3}(?:\.\d{3})+,\d+$/;
const missing =
  /^(?:[+-]?(?:nan|inf|infinity|∞)|n\/?a|#n\/a|#value!|#div\/0!|null|none|-{1,3}|ol|ovld|overload|overflow|1\.#\w+)$/i;
const raised = /^(.*?)\s*(?:[·×*x]\s*)?10\^\{?([+−-]?\d+)\}?$/;

/** SCPI-99 volume 1, 7.2.1: ±9.9E37 stands for infinity, 9.91E37 for not-a-number. */
const instrumentOverflow = 9.9e37;

function finish(text: string): number {
  const value = Number(text.replace(/[dD]/, "e"));
  return Math.abs(value) >= instrumentOverflow ? Number.NaN : value;
}

/**
 * A cell as a number: `undefined` where it is none, NaN where the file says that the value is missing or overflowed.
 * Takes E and D exponents, ×10^n, a true minus, and grouped digits where both marks occur.
 */
export function readNumber(cell: string, mark: DecimalMark): number | undefined {
  if (cell.length === 0 || cell.length > longest) return undefined;
  const first = cell.charCodeAt(0);
  const plain = (first >= 48 && first <= 57) || first === 43 || first === 45 || first === 46 || first === 44;
  if (plain) {
    if (mark !== "comma" && withPoint.test(cell)) return finish(cell);
    if (mark !== "point" && withComma.test(cell)) return finish(cell.replace(",", "."));
    if (mark !== "comma" && groupedWithPoint.test(cell)) return finish(cell.replaceAll(",", ""));
    if (mark !== "point" && groupedWithComma.test(cell)) return finish(cell.replaceAll(".", "").replace(",", "."));
  }
  if (cell.charCodeAt(0) === 0x2212) return readNumber(`-${cell.slice(1)}`, mark);
  if (missing.test(cell)) return Number.NaN;
  const power = raised.exec(cell);
  if (!power) return undefined;
  const mantissa = power[1] === "" ? 1 : readNumber(power[1], mark);
  return mantissa === undefined ? undefined : mantissa * 10 ** Number(power[2].replace("−", "-"));
}
