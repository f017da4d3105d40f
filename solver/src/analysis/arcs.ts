/**
 * The arcs of a spectrum: contributions of one process each.
 *
 * The spectrum is approximated by a sum of simple terms that vanish at high frequency: poles and residues of a rational
 * function (`aaa.ts`) where the spectrum is clean, the fewest elements that describe it (`elements.ts`) where noise sets the
 * limit or where so few describe it exactly. Terms are then grouped. A film that is diffused through, a distribution of
 * time constants or a transit is many poles but one process, so:
 *
 * 1. neighbours more than a factor `chainRatio` apart belong to different arcs;
 * 2. terms that cancel each other are one arc, and so are terms of both signs whose sum hardly leaves its half plane
 *    (the alternating poles of far-side diffusion, a transit);
 * 3. other neighbours of opposite sign are different arcs;
 * 4. neighbours of one sign are different arcs where |Im| of their sum has a valley between two maxima;
 * 5. a weak satellite without a maximum of its own is the tail of its stronger neighbour.
 */

import { add, type Complex, complex, divide, modulus, multiply, subtract } from "../numerics/complex.ts";
import { evaluate, fitRational, poles, type RationalFit, residue, type Samples } from "./aaa.ts";
import {
  type Draft,
  type Element,
  type ElementFit,
  ElementModel,
  elementAt,
  elementFitAt,
  peakOmegaTau,
} from "./elements.ts";
import { localNoise } from "./noise.ts";

export interface Arc {
  /** Where |Im| of the contribution is largest, Hz. */
  peakHz: number;
  /** 1/(2π peakHz), s. */
  timeConstantS: number;
  /** |ΔRe| between the two ends of the contribution, unit of the spectrum. */
  spanRe: number;
  /** Largest |Im| of the contribution, unit of the spectrum. */
  spanIm: number;
  /** 1–4, counter-clockwise from Re > 0, Im > 0 with Im upwards. */
  quadrant: 1 | 2 | 3 | 4;
  /** 1 − (4/π) atan(2 spanIm/spanRe). */
  depression: number;
}

export interface Curve {
  readonly frequencyHz: readonly number[];
  readonly re: readonly number[];
  readonly im: readonly number[];
}

export interface ArcAnalysis {
  /** From low to high peakHz. */
  arcs: Arc[];
  /** Standard deviation of Re and of Im, unit of the spectrum. */
  noise: number;
  approximation: {
    /** How the terms were found. */
    kind: "rational" | "elements";
    /** Root-mean-square distance between spectrum and approximation, unit of the spectrum. */
    deviation: number;
    /** Value of the approximation at a frequency in Hz. */
    at(frequencyHz: number): Complex;
    /** Contribution of an arc (index as in `arcs`) at a frequency in Hz, 0 at high frequency. */
    contribution(arc: number, frequencyHz: number): Complex;
    /** Frequencies between neighbouring arcs where they contribute the same |Im|: one fewer than arcs, Hz. */
    valleysHz: number[];
  };
}

/** Neighbouring terms further apart than this factor are separate processes (a film's first two poles: 9, with recombination more). */
const chainRatio = 28;
/** A valley this deep, relative to the lower of its two maxima, separates two arcs. */
const valleyDepth = 0.95;
/** The other half plane may hold this share of a spiral's height. */
const spiralShare = 0.15;
/** Terms whose sum is lower than this share of the higher one cancel each other. */
const cancellation = 0.8;
/** Runs of both signs whose heights add up to more than this multiple of their sum's height are no separate processes. */
const combExcess = 3;
/** Terms of the minor sign below this share of the others do not make a group mixed. */
const minorShare = 0.05;
/** Terms weaker than this share of the largest modulus do not bridge a gap; they go with the nearest stronger one. */
const bridgeShare = 2.5e-4;
/** A satellite below this share of the largest modulus, and no further away than this factor, is a tail unless it has a maximum of its own. */
const satelliteShare = 0.02;
const satelliteRatio = 60;
/** An arc below this share of the largest modulus must peak inside the window. */
const weakShare = 0.05;
/** Nothing smaller is called an arc, relative to the largest modulus. */
const leastShare = 5e-4;
/** … and relative to the noise. */
const leastSignal = 5;
/** An arc that peaks outside the window by more than this factor is not reported, a weak one not at all. */
const windowMargin = 2;

