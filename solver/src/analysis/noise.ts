/**
 * The noise of a spectrum, estimated from the spectrum itself: what a smooth local model cannot follow.
 *
 * Each window of consecutive points is fitted by a rational function of s = iω with real coefficients,
 * (a₀ + a₁s + a₂s²)/(1 + b₁s + b₂s²), the most general response of two relaxations; it is linear least squares after
 * multiplication by the denominator, repeated with the denominator of the step before (C. Sanathanan, J. Koerner, IEEE
 * Trans. Autom. Control 8, 56 (1963)). The median of the windows' variances resists outliers; a real and an imaginary
 * part are taken to have the same standard deviation (P. Durbha, M. Orazem, L. García-Rubio, J. Electrochem. Soc. 144,
 * 48 (1997), from memory).
 */
import quantileChiSquare from "@stdlib/stats-base-dists-chisquare-quantile";
import { Matrix, solve } from "ml-matrix";
import type { Samples } from "./aaa.ts";

const parameters = 5;

/** Sum of squared residuals (Re and Im) of the local model over points `from`…`from + size − 1`. */
function localResidual(samples: Samples, from: number, size: number): number {
  const { omega, re, im } = samples;
  const centre = Math.sqrt(omega[from] * omega[from + size - 1]);
  let denominator = new Array<{ re: number; im: number }>(size).fill({ re: 1, im: 0 });
  let best = Infinity;
  for (let pass = 0; pass < 4; pass++) {
    const left = new Matrix(2 * size, parameters);
    const right = new Matrix(2 * size, 1);
    for (let point = 0; point < size; point++) {
      const x = omega[from + point] / centre;
      const f = { re: re[from + point], im: im[from + point] };
      const weight = 1 / Math.hypot(denominator[point].re, denominator[point].im);
      // a₀ + a₁ ix − a₂ x² − b₁ ix f + b₂ x² f = f
      const rowRe = [1, 0, -x * x, x * f.im, x * x * f.re];
      const rowIm = [0, x, 0, -x * f.re, x * x * f.im];
      rowRe.forEach((value, column) => {
        left.set(2 * point, column, weight * value);
        left.set(2 * point + 1, column, weight * rowIm[column]);
      });
      right.set(2 * point, 0, weight * f.re);
      right.set(2 * point + 1, 0, weight * f.im);
    }
    const [a0, a1, a2, b1, b2] = solve(left, right, true).to1DArray();
    let square = 0;
    denominator = denominator.map((_, point) => {
      const x = omega[from + point] / centre;
      const below = { re: 1 - b2 * x * x, im: b1 * x };
      const size2 = below.re * below.re + below.im * below.im;
      const above = { re: a0 - a2 * x * x, im: a1 * x };
      square +=
        ((above.re * below.re + above.im * below.im) / size2 - re[from + point]) ** 2 +
        ((above.im * below.re - above.re * below.im) / size2 - im[from + point]) ** 2;
      return below;
    });
    if (square < best) best = square;
  }
  return best;
}

/**
 * Standard deviation of Re and of Im, in the spectrum's unit; 0 for fewer than six points.
 * Clean spectra give what the local model misses, a few 1e-5 of the modulus at five points a decade.
 */
export function localNoise(samples: Samples): number {
  const count = samples.omega.length;
  const size = Math.min(8, count);
  if (size < 6) return 0;
  const degrees = 2 * size - parameters;
  const variances: number[] = [];
  for (let from = 0; from + size <= count; from++) variances.push(localResidual(samples, from, size) / degrees);
  variances.sort((a, b) => a - b);
  const middle = variances.length >> 1;
  const median = variances.length % 2 ? variances[middle] : (variances[middle - 1] + variances[middle]) / 2;
  return Math.sqrt((median * degrees) / quantileChiSquare(0.5, degrees));
}
