/** Where an axis has ticks, and what is written at them. */
import { axisExponent, formatTicks, superscript } from "~/lib/numberFormat";
import type { Range, ScaleKind } from "./view";

export interface Ticks {
  values: number[];
  /** Text of each tick, "" for a minor one. */
  labels: string[];
  /** Power of ten by which the labels are divided; belongs to the axis label. */
  exponent: number;
}

/** Ticks at round numbers, about `count` of them: steps of 1, 2, 2.5 or 5 times a power of ten. */
function linearTicks([low, high]: Range, count: number, step?: number): number[] {
  const rough = (high - low) / Math.max(1, count);
  const power = 10 ** Math.floor(Math.log10(rough));
  const width = step ?? power * ([1, 2, 2.5, 5, 10].find((multiple) => multiple * power >= rough * (1 - 1e-9)) ?? 10);
  const first = Math.ceil(low / width - 1e-9);
  const last = Math.floor(high / width + 1e-9);
  return Array.from({ length: Math.max(0, last - first + 1) }, (_, index) =>
    Number(((first + index) * width).toPrecision(12)),
  );
}

function logTicks([low, high]: Range, count: number): Ticks {
  const values: number[] = [];
  const labels: string[] = [];
  const decades = Math.log10(high / low);
  const every = Math.max(1, Math.ceil(decades / Math.max(1, count)));
  const powers = Math.floor(Math.log10(high) + 1e-9) - Math.ceil(Math.log10(low) - 1e-9) + 1;
  const named = powers > 1 ? [1] : [1, 2, 5];
  const minor = decades <= 6 ? [1, 2, 3, 4, 5, 6, 7, 8, 9] : [1];
  for (let power = Math.floor(Math.log10(low)); power <= Math.ceil(Math.log10(high)); power++)
    for (const digit of minor) {
      const value = Number(`${digit}e${power}`);
      if (value < low * (1 - 1e-9) || value > high * (1 + 1e-9)) continue;
      values.push(value);
      const shown = named.includes(digit) && (digit > 1 || ((power % every) + every) % every === 0);
      const decade = `10${superscript(power)}`;
      labels.push(!shown ? "" : named.length === 1 || digit === 1 ? decade : `${digit}×${decade}`);
    }
  return { values, labels, exponent: 0 };
}

/** Ticks of an axis of some length, labels at least `apart` px from each other. */
export function ticksOf(range: Range, scale: ScaleKind, length: number, apart: number, step?: number): Ticks {
  const count = Math.max(2, Math.floor(length / apart));
  if (scale === "log") return logTicks(range, count);
  const values = linearTicks(range, count, step);
  const exponent = axisExponent(range[0], range[1]);
  return { values, labels: formatTicks(values, exponent), exponent };
}
