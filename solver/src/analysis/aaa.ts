/**
 * Rational approximation of a spectrum on the imaginary axis: the AAA algorithm.
 *
 * Y. Nakatsukasa, O. Sète, L. N. Trefethen, SIAM J. Sci. Comput. 40, A1494 (2018): barycentric form
 * r(s) = Σ w_j f_j/(s − z_j) / Σ w_j/(s − z_j), support points chosen greedily, weights from the smallest singular
 * vector of the Loewner matrix, poles as the zeros of the denominator.
 *
 * Every support point iω_j comes with its conjugate −iω_j and the conjugate weight, so r is real on the real axis; with
 * w_j = a_j + i b_j the problem is real in (a_j, b_j). Spectra run over many decades: columns are scaled by ω_j (terms
 * ω_j/(s − z_j) do not change with the unit of time) and rows by 1/|denominator| of the step before, which turns the
 * linearised residual into the true one (C. Sanathanan, J. Koerner, IEEE Trans. Autom. Control 8, 56 (1963)).
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | omega | angular frequencies, ascending, scaled by the caller | any |
 * | re, im | values of the spectrum at iω | spectrum's |
 * | support | indices of the support points in omega | 1 |
 * | a, b | real and imaginary part of the weights | 1 |
 */
import { EigenvalueDecomposition, Matrix, SingularValueDecomposition } from "ml-matrix";
import { add, type Complex, complex, divide, modulus, multiply, scale, subtract } from "../numerics/complex.ts";

export interface Samples {
  readonly omega: ArrayLike<number>;
  readonly re: ArrayLike<number>;
  readonly im: ArrayLike<number>;
}

export interface BarycentricForm {
  readonly supportOmega: number[];
  readonly values: Complex[];
  readonly weights: Complex[];
}

export interface RationalFit extends BarycentricForm {
  /** Indices of the support points, in the order they were chosen. */
  readonly support: number[];
  /** Largest and root-mean-square error over the points that are no support points, in the spectrum's unit. */
  readonly maxError: number;
  readonly rmsError: number;
}

/** Numerator and denominator of the barycentric form at s; s must not be a support point. */
function quotient(form: BarycentricForm, s: Complex): { numerator: Complex; denominator: Complex; slope: Complex } {
  let numerator = complex(0);
  let denominator = complex(0);
  let slope = complex(0);
  form.supportOmega.forEach((omega, j) => {
    for (const sign of [1, -1]) {
      const weight = sign > 0 ? form.weights[j] : { re: form.weights[j].re, im: -form.weights[j].im };
      const value = sign > 0 ? form.values[j] : { re: form.values[j].re, im: -form.values[j].im };
      const difference = subtract(s, complex(0, sign * omega));
      const term = divide(weight, difference);
      denominator = add(denominator, term);
      numerator = add(numerator, multiply(term, value));
      slope = subtract(slope, divide(term, difference));
    }
  });
  return { numerator, denominator, slope };
}

/** Value of the rational function at s (complex, same unit as omega). */
export function evaluate(form: BarycentricForm, s: Complex): Complex {
  const at = form.supportOmega.findIndex((omega) => s.re === 0 && s.im === omega);
  if (at >= 0) return form.values[at];
  const { numerator, denominator } = quotient(form, s);
  return divide(numerator, denominator);
}

