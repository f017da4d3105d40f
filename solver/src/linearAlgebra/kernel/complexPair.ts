/**
 * Complex numbers at two frequencies side by side.
 *
 *   symbol   meaning                                                      size
 *   v128     one real quantity at two frequencies                         16 bytes
 *   number   real part (v128), imaginary part (v128)                      32 bytes
 *   real     one double of the system, the same at both frequencies       8 bytes
 */

/** Bytes of a complex number at two frequencies. */
export const NUMBER: usize = 32;
/** Bytes of a real coefficient of the system. */
export const REAL: usize = 8;

// @ts-ignore: decorator
@inline
export function realPart(at: usize): v128 {
  return v128.load(at);
}

// @ts-ignore: decorator
@inline
export function imaginaryPart(at: usize): v128 {
  return v128.load(at, 16);
}

// @ts-ignore: decorator
@inline
export function put(at: usize, re: v128, im: v128): void {
  v128.store(at, re);
  v128.store(at, im, 16);
}

/** A coefficient of the system at both frequencies. */
// @ts-ignore: decorator
@inline
export function coefficient(at: usize): v128 {
  return v128.load64_splat(at);
}

/** a − b c */
// @ts-ignore: decorator
@inline
export function minusProduct(a: v128, b: v128, c: v128): v128 {
  return f64x2.sub(a, f64x2.mul(b, c));
}

/** a + b c */
// @ts-ignore: decorator
@inline
export function plusProduct(a: v128, b: v128, c: v128): v128 {
  return f64x2.add(a, f64x2.mul(b, c));
}
