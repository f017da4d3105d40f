/**
 * A result document apart: everything but its arrays as a small JSON value, and the arrays as one run of Float64
 * numbers (frequencies, Re, Im of each solved spectrum in turn), which is how runs are stored.
 */
import type { ResultDocument, SolvedSpectrum, SpectrumResult } from "@demilune/solver";

type SpectrumHead =
  | (Omit<SolvedSpectrum, "frequencyHz" | "re" | "im"> & { points: number })
  | Exclude<SpectrumResult, SolvedSpectrum>;

export interface ResultHead extends Omit<ResultDocument, "spectra"> {
  spectra: SpectrumHead[];
}

export interface PackedResult {
  head: ResultHead;
  numbers: Float64Array;
}

export function packResult({ spectra, ...head }: ResultDocument): PackedResult {
  const solved = spectra.filter((spectrum) => spectrum.status === "solved");
  const numbers = new Float64Array(solved.reduce((sum, { frequencyHz }) => sum + 3 * frequencyHz.length, 0));
  let at = 0;
  for (const { frequencyHz, re, im } of solved)
    for (const list of [frequencyHz, re, im]) {
      numbers.set(list, at);
      at += list.length;
    }
  return {
    head: {
      ...head,
      spectra: spectra.map((spectrum) => {
        if (spectrum.status !== "solved") return spectrum;
        const { frequencyHz, re: _re, im: _im, ...rest } = spectrum;
        return { ...rest, points: frequencyHz.length };
      }),
    },
    numbers,
  };
}

export function unpackResult({ head, numbers }: PackedResult): ResultDocument {
  let at = 0;
  const next = (count: number) => {
    at += count;
    return Array.from(numbers.subarray(at - count, at));
  };
  return {
    ...head,
    spectra: head.spectra.map((spectrum) => {
      if (spectrum.status !== "solved") return spectrum;
      const { points, ...rest } = spectrum;
      return { ...rest, frequencyHz: next(points), re: next(points), im: next(points) };
    }),
  };
}
