/**
 * A state of the cell: what Newton's method changes.
 *
 * | symbol | meaning | unit | shape |
 * |---|---|---|---|
 * | φ̃, u_n, u_p | potential / V_T and quasi-Fermi energies / kT, each relative to the contact on its side of the cut | 1 | nodes |
 * | v | voltage inside the series resistance / V_T | 1 | |
 * | cut | edge that carries the voltage as an e.m.f. | | |
 * | λ | ion levels on the front's scale | 1 | ion groups |
 *
 * In front of the cut the values are true ones with the front contact's Fermi level as zero; behind it the true potential
 * is φ̃ + s v and the true energies u − s v (s = +1 with the hole contact at the back). So the small differences that
 * carry the current near a doped contact are differences of small numbers.
 */
import type { Problem } from "./problem.ts";

export interface State {
  potential: Float64Array;
  electronEnergy: Float64Array;
  holeEnergy: Float64Array;
  voltage: number;
  cut: number;
  ionLevels: Float64Array;
}

export function copyState(state: State): State {
  return {
    potential: state.potential.slice(),
    electronEnergy: state.electronEnergy.slice(),
    holeEnergy: state.holeEnergy.slice(),
    voltage: state.voltage,
    cut: state.cut,
    ionLevels: state.ionLevels.slice(),
  };
}

/** The same state with the e.m.f. across another edge, in place. */
export function moveCut(problem: Problem, state: State, cut: number): void {
  const step = problem.sign * state.voltage;
  const [from, to, shift] = cut > state.cut ? [state.cut + 1, cut, step] : [cut + 1, state.cut, -step];
  for (let i = from; i <= to; i++) {
    state.potential[i] += shift;
    state.electronEnergy[i] -= shift;
    state.holeEnergy[i] -= shift;
  }
  state.cut = cut;
}

/**
 * A state of one problem as a start for another with the same number of layers: interpolated linearly over the relative
 * depth in each layer. Null where the layers do not correspond.
 */
export function transferState(from: Problem, state: State, to: Problem): State | null {
  const count = from.device.layers.length;
  if (count !== to.device.layers.length) return null;
  const step = from.sign * state.voltage;
  const { nodes } = to;
  const result: State = {
    potential: new Float64Array(nodes),
    electronEnergy: new Float64Array(nodes),
    holeEnergy: new Float64Array(nodes),
    voltage: state.voltage,
    cut: nodes - 2,
    ionLevels: new Float64Array(to.ions.length),
  };
  const reached = to.sign * state.voltage;
  let source = 0;
  let sourceStart = 0;
  let start = 0;
  let node = 0;
  for (let k = 0; k < count; k++) {
    const scale = from.device.layers[k].thickness / to.device.layers[k].thickness;
    const end = start + to.device.layers[k].thickness;
    while (node < nodes && (node < to.edgeLayer.length ? to.edgeLayer[Math.max(node - 1, 0)] : k) <= k) {
      const depth = sourceStart + (to.x[node] - start) * scale;
      while (source < from.nodes - 2 && from.x[source + 1] < depth) source += 1;
      const width = from.x[source + 1] - from.x[source];
      const fraction = Math.min(1, Math.max(0, (depth - from.x[source]) / width));
      const behind = node === nodes - 1 ? reached : 0;
      const between = (values: Float64Array, sign: number) => {
        const left = values[source] + (source > state.cut ? sign * step : 0);
        const right = values[source + 1] + (source + 1 > state.cut ? sign * step : 0);
        return left + fraction * (right - left) - sign * behind;
      };
      result.potential[node] = between(state.potential, 1);
      result.electronEnergy[node] = between(state.electronEnergy, -1);
      result.holeEnergy[node] = between(state.holeEnergy, -1);
      node += 1;
    }
    start = end;
    sourceStart += from.device.layers[k].thickness;
  }
  result.potential[0] = to.front.potential;
  result.potential[nodes - 1] = to.back.potential;
  return result;
}
