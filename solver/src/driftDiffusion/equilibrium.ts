/**
 * Equilibrium in the dark at V = 0: Poisson's equation alone, both quasi-Fermi energies zero.
 *
 *     ∂(ε ∂φ/∂x)/∂x + ρ(φ) = 0,  convex: Newton's method with limited steps converges from neutral layers.
 *
 * Ions follow: their number couples all potentials of a group, one border unknown each (ions.ts).
 */
import { neutralFermiDepth } from "../equilibrium.ts";
import { RealBlockTridiagonal } from "../linearAlgebra/realBlockTridiagonal.ts";
import type { HeldIons } from "./ions.ts";
import { balanceIons, type NewtonOutcome, solveDense } from "./newton.ts";
import type { Problem } from "./problem.ts";
import type { State } from "./state.ts";
import { boltzmann } from "./statistics.ts";

/** Every layer neutral, Fermi level flat. */
export function neutralState(problem: Problem): State {
  const { nodes, thermalVoltage, device, edgeLayer } = problem;
  const neutral = device.layers.map(
    (layer) => -(layer.affinity + neutralFermiDepth(layer, device.temperature)) / thermalVoltage,
  );
  const potential = new Float64Array(nodes);
  for (let i = 0; i < nodes; i++)
    potential[i] = 0.5 * (neutral[edgeLayer[Math.max(i - 1, 0)]] + neutral[edgeLayer[Math.min(i, nodes - 2)]]);
  potential[0] = problem.front.potential;
  potential[nodes - 1] = problem.back.potential;
  return {
    potential,
    electronEnergy: new Float64Array(nodes),
    holeEnergy: new Float64Array(nodes),
    voltage: 0,
    cut: 0,
    ionLevels: new Float64Array(problem.ions.length),
  };
}

const iterationLimit = 300;

/**
 * Solves for the potential of `state` in place.
 * @param heldIons ions held where they are; null where they follow
 */
export function solveEquilibrium(problem: Problem, state: State, heldIons: HeldIons | null): NewtonOutcome {
  const groups = heldIons ? [] : problem.ions;
  const { nodes, pieceNode, pieceLayer, pieceWidth, layers, permittivity } = problem;
  const { potential } = state;
  const matrix = new RealBlockTridiagonal(nodes, 1);
  const step = new Float64Array(nodes);
  const columns = groups.map(() => new Float64Array(nodes));
  const size = columns.length;
  let residual = Infinity;
  for (let iteration = 1; iteration <= iterationLimit; iteration++) {
    balanceIons(problem, state);
    matrix.clear();
    step.fill(0);
    for (let e = 0; e < nodes - 1; e++) {
      const displacement = permittivity[e] * (potential[e + 1] - potential[e]);
      step[e] += displacement;
      step[e + 1] -= displacement;
      matrix.diagonal[e] += permittivity[e];
      matrix.diagonal[e + 1] += permittivity[e];
      matrix.upper[e] = -permittivity[e];
      matrix.lower[e + 1] = -permittivity[e];
    }
    for (let k = 0; k < pieceNode.length; k++) {
      const i = pieceNode[k];
      const layer = pieceLayer[k];
      const n = boltzmann(layers.electronLevel[layer] + potential[i]);
      const p = boltzmann(layers.holeLevel[layer] - potential[i]);
      let charge = p - n + layers.fixedCharge[layer];
      let slope = p + n;
      if (layers.trapDensity[layer] > 0) {
        const filled = 1 / (1 + layers.trapElectrons[layer] / n);
        charge += layers.trapDensity[layer] * (layers.emptyTrapCharge[layer] - filled);
        slope += layers.trapDensity[layer] * filled * (1 - filled);
      }
      step[i] += pieceWidth[k] * charge;
      matrix.diagonal[i] += pieceWidth[k] * slope;
    }
    if (heldIons) for (let i = 0; i < nodes; i++) step[i] += heldIons.charge[i];
    const dense = new Float64Array(size * size);
    const right = new Float64Array(size);
    groups.forEach(({ charge, firstNode, lastNode, width }, g) => {
      columns[g].fill(0);
      for (let i = firstNode; i <= lastNode; i++) {
        const ions = width[i - firstNode] * boltzmann(state.ionLevels[g] - charge * potential[i]);
        step[i] += charge * ions;
        matrix.diagonal[i] += ions;
        columns[g][i] = charge * ions;
      }
    });
    for (const i of [0, nodes - 1]) {
      matrix.diagonal[i] = 1;
      matrix.upper[i] = 0;
      matrix.lower[i] = 0;
      step[i] = 0;
      for (const column of columns) column[i] = 0;
    }
    const weights = groups.map(({ number }, g) => columns[g].map((value) => value / number));
    if (!matrix.factor()) return { status: "singular", iterations: iteration, residual };
    matrix.solve(step);
    for (const column of columns) matrix.solve(column);
    for (let g = 0; g < size; g++) {
      dense[g * size + g] = 1;
      for (let i = 0; i < nodes; i++) {
        right[g] += weights[g][i] * step[i];
        for (let k = 0; k < size; k++) dense[g * size + k] -= weights[g][i] * columns[k][i];
      }
    }
    if (!solveDense(dense, right)) return { status: "singular", iterations: iteration, residual };
    residual = 0;
    for (let i = 0; i < nodes; i++) {
      let change = step[i];
      for (let g = 0; g < size; g++) change += right[g] * columns[g][i];
      const length = Math.abs(change);
      if (!(length < Infinity)) return { status: "singular", iterations: iteration, residual };
      residual = Math.max(residual, length);
      potential[i] += length > 1 ? Math.sign(change) * (1 + Math.log(length)) : change;
    }
    if (residual < 1e-10) return { status: "solved", iterations: iteration, residual };
  }
  return { status: residual < 1e-6 ? "solved" : "notConverged", iterations: iterationLimit, residual };
}
