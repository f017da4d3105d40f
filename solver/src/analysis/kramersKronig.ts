/**
 * Linear Kramers–Kronig test: can a sum of relaxations with fixed time constants describe the data?
 *
 * B. A. Boukamp, J. Electrochem. Soc. 142, 1885 (1995): f(iω) = R∞ + Σ R_k/(1 + iωτ_k) [+ iωL + 1/(iωC)], τ_k log-spaced
 * and fixed, so the problem is linear and every term obeys the Kramers–Kronig relations. IMPS with recombination arcs,
 * far-side diffusion and transit need R_k of both signs in perfect data, so the usual criterion (few negative R_k) cannot
 * choose how many to take; the corrected information criterion does (H. Akaike 1974; C. Hurvich, C.-L. Tsai,
 * Biometrika 76, 297 (1989), from memory). The data fail where
 *
 * 1. the residual is larger than the noise, which is known or estimated by local fits that do not see slow violations;
 * 2. neighbouring residuals have the same sign more often than chance (runs test, A. Wald, J. Wolfowitz 1940); or
 * 3. one point stands out of all others when it is left out of the fit.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | scale | standard deviation of Re and of Im per point, or its shape | spectrum's, or relative |
 * | leverage | diagonal of the projection on the model: residual left out = residual/(1 − leverage) | 1 |
 */

import { type Complex, complex } from "../numerics/complex.ts";
import type { Samples } from "./aaa.ts";
import { ElementModel, elementAt } from "./elements.ts";
import { type LeastSquares, leastSquares } from "./leastSquares.ts";
import type { Verdict } from "./verdict.ts";

export interface KramersKronig {
  verdict: Verdict;
  /** Root of the mean of |data − fit|² over the largest modulus. */
  rmsResidual: number;
  /** Index of the worst residual, each judged with its point left out. */
  worst: number;
  /** One sentence: why, with the figures. */
  reason: string;
  /** What would have been seen, relative to the largest modulus. */
  detectable: {
    /** A smooth violation of the relations of this amplitude. */
    violation: number;
    /** A gain that drifts linearly in log f over the sweep by this much in total. */
    gainDrift: number;
    /** A single point off by this much. */
    outlier: number;
  };
  /** The fit and the residuals, in the order of the samples and the unit of the spectrum. */
  fit: { re: number[]; im: number[] };
  /** Standard deviation of Re and of Im from the residuals, unit of the spectrum; as if the relations held. */
  deviation: number;
}

/** Time constants per decade that are tried; each level holds the one before. */
const levels = [1, 2, 4, 8];
/** Decades of time constants beyond the window on either side. */
const margin = 1;
/** Below this, relative to the largest modulus, a residual is the arithmetic of the data file, not a violation. */
const arithmetic = 1e-6;
/** Amplitudes that a point near the end may need, in units of the largest modulus. */
const amplitudeNearEnd = 3;
/** Standard errors at which a smooth violation is marginal and fails. */
const marginalAt = 3;
const failsAt = 4;
/** Chance that the worst of all points is called an outlier by mistake: marginal, fails. */
const outlierChance = { marginal: 1e-3, fails: 1e-4 };

/** ln τ of all levels, coarse first, so that every leading set is a level. */
function timeConstants(samples: Samples): { logTimes: number[]; counts: number[] } {
  const { omega } = samples;
  const from = -Math.log(omega[omega.length - 1]) - margin * Math.LN10;
  const to = -Math.log(omega[0]) + margin * Math.LN10;
  const steps = Math.ceil((to - from) / Math.LN10);
  const seen = new Set<number>();
  const logTimes: number[] = [];
  const counts: number[] = [];
  const finest = levels[levels.length - 1];
  for (const level of levels) {
    for (let k = 0; k <= steps * level; k++) {
      const place = (k * finest) / level;
      if (seen.has(place)) continue;
      seen.add(place);
      logTimes.push(from + ((to - from) * place) / (steps * finest));
    }
    counts.push(logTimes.length);
  }
  return { logTimes, counts };
}

