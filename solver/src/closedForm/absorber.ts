/**
 * What the closed forms take from the stack: the carrier, its diffusion and lifetime, and the light that reaches the
 * absorber.
 */
import { thermalVoltage } from "../constants.ts";
import { netDoping } from "../equilibrium.ts";
import { absorptionAt, lightThrough, type Wavelength } from "../light/generation.ts";
import type { Device, Layer } from "../scenario/device.ts";

export type Carrier = "electron" | "hole";

/** Electrons, unless the layer is n-type. */
export const minorityCarrier = (layer: Layer): Carrier => (netDoping(layer) > 0 ? "hole" : "electron");

/** D = µV_T in m²/s. */
export function diffusionOf(layer: Layer, carrier: Carrier, temperature: number): number {
  return (carrier === "electron" ? layer.electronMobility : layer.holeMobility) * thermalVoltage(temperature);
}

/** 1/τ = 1/τ_SRH + B N + C N² in 1/s, N the net doping and C the Auger coefficient of the majority. */
export function recombinationRate(layer: Layer, carrier: Carrier): number {
  const lifetime = carrier === "electron" ? layer.electronLifetime : layer.holeLifetime;
  const doping = netDoping(layer);
  const auger = doping > 0 ? layer.augerElectron : layer.augerHole;
  return (lifetime === null ? 0 : 1 / lifetime) + layer.radiative * Math.abs(doping) + auger * doping * doping;
}

export interface AbsorberLight {
  /** Absorption coefficient, 1/m. */
  absorption: number;
  /** Carriers per incident photon if the absorber took all light that reaches it. */
  reaching: number;
}

/** Light of one wavelength at the absorber; the back mirror is not part of the closed forms. */
export function lightAtAbsorber(device: Device, absorber: number, wavelength: Wavelength): AbsorberLight {
  const layer = device.layers[absorber];
  const { reaching } = lightThrough(device, wavelength);
  return { absorption: absorptionAt(layer, wavelength), reaching: reaching[absorber] * layer.carrierYield };
}