/** One term of the approximation. */
interface Term {
  /** ln of the angular frequency it belongs to. */
  logOmega: number;
  /** Value at zero frequency. */
  strength: number;
  /** A pair of complex poles. */
  oscillating: boolean;
  at(omega: number): Complex;
}

type Group = Term[];

const termOfPole = (pole: Complex, amount: Complex): Term => {
  const size = modulus(pole);
  if (pole.im === 0) {
    return {
      logOmega: Math.log(size),
      strength: -amount.re / pole.re,
      oscillating: false,
      at: (omega) => divide(complex(amount.re), complex(-pole.re, omega)),
    };
  }
  // r/(s − p) + conj: (2 Re r · s − 2 Re(r conj p)) / (s² − 2 Re p · s + |p|²)
  const product = multiply(amount, complex(pole.re, -pole.im)).re;
  return {
    logOmega: Math.log(size),
    strength: (-2 * product) / (size * size),
    oscillating: true,
    at: (omega) =>
      divide(complex(-2 * product, 2 * amount.re * omega), complex(size * size - omega * omega, -2 * pole.re * omega)),
  };
};

const heightOf = (term: Term): number =>
  Math.max(...[0.5, 1, 2].map((factor) => modulus(term.at(Math.exp(term.logOmega) * factor))));

function termsOfRational(fit: RationalFit, floor: number): Term[] {
  const terms: Term[] = [];
  for (const pole of poles(fit)) {
    if (pole.im < 0) continue;
    const term = termOfPole(pole, residue(fit, pole));
    const height = heightOf(term);
    if (Number.isFinite(height) && height > floor) terms.push(term);
  }
  return terms;
}

const termOfElement = (element: Element): Term => ({
  logOmega: Math.log(peakOmegaTau[element.shape]) - element.logTime,
  strength: element.amplitude,
  oscillating: element.shape === "resonance",
  at: (omega) => elementAt(element, omega),
});

const imaginary = (group: Group, omega: number): number => group.reduce((sum, term) => sum + term.at(omega).im, 0);

/** Angular frequencies on which a group is looked at: 40 a decade, a decade beyond its terms. */
function scan(group: Group): number[] {
  const from = Math.min(...group.map((term) => term.logOmega)) - 2.3;
  const to = Math.max(...group.map((term) => term.logOmega)) + 2.3;
  const steps = Math.ceil((to - from) / 0.0576);
  return Array.from({ length: steps + 1 }, (_, k) => Math.exp(from + ((to - from) * k) / steps));
}

/** Largest |Im| of a group, where (the lowest frequency where one goes round several times), largest Im of the other sign. */
function heights(group: Group): { peak: number; at: number; opposite: number } {
  const omegas = scan(group);
  const values = omegas.map((omega) => imaginary(group, omega));
  const top = Math.max(0, ...values);
  const bottom = Math.max(0, ...values.map((value) => -value));
  const sign = top > bottom ? 1 : -1;
  const peak = Math.max(top, bottom);
  const first = values.findIndex((value, k) => sign * value >= 0.98 * peak && !(sign * values[k + 1] > sign * value));
  return { peak, at: omegas[Math.max(first, 0)], opposite: Math.min(top, bottom) };
}

/** Both signs matter in it. */
function isMixed(group: Group): boolean {
  let plus = 0;
  let minus = 0;
  for (const { strength } of group) {
    if (strength > 0) plus += strength;
    else minus -= strength;
  }
  return Math.min(plus, minus) > minorShare * Math.max(plus, minus);
}

/** Consecutive terms of one sign. */
function runsOf(chain: Group): Group[] {
  const runs: Group[] = [];
  for (const term of chain) {
    const last = runs.at(-1);
    if (last && Math.sign(last[0].strength) === Math.sign(term.strength)) last.push(term);
    else runs.push([term]);
  }
  return runs;
}

/** Runs that cancel each other are joined, strongest cancellation first. */
function joinCancelling(runs: Group[]): Group[] {
  const joined = [...runs];
  for (;;) {
    let best = -1;
    let bestRatio = cancellation;
    for (let k = 0; k + 1 < joined.length; k++) {
      const ratio =
        heights([...joined[k], ...joined[k + 1]]).peak / Math.max(heights(joined[k]).peak, heights(joined[k + 1]).peak);
      if (ratio < bestRatio) [best, bestRatio] = [k, ratio];
    }
    if (best < 0) return joined;
    joined.splice(best, 2, [...joined[best], ...joined[best + 1]]);
  }
}