function columnOf({ omega }: Samples, scale: ArrayLike<number>, value: (omega: number) => Complex): Float64Array {
  const entries = new Float64Array(2 * omega.length);
  for (let k = 0; k < omega.length; k++) {
    const { re, im } = value(omega[k]);
    entries[2 * k] = re / scale[k];
    entries[2 * k + 1] = im / scale[k];
  }
  return entries;
}

/** A constant, a capacitor in series, an inductance in series. */
const backgroundColumns = (samples: Samples, scale: ArrayLike<number>): Float64Array[] => [
  columnOf(samples, scale, () => complex(1)),
  columnOf(samples, scale, (omega) => complex(0, -samples.omega[0] / omega)),
  columnOf(samples, scale, (omega) => complex(0, omega / samples.omega[samples.omega.length - 1])),
];

const relaxationColumn = (samples: Samples, scale: ArrayLike<number>, logTime: number): Float64Array =>
  columnOf(samples, scale, (omega) => {
    const x = omega * Math.exp(logTime);
    return complex(1 / (1 + x * x), -x / (1 + x * x));
  });

/** Columns of the elements that a free fit finds; resonances stay wider than a few points. */
function elementColumns(samples: Samples, scale: ArrayLike<number>, enough: number): Float64Array[] {
  const { omega } = samples;
  const perDecade = (omega.length - 1) / Math.log10(omega[omega.length - 1] / omega[0]);
  return new ElementModel(samples, { capacitive: false, inductive: false }, Math.max(1, perDecade / 4))
    .search(4, enough, enough)
    .elements.map((element) => columnOf(samples, scale, (value) => elementAt({ ...element, amplitude: 1 }, value)));
}

const informationCriterion = (square: number, data: number, rank: number): number =>
  data * Math.log(square / data) + 2 * rank + (2 * rank * (rank + 1)) / (data - rank - 1);

/** The level with the lowest corrected information criterion. */
function chooseLevel(all: LeastSquares, counts: number[], data: number, floor: number): number {
  let best = counts[0];
  let lowest = Infinity;
  for (const count of counts) {
    const rank = all.basis.slice(0, count).filter((vector) => vector !== null).length;
    if (data - rank - 1 < 4) continue;
    const criterion = informationCriterion(Math.max(all.squares[count], floor), data, rank);
    if (criterion < lowest) {
      lowest = criterion;
      best = count;
    }
  }
  return best;
}

/** Standard score of the number of runs of equal sign; negative where signs cling together. */
function runsScore(values: readonly number[]): number {
  const signs = values.filter((value) => value !== 0).map(Math.sign);
  const plus = signs.filter((sign) => sign > 0).length;
  const minus = signs.length - plus;
  if (plus === 0 || minus === 0) return signs.length > 8 ? -Math.sqrt(signs.length) : 0;
  const runs = 1 + signs.slice(1).filter((sign, k) => sign !== signs[k]).length;
  const expected = 1 + (2 * plus * minus) / signs.length;
  const variance = ((expected - 1) * (expected - 2)) / (signs.length - 1);
  return variance > 0 ? (runs - expected) / Math.sqrt(variance) : 0;
}

/**
 * Standard deviation of what changes from one point to the next: median of squared second differences, in which a slow
 * violation has no share.
 */
function roughness(residual: Float64Array): number {
  const squares: number[] = [];
  for (let row = 2; row + 2 < residual.length; row++) {
    squares.push((residual[row - 2] - 2 * residual[row] + residual[row + 2]) ** 2 / 6);
  }
  squares.sort((a, b) => a - b);
  // the median of χ² with one degree of freedom is 0.4549
  return Math.sqrt(squares[squares.length >> 1] / 0.4549);
}

interface Attempt {
  residual: Float64Array;
  leverage: Float64Array;
  /** Data less unknowns. */
  degrees: number;
  /** Columns taken. */
  chosen: number;
}

