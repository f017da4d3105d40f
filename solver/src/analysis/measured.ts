/** A measured spectrum as its rows stand: any order of frequencies, equal ones are repeats in their order. */
export interface Measured {
  frequencyHz: number[];
  re: number[];
  im: number[];
  /** Standard deviation of Re and of Im, each. */
  sigma?: number[];
  /** When each point was taken, s. */
  timeS?: number[];
}

/** Row numbers by how often their frequency came before: first the first sweep, then the repeats; each ascending in frequency. */
export function sweepsOf({ frequencyHz }: Measured): number[][] {
  const seen = new Map<number, number>();
  const sweeps: number[][] = [];
  frequencyHz.forEach((frequency, row) => {
    const before = seen.get(frequency) ?? 0;
    seen.set(frequency, before + 1);
    sweeps[before] ??= [];
    sweeps[before].push(row);
  });
  return sweeps.map((rows) => rows.sort((a, b) => frequencyHz[a] - frequencyHz[b]));
}

/** The rows of a measurement as samples over angular frequency, in the order of `rows`. */
export function samplesOf({ frequencyHz, re, im }: Measured, rows: readonly number[]) {
  return {
    omega: rows.map((row) => 2 * Math.PI * frequencyHz[row]),
    re: rows.map((row) => re[row]),
    im: rows.map((row) => im[row]),
  };
}
