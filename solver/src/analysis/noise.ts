/**
 * The noise of a spectrum, estimated from the spectrum itself: what a smooth local model cannot follow.
 *
 * Each window of consecutive points is fitted by a rational function of s = iω with real coefficients,
 * (a₀ + a₁s + a₂s²)/(1 + b₁s + b₂s²), the most general response of two relaxations: first linear least squares after
 * multiplication by the denominator, repeated with the denominator of the step before (C. Sanathanan, J. Koerner, IEEE
 * Trans. Autom. Control 8, 56 (1963)), then Gauss–Newton steps on the true residual. The median of the windows'
 * variances resists outliers; a real and an imaginary part are taken to have the same standard deviation (P. Durbha,
 * M. Orazem, L. García-Rubio, J. Electrochem. Soc. 144, 48 (1997), from memory).
 */
import quantileChiSquare from "@stdlib/stats-base-dists-chisquare-quantile";
import type { Samples } from "./aaa.ts";
import { leastSquares } from "./leastSquares.ts";

const unknowns = 5;
/** Few points keep the window short, where two relaxations are enough. */
const windowSize = 6;
const linearisedPasses = 3;
const newtonPasses = 3;

interface LocalFit {
  square: number;
  denominator: { re: number; im: number }[];
  value: { re: number; im: number }[];
  residual: Float64Array;
}

/** Sum of squared residuals (Re and Im, divided by `scale`) of the local model over `size` points from `from`. */
function localResidual({ omega, re, im }: Samples, scale: ArrayLike<number>, from: number, size: number): number {
  const centre = Math.sqrt(omega[from] * omega[from + size - 1]);
  const points = Array.from({ length: size }, (_, k) => ({
    x: omega[from + k] / centre,
    re: re[from + k],
    im: im[from + k],
    weight: 1 / scale[from + k],
  }));
  const powers = (x: number) => [
    { re: 1, im: 0 },
    { re: 0, im: x },
    { re: -x * x, im: 0 },
  ];

  const evaluate = (c: ArrayLike<number>): LocalFit => {
    const residual = new Float64Array(2 * size);
    const denominator = points.map(({ x }) => ({ re: 1 - c[4] * x * x, im: c[3] * x }));
    const value = points.map(({ x, re, im, weight }, k) => {
      const below = denominator[k];
      const square = below.re * below.re + below.im * below.im;
      const above = { re: c[0] - c[2] * x * x, im: c[1] * x };
      const fit = {
        re: (above.re * below.re + above.im * below.im) / square,
        im: (above.im * below.re - above.re * below.im) / square,
      };
      residual[2 * k] = weight * (re - fit.re);
      residual[2 * k + 1] = weight * (im - fit.im);
      return fit;
    });
    return { square: residual.reduce((sum, entry) => sum + entry * entry, 0), denominator, value, residual };
  };

  /** Columns s^k/D for the numerator and −f s^k/D for the denominator: the linearised model and the Jacobian alike. */
  const columnsAt = (denominator: LocalFit["denominator"], value: { re: number; im: number }[]): Float64Array[] => {
    const columns = Array.from({ length: unknowns }, () => new Float64Array(2 * size));
    points.forEach(({ x, weight }, k) => {
      const below = denominator[k];
      const square = below.re * below.re + below.im * below.im;
      powers(x).forEach((power, order) => {
        const ratio = {
          re: (weight * (power.re * below.re + power.im * below.im)) / square,
          im: (weight * (power.im * below.re - power.re * below.im)) / square,
        };
        columns[order][2 * k] = ratio.re;
        columns[order][2 * k + 1] = ratio.im;
        if (order === 0) return;
        columns[2 + order][2 * k] = -(ratio.re * value[k].re - ratio.im * value[k].im);
        columns[2 + order][2 * k + 1] = -(ratio.re * value[k].im + ratio.im * value[k].re);
      });
    });
    return columns;
  };

  let best: LocalFit | null = null;
  let coefficients: Float64Array = new Float64Array(unknowns);
  let denominator = points.map(() => ({ re: 1, im: 0 }));
  for (let pass = 0; pass < linearisedPasses; pass++) {
    const target = new Float64Array(2 * size);
    points.forEach(({ re, im, weight }, k) => {
      const below = denominator[k];
      const square = below.re * below.re + below.im * below.im;
      target[2 * k] = (weight * (re * below.re + im * below.im)) / square;
      target[2 * k + 1] = (weight * (im * below.re - re * below.im)) / square;
    });
    const solution = leastSquares(columnsAt(denominator, points), target).coefficients;
    const fit = evaluate(solution);
    denominator = fit.denominator;
    if (best === null || fit.square < best.square) {
      best = fit;
      coefficients = solution;
    }
  }
  for (let pass = 0; pass < newtonPasses && best !== null; pass++) {
    const step = leastSquares(columnsAt(best.denominator, best.value), best.residual).coefficients;
    const moved: Float64Array = coefficients.map((value, k) => value + step[k]);
    const fit = evaluate(moved);
    if (!(fit.square < best.square)) break;
    best = fit;
    coefficients = moved;
  }
  return best === null ? 0 : best.square;
}

/**
 * Standard deviation of Re and of Im, in units of `scale` (the spectrum's unit where it is left out); 0 for fewer than
 * six points. Clean spectra give what the local model misses, a few 1e-5 of the modulus at ten points a decade.
 * @param scale relative standard deviation per point
 */
export function localNoise(
  samples: Samples,
  scale: ArrayLike<number> = new Float64Array(samples.omega.length).fill(1),
): number {
  return median(localVariances(samples, scale), Math.min(windowSize, samples.omega.length));
}

/** Variance per window of consecutive points, in units of `scale` squared; empty for fewer than six points. */
export function localVariances(samples: Samples, scale: ArrayLike<number>): number[] {
  const count = samples.omega.length;
  const size = Math.min(windowSize, count);
  if (size < 6) return [];
  const degrees = 2 * size - unknowns;
  return Array.from({ length: count - size + 1 }, (_, from) => localResidual(samples, scale, from, size) / degrees);
}

function median(variances: number[], size: number): number {
  if (variances.length === 0) return 0;
  const sorted = [...variances].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  const value = sorted.length % 2 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
  const degrees = 2 * size - unknowns;
  return Math.sqrt((value * degrees) / quantileChiSquare(0.5, degrees));
}