/** Fit of the level that the criterion chooses; `first` columns come before the grid and are in every level. */
function attempt(
  columns: Float64Array[],
  counts: number[],
  target: Float64Array,
  floor: number,
  least: number,
): Attempt {
  const all = leastSquares(columns, target, 1e-12, least);
  const chosen = chooseLevel(all, counts, target.length, target.length * (0.01 * floor) ** 2);
  const { basis, residual } = leastSquares(columns.slice(0, chosen), target, 1e-12, least);
  const leverage = new Float64Array(target.length);
  for (const vector of basis) {
    vector?.forEach((entry, row) => {
      leverage[row] += entry * entry;
    });
  }
  const rank = basis.filter((vector) => vector !== null).length;
  return { residual, leverage, degrees: Math.max(1, target.length - rank), chosen };
}

/** Variance of the residuals per degree of freedom. */
const meanSquare = ({ residual, degrees }: Pick<Attempt, "residual" | "degrees">): number =>
  residual.reduce((sum, value) => sum + value * value, 0) / degrees;

/** |Δ|² of one point, Re and Im, with the point left out of the fit. */
const squareLeftOut = ({ residual, leverage }: Pick<Attempt, "residual" | "leverage">, k: number): number =>
  [2 * k, 2 * k + 1].reduce((sum, row) => sum + residual[row] ** 2 / Math.max(1 - leverage[row], 0.05), 0);

/** Chance of the worst of N points: |Δ|²/σ² of Re and Im is χ² with two degrees of freedom, P(> x) = exp(−x/2). */
const outlierProbability = (square: number, reference: number, count: number): number =>
  count * Math.exp(-square / (reference * reference) / 2);

interface Judgement {
  verdict: Verdict;
  reason: string;
  worst: number;
  /** Standard deviation in units of the scale that the residuals were judged by. */
  reference: number;
}

const level = (value: number, marginal: number, fails: number): Verdict =>
  value >= fails ? "fails" : value >= marginal ? "marginal" : "holds";

function judge(
  { residual, leverage, degrees }: Attempt,
  omega: ArrayLike<number>,
  noise: number,
  known: boolean,
  floor: number,
): Judgement {
  const count = omega.length;
  const rough = roughness(residual) * Math.sqrt((2 * count) / degrees);
  const reference = Math.max(known ? noise : Math.min(noise, rough), floor);
  const size = Math.sqrt(meanSquare({ residual, degrees }));
  // standard error of the ratio: that of the residual's scale, and of the noise where it is estimated from the same points
  const standardError = Math.sqrt(1 / (2 * degrees) + (known ? 0 : 1 / count));
  const excess = (size / reference - 1) / standardError;

  let worst = 0;
  let worstSquare = -1;
  for (let k = 0; k < count; k++) {
    const square = squareLeftOut({ residual, leverage }, k);
    if (square > worstSquare) [worst, worstSquare] = [k, square];
  }
  const chance = outlierProbability(worstSquare, reference, count);
  const part = (offset: number) => Array.from({ length: count }, (_, k) => residual[2 * k + offset]);
  const runs = size > floor ? -Math.min(runsScore(part(0)), runsScore(part(1))) : 0;
  const findings: [Verdict, string][] = [
    [level(excess, marginalAt, failsAt), `the residual is ${(size / reference).toFixed(2)} times the noise`],
    [level(runs, marginalAt, failsAt), "neighbouring residuals have the same sign more often than by chance"],
    [
      level(-Math.log(chance), -Math.log(outlierChance.marginal), -Math.log(outlierChance.fails)),
      `the point at ${Number((omega[worst] / (2 * Math.PI)).toPrecision(4))} Hz is off by ${(Math.sqrt(worstSquare / 2) / reference).toFixed(1)} standard deviations`,
    ],
  ];
  const decisive =
    findings.find(([verdict]) => verdict === "fails") ?? findings.find(([verdict]) => verdict === "marginal");
  return {
    verdict: decisive?.[0] ?? "holds",
    reason: decisive?.[1] ?? "the residual is what the noise explains",
    worst,
    reference,
  };
}

interface Fit extends Attempt, Judgement {}

