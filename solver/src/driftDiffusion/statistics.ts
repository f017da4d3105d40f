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
  return Math.exp(x < lowestExponent ? lowestExponent : x > highestExponent ? highestExponent : x);
}

/** Λ_n of a layer at thermal voltage V_T (V). */
export const electronLevel = (layer: Layer, thermalVoltage: number): number =>
  Math.log(layer.conductionStates) + layer.affinity / thermalVoltage;

/** Λ_p of a layer at thermal voltage V_T (V). */
export const holeLevel = (layer: Layer, thermalVoltage: number): number =>
  Math.log(layer.valenceStates) - (layer.affinity + layer.gap) / thermalVoltage;

/** ln(e^a + e^b). */
const logSum = (a: number, b: number): number => {
  const high = Math.max(a, b);
  return high === -Infinity ? -Infinity : high + Math.log1p(Math.exp(-Math.abs(a - b)));
};

/**
 * Work function (V below vacuum) at which a layer is neutral in equilibrium: doping, carriers and static trap charge.
 * Mobile ions are compensated exactly and do not enter. Solved by bisection on the logarithms of positive and negative
 * charge, so that densities of any smallness count.
 */
export function neutralWorkFunction(layer: Layer, thermalVoltage: number): number {
  const common = Math.min(layer.donors, layer.acceptors);
  const donors = Math.log(layer.donors - common);
  const acceptors = Math.log(layer.acceptors - common);
  const { traps, trapDepth, affinity } = layer;
  const trapLevel = traps ? Math.log(traps.density) : -Infinity;
  const lnElectrons = electronLevel(layer, thermalVoltage);
  const lnHoles = holeLevel(layer, thermalVoltage);
  /** ln(positive/negative charge) with the Fermi level at −workFunction; rises with the work function. */
  const imbalance = (workFunction: number) => {
    const level = workFunction / thermalVoltage;
    let positive = logSum(lnHoles + level, donors);
    let negative = logSum(lnElectrons - level, acceptors);
    if (traps) {
      const above = (workFunction - affinity - trapDepth) / thermalVoltage;
      if (traps.kind === "donor") positive = logSum(positive, trapLevel - logSum(0, -above));
      else negative = logSum(negative, trapLevel - logSum(0, above));
    }
    return positive - negative;
  };
  let low = affinity - 80 * thermalVoltage - 1;
  let high = affinity + layer.gap + 80 * thermalVoltage + 1;
  for (let step = 0; step < 200; step++) {
    const middle = 0.5 * (low + high);
    if (middle <= low || middle >= high) break;
    if (imbalance(middle) < 0) low = middle;
    else high = middle;
  }
  return 0.5 * (low + high);
}
