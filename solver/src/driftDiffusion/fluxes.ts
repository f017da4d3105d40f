/**
 * Particle currents between two nodes: Scharfetter and Gummel's exponential fit in terms of quasi-Fermi energies.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | a | D/h | m/s |
 * | Δφ, Δu | differences of φ̃ and of the quasi-Fermi energy / kT, right minus left, e.m.f. included | 1 |
 * | ℓ | mean of ln(density) over the two nodes | 1 |
 *
 *     J/q = a e^ℓ (Δφ/2)/sinh(Δφ/2) · 2 sinh(Δu/2) = P − M,   P, M = a e^{ℓ ± Δu/2} (Δφ/2)/sinh(Δφ/2)
 *
 * It holds for electrons (J_n = µ_n n ∂E_Fn/∂x), holes, cations (as holes) and anions (as electrons).
 * Sources: D. L. Scharfetter, H. K. Gummel, IEEE Trans. Electron Devices 16, 64 (1969); the sinh form: P. Farrell et al.,
 * in Handbook of Optoelectronic Device Modeling and Simulation (CRC 2017), ch. 50.
 */

import { boltzmann } from "./statistics.ts";

/** Result of `edgeFlux`: [P − M, P, M]. */
export const flux = new Float64Array(3);

/** |Δφ| / (1 − e^{−|Δφ|}), 1 at 0. */
export function fieldFactor(potentialStep: number): number {
  const y = Math.abs(potentialStep);
  return y < 1e-9 ? 1 + 0.5 * y : -y / Math.expm1(-y);
}

/** d/dΔφ of ln[(Δφ/2)/sinh(Δφ/2)]: between −½ and ½. */
export function fieldSlope(potentialStep: number): number {
  if (Math.abs(potentialStep) < 1e-2) return potentialStep * (-1 / 12 + (potentialStep * potentialStep) / 720);
  return 1 / potentialStep - 0.5 / Math.tanh(0.5 * potentialStep);
}

/**
 * Fills `flux` with P − M, P and M.
 * @param factor `fieldFactor(potentialStep)`
 */
export function edgeFlux(
  conductance: number,
  meanLogDensity: number,
  potentialStep: number,
  factor: number,
  energyStep: number,
): void {
  const exponent = meanLogDensity - 0.5 * Math.abs(potentialStep) + 0.5 * Math.abs(energyStep);
  const larger = conductance * factor * boltzmann(exponent);
  const decay = Math.expm1(-Math.abs(energyStep));
  const smaller = larger * (1 + decay);
  if (energyStep >= 0) {
    flux[0] = -larger * decay;
    flux[1] = larger;
    flux[2] = smaller;
  } else {
    flux[0] = larger * decay;
    flux[1] = smaller;
    flux[2] = larger;
  }
}