/** The longest stretch of runs that together stay in one half plane becomes one group; the rest likewise. */
function joinSpirals(runs: Group[]): Group[] {
  for (let length = runs.length; length > 1; length--) {
    for (let from = 0; from + length <= runs.length; from++) {
      const union = runs.slice(from, from + length).flat();
      const { peak, opposite } = heights(union);
      const apart = runs.slice(from, from + length).reduce((sum, run) => sum + heights(run).peak, 0);
      const comb = apart > combExcess * peak;
      if (opposite > spiralShare * peak && !comb) continue;
      if (valleysOf(union).length > 0 && !comb && !union.some((term) => term.oscillating)) continue;
      return [...joinSpirals(runs.slice(0, from)), union, ...joinSpirals(runs.slice(from + length))];
    }
  }
  return runs;
}

/** Valleys of |Im| between maxima, ln ω. */
function valleysOf(group: Group): number[] {
  const omegas = scan(group);
  const signed = omegas.map((omega) => imaginary(group, omega));
  // only the half plane of the highest point: where a spiral crosses into the other one is no valley
  const sign = Math.max(...signed) > -Math.min(...signed) ? 1 : -1;
  const values = signed.map((value) => Math.max(0, sign * value));
  const valleys: number[] = [];
  let top = 0;
  let low = Infinity;
  let lowAt = 0;
  values.forEach((value, k) => {
    if (value < low) [low, lowAt] = [value, k];
    if (value > top && low >= valleyDepth * top) {
      // still climbing to the first maximum, or the dip was too shallow to count
      [top, low] = [value, value];
    } else if (low < valleyDepth * top && low < valleyDepth * value) {
      const rest = Math.max(...values.slice(k));
      if (low < valleyDepth * rest) {
        valleys.push(Math.log(omegas[lowAt]));
        [top, low] = [value, value];
      }
    }
  });
  return valleys;
}

function splitAtValleys(group: Group): Group[] {
  if (isMixed(group)) return [group];
  const edges = [-Infinity, ...valleysOf(group), Infinity];
  return edges
    .slice(1)
    .map((high, k) => group.filter((term) => term.logOmega >= edges[k] && term.logOmega < high))
    .filter((part) => part.length > 0);
}

function groupsOf(terms: Term[], reference: number): Group[] {
  const byFrequency = (a: Term, b: Term) => a.logOmega - b.logOmega;
  const strong = terms.filter((term) => heightOf(term) >= bridgeShare * reference).sort(byFrequency);
  const chains: Group[] = [];
  strong.forEach((term, k) => {
    if (k > 0 && term.logOmega - strong[k - 1].logOmega < Math.log(chainRatio)) chains.at(-1)?.push(term);
    else chains.push([term]);
  });
  const groups = chains.flatMap((chain) =>
    joinSpirals(joinCancelling(joinSpirals(runsOf(chain)))).flatMap(splitAtValleys),
  );
  for (const term of terms) {
    if (strong.includes(term) || strong.length === 0) continue;
    const distance = (group: Group) => Math.min(...group.map((other) => Math.abs(other.logOmega - term.logOmega)));
    groups.reduce((a, b) => (distance(b) < distance(a) ? b : a)).push(term);
  }
  return absorbSatellites(groups, reference);
}

const total = (group: Group): number => group.reduce((sum, term) => sum + term.strength, 0);

/** Rule 5: weak groups without a maximum of their own join the stronger neighbour of the same sign. */
function absorbSatellites(groups: Group[], reference: number): Group[] {
  const left = [...groups];
  for (let k = 0; k < left.length; k++) {
    const own = heights(left[k]);
    if (Math.max(2 * own.peak, Math.abs(total(left[k]))) >= satelliteShare * reference) continue;
    for (const neighbour of [k - 1, k + 1]) {
      const other = left[neighbour];
      if (other === undefined || Math.sign(total(other)) !== Math.sign(total(left[k]))) continue;
      const there = heights(other);
      if (there.peak < own.peak || Math.abs(Math.log(there.at / own.at)) > Math.log(satelliteRatio)) continue;
      const union = [...other, ...left[k]];
      if (valleysOf(union).length > valleysOf(other).length) continue;
      left.splice(Math.min(k, neighbour), 2, union);
      k = -1;
      break;
    }
  }
  return left;
}

