/** Exact spectra with known arcs, shared by the tests of the analysis. */
import { add, type Complex, complex, divide, multiply, scale } from "../../solver/src/numerics/complex.ts";

export type Response = (omega: number) => Complex;

/** 1/(1 + iωτ) with its peak at a frequency in Hz. */
export const relaxation =
  (peakHz: number, amplitude = 1): Response =>
  (omega) =>
    divide(complex(amplitude), complex(1, omega / (2 * Math.PI * peakHz)));

/** 1/(1 + (iωτ)^β): K. S. Cole, R. H. Cole, J. Chem. Phys. 9, 341 (1941). */
export const coleCole =
  (peakHz: number, beta: number, amplitude = 1): Response =>
  (omega) => {
    const size = (omega / (2 * Math.PI * peakHz)) ** beta;
    const angle = (beta * Math.PI) / 2;
    return divide(complex(amplitude), complex(1 + size * Math.cos(angle), size * Math.sin(angle)));
  };

const exponentialOfRoot = (omegaTau: number, factor: number): { root: Complex; decay: Complex } => {
  const root = complex(Math.sqrt(omegaTau / 2), Math.sqrt(omegaTau / 2));
  const size = Math.exp(-factor * root.re);
  return { root, decay: complex(size * Math.cos(factor * root.im), -size * Math.sin(factor * root.im)) };
};

/** tanh√(iωτ)/√(iωτ), τ = d²/D: uniform generation in a diffusion film (L. Dloczik et al., J. Phys. Chem. B 101, 10281 (1997)). */
export const diffusion =
  (tau: number, amplitude = 1): Response =>
  (omega) => {
    const { root, decay } = exponentialOfRoot(omega * tau, 2);
    return scale(divide(divide(complex(1 - decay.re, -decay.im), complex(1 + decay.re, decay.im)), root), amplitude);
  };

/** 1/cosh√(iωτ): all carriers born at the far face. */
export const farSheet =
  (tau: number, amplitude = 1): Response =>
  (omega) => {
    const { decay } = exponentialOfRoot(omega * tau, 1);
    return divide(scale(decay, 2 * amplitude), add(complex(1), multiply(decay, decay)));
  };

export const sum =
  (...parts: Response[]): Response =>
  (omega) =>
    parts.reduce((total, part) => add(total, part(omega)), complex(0));

export const constant =
  (value: number): Response =>
  () =>
    complex(value);

/** Frequencies at equal steps of log f, ends included. */
export function logarithmic(fromHz: number, toHz: number, perDecade: number): number[] {
  const steps = Math.round(perDecade * Math.log10(toHz / fromHz));
  return Array.from({ length: steps + 1 }, (_, k) => fromHz * (toHz / fromHz) ** (k / steps));
}

/** Normal deviates from a fixed seed (Box–Muller on a 32-bit multiplicative generator). */
function normalDeviates(seed: number): () => number {
  let state = seed >>> 0;
  const uniform = () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), 0x2c1b3c6d);
    mixed = Math.imul(mixed ^ (mixed >>> 12), 0x297a2d39);
    return ((mixed ^ (mixed >>> 15)) >>> 0) / 2 ** 32;
  };
  return () => Math.sqrt(-2 * Math.log(uniform() + 1e-12)) * Math.cos(2 * Math.PI * uniform());
}

export interface Sampled {
  frequencyHz: number[];
  re: number[];
  im: number[];
}

/** A response at given frequencies; `noise` is the standard deviation of Re and of Im relative to the largest modulus. */
export function sampled(frequencyHz: number[], response: Response, noise = 0, seed = 1): Sampled {
  const values = frequencyHz.map((frequency) => response(2 * Math.PI * frequency));
  const deviate = normalDeviates(seed);
  const deviation = noise * Math.max(...values.map(({ re, im }) => Math.hypot(re, im)));
  return {
    frequencyHz,
    re: values.map(({ re }) => re + deviation * deviate()),
    im: values.map(({ im }) => im + deviation * deviate()),
  };
}
