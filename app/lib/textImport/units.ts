/**
 * Units as instruments and people write them, by their dimensions: "mA/cm2", "Ohm cm²", "V per photon flux",
 * "uA·cm^-2", "kHz". Only the dimensions that occur in these measurements are known.
 */

/** Exponents of ampere, volt, metre, second. */
export type Dimensions = readonly [ampere: number, volt: number, metre: number, second: number];

type Scale = "linear" | "degree" | "radian" | "angularFrequency" | "decibel" | "decade" | "relative";

export interface Unit {
  /** Times this gives SI. */
  factor: number;
  dimensions: Dimensions;
  scale: Scale;
}

const base: Record<string, readonly [number, Dimensions]> = {
  A: [1, [1, 0, 0, 0]],
  V: [1, [0, 1, 0, 0]],
  m: [1, [0, 0, 1, 0]],
  s: [1, [0, 0, 0, 1]],
  Hz: [1, [0, 0, 0, -1]],
  Ω: [1, [-1, 1, 0, 0]],
  S: [1, [1, -1, 0, 0]],
  W: [1, [1, 1, 0, 0]],
  C: [1, [1, 0, 0, 1]],
  F: [1, [1, -1, 0, 1]],
  "%": [0.01, [0, 0, 0, 0]],
  1: [1, [0, 0, 0, 0]],
};

const prefixes: Record<string, number> = {
  T: 1e12,
  G: 1e9,
  M: 1e6,
  k: 1e3,
  K: 1e3,
  d: 1e-1,
  c: 1e-2,
  m: 1e-3,
  µ: 1e-6,
  u: 1e-6,
  n: 1e-9,
  p: 1e-12,
  f: 1e-15,
};
const prefixWords: Record<string, string> = { mega: "M", kilo: "k", milli: "m", micro: "µ", nano: "n", giga: "G" };

const words: Record<string, string> = {
  ohm: "Ω",
  ohms: "Ω",
  volt: "V",
  volts: "V",
  amp: "A",
  amps: "A",
  ampere: "A",
  amperes: "A",
  second: "s",
  seconds: "s",
  sec: "s",
  hertz: "Hz",
  hz: "Hz",
  watt: "W",
  watts: "W",
  siemens: "S",
  percent: "%",
  photon: "1",
  photons: "1",
  ph: "1",
  phot: "1",
  electron: "1",
  electrons: "1",
  none: "1",
};

const special: Record<string, Unit> = {};
for (const [names, unit] of [
  [
    ["deg", "degree", "degrees", "°", "grad", "degs"],
    { factor: Math.PI / 180, dimensions: [0, 0, 0, 0], scale: "degree" },
  ],
  [["rad", "radian", "radians"], { factor: 1, dimensions: [0, 0, 0, 0], scale: "radian" }],
  [["mrad"], { factor: 1e-3, dimensions: [0, 0, 0, 0], scale: "radian" }],
  [
    ["rad/s", "rads-1", "rad/sec", "rads^-1", "1/s", "s-1", "s^-1"],
    { factor: 1 / (2 * Math.PI), dimensions: [0, 0, 0, -1], scale: "angularFrequency" },
  ],
  [["krad/s"], { factor: 1e3 / (2 * Math.PI), dimensions: [0, 0, 0, -1], scale: "angularFrequency" }],
  [["db"], { factor: 1, dimensions: [0, 0, 0, 0], scale: "decibel" }],
  [["log10(hz)", "loghz", "log(hz)", "log10hz"], { factor: 1, dimensions: [0, 0, 0, -1], scale: "decade" }],
  [
    ["a.u.", "au", "arb.u.", "arb.units", "arbitraryunits", "arb", "rel.u.", "relative", "normalised", "normalized"],
    { factor: 1, dimensions: [0, 0, 0, 0], scale: "relative" },
  ],
] as const satisfies readonly (readonly [readonly string[], Unit])[]) {
  for (const name of names) special[name] = unit;
}

/** One spelling for the many of the same character. */
function plainUnit(text: string): string {
  return text
    .normalize("NFKC")
    .replaceAll("μ", "µ")
    .replaceAll("−", "-")
    .replaceAll("⁻", "-")
    .replace(/[·⋅×*]/g, " ")
    .replaceAll("^", "")
    .trim();
}

function symbol(name: string): readonly [number, Dimensions] | null {
  if (Object.hasOwn(base, name)) return base[name];
  const lower = name.toLowerCase();
  if (Object.hasOwn(words, lower)) return base[words[lower]];
  for (const [word, letter] of Object.entries(prefixWords)) {
    if (lower.startsWith(word) && lower.length > word.length) return withPrefix(letter, name.slice(word.length));
  }
  const prefix = name[0];
  return name.length > 1 && Object.hasOwn(prefixes, prefix) ? withPrefix(prefix, name.slice(1)) : null;
}

function withPrefix(prefix: string, rest: string): readonly [number, Dimensions] | null {
  const lower = rest.toLowerCase();
  const found = Object.hasOwn(base, rest) ? base[rest] : Object.hasOwn(words, lower) ? base[words[lower]] : null;
  return found && [found[0] * prefixes[prefix], found[1]];
}

const token = /\s*(?:(\/)|(\()|(\))|([A-Za-zµΩ%]+|1)(-?\d+)?)/y;
const noDimensions: Dimensions = [0, 0, 0, 0];

/** Product and quotient of symbols; everything behind a slash is below it, as the trade writes cm²/Vs. */
function product(
  text: string,
  position: { at: number },
  depth: number,
): { factor: number; dimensions: Dimensions } | null {
  let factor = 1;
  let dimensions = noDimensions;
  let sign = 1;
  let seen = false;
  let dangling = false;
  for (;;) {
    token.lastIndex = position.at;
    const found = token.exec(text);
    if (!found)
      return seen && !dangling && text.slice(position.at).trim() === "" && depth === 0 ? { factor, dimensions } : null;
    position.at = token.lastIndex;
    if (found[1]) {
      sign = -1;
      dangling = true;
      continue;
    }
    if (found[3]) return depth > 0 && seen ? { factor, dimensions } : null;
    dangling = false;
    let part: { factor: number; dimensions: Dimensions } | null;
    let exponent = sign;
    if (found[2]) part = depth < 4 ? product(text, position, depth + 1) : null;
    else {
      const known = symbol(found[4]);
      part = known && { factor: known[0], dimensions: known[1] };
      exponent *= found[5] ? Number(found[5]) : 1;
    }
    if (!part || Math.abs(exponent) > 9) return null;
    const { factor: size, dimensions: added } = part;
    factor *= size ** exponent;
    dimensions = [
      dimensions[0] + exponent * added[0],
      dimensions[1] + exponent * added[1],
      dimensions[2] + exponent * added[2],
      dimensions[3] + exponent * added[3],
    ];
    seen = true;
  }
}

/** A unit, or null where the text is none. */
export function parseUnit(text: string): Unit | null {
  const plain = plainUnit(text);
  if (plain === "" || plain.length > 40) return null;
  const packed = plain.replaceAll(/\s+/g, "").toLowerCase();
  if (Object.hasOwn(special, packed)) return special[packed];
  const found = product(plain.replace(/\bper\b/g, "/").replace(/(?<=[A-Za-zΩ0-9)])\.(?=[A-Za-z])/g, " "), { at: 0 }, 0);
  return found && Number.isFinite(found.factor) ? { ...found, scale: "linear" } : null;
}

export const hasDimensions = (unit: Unit, dimensions: Dimensions): boolean =>
  unit.dimensions.every((exponent, index) => exponent === dimensions[index]);