/** Peak by golden section around the highest point of the scan. */
function peakOf(group: Group): number {
  const { at } = heights(group);
  const value = (logOmega: number) => -Math.abs(imaginary(group, Math.exp(logOmega)));
  const ratio = (Math.sqrt(5) - 1) / 2;
  let low = Math.log(at) - 0.06;
  let high = Math.log(at) + 0.06;
  for (let step = 0; step < 50; step++) {
    const left = high - ratio * (high - low);
    const right = low + ratio * (high - low);
    if (value(left) < value(right)) high = right;
    else low = left;
  }
  return Math.exp((low + high) / 2);
}

function measure(group: Group, whole: (omega: number) => Complex): Arc {
  const omega = peakOf(group);
  const peakHz = omega / (2 * Math.PI);
  const height = imaginary(group, omega);
  const spanRe = Math.abs(total(group));
  const spanIm = Math.abs(height);
  const right = whole(omega).re >= 0;
  const quadrant = height > 0 ? (right ? 1 : 2) : right ? 4 : 3;
  return {
    peakHz,
    timeConstantS: 1 / omega,
    spanRe,
    spanIm,
    quadrant,
    depression: 1 - (4 / Math.PI) * Math.atan2(2 * spanIm, spanRe),
  };
}

/** Where neighbouring groups contribute the same |Im|, by bisection between their peaks. */
function valleyBetween(low: { group: Group; arc: Arc }, high: { group: Group; arc: Arc }): number {
  let from = Math.log(low.arc.peakHz);
  let to = Math.log(high.arc.peakHz);
  for (let step = 0; step < 40; step++) {
    const middle = (from + to) / 2;
    const omega = 2 * Math.PI * Math.exp(middle);
    const share = (side: { group: Group; arc: Arc }) => Math.abs(imaginary(side.group, omega)) / side.arc.spanIm;
    if (share(low) > share(high)) from = middle;
    else to = middle;
  }
  return Math.exp((from + to) / 2);
}

/** Growth of |Im| as 1/ω at the low end, or as ω at the high end: a blocking capacitor, an inductance, an arc far outside. */
function backgroundOf(samples: Samples): { capacitive: boolean; inductive: boolean } {
  const { omega, re, im } = samples;
  const count = omega.length;
  const largest = Math.max(...Array.from(re, (value, k) => Math.hypot(value, im[k])));
  const slope = (a: number, b: number) => Math.log(Math.abs(im[b] / im[a])) / Math.log(omega[b] / omega[a]);
  return {
    capacitive: Math.abs(im[0]) > 0.2 * largest && Math.abs(slope(0, 2) + 1) < 0.05,
    inductive: Math.abs(im[count - 1]) > 0.1 * largest && Math.abs(slope(count - 3, count - 1) - 1) < 0.05,
  };
}

interface Description {
  kind: "rational" | "elements";
  terms: Term[];
  deviation: number;
  at(omega: number): Complex;
}

const nothing: { description: Description; noise: number } = {
  description: { kind: "rational", terms: [], deviation: 0, at: () => complex(0) },
  noise: 0,
};

const fromElements = (fit: ElementFit): Description => ({
  kind: "elements",
  terms: fit.elements.filter((element) => element.amplitude !== 0).map(termOfElement),
  deviation: fit.deviation,
  at: (omega) => elementFitAt(fit, omega),
});

/** Fewer points say nothing about arcs. */
const fewestPoints = 4;

/**
 * Arcs of a spectrum; none where it has fewer than four points or is zero throughout.
 * @param curve frequencies in Hz, ascending and distinct; real and imaginary parts
 */