interface Basis {
  /** Columns that every level has. */
  first: Float64Array[];
  grid: Float64Array[];
  /** Columns of the grid in each level. */
  counts: number[];
  target: Float64Array;
  floor: number;
}

/** `withElements` adds transit, resonance and relaxations between the grid's times. */
function basisOf(samples: Samples, scale: ArrayLike<number>, withElements: boolean): Basis {
  const { omega, re, im } = samples;
  const target = new Float64Array(2 * omega.length);
  for (let k = 0; k < omega.length; k++) {
    target[2 * k] = re[k] / scale[k];
    target[2 * k + 1] = im[k] / scale[k];
  }
  const { logTimes, counts } = timeConstants(samples);
  const first = backgroundColumns(samples, scale);
  if (withElements) first.push(...elementColumns(samples, scale, arithmetic * largestOf(samples)));
  const grid = logTimes.map((logTime) => relaxationColumn(samples, scale, logTime));
  return { first, grid, counts, target, floor: (arithmetic * largestOf(samples)) / meanOf(scale) };
}

function attemptAt({ first, grid, target, floor }: Basis, counts: number[], least = 0): Attempt {
  const sizes = counts.map((entry) => entry + first.length);
  return attempt([...first, ...grid], sizes, target, floor, least);
}

function fitAndJudge(
  samples: Samples,
  scale: ArrayLike<number>,
  noise: number,
  known: boolean,
  withElements: boolean,
): Fit {
  const basis = basisOf(samples, scale, withElements);
  const tried = attemptAt(basis, [0, ...basis.counts]);
  return { ...tried, ...judge(tried, samples.omega, noise, known, basis.floor) };
}

const largestOf = ({ re, im }: Samples): number => Math.max(...Array.from(re, (value, k) => Math.hypot(value, im[k])));
const meanOf = (scale: ArrayLike<number>): number =>
  Math.sqrt(Array.from(scale).reduce((sum, value) => sum + value * value, 0) / scale.length);

const without = (values: ArrayLike<number>, at: number): number[] => Array.from(values).filter((_, k) => k !== at);

/** Points in the order of their residual, each left out. */
function ranked(tried: Attempt): number[] {
  const squares = Array.from({ length: tried.residual.length / 2 }, (_, k) => squareLeftOut(tried, k));
  return squares.map((_, k) => k).sort((a, b) => squares[b] - squares[a]);
}

/** A fit without one point holds, and the point itself is the fault. */
function outlierOf(
  samples: Samples,
  scale: ArrayLike<number>,
  noise: number,
  known: boolean,
  withElements: boolean,
  candidates: number[],
): number | null {
  for (const at of candidates) {
    const rest = { omega: without(samples.omega, at), re: without(samples.re, at), im: without(samples.im, at) };
    if (fitAndJudge(rest, without(scale, at), noise, known, withElements).verdict === "holds") return at;
  }
  return null;
}

/**
 * A point near either end that the others do not announce. There the finest columns can follow any single point, but
 * only with amplitudes far above the spectrum's own that nearly cancel, so columns are left out whose part that is not
 * in those before them would drown in the noise at such an amplitude.
 */
function outlierNearEnd(samples: Samples, scale: ArrayLike<number>, noise: number, known: boolean): number | null {
  const count = samples.omega.length;
  const basis = basisOf(samples, scale, false);
  const sizes = [0, ...basis.counts];
  const least = noise / (amplitudeNearEnd * largestOf(samples));
  const examined = (at: number) => {
    const dropped = (column: Float64Array) => column.filter((_, row) => row >> 1 !== at);
    const { first, grid, target } = basis;
    const rest = { ...basis, first: first.map(dropped), grid: grid.map(dropped), target: dropped(target) };
    const others = attemptAt(rest, sizes, least);
    const { verdict, reference } = judge(others, without(samples.omega, at), noise, known, basis.floor);
    const square = squareLeftOut(attemptAt(basis, [others.chosen - first.length], least), at);
    const odd = verdict === "holds" && outlierProbability(square, reference, count) < outlierChance.fails;
    const { residual, degrees } = others;
    const left = informationCriterion(meanSquare(others) * degrees, residual.length, residual.length - degrees);
    return { at, odd, left };
  };
  for (const end of [
    [0, 1],
    [count - 1, count - 2],
  ]) {
    const [better, worse] = end.map(examined).sort((a, b) => a.left - b.left);
    // An outlier bends the fit at its neighbour too: the one without which the rest is described best is at fault.
    if (better.odd || worse.odd) return better.at;
  }
  return null;
}

