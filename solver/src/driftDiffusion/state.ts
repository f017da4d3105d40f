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
