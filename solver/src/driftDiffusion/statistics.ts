/**
 * Boltzmann statistics in logarithms.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | φ̃ | electrostatic potential / V_T | 1 |
 * | u_n, u_p | quasi-Fermi energies / kT | 1 |
 * | Λ_n, Λ_p | ln N_c + χ/V_T and ln N_v − (χ+E_g)/V_T (N in m⁻³) | 1 |
 *
 *     ln n = Λ_n + φ̃ + u_n,    ln p = Λ_p − φ̃ − u_p
 *
 * Source: S. Selberherr, Analysis and Simulation of Semiconductor Devices (Springer 1984), §2.1.
 */
import type { Layer } from "../scenario/device.ts";

/** Exponents outside are clipped: below, a density has no effect on anything; above, none is physical. */
const lowestExponent = -600;
const highestExponent = 140;

/** exp(x) that neither overflows nor becomes zero. */
export function boltzmann(x: number): number {
  return Math.exp(Math.min(Math.max(x, lowestExponent), highestExponent));
}

/** Λ_n of a layer at thermal voltage V_T (V). */
export const electronLevel = (layer: Layer, thermalVoltage: number): number =>
  Math.log(layer.conductionStates) + layer.affinity / thermalVoltage;

/** Λ_p of a layer at thermal voltage V_T (V). */
export const holeLevel = (layer: Layer, thermalVoltage: number): number =>
  Math.log(layer.valenceStates) - (layer.affinity + layer.gap) / thermalVoltage;
