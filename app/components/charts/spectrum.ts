/** Spectra as series: what each kind of plot shows of one complex function of frequency. */
import type { Mark, Series, SeriesKind } from "./series";

/** A predicted, measured or held spectrum. Re and Im have the same length as the frequencies. */
export interface SpectrumSeries {
  id: string;
  /** Notation of `richText.ts`. */
  label: string;
  kind: SeriesKind;
  frequencyHz: ArrayLike<number>;
  re: ArrayLike<number>;
  im: ArrayLike<number>;
  masked?: ArrayLike<boolean>;
  colour?: number | string;
  mark?: Mark;
  width?: number;
  dash?: string;
}

/** What is drawn over frequency. */
export type Part = "modulus" | "phase" | "re" | "im";

const map = (values: ArrayLike<number>, change: (value: number, index: number) => number): Float64Array =>
  Float64Array.from({ length: values.length }, (_, index) => change(values[index], index));

const styleOf = ({ id, label, kind, masked, colour, mark, width, dash }: SpectrumSeries) => ({
  id,
  label,
  kind,
  masked,
  colour,
  mark,
  width,
  dash,
});

/** Phase in degrees, continuous over frequency: jumps of a full turn between neighbours are taken out. */
export function phaseDegrees(re: ArrayLike<number>, im: ArrayLike<number>): Float64Array {
  let turns = 0;
  let previous = 0;
  return map(re, (value, index) => {
    const angle = (Math.atan2(im[index], value) * 180) / Math.PI;
    if (index > 0) turns -= Math.round((angle - previous) / 360);
    previous = angle;
    return angle + 360 * turns;
  });
}

/** One part of a spectrum over frequency. */
export function overFrequency(spectrum: SpectrumSeries, part: Part): Series {
  const { re, im, frequencyHz } = spectrum;
  const y = {
    modulus: () => map(re, (value, index) => Math.hypot(value, im[index])),
    phase: () => phaseDegrees(re, im),
    re: () => re,
    im: () => im,
  }[part]();
  return { ...styleOf(spectrum), x: frequencyHz, y };
}

/** A spectrum in the complex plane; `imUp` false draws −Im upwards. */
export const inPlane = (spectrum: SpectrumSeries, imUp: boolean): Series => ({
  ...styleOf(spectrum),
  x: spectrum.re,
  y: imUp ? spectrum.im : map(spectrum.im, (value) => -value),
  at: spectrum.frequencyHz,
});
