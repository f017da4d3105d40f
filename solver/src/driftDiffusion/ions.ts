/**
 * Mobile ions: dilute, without a site limit, inside contiguous groups of layers that carry the species.
 *
 * | symbol | meaning | unit | shape |
 * |---|---|---|---|
 * | z | +1 cations, −1 anions | 1 | |
 * | λ | level: ln of the concentration at φ̃ = 0 on the front's scale | 1 | one per group |
 * | c | concentration, c = exp(λ − z φ̃) in the steady state | m⁻³ | nodes |
 * | w | width of the group's layers in a node's control volume | m | group's nodes |
 *
 * Steady state: no flux anywhere, so λ is one constant per group and species, fixed by the number of ions; no nodal
 * equation. Small signal: an electrochemical potential per node (as for holes and electrons).
 */
import type { Device } from "../scenario/device.ts";
import type { Problem } from "./problem.ts";
import type { State } from "./state.ts";

export interface IonGroup {
  charge: 1 | -1;
  firstNode: number;
  lastNode: number;
  /** Ions per area, m⁻². */
  number: number;
  /** w, index 0 is the first node. */
  width: Float64Array;
  /** D/h of each edge of the group, m/s. */
  conductance: Float64Array;
}

/** The groups of both species, front to back, cations first. */
export function ionGroups(device: Device, x: Float64Array, edgeLayer: Int32Array, thermalVoltage: number): IonGroup[] {
  const groups: IonGroup[] = [];
  for (const [charge, density, mobility] of [
    [1, "cations", "cationMobility"],
    [-1, "anions", "anionMobility"],
  ] as const) {
    let e = 0;
    while (e < edgeLayer.length) {
      if (device.layers[edgeLayer[e]][density] <= 0) {
        e += 1;
        continue;
      }
      const firstNode = e;
      while (e < edgeLayer.length && device.layers[edgeLayer[e]][density] > 0) e += 1;
      const count = e - firstNode;
      const width = new Float64Array(count + 1);
      const conductance = new Float64Array(count);
      let number = 0;
      for (let j = 0; j < count; j++) {
        const layer = device.layers[edgeLayer[firstNode + j]];
        const h = x[firstNode + j + 1] - x[firstNode + j];
        width[j] += 0.5 * h;
        width[j + 1] += 0.5 * h;
        number += layer[density] * h;
        conductance[j] = (layer[mobility] * thermalVoltage) / h;
      }
      groups.push({ charge, firstNode, lastNode: e, number, width, conductance });
    }
  }
  return groups;
}

/**
 * The level λ at which a group holds its number of ions.
 * @param potential φ̃ of every node, relative to its side of the cut
 * @param step what is added to φ̃ behind the cut edge
 */
export function ionLevel(group: IonGroup, potential: Float64Array, cut: number, step: number): number {
  const { charge, firstNode, lastNode, width, number } = group;
  let highest = -Infinity;
  for (let i = firstNode; i <= lastNode; i++) {
    const exponent = -charge * (potential[i] + (i > cut ? step : 0));
    if (exponent > highest) highest = exponent;
  }
  let sum = 0;
  for (let i = firstNode; i <= lastNode; i++)
    sum += width[i - firstNode] * Math.exp(-charge * (potential[i] + (i > cut ? step : 0)) - highest);
  return Math.log(number / sum) - highest;
}

/** Ions held at the profile of a state. */
export interface HeldIons {
  /** Charge in each node's control volume, m⁻². */
  charge: Float64Array;
  /** Concentrations, m⁻³, nodes. */
  cations: Float64Array;
  anions: Float64Array;
}

/** The ions of a state in equilibrium with it, to hold them there or to look at them. */
export function holdIons(problem: Problem, state: State): HeldIons {
  const held: HeldIons = {
    charge: new Float64Array(problem.nodes),
    cations: new Float64Array(problem.nodes),
    anions: new Float64Array(problem.nodes),
  };
  const step = problem.sign * state.voltage;
  problem.ions.forEach(({ charge, firstNode, lastNode, width }, g) => {
    const species = charge === 1 ? held.cations : held.anions;
    for (let i = firstNode; i <= lastNode; i++) {
      const phi = state.potential[i] + (i > state.cut ? step : 0);
      const density = Math.exp(state.ionLevels[g] - charge * phi);
      species[i] += density;
      held.charge[i] += charge * width[i - firstNode] * density;
    }
  });
  return held;
}
