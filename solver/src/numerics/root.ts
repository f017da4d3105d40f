/**
 * Root of a continuous function between two points where its signs differ: Brent's method (R. P. Brent, "Algorithms
 * for Minimization without Derivatives", 1973, chapter 4), to the resolution of double precision. Infinite values are
 * taken by their sign.
 *
 * @throws RangeError where the signs do not differ.
 */
export function rootBetween(f: (x: number) => number, from: number, to: number): number {
  let [a, b, fa, fb] = [from, to, f(from), f(to)];
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(Math.sign(fa) * Math.sign(fb) < 0)) throw new RangeError(`no change of sign between ${from} and ${to}`);
  let [c, fc, before, step] = [a, fa, b - a, b - a];
  for (;;) {
    if (Math.sign(fb) === Math.sign(fc)) [c, fc, before, step] = [a, fa, b - a, b - a];
    if (Math.abs(fc) < Math.abs(fb)) [a, b, c, fa, fb, fc] = [b, c, b, fb, fc, fb];
    const middle = (c - b) / 2;
    const tolerance = 2 * Number.EPSILON * Math.abs(b) + Number.MIN_VALUE;
    if (Math.abs(middle) <= tolerance || fb === 0) return b;
    const interpolated = interpolation(a, b, c, fa, fb, fc);
    const good =
      Math.abs(before) >= tolerance &&
      Math.abs(fa) > Math.abs(fb) &&
      interpolated * middle > 0 &&
      Math.abs(interpolated) < Math.min(1.5 * Math.abs(middle) - Math.abs(tolerance) / 2, Math.abs(before) / 2);
    [before, step] = good ? [step, interpolated] : [middle, middle];
    [a, fa] = [b, fb];
    b += Math.abs(step) > tolerance ? step : Math.sign(middle) * tolerance;
    fb = f(b);
  }
}

/** Step from b by inverse quadratic interpolation, by the secant where only two points differ. */
function interpolation(a: number, b: number, c: number, fa: number, fb: number, fc: number): number {
  const s = fb / fa;
  if (a === c) return (-(c - b) * s) / (1 - s);
  const [q, r] = [fa / fc, fb / fc];
  const p = s * ((c - b) * q * (q - r) - (b - a) * (r - 1));
  return -p / ((q - 1) * (r - 1) * (s - 1));
}
