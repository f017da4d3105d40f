/**
 * The neutral layer in equilibrium: where its Fermi level lies, and what follows for "ohmic" contacts.
 * Boltzmann statistics (`n = N_c e^{(E_F−E_c)/kT}`), traps by Shockley and Read, Phys. Rev. 87, 835 (1952).
 * Energies are divided by q and counted in V below vacuum.
 */
import { thermalVoltage } from "./constants.ts";
import { rootBetween } from "./numerics/root.ts";
import type { Device, Layer } from "./scenario/device.ts";
import type { Side } from "./scenario/schema.ts";

/** Net doping N_D − N_A in m⁻³. */
export const netDoping = (layer: Layer): number => layer.donors - layer.acceptors;

/** ln n_i, n_i in m⁻³: the density itself may underflow. */
export function logIntrinsicDensity(layer: Layer, temperature: number): number {
  const { conductionStates, valenceStates, gap } = layer;
  return (Math.log(conductionStates) + Math.log(valenceStates) - gap / thermalVoltage(temperature)) / 2;
}

/** ln n of a neutral layer without traps, from n − n_i²/n = N. */
function logElectronDensity(layer: Layer, temperature: number): number {
  const logIntrinsic = logIntrinsicDensity(layer, temperature);
  const doping = netDoping(layer);
  if (doping === 0) return logIntrinsic;
  const logHalf = Math.log(Math.abs(doping) / 2);
  const ratio = Math.exp(logIntrinsic - logHalf);
  const aboveIntrinsic =
    ratio < 1 ? logHalf - logIntrinsic + Math.log1p(Math.sqrt(1 + ratio * ratio)) : Math.asinh(1 / ratio);
  return logIntrinsic + Math.sign(doping) * aboveIntrinsic;
}

/** ln(e^a + e^b). */
function logSum(a: number, b: number): number {
  const larger = Math.max(a, b);
  return larger === -Infinity ? -Infinity : larger + Math.log1p(Math.exp(-Math.abs(a - b)));
}

/**
 * ln of positive over negative charge of a layer with traps, with its Fermi level at a depth below the conduction band:
 * in logarithms, so that charges of any smallness count.
 */
function chargeImbalance(depth: number, layer: Layer, thermal: number): number {
  const doping = netDoping(layer);
  let positive = logSum(Math.log(layer.valenceStates) + (depth - layer.gap) / thermal, Math.log(Math.max(doping, 0)));
  let negative = logSum(Math.log(layer.conductionStates) - depth / thermal, Math.log(Math.max(-doping, 0)));
  if (layer.traps) {
    const above = (depth - layer.trapDepth) / thermal;
    const density = Math.log(layer.traps.density);
    if (layer.traps.kind === "donor") positive = logSum(positive, density - logSum(0, -above));
    else negative = logSum(negative, density - logSum(0, above));
  }
  return positive - negative;
}

/** Depth of the Fermi level below the conduction band in V where doping, carriers and static trap charge balance. */
export function neutralFermiDepth(layer: Layer, temperature: number): number {
  const thermal = thermalVoltage(temperature);
  if (!layer.traps) return (Math.log(layer.conductionStates) - logElectronDensity(layer, temperature)) * thermal;
  // Far beyond either band edge the carriers outweigh any doping or trap density that a document may hold.
  const margin = 100 * thermal;
  return rootBetween((depth) => chargeImbalance(depth, layer, thermal), -margin, layer.gap + margin);
}

/** Work function of a contact in V below vacuum; "ohmic" is the Fermi level of the neutral adjacent layer. */
export function workFunctionOf(device: Device, side: Side): number {
  const { workFunction } = device[side];
  if (workFunction !== "ohmic") return workFunction;
  const layer = side === "front" ? device.layers[0] : device.layers[device.layers.length - 1];
  return layer.affinity + neutralFermiDepth(layer, device.temperature);
}

export const opposite = (side: Side): Side => (side === "front" ? "back" : "front");

/** V_bi = (Φ_hole − Φ_electron)/q in V. */
export function builtInVoltage(device: Device): number {
  return workFunctionOf(device, opposite(device.electronContact)) - workFunctionOf(device, device.electronContact);
}
