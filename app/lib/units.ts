/**
 * Units as people type them: "cm2/Vs", "cm^-3", "1/cm", "µm", "Ohm cm2". A unit is a power of ten and a vector of
 * base dimensions, so that a conversion only shifts the decimal exponent and never rounds.
 *
 * Trade convention, kept here: everything behind a slash is below it, "cm²/Vs" is cm²/(V·s).
 */

const dimensionNames = ["length", "time", "voltage", "current", "energy", "temperature"] as const;
type DimensionName = (typeof dimensionNames)[number];
type Dimension = Partial<Record<DimensionName, number>>;

export interface Unit {
  /** Power of ten against m, s, V, A, eV, K. */
  power: number;
  dimension: Dimension;
}

const prefixPowers = { f: -15, p: -12, n: -9, µ: -6, u: -6, m: -3, k: 3, M: 6, G: 9, T: 12 } as const;

const prefixable: Record<string, Dimension> = {
  m: { length: 1 },
  s: { time: 1 },
  V: { voltage: 1 },
  A: { current: 1 },
  W: { voltage: 1, current: 1 },
  F: { current: 1, time: 1, voltage: -1 },
  C: { current: 1, time: 1 },
  S: { current: 1, voltage: -1 },
  Ω: { voltage: 1, current: -1 },
  Ohm: { voltage: 1, current: -1 },
  ohm: { voltage: 1, current: -1 },
  Hz: { time: -1 },
  eV: { energy: 1 },
  K: { temperature: 1 },
};

const symbols = new Map<string, Unit>([
  ["cm", { power: -2, dimension: { length: 1 } }],
  ["dm", { power: -1, dimension: { length: 1 } }],
  ["Å", { power: -10, dimension: { length: 1 } }],
  ["%", { power: -2, dimension: {} }],
  ["photons", { power: 0, dimension: {} }],
  ["photon", { power: 0, dimension: {} }],
]);
for (const [symbol, dimension] of Object.entries(prefixable)) {
  symbols.set(symbol, { power: 0, dimension });
  for (const [prefix, power] of Object.entries(prefixPowers)) symbols.set(prefix + symbol, { power, dimension });
}
const longestFirst = [...symbols.keys()].sort((one, other) => other.length - one.length);

const superscripts = "⁰¹²³⁴⁵⁶⁷⁸⁹";

/** One spelling for all the ways to type a minus, a micro sign, a superscript, a product sign or a space. */
export function normaliseText(text: string): string {
  return text
    .replace(/[\u00a0\u2000-\u200b\u202f\u205f\u3000\t]/g, " ")
    .replace(/[\u2212\u2010-\u2014\u207b\ufe63\uff0d]/g, "-")
    .replace(/[\u00b5\u03bc]/g, "µ")
    .replace(/\u2126/g, "Ω")
    .replace(/\u212b/g, "Å")
    .replace(/\u207a/g, "+")
    .replace(/[⁰¹²³⁴⁵⁶⁷⁸⁹]+/g, (digits) => `^${[...digits].map((digit) => superscripts.indexOf(digit)).join("")}`)
    .replace(/-\^/g, "^-")
    .replace(/\+\^/g, "^+")
    .replace(/[·⋅∙×*]/g, "·")
    .trim();
}

function addSegment(segment: string, sign: 1 | -1, unit: Unit): boolean {
  let rest = segment.replace(/[\s·()]+/g, " ").trim();
  while (rest !== "") {
    const symbol = longestFirst.find((candidate) => rest.startsWith(candidate));
    if (symbol === undefined) return false;
    rest = rest.slice(symbol.length);
    const exponentText = /^ ?\^ ?([+-]?\d+)|^([+-]?\d+)/.exec(rest);
    const exponent = sign * Number(exponentText?.[1] ?? exponentText?.[2] ?? 1);
    rest = rest.slice(exponentText?.[0].length ?? 0).trim();
    const { power, dimension } = symbols.get(symbol)!;
    unit.power += power * exponent;
    for (const name of dimensionNames) {
      const sum = (unit.dimension[name] ?? 0) + (dimension[name] ?? 0) * exponent;
      if (sum === 0) delete unit.dimension[name];
      else unit.dimension[name] = sum;
    }
  }
  return true;
}

/** Read a unit expression; null where a symbol is not known. The text must have gone through `normaliseText`. */
export function parseUnit(text: string): Unit | null {
  const unit: Unit = { power: 0, dimension: {} };
  const [numerator, ...denominators] = text.split("/");
  if (numerator.trim() !== "1" && !addSegment(numerator, 1, unit)) return null;
  for (const denominator of denominators) {
    if (denominator.trim() === "" || !addSegment(denominator, -1, unit)) return null;
  }
  return unit;
}

/** Whether two units measure the same kind of thing. */
export function sameDimension(one: Unit, other: Unit): boolean {
  return dimensionNames.every((name) => (one.dimension[name] ?? 0) === (other.dimension[name] ?? 0));
}