/** Weights for given support points: smallest singular vector of the real Loewner matrix, reweighted once. */
function weightsFor(samples: Samples, support: number[]): Complex[] {
  const { omega, re, im } = samples;
  const chosen = new Set(support);
  const rows: number[] = [];
  for (let k = 0; k < omega.length; k++) if (!chosen.has(k)) rows.push(k);
  const m = support.length;
  let rowScale = rows.map(() => 1);
  let weights: Complex[] = [];
  for (let pass = 0; pass < 2; pass++) {
    const loewner = new Matrix(Math.max(2 * rows.length, 2 * m), 2 * m);
    rows.forEach((k, row) => {
      support.forEach((j, column) => {
        // (f_k − f_j)/(iω_k − iω_j) and (f_k − conj f_j)/(iω_k + iω_j), times ω_j
        const direct = omega[j] / (omega[k] - omega[j]);
        const mirrored = omega[j] / (omega[k] + omega[j]);
        const one = { re: (im[k] - im[j]) * direct, im: -(re[k] - re[j]) * direct };
        const two = { re: (im[k] + im[j]) * mirrored, im: -(re[k] - re[j]) * mirrored };
        // (one)(a + ib) + (two)(a − ib)
        loewner.set(2 * row, 2 * column, rowScale[row] * (one.re + two.re));
        loewner.set(2 * row, 2 * column + 1, rowScale[row] * (two.im - one.im));
        loewner.set(2 * row + 1, 2 * column, rowScale[row] * (one.im + two.im));
        loewner.set(2 * row + 1, 2 * column + 1, rowScale[row] * (one.re - two.re));
      });
    });
    const { rightSingularVectors } = new SingularValueDecomposition(loewner, {
      computeLeftSingularVectors: false,
      computeRightSingularVectors: true,
      autoTranspose: false,
    });
    const last = 2 * m - 1;
    weights = support.map((j, column) =>
      scale(
        complex(rightSingularVectors.get(2 * column, last), rightSingularVectors.get(2 * column + 1, last)),
        omega[j],
      ),
    );
    const form = { supportOmega: support.map((j) => omega[j]), values: [], weights };
    rowScale = rows.map((k) => 1 / Math.max(modulus(denominatorAt(form, omega[k])), 1e-300));
    const mean = Math.exp(rowScale.reduce((sum, value) => sum + Math.log(value), 0) / rowScale.length);
    rowScale = rowScale.map((value) => value / mean);
  }
  return weights;
}

function denominatorAt(form: { supportOmega: number[]; weights: Complex[] }, omega: number): Complex {
  let denominator = complex(0);
  form.supportOmega.forEach((support, j) => {
    const { re, im } = form.weights[j];
    const direct = 1 / (omega - support);
    const mirrored = 1 / (omega + support);
    denominator = add(denominator, complex(im * direct - im * mirrored, -re * direct - re * mirrored));
  });
  return denominator;
}

/** With no real progress over this many support points the rest is noise. */
const patience = 5;

/**
 * Greedy AAA fit.
 * @param tolerance stop when the root-mean-square error of the remaining points is below it (spectrum's unit)
 * @param maximumSupport most support points; each brings two poles
 */
export function fitRational(samples: Samples, tolerance: number, maximumSupport: number): RationalFit {
  const { omega, re, im } = samples;
  const count = omega.length;
  const mean = complex(
    Array.from(re).reduce((sum, value) => sum + value, 0) / count,
    Array.from(im).reduce((sum, value) => sum + value, 0) / count,
  );
  let current: Complex[] = Array.from({ length: count }, () => mean);
  const support: number[] = [];
  let best: RationalFit | null = null;
  const history: number[] = [];
  const limit = Math.min(maximumSupport, Math.floor((count - 1) / 2));
  while (support.length < limit) {
    let worst = -1;
    let worstError = -1;
    for (let k = 0; k < count; k++) {
      if (support.includes(k)) continue;
      const error = Math.hypot(re[k] - current[k].re, im[k] - current[k].im);
      if (error > worstError) {
        worst = k;
        worstError = error;
      }
    }
    support.push(worst);
    const weights = weightsFor(samples, support);
    const form = {
      supportOmega: support.map((j) => omega[j]),
      values: support.map((j) => complex(re[j], im[j])),
      weights,
    };
    current = Array.from({ length: count }, (_, k) => evaluate(form, complex(0, omega[k])));
    let maxError = 0;
    let square = 0;
    current.forEach((value, k) => {
      const error = Math.hypot(re[k] - value.re, im[k] - value.im);
      maxError = Math.max(maxError, error);
      square += error * error;
    });
    const rmsError = Math.sqrt(square / Math.max(1, count - support.length));
    const fit = { ...form, support: [...support], maxError, rmsError };
    if (best === null || rmsError < best.rmsError) best = fit;
    if (rmsError <= tolerance) return fit;
    history.push(rmsError);
    if (history.length > patience + 3 && rmsError > 0.3 * history[history.length - 1 - patience]) break;
  }
  return best!;
}

/**
 * Poles of a barycentric form, in the unit of omega. Real poles are sign changes of the denominator, which is real on the
 * real axis: exact over any number of decades, where eigenvalues are only accurate relative to the largest. Complex pairs
 * are eigenvalues of (I − 1wᵀ/Σw) diag(z), polished by Newton steps on the denominator.
 */
