/**
 * Diffusion and recombination of one carrier in one uniform layer.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | d | thickness | m |
 * | D | diffusion coefficient | m²/s |
 * | 1/τ | recombination rate | 1/s |
 * | S | recombination velocity at the far face | m/s |
 * | γ | √((1/τ + iω)/D) | 1/m |
 * | z = γd, a = αd, b = Sd/D | | 1 |
 *
 * The collected flux is ∫ g(x) ψ(x) dx with ψ the solution of Dψ'' = (1/τ + iω)ψ, ψ(0) = 1, Dψ'(d) = −Sψ(d), that is
 * `ψ = [cosh z u + b u sinhc(zu)]/[cosh z + b sinhc z]`, u = 1 − x/d. For S = 0 this is the form of L. Dloczik et al.,
 * J. Phys. Chem. B 101, 10281 (1997) (from memory); for light from the collecting face and S > 0 that of H. J. Hovel,
 * Semiconductors and Semimetals, vol. 11 (1975) (from memory).
 */
import {
  add,
  type Complex,
  complex,
  divide,
  exponential,
  multiply,
  one,
  scale,
  squareRoot,
} from "../numerics/complex.ts";
import { type LitFace, meanDecay, weightedIntegrals } from "./exponentialIntegrals.ts";

export interface Film {
  thickness: number;
  diffusion: number;
  /** 1/τ; 0 without recombination. */
  rate: number;
  farVelocity: number;
}

/** γ in 1/m at an angular frequency in rad/s. */
export const inverseDiffusionLength = ({ diffusion, rate }: Pick<Film, "diffusion" | "rate">, omega: number): Complex =>
  squareRoot(complex(rate / diffusion, omega / diffusion));

/** (cosh z + b sinhc z) e^{−z}. */
function spread(z: Complex, b: number): Complex {
  const cosine = scale(add(one, exponential(scale(z, -2))), 1 / 2);
  return add(cosine, scale(meanDecay(scale(z, 2)), b));
}

/** Flux drawn into the film per unit density at its collecting face, in m/s: Dγ (sinh z + s cosh z)/(cosh z + s sinh z). */
export function filmConductance(film: Film, omega: number): Complex {
  const { thickness, diffusion, farVelocity } = film;
  const z = scale(inverseDiffusionLength(film, omega), thickness);
  const b = (farVelocity * thickness) / diffusion;
  const cosine = scale(add(one, exponential(scale(z, -2))), b / 2);
  const sine = multiply(multiply(z, z), meanDecay(scale(z, 2)));
  return scale(divide(add(sine, cosine), spread(z, b)), diffusion / thickness);
}

/**
 * Carriers collected per photon that enters the film, with nothing left behind at the collecting face.
 *
 * @param absorption α in 1/m.
 * @param lit "near" where the light enters through the collecting face.
 * @returns the fraction as a function of the angular frequency.
 */
export function filmCollection(film: Film, absorption: number, lit: LitFace): (omega: number) => Complex {
  const { thickness, diffusion, farVelocity } = film;
  const a = absorption * thickness;
  const b = (farVelocity * thickness) / diffusion;
  const { cosine, sine } = weightedIntegrals(a, lit);
  return (omega) => {
    const z = scale(inverseDiffusionLength(film, omega), thickness);
    const weighted = b === 0 ? cosine(z) : add(cosine(z), scale(sine(z), b));
    return scale(divide(weighted, spread(z, b)), a);
  };
}

/** 1/τ − F(0)²/D in 1/s with F the conductance of the film: (1/τ − S²/D)/(cosh z + b sinhc z)² at zero frequency. */
export function steadyDeficit(film: Film): number {
  const { thickness, diffusion, rate, farVelocity } = film;
  const z = scale(inverseDiffusionLength(film, 0), thickness);
  const spreading = spread(z, (farVelocity * thickness) / diffusion).re;
  const decayed = Math.exp(-z.re) / spreading;
  return (rate - farVelocity ** 2 / diffusion) * decayed * decayed;
}
