/** Arithmetic of complex numbers as plain pairs. */
export interface Complex {
  readonly re: number;
  readonly im: number;
}

export const complex = (re: number, im = 0): Complex => ({ re, im });
export const one: Complex = { re: 1, im: 0 };

export const add = (a: Complex, b: Complex): Complex => ({ re: a.re + b.re, im: a.im + b.im });
export const subtract = (a: Complex, b: Complex): Complex => ({ re: a.re - b.re, im: a.im - b.im });
export const scale = (a: Complex, factor: number): Complex => ({ re: a.re * factor, im: a.im * factor });
export const multiply = (a: Complex, b: Complex): Complex => ({
  re: a.re * b.re - a.im * b.im,
  im: a.re * b.im + a.im * b.re,
});

/** Quotient by Smith's method (R. L. Smith, Commun. ACM 5, 435 (1962)): no overflow on the way. */
export function divide(a: Complex, b: Complex): Complex {
  if (Math.abs(b.re) >= Math.abs(b.im)) {
    const ratio = b.im / b.re;
    const denominator = b.re + b.im * ratio;
    return { re: (a.re + a.im * ratio) / denominator, im: (a.im - a.re * ratio) / denominator };
  }
  const ratio = b.re / b.im;
  const denominator = b.re * ratio + b.im;
  return { re: (a.re * ratio + a.im) / denominator, im: (a.im * ratio - a.re) / denominator };
}

export const modulus = (a: Complex): number => Math.hypot(a.re, a.im);

/** Principal square root, for a real part that is not negative. */
export function squareRoot(a: Complex): Complex {
  const re = Math.sqrt((modulus(a) + a.re) / 2);
  return { re, im: re === 0 ? 0 : a.im / (2 * re) };
}

export function exponential(a: Complex): Complex {
  const size = Math.exp(a.re);
  return { re: size * Math.cos(a.im), im: size * Math.sin(a.im) };
}

/** e^a − 1 without cancellation near a = 0. */
export function exponentialMinusOne(a: Complex): Complex {
  const half = Math.sin(a.im / 2);
  return { re: Math.expm1(a.re) * Math.cos(a.im) - 2 * half * half, im: Math.exp(a.re) * Math.sin(a.im) };
}
