import { plainDecimal } from "~/lib/numberFormat";

/** Present value and range of a spinbutton; ARIA knows no exponents, so "1e-12" is written out. */
export function ariaNumbers(now: number | undefined, min?: number, max?: number): Record<string, string> {
  const values = { "aria-valuenow": now, "aria-valuemin": min, "aria-valuemax": max };
  return Object.fromEntries(
    Object.entries(values).flatMap(([name, value]) => (value === undefined ? [] : [[name, plainDecimal(value)]])),
  );
}
