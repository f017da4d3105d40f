/** Invented instrument files for the importer's tests. The spectra are one relaxation, H = H0 / (1 + i f/fc). */

export interface Point {
  hz: number;
  re: number;
  im: number;
}

export function relaxation(size: number, cornerHz: number, fromHz = 0.1, toHz = 1e5, points = 61): Point[] {
  return Array.from({ length: points }, (_, index) => {
    const hz = fromHz * (toHz / fromHz) ** (index / (points - 1));
    const x = hz / cornerHz;
    return { hz, re: size / (1 + x * x), im: (-size * x) / (1 + x * x) };
  });
}

export const modulus = ({ re, im }: Point) => Math.hypot(re, im);
export const degrees = ({ re, im }: Point) => (Math.atan2(im, re) * 180) / Math.PI;

/** Rows of numbers as text. */
export function rows(
  points: readonly Point[],
  cells: (point: Point) => number[],
  delimiter: string,
  mark: "." | "," = ".",
): string[] {
  return points.map((point) =>
    cells(point)
      .map((value) => value.toExponential(8).replace(".", mark))
      .join(delimiter),
  );
}

export const bytes = (text: string) => new TextEncoder().encode(text);

/** Windows-1252 for the Latin-1 range, which is all these tests write. */
export const latin = (text: string) => Uint8Array.from(text, (character) => character.charCodeAt(0));

export function utf16(text: string, lowFirst: boolean): Uint8Array {
  const out = new Uint8Array(2 + 2 * text.length);
  const view = new DataView(out.buffer);
  view.setUint16(0, 0xfeff, lowFirst);
  for (let index = 0; index < text.length; index++) view.setUint16(2 + 2 * index, text.charCodeAt(index), lowFirst);
  return out;
}
