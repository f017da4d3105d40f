/**
 * Points of a measured spectrum as one blob: the columns frequency/Hz, Re, Im, sigma, masked, each `count` Float64
 * long, little-endian. sigma is 0 where the file gives none; masked is 0 or 1.
 */
export interface MeasuredPoints {
  /** Ascending; repeats stay in the order of the file. */
  frequencyHz: number[];
  re: number[];
  im: number[];
  /** Standard deviation of Re and of Im, each; null where the file gives none. */
  sigma: number[] | null;
  masked: boolean[];
}

const columns = 5;

export function packPoints({ frequencyHz, re, im, sigma, masked }: MeasuredPoints): Buffer {
  const count = frequencyHz.length;
  const numbers = new Float64Array(columns * count);
  numbers.set(frequencyHz, 0);
  numbers.set(re, count);
  numbers.set(im, 2 * count);
  if (sigma) numbers.set(sigma, 3 * count);
  numbers.set(masked.map(Number), 4 * count);
  return Buffer.from(numbers.buffer);
}

export function unpackPoints(data: Uint8Array): MeasuredPoints {
  // A copy, because the database's bytes need not begin at a multiple of eight.
  const numbers = new Float64Array(data.slice().buffer);
  const count = numbers.length / columns;
  const column = (index: number) => Array.from(numbers.subarray(index * count, (index + 1) * count));
  const sigma = column(3);
  return {
    frequencyHz: column(0),
    re: column(1),
    im: column(2),
    sigma: sigma.some((value) => value > 0) ? sigma : null,
    masked: column(4).map((value) => value !== 0),
  };
}
