/**
 * Integrals of exponentials over a unit interval, without cancellation or overflow. The closed forms are sums of them,
 * so that no removable singularity (α = γ, αd → 0, ωT → 0) is left.
 *
 * | symbol | meaning |
 * |---|---|
 * | w, z | complex, real part not negative |
 * | a | real, not negative: an optical depth |
 */
import {
  add,
  type Complex,
  complex,
  divide,
  exponential,
  exponentialMinusOne,
  modulus,
  multiply,
  one,
  scale,
  subtract,
} from "../numerics/complex.ts";

/** ∫₀¹ e^{−wu} du = (1 − e^{−w})/w. */
export function meanDecay(w: Complex): Complex {
  if (w.re === 0 && w.im === 0) return one;
  return scale(divide(exponentialMinusOne(scale(w, -1)), w), -1);
}

/** ∫₀¹ e^{−a u − z (1−u)} du = (e^{−a} − e^{−z})/(z − a). */
function decayBetween(a: number, z: Complex): Complex {
  if (a <= z.re) return scale(meanDecay(subtract(z, complex(a))), Math.exp(-a));
  return multiply(exponential(scale(z, -1)), meanDecay(subtract(complex(a), z)));
}

/** Enough terms of the series below for |w| < 1/2 in double precision. */
const terms = 14;
const seriesRadius = 0.5;
/** Above this optical depth e^{−a} times a low power is negligible beside 1. */
const deep = 30;

/** ∫₀¹ e^{−au} u^j du for j = 0 … count − 1. */
function momentsFromLitFace(a: number, count: number): number[] {
  if (a <= deep)
    return Array.from({ length: count }, (_, j) => {
      let term = Math.exp(-a) / (j + 1);
      let sum = term;
      for (let k = 1; term > sum * 1e-17; k++) {
        term *= a / (j + 1 + k);
        sum += term;
      }
      return sum;
    });
  const moments = [-Math.expm1(-a) / a];
  for (let j = 1; j < count; j++) moments.push((j * moments[j - 1] - Math.exp(-a)) / a);
  return moments;
}

/** ∫₀¹ e^{−av} (1−v)^j dv for j = 0 … count − 1. */
function momentsFromDarkFace(a: number, count: number): number[] {
  if (a <= deep)
    return Array.from({ length: count }, (_, j) => {
      let power = Math.exp(-a);
      let sum = power / (j + 1);
      for (let k = 1; k < a || power > sum * 1e-17; k++) {
        power *= a / k;
        sum += power / (k + j + 1);
      }
      return sum;
    });
  const moments = [-Math.expm1(-a) / a];
  for (let j = 1; j < count; j++) moments.push((1 - j * moments[j - 1]) / a);
  return moments;
}

/** Where the light enters, seen from the face u = 0 that the weight of an integral belongs to. */
export type LitFace = "near" | "far";

/**
 * Integrals over a layer of unit thickness with light of optical depth a, weights counted from the far face: for
 * "near" ∫ e^{−a(1−u)} …(zu) du, for "far" ∫ e^{−au} …(zu) du. All are multiplied by e^{−z} against overflow.
 */
export function weightedIntegrals(a: number, lit: LitFace) {
  let moments: number[] | undefined;
  const odd = (z: Complex): Complex => {
    moments ??= lit === "near" ? momentsFromDarkFace(a, terms) : momentsFromLitFace(a, terms);
    const square = multiply(z, z);
    let power = one;
    let sum = complex(0);
    for (let j = 1; j < terms; j += 2) {
      sum = add(sum, scale(power, moments[j]));
      power = scale(multiply(power, square), 1 / ((j + 1) * (j + 2)));
    }
    return multiply(sum, exponential(scale(z, -1)));
  };
  const parts = (z: Complex): [Complex, Complex] => {
    const decayed = exponential(scale(z, -1));
    const falling = meanDecay(add(complex(a), z));
    const between = decayBetween(a, z);
    return lit === "near" ? [falling, multiply(decayed, between)] : [between, multiply(decayed, falling)];
  };
  return {
    /** With the weight cosh zu. */
    cosine: (z: Complex): Complex => scale(add(...parts(z)), 1 / 2),
    /** With the weight sinh(zu)/z. */
    sine: (z: Complex): Complex => {
      if (lit === "far" && a > deep && modulus(z) < a / 2) return deepFarSine(a, z);
      if (modulus(z) < seriesRadius) return odd(z);
      return divide(subtract(...parts(z)), scale(z, 2));
    },
  };
}

/** ∫ e^{−au} sinh(zu)/z du · e^{−z} = [1 − e^{−a}(cosh z + a sinh z/z)]/(a² − z²) · e^{−z}, far from cancellation. */
function deepFarSine(a: number, z: Complex): Complex {
  const decayed = exponential(scale(z, -1));
  const twice = exponential(scale(z, -2));
  const cosine = scale(add(one, twice), Math.exp(-a) / 2);
  const sine = scale(meanDecay(scale(z, 2)), a * Math.exp(-a));
  return divide(subtract(decayed, add(cosine, sine)), subtract(complex(a * a), multiply(z, z)));
}

/** ∫ e^{−au} (1 − e^{−wu})/w du for "near", with 1 − u in the second factor for "far". */
export function meanPassage(a: number, lit: LitFace): (w: Complex) => Complex {
  let moments: number[] | undefined;
  return (w) => {
    if (modulus(w) >= seriesRadius) {
      const passed = lit === "near" ? meanDecay(add(complex(a), w)) : decayBetween(a, w);
      return divide(subtract(meanDecay(complex(a)), passed), w);
    }
    moments ??= lit === "near" ? momentsFromLitFace(a, terms) : momentsFromDarkFace(a, terms);
    let power = one;
    let sum = complex(0);
    for (let j = 1; j < terms; j++) {
      sum = add(sum, scale(power, moments[j]));
      power = scale(multiply(power, w), -1 / (j + 1));
    }
    return sum;
  };
}