export function arcsOf(curve: Curve): ArcAnalysis {
  const unit = 2 * Math.PI * Math.sqrt(curve.frequencyHz[0] * curve.frequencyHz[curve.frequencyHz.length - 1]);
  const omega = curve.frequencyHz.map((frequency) => (2 * Math.PI * frequency) / unit);
  const samples: Samples = { omega, re: curve.re, im: curve.im };
  const largest = Math.max(...curve.re.map((value, k) => Math.hypot(value, curve.im[k])));
  const { description, noise } = omega.length < fewestPoints || largest === 0 ? nothing : describe(samples, largest);

  const background = description.terms.filter(
    (term) => term.logOmega < Math.log(omega[0] / 30) || term.logOmega > Math.log(omega[omega.length - 1] * 30),
  );
  const reference = Math.max(
    ...omega.map((w, k) =>
      modulus(
        subtract(
          complex(curve.re[k], curve.im[k]),
          background.reduce((sum, term) => add(sum, term.at(w)), complex(0)),
        ),
      ),
    ),
  );
  const low = omega[0];
  const high = omega[omega.length - 1];
  const found = groupsOf(description.terms, reference)
    .map((group) => ({ group, arc: measure(group, description.at) }))
    .filter(({ arc }) => {
      const size = Math.max(arc.spanRe, 2 * arc.spanIm);
      const at = 2 * Math.PI * arc.peakHz;
      const margin = size < weakShare * reference ? 1 : windowMargin;
      return at >= low / margin && at <= high * margin && size >= leastShare * reference && size >= leastSignal * noise;
    })
    .sort((a, b) => a.arc.peakHz - b.arc.peakHz);
  const inside = (frequencyHz: number) => (2 * Math.PI * frequencyHz) / unit;
  return {
    arcs: found.map(({ arc }) => ({
      ...arc,
      peakHz: arc.peakHz * unit,
      timeConstantS: arc.timeConstantS / unit,
    })),
    noise,
    approximation: {
      kind: description.kind,
      deviation: description.deviation,
      at: (frequencyHz) => description.at(inside(frequencyHz)),
      contribution: (arc, frequencyHz) =>
        found[arc].group.reduce((sum, term) => add(sum, term.at(inside(frequencyHz))), complex(0)),
      valleysHz: found.slice(1).map((next, k) => valleyBetween(found[k], next) * unit),
    },
  };
}

/** Relative error below which a spectrum counts as free of noise. */
const cleanTolerance = 1e-7;
/** With this many poles the spectrum holds a distribution, whose tail may reach under a neighbouring arc. */
const manyTerms = 6;

/** More points than this are thinned for the search; the description found is refined on all. */
const manyPoints = 160;

function thinned({ omega, re, im }: Samples): Samples {
  const stride = Math.ceil(omega.length / manyPoints);
  const kept = Array.from({ length: omega.length }, (_, k) => k).filter(
    (k) => k % stride === 0 || k === omega.length - 1,
  );
  return { omega: kept.map((k) => omega[k]), re: kept.map((k) => re[k]), im: kept.map((k) => im[k]) };
}

/** Terms and a constant give the spectrum: false where poles of a spiral far outside the window were not found. */
function addsUp({ terms }: Description, { omega, re, im }: Samples, largest: number): boolean {
  const rest = Array.from(omega, (value, k) =>
    terms.reduce((sum, term) => subtract(sum, term.at(value)), complex(re[k], im[k])),
  );
  const constant = rest.reduce((sum, { re }) => sum + re, 0) / rest.length;
  return rest.every(({ re, im }) => Math.hypot(re - constant, im) < 1e-2 * largest);
}

function describe(all: Samples, largest: number): { description: Description; noise: number } {
  const samples = all.omega.length > manyPoints ? thinned(all) : all;
  const background = backgroundOf(samples);
  const most = Math.max(1, Math.min(20, Math.floor(samples.omega.length / 3)));
  const rational = fitRational(samples, 1e-10 * largest, most);
  const noise = Math.min(localNoise(all), rational.rmsError);
  const model = new ElementModel(samples, background);
  if (noise >= cleanTolerance * largest) {
    const found = model.search(6, noise / 2, noise);
    const few = samples === all ? found : new ElementModel(all, background).refine(found.elements, 20);
    return { description: fromElements(few), noise: Math.min(noise, few.deviation) };
  }
  const clean: Description = {
    kind: "rational",
    terms: termsOfRational(rational, Math.max(3 * noise, 1e-9 * largest)),
    deviation: rational.rmsError,
    at: (omega) => evaluate(rational, complex(0, omega)),
  };
  if (!addsUp(clean, samples, largest)) return { description: fromElements(model.search(6, 0, 0)), noise };
  if (clean.terms.length < manyTerms) return { description: clean, noise };
  const seeds: Draft[] = groupsOf(clean.terms, largest).map((group) => ({
    shape: "depressed",
    form: 0.9,
    logTime: -Math.log(heights(group).at),
  }));
  const few = model.search(3, 1e-9 * largest, 1e-9 * largest, seeds.length <= 3 ? seeds : []);
  return { description: few.deviation < cleanTolerance * largest ? fromElements(few) : clean, noise };
}
