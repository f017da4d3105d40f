/**
 * The device in SI units: the one place where bench units are converted.
 *
 * | name | meaning | unit |
 * |---|---|---|
 * | energies (affinity, gap, workFunction, trapDepth) | divided by q | V |
 * | densities, states, doping, ions, traps | | m⁻³ |
 * | mobilities | | m² V⁻¹ s⁻¹ |
 * | lifetimes | | s |
 * | B, C_n, C_p | | m³ s⁻¹, m⁶ s⁻¹ |
 * | velocities | | m s⁻¹ |
 * | absorption | | m⁻¹ |
 * | flux | photons | m⁻² s⁻¹ |
 * | resistances, capacitance per area | | Ω m², F m⁻² |
 */
import type { ResolvedCircuit, ResolvedContact, ResolvedLayer, ResolvedScenario } from "./resolved.ts";
import type { Bias, Side } from "./schema.ts";

export interface Layer {
  thickness: number;
  relativePermittivity: number;
  affinity: number;
  gap: number;
  conductionStates: number;
  valenceStates: number;
  electronMobility: number;
  holeMobility: number;
  donors: number;
  acceptors: number;
  absorption: number;
  modulationAbsorption: number;
  carrierYield: number;
  /** Null without SRH recombination (and then without dynamic traps). */
  electronLifetime: number | null;
  holeLifetime: number | null;
  trapDepth: number;
  radiative: number;
  augerElectron: number;
  augerHole: number;
  cations: number;
  anions: number;
  cationMobility: number;
  anionMobility: number;
  /** Dynamic traps; null where there are none. */
  traps: { density: number; kind: "acceptor" | "donor" } | null;
}

export interface Contact {
  /** Work function in V below vacuum, or ohmic. */
  workFunction: number | "ohmic";
  electronVelocity: number;
  holeVelocity: number;
}

export interface Interface {
  /** Index of the layer in front of the interface. */
  afterLayer: number;
  electronVelocity: number;
  holeVelocity: number;
}

export interface Circuit {
  seriesResistance: number;
  /** Infinity without a shunt. */
  shuntResistance: number;
  parallelCapacitance: number;
  /** Hz; Infinity where ideal. */
  amplifierBandwidth: number;
  sourceBandwidth: number;
}

/** Everything the physics needs, in SI, without the light level: that belongs to the operating point. */
export interface Device {
  temperature: number;
  electronContact: Side;
  front: Contact;
  back: Contact;
  layers: Layer[];
  interfaces: Interface[];
  ionsFrozenAt: { bias: Bias; flux: number } | null;
  lightSide: Side;
  frontReflectance: number;
  backMirrorReflectance: number;
  circuit: Circuit;
}

const perCm3 = 1e6;
const cm2 = 1e-4;
const nanosecond = 1e-9;

/** Photons cm⁻² s⁻¹ → photons m⁻² s⁻¹. */
export const fluxToSI = (fluxPerCm2S: number): number => fluxPerCm2S * 1e4;

/** A/m² → mA/cm². */
export const currentFromSI = (current: number): number => current * 0.1;
/** mA/cm² → A/m². */
export const currentToSI = (currentMAPerCm2: number): number => currentMAPerCm2 * 10;
/** Ω m² → Ω cm². */
export const resistanceFromSI = (resistance: number): number => resistance * 1e4;

function layerToSI(layer: ResolvedLayer): Layer {
  const { recombination, ions, traps } = layer;
  const lifetime = (ns: number | null) => (ns === null ? null : ns * nanosecond);
  return {
    thickness: layer.thicknessNm * 1e-9,
    relativePermittivity: layer.relativePermittivity,
    affinity: layer.affinityEV,
    gap: layer.gapEV,
    conductionStates: layer.conductionStatesPerCm3 * perCm3,
    valenceStates: layer.valenceStatesPerCm3 * perCm3,
    electronMobility: layer.electronMobilityCm2PerVs * cm2,
    holeMobility: layer.holeMobilityCm2PerVs * cm2,
    donors: layer.donorsPerCm3 * perCm3,
    acceptors: layer.acceptorsPerCm3 * perCm3,
    absorption: layer.absorptionPerCm * 100,
    modulationAbsorption: layer.modulationAbsorptionPerCm * 100,
    carrierYield: layer.carrierYield,
    electronLifetime: lifetime(recombination.electronLifetimeNs),
    holeLifetime: lifetime(recombination.holeLifetimeNs),
    trapDepth: recombination.trapDepthEV,
    radiative: recombination.radiativeCm3PerS * 1e-6,
    augerElectron: recombination.augerElectronCm6PerS * 1e-12,
    augerHole: recombination.augerHoleCm6PerS * 1e-12,
    cations: ions.cationsPerCm3 * perCm3,
    anions: ions.anionsPerCm3 * perCm3,
    cationMobility: ions.cationMobilityCm2PerVs * cm2,
    anionMobility: ions.anionMobilityCm2PerVs * cm2,
    traps: traps && traps.densityPerCm3 > 0 ? { density: traps.densityPerCm3 * perCm3, kind: traps.kind } : null,
  };
}

function contactToSI(contact: ResolvedContact): Contact {
  return {
    workFunction: contact.workFunctionEV,
    electronVelocity: contact.electronVelocityCmPerS / 100,
    holeVelocity: contact.holeVelocityCmPerS / 100,
  };
}

function circuitToSI(circuit: ResolvedCircuit): Circuit {
  return {
    seriesResistance: circuit.seriesResistanceOhmCm2 * cm2,
    shuntResistance: circuit.shuntResistanceOhmCm2 === null ? Infinity : circuit.shuntResistanceOhmCm2 * cm2,
    parallelCapacitance: circuit.parallelCapacitanceFPerCm2 * 1e4,
    amplifierBandwidth: circuit.amplifierBandwidthHz ?? Infinity,
    sourceBandwidth: circuit.sourceBandwidthHz ?? Infinity,
  };
}

/** Convert a resolved scenario to SI. */
export function deviceOf(scenario: ResolvedScenario): Device {
  const { stack, light } = scenario;
  return {
    temperature: stack.temperatureK,
    electronContact: stack.electronContact,
    front: contactToSI(stack.front),
    back: contactToSI(stack.back),
    layers: stack.layers.map(layerToSI),
    interfaces: stack.interfaces.map((face) => ({
      afterLayer: face.afterLayer,
      electronVelocity: face.electronVelocityCmPerS / 100,
      holeVelocity: face.holeVelocityCmPerS / 100,
    })),
    ionsFrozenAt: stack.ionsFrozenAt && {
      bias: stack.ionsFrozenAt.bias,
      flux: fluxToSI(stack.ionsFrozenAt.fluxPerCm2S),
    },
    lightSide: light.side,
    frontReflectance: light.frontReflectance,
    backMirrorReflectance: light.backMirrorReflectance,
    circuit: circuitToSI(scenario.circuit),
  };
}
