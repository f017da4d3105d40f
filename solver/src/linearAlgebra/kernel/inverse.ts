/**
 * Inverse of one complex block at two frequencies, in place, without exchanging rows (Gauss–Jordan: Golub & Van Loan, Matrix
 * Computations, 4th ed. (2013), §3.2 for the elimination). A pivot much smaller or much larger than the diagonal entry it grew from
 * has lost digits; such frequencies are marked and solved elsewhere with row exchanges.
 *
 *   symbol   meaning                                       shape
 *   block    on entry D, on return D⁻¹                      m × m numbers, row-major
 *   before   |D_kk|² on entry                               m v128
 *   marks    all ones where a pivot was out of proportion   v128
 */
import { imaginaryPart, minusProduct, NUMBER, plusProduct, put, realPart } from "./complexPair";

/** Square of the factor by which a pivot may differ from its diagonal entry: six of sixteen digits. */
const PROPORTION: f64 = 1e12;

// @ts-ignore: decorator
@inline
function scaleNumber(at: usize, re: v128, im: v128): void {
  const x = realPart(at);
  const y = imaginaryPart(at);
  put(at, minusProduct(f64x2.mul(x, re), y, im), plusProduct(f64x2.mul(x, im), y, re));
}

/** target −= (re + i im) source */
// @ts-ignore: decorator
@inline
function subtractMultiple(target: usize, source: usize, re: v128, im: v128): void {
  const x = realPart(source);
  const y = imaginaryPart(source);
  put(
    target,
    plusProduct(minusProduct(realPart(target), re, x), im, y),
    minusProduct(minusProduct(imaginaryPart(target), re, y), im, x),
  );
}

// @ts-ignore: decorator
@inline
function scaleRow(m: usize, row: usize, re: v128, im: v128): void {
  scaleNumber(row, re, im);
  scaleNumber(row + NUMBER, re, im);
  scaleNumber(row + 2 * NUMBER, re, im);
  if (m > 3) scaleNumber(row + 3 * NUMBER, re, im);
  if (m > 4) scaleNumber(row + 4 * NUMBER, re, im);
}

// @ts-ignore: decorator
@inline
function subtractRow(m: usize, target: usize, source: usize, re: v128, im: v128): void {
  subtractMultiple(target, source, re, im);
  subtractMultiple(target + NUMBER, source + NUMBER, re, im);
  subtractMultiple(target + 2 * NUMBER, source + 2 * NUMBER, re, im);
  if (m > 3) subtractMultiple(target + 3 * NUMBER, source + 3 * NUMBER, re, im);
  if (m > 4) subtractMultiple(target + 4 * NUMBER, source + 4 * NUMBER, re, im);
}

/** Inverts a block of m = 3, 4 or 5 (a constant, so that the rows are unrolled) and returns the marks. */
// @ts-ignore: decorator
@inline
export function invert(m: usize, block: usize, before: usize): v128 {
  const row = m * NUMBER;
  const proportion = f64x2.splat(PROPORTION);
  const zero = f64x2.splat(0);
  const one = f64x2.splat(1);
  let marks = zero;
  for (let k: usize = 1; k < m; k++) {
    const at = block + k * (row + NUMBER);
    const x = realPart(at);
    const y = imaginaryPart(at);
    v128.store(before + k * 16, plusProduct(f64x2.mul(x, x), y, y));
  }
  for (let k: usize = 0; k < m; k++) {
    const pivot = block + k * row;
    const at = pivot + k * NUMBER;
    const x = realPart(at);
    const y = imaginaryPart(at);
    const square = plusProduct(f64x2.mul(x, x), y, y);
    const inverse = f64x2.div(one, square);
    if (k > 0) {
      const size = v128.load(before + k * 16);
      marks = v128.or(marks, f64x2.gt(square, f64x2.mul(proportion, size)));
      marks = v128.or(marks, f64x2.gt(size, f64x2.mul(proportion, square)));
    }
    put(at, one, zero);
    scaleRow(m, pivot, f64x2.mul(x, inverse), f64x2.neg(f64x2.mul(y, inverse)));
    for (let a: usize = 0; a < m; a++) {
      if (a == k) continue;
      const target = block + a * row;
      const factor = target + k * NUMBER;
      const re = realPart(factor);
      const im = imaginaryPart(factor);
      put(factor, zero, zero);
      subtractRow(m, target, pivot, re, im);
    }
  }
  return marks;
}

/** The same for any block size. */
export function invertAny(m: usize, block: usize, before: usize): v128 {
  const row = m * NUMBER;
  const proportion = f64x2.splat(PROPORTION);
  const zero = f64x2.splat(0);
  const one = f64x2.splat(1);
  let marks = zero;
  for (let k: usize = 0; k < m; k++) {
    const at = block + k * (row + NUMBER);
    const x = realPart(at);
    const y = imaginaryPart(at);
    v128.store(before + k * 16, plusProduct(f64x2.mul(x, x), y, y));
  }
  for (let k: usize = 0; k < m; k++) {
    const pivot = block + k * row;
    const at = pivot + k * NUMBER;
    const x = realPart(at);
    const y = imaginaryPart(at);
    const square = plusProduct(f64x2.mul(x, x), y, y);
    const inverse = f64x2.div(one, square);
    const size = v128.load(before + k * 16);
    marks = v128.or(marks, f64x2.gt(square, f64x2.mul(proportion, size)));
    marks = v128.or(marks, f64x2.gt(size, f64x2.mul(proportion, square)));
    put(at, one, zero);
    const re = f64x2.mul(x, inverse);
    const im = f64x2.neg(f64x2.mul(y, inverse));
    for (let c: usize = 0; c < m; c++) scaleNumber(pivot + c * NUMBER, re, im);
    for (let a: usize = 0; a < m; a++) {
      if (a == k) continue;
      const target = block + a * row;
      const factor = target + k * NUMBER;
      const u = realPart(factor);
      const v = imaginaryPart(factor);
      put(factor, zero, zero);
      for (let c: usize = 0; c < m; c++) subtractMultiple(target + c * NUMBER, pivot + c * NUMBER, u, v);
    }
  }
  return marks;
}