/** Points that are tried as the only outlier, of each of two fits. */
const suspectsPerFit = 3;

/** The worst points of the fit chosen, and of the finest one: the former may be coarse because of the outlier. */
function suspicious(samples: Samples, scale: ArrayLike<number>, fit: Fit): number[] {
  const basis = basisOf(samples, scale, false);
  const finest = basis.counts.filter((entry) => entry + basis.first.length < 1.2 * samples.omega.length).at(-1);
  const fine = finest === undefined ? [] : ranked(attemptAt(basis, [finest])).slice(0, suspectsPerFit);
  return [...new Set([...ranked(fit).slice(0, suspectsPerFit), ...fine])];
}

/**
 * Test one spectrum.
 * @param samples angular frequencies in rad/s, ascending, repeats allowed; at least ten points
 * @param scale standard deviation of Re and of Im per point, or its shape (1 throughout, or the modulus)
 * @param noise standard deviation in units of `scale`: 1 where it is known, an estimate otherwise
 * @param known whether `noise` is known rather than estimated
 */
export function kramersKronig(
  samples: Samples,
  scale: ArrayLike<number>,
  noise: number,
  known: boolean,
): KramersKronig {
  const { omega, re, im } = samples;
  const count = omega.length;
  const largest = largestOf(samples);
  const alone = (outlier: number): Pick<Fit, "verdict" | "worst" | "reason"> => {
    const hz = Number((omega[outlier] / (2 * Math.PI)).toPrecision(4));
    const reason = `the point at ${hz} Hz does not fit; without it the relations hold`;
    return { verdict: "fails", worst: outlier, reason };
  };
  let fit = fitAndJudge(samples, scale, noise, known, false);
  const nearEnd = outlierNearEnd(samples, scale, noise, known);
  if (nearEnd !== null) fit = { ...fit, ...alone(nearEnd) };
  else if (fit.verdict !== "holds") {
    const suspects = suspicious(samples, scale, fit);
    const freer = fitAndJudge(samples, scale, noise, known, true);
    if (freer.verdict === "holds" || meanSquare(freer) < meanSquare(fit)) fit = freer;
    const outlier =
      freer.verdict === "holds"
        ? null
        : (outlierOf(samples, scale, noise, known, false, suspects) ??
          outlierOf(samples, scale, noise, known, true, ranked(freer).slice(0, 1)));
    if (outlier !== null) fit = { ...fit, ...alone(outlier), verdict: fit.verdict };
  }
  const { residual, degrees } = fit;
  const rest = (row: number, k: number) => residual[row] * scale[k];
  let squares = 0;
  for (let k = 0; k < count; k++) squares += rest(2 * k, k) ** 2 + rest(2 * k + 1, k) ** 2;

  const typical = (fit.reference * meanOf(scale)) / largest;
  const decades = Math.log10(omega[count - 1] / omega[0]);
  const violation = (typical * failsAt) / Math.sqrt(degrees);
  return {
    verdict: fit.verdict,
    rmsResidual: Math.sqrt(squares / count) / largest,
    worst: fit.worst,
    reason: fit.reason,
    detectable: {
      violation,
      gainDrift: (violation * decades * Math.LN10 * 2) / Math.PI,
      outlier: typical * Math.sqrt(2 * Math.log(count / outlierChance.fails)),
    },
    fit: {
      re: Array.from({ length: count }, (_, k) => re[k] - rest(2 * k, k)),
      im: Array.from({ length: count }, (_, k) => im[k] - rest(2 * k + 1, k)),
    },
    deviation: Math.sqrt(squares / degrees),
  };
}
