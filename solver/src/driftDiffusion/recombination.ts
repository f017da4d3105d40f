/**
 * Recombination in layers and at interfaces, and the per-layer constants of statistics, traps and recombination.
 *
 * | symbol | meaning | unit | shape |
 * |---|---|---|---|
 * | Λ_n, Λ_p | see statistics.ts | 1 | layers |
 * | n_i² | N_c N_v e^{−E_g/kT} | m⁻⁶ | layers |
 * | n_1, p_1 | densities with the Fermi level at the trap | m⁻³ | layers |
 *
 *     R = (np − n_i²) [ 1/(τ_p(n+n_1) + τ_n(p+p_1)) + B + C_n n + C_p p ]
 *     R_s = (n_A p_B − n_s²) / ((n_A+n_s)/S_p + (p_B+n_s)/S_n)
 *
 * with np − n_i² = np (1 − e^{−w}) or n_i² (e^{w} − 1), w = u_n − u_p, which cancels nowhere.
 * Sources: W. Shockley, W. T. Read, Phys. Rev. 87, 835 (1952); R. N. Hall, Phys. Rev. 87, 387 (1952); Selberherr 1984, §4.2.
 * n_A is taken on the electron contact's side of the interface, p_B on the hole contact's side.
 */
import type { Device } from "../scenario/device.ts";
import { boltzmann, electronLevel, holeLevel } from "./statistics.ts";

export interface LayerTable {
  electronLevel: Float64Array;
  holeLevel: Float64Array;
  /** N_D − N_A and the charge that compensates mobile ions, m⁻³. */
  fixedCharge: Float64Array;
  intrinsicSquared: Float64Array;
  /** Infinity without SRH recombination. */
  electronLifetime: Float64Array;
  holeLifetime: Float64Array;
  trapElectrons: Float64Array;
  trapHoles: Float64Array;
  radiative: Float64Array;
  augerElectron: Float64Array;
  augerHole: Float64Array;
  /** Density of dynamic traps, 0 where there are none. */
  trapDensity: Float64Array;
  /** Charge of an empty trap: 0 acceptor-like, 1 donor-like. */
  emptyTrapCharge: Float64Array;
}

export interface InterfaceTable {
  node: Int32Array;
  /** Λ_n on the electron contact's side, Λ_p on the hole contact's side. */
  electronLevel: Float64Array;
  holeLevel: Float64Array;
  electronVelocity: Float64Array;
  holeVelocity: Float64Array;
  /** n_s and n_s². */
  balance: Float64Array;
  balanceSquared: Float64Array;
}

export function layerTable(device: Device, thermalVoltage: number): LayerTable {
  const per = (value: (layer: Device["layers"][number]) => number) => Float64Array.from(device.layers, value);
  return {
    electronLevel: per((layer) => electronLevel(layer, thermalVoltage)),
    holeLevel: per((layer) => holeLevel(layer, thermalVoltage)),
    fixedCharge: per((layer) => layer.donors - layer.acceptors - layer.cations + layer.anions),
    intrinsicSquared: per((layer) =>
      boltzmann(electronLevel(layer, thermalVoltage) + holeLevel(layer, thermalVoltage)),
    ),
    electronLifetime: per((layer) => layer.electronLifetime ?? Infinity),
    holeLifetime: per((layer) => layer.holeLifetime ?? Infinity),
    trapElectrons: per((layer) => boltzmann(Math.log(layer.conductionStates) - layer.trapDepth / thermalVoltage)),
    trapHoles: per((layer) =>
      boltzmann(Math.log(layer.valenceStates) - (layer.gap - layer.trapDepth) / thermalVoltage),
    ),
    radiative: per((layer) => layer.radiative),
    augerElectron: per((layer) => layer.augerElectron),
    augerHole: per((layer) => layer.augerHole),
    trapDensity: per((layer) => layer.traps?.density ?? 0),
    emptyTrapCharge: per((layer) => (layer.traps?.kind === "donor" ? 1 : 0)),
  };
}

export function interfaceTable(device: Device, edgeLayer: Int32Array, thermalVoltage: number): InterfaceTable {
  const faces = device.interfaces;
  const electronsInFront = device.electronContact === "front";
  const electronSide = faces.map((face) => device.layers[face.afterLayer + (electronsInFront ? 0 : 1)]);
  const holeSide = faces.map((face) => device.layers[face.afterLayer + (electronsInFront ? 1 : 0)]);
  const electrons = Float64Array.from(electronSide, (layer) => electronLevel(layer, thermalVoltage));
  const holes = Float64Array.from(holeSide, (layer) => holeLevel(layer, thermalVoltage));
  return {
    node: Int32Array.from(faces, (face) => edgeLayer.indexOf(face.afterLayer + 1)),
    electronLevel: electrons,
    holeLevel: holes,
    electronVelocity: Float64Array.from(faces, (face) => face.electronVelocity),
    holeVelocity: Float64Array.from(faces, (face) => face.holeVelocity),
    balance: electrons.map((level, k) => boltzmann(0.5 * (level + holes[k]))),
    balanceSquared: electrons.map((level, k) => boltzmann(level + holes[k])),
  };
}

/** np − n_i² without cancellation; `product` = np, `splitting` = u_n − u_p. */
export function excessProduct(product: number, intrinsicSquared: number, splitting: number): number {
  return splitting >= 0 ? -product * Math.expm1(-splitting) : intrinsicSquared * Math.expm1(splitting);
}

/** Net recombination rate in a layer, m⁻³ s⁻¹, by kind. */
export interface Rates {
  shockleyReadHall: number;
  bandToBand: number;
  auger: number;
}

/** Rates of a layer at given densities (m⁻³); `splitting` = u_n − u_p. */
export function layerRates(layers: LayerTable, layer: number, n: number, p: number, splitting: number): Rates {
  const excess = excessProduct(n * p, layers.intrinsicSquared[layer], splitting);
  const electronLifetime = layers.electronLifetime[layer];
  const holeLifetime = layers.holeLifetime[layer];
  return {
    shockleyReadHall:
      electronLifetime < Infinity
        ? excess / (holeLifetime * (n + layers.trapElectrons[layer]) + electronLifetime * (p + layers.trapHoles[layer]))
        : 0,
    bandToBand: layers.radiative[layer] * excess,
    auger: (layers.augerElectron[layer] * n + layers.augerHole[layer] * p) * excess,
  };
}