export function poles(form: BarycentricForm): Complex[] {
  return [...realPoles(form, -1), ...realPoles(form, 1), ...complexPoles(form)];
}

/** Poles on one half of the real axis, from 10⁻⁴ of the lowest to 10⁴ of the highest support point. */
function realPoles(form: BarycentricForm, side: 1 | -1): Complex[] {
  const denominator = (logSize: number) => {
    const x = side * Math.exp(logSize);
    return form.supportOmega.reduce((sum, omega, j) => {
      const { re, im } = form.weights[j];
      return sum + (2 * (re * x - im * omega)) / (x * x + omega * omega);
    }, 0);
  };
  const from = Math.log(Math.min(...form.supportOmega)) - 9.2;
  const to = Math.log(Math.max(...form.supportOmega)) + 9.2;
  const steps = Math.ceil((to - from) / 0.02);
  const found: Complex[] = [];
  let before = denominator(from);
  for (let step = 1; step <= steps; step++) {
    const here = denominator(from + ((to - from) * step) / steps);
    if (before * here < 0) {
      let low = from + ((to - from) * (step - 1)) / steps;
      let high = from + ((to - from) * step) / steps;
      for (let halving = 0; halving < 50; halving++) {
        const middle = (low + high) / 2;
        if (denominator(middle) * before > 0) low = middle;
        else high = middle;
      }
      found.push(complex(side * Math.exp((low + high) / 2)));
    }
    before = here;
  }
  return found;
}

/** Complex pairs; both members are returned. */
function complexPoles(form: BarycentricForm): Complex[] {
  const order = form.supportOmega.map((_, j) => j).sort((a, b) => form.supportOmega[a] - form.supportOmega[b]);
  const omegas = order.map((j) => form.supportOmega[j]);
  const weights = order.map((j) => form.weights[j]);
  const m = omegas.length;
  const total = weights.reduce((sum, weight) => sum + 2 * weight.re, 0);
  if (total === 0) return [];
  // In the real basis diag(z) is [[0, −ω], [ω, 0]]; for a value x + iy per support point, wᵀ diag(z) and its conjugate
  // add up to 2 Re(w iω (x + iy)) = −2ω(b x + a y).
  const matrix = new Matrix(2 * m, 2 * m);
  omegas.forEach((omega, j) => {
    matrix.set(2 * j, 2 * j + 1, -omega);
    matrix.set(2 * j + 1, 2 * j, omega);
  });
  for (let row = 0; row < m; row++) {
    omegas.forEach((omega, j) => {
      const { re, im } = weights[j];
      matrix.set(2 * row, 2 * j, matrix.get(2 * row, 2 * j) + (2 * omega * im) / total);
      matrix.set(2 * row, 2 * j + 1, matrix.get(2 * row, 2 * j + 1) + (2 * omega * re) / total);
    });
  }
  const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(matrix);
  const found: Complex[] = [];
  realEigenvalues.forEach((re, k) => {
    if (!(imaginaryEigenvalues[k] > 0)) return;
    const pole = polish(form, complex(re, imaginaryEigenvalues[k]));
    if (pole === null) return;
    const isReal = Math.abs(pole.im) < 1e-4 * modulus(pole);
    const isKnown = found.some((other) => modulus(subtract(other, pole)) < 1e-6 * modulus(pole));
    if (!isReal && pole.im > 0 && !isKnown) found.push(pole);
  });
  return found.flatMap((pole) => [pole, complex(pole.re, -pole.im)]);
}

/** Newton steps to a zero of the denominator; null where they do not lead to one near the start. */
function polish(form: BarycentricForm, start: Complex): Complex | null {
  let s = start;
  let size = 1;
  for (let step = 0; step < 20; step++) {
    const { denominator, slope } = quotient(form, s);
    const change = divide(denominator, slope);
    if (!(modulus(change) < 0.5 * modulus(s))) return null;
    s = subtract(s, change);
    size = modulus(change) / modulus(s);
    if (size < 1e-13) return s;
  }
  return size < 1e-5 ? s : null;
}

/** Residue of the rational function at a simple pole, unit of the spectrum times that of omega. */
export function residue(form: BarycentricForm, pole: Complex): Complex {
  const { numerator, slope } = quotient(form, pole);
  return divide(numerator, slope);
}
