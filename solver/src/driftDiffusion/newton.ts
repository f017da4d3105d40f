/**
 * Newton's method for the steady state, bordered by the ion levels and, where the circuit decides it, by the voltage.
 *
 * | symbol | meaning | shape |
 * |---|---|---|
 * | K, F | Jacobian and residual (assembly.ts) | nodes × 3 |
 * | z | border unknowns: δλ of each ion group, δv | groups (+1) |
 *
 * A step is limited as a relative change of density: with a = δφ̃ + δu (the linear change of ln n), ln n changes by
 * ln(1+a). That is the step of a method with densities as unknowns, which is exact for every linear problem, and stays
 * positive. Damping: R. E. Bank, D. J. Rose, Numer. Math. 37, 279 (1981) names the alternatives.
 */
import { elementaryCharge } from "../constants.ts";
import { RealBlockTridiagonal } from "../linearAlgebra/realBlockTridiagonal.ts";
import { type Assembly, assemble, createAssembly, type Drive } from "./assembly.ts";
import { ionLevel } from "./ions.ts";
import type { Problem } from "./problem.ts";
import { moveCut, type State } from "./state.ts";

/** What decides the voltage. */
export type Operation =
  | { kind: "openCircuit" }
  /** Terminal voltage in V, or with `inside` the voltage inside the series resistance. */
  | { kind: "voltage"; voltage: number; inside?: boolean };

export interface Workspace {
  matrix: RealBlockTridiagonal;
  assembly: Assembly;
  /** Solutions of the border columns. */
  columns: Float64Array[];
}

export function createWorkspace(problem: Problem): Workspace {
  const matrix = new RealBlockTridiagonal(problem.nodes, 3);
  return {
    matrix,
    assembly: createAssembly(matrix, false),
    columns: Array.from({ length: problem.ions.length + 1 }, () => new Float64Array(problem.nodes * 3)),
  };
}

export interface NewtonOutcome {
  status: "solved" | "notConverged" | "singular" | "aborted";
  iterations: number;
  /** Largest change of ln(density) or φ̃ in the last step. */
  residual: number;
}

export interface NewtonOptions {
  iterations: number;
  tolerance: number;
  signal?: { readonly aborted: boolean };
}

/** The circuit's equation and its derivatives by J_x/q and v. Zero at the operating point. */
export function circuitEquation(problem: Problem, operation: Operation, current: number, voltage: number) {
  const { seriesResistance, shuntResistance } = problem.device.circuit;
  const perVoltage = problem.thermalVoltage / (elementaryCharge * shuntResistance);
  const delivered = problem.sign * current - voltage * perVoltage;
  if (operation.kind === "openCircuit") return { value: delivered, byCurrent: problem.sign, byVoltage: -perVoltage };
  const resistance = (seriesResistance * elementaryCharge) / problem.thermalVoltage;
  return {
    value: voltage - resistance * delivered - operation.voltage / problem.thermalVoltage,
    byCurrent: -resistance * problem.sign,
    byVoltage: 1 + resistance * perVoltage,
  };
}

const voltageIsUnknown = (problem: Problem, operation: Operation): boolean =>
  operation.kind === "openCircuit" || (problem.device.circuit.seriesResistance > 0 && !operation.inside);

/** J_x/q at the state assembled last: from the balance or from the cut edge, whichever is less noisy. */
export const steadyCurrent = (assembly: Assembly): number =>
  assembly.balanceNoise < assembly.currentNoise ? assembly.balance : assembly.current;

/** Ion levels that hold the numbers of ions, in place. */
export function balanceIons(problem: Problem, state: State): void {
  const step = problem.sign * state.voltage;
  for (let g = 0; g < problem.ions.length; g++)
    state.ionLevels[g] = ionLevel(problem.ions[g], state.potential, state.cut, step);
}

/** Solve a small dense system in place by elimination with pivoting; false when singular. */
export function solveDense(matrix: Float64Array, right: Float64Array): boolean {
  const n = right.length;
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let r = k + 1; r < n; r++) if (Math.abs(matrix[r * n + k]) > Math.abs(matrix[pivot * n + k])) pivot = r;
    const head = matrix[pivot * n + k];
    if (!(Math.abs(head) > 0) || !Number.isFinite(head)) return false;
    if (pivot !== k) {
      for (let c = 0; c < n; c++) {
        const swap = matrix[k * n + c];
        matrix[k * n + c] = matrix[pivot * n + c];
        matrix[pivot * n + c] = swap;
      }
      const swap = right[k];
      right[k] = right[pivot];
      right[pivot] = swap;
    }
    for (let r = k + 1; r < n; r++) {
      const factor = matrix[r * n + k] / head;
      for (let c = k; c < n; c++) matrix[r * n + c] -= factor * matrix[k * n + c];
      right[r] -= factor * right[k];
    }
  }
  for (let k = n - 1; k >= 0; k--) {
    let sum = right[k];
    for (let c = k + 1; c < n; c++) sum -= matrix[k * n + c] * right[c];
    right[k] = sum / matrix[k * n + k];
  }
  return true;
}

/**
 * One linear solve: the step of all unknowns, left in `assembly.residual`; returns δv, or null when singular.
 */
function linearStep(problem: Problem, state: State, work: Workspace, operation: Operation, ionsFollow: boolean) {
  const { matrix, assembly, columns } = work;
  const groups = ionsFollow ? problem.ions.length : 0;
  const withVoltage = voltageIsUnknown(problem, operation);
  const size = groups + (withVoltage ? 1 : 0);
  if (!matrix.factor()) return null;
  const step = assembly.residual;
  matrix.solve(step);
  if (size === 0) return 0;
  const potentialStep = problem.sign * state.voltage;
  for (let g = 0; g < groups; g++) {
    const column = columns[g].fill(0);
    const { charge, firstNode, lastNode, width } = problem.ions[g];
    for (let i = Math.max(firstNode, 1); i <= Math.min(lastNode, problem.nodes - 2); i++) {
      const phi = state.potential[i] + (i > state.cut ? potentialStep : 0);
      column[i * 3] = charge * width[i - firstNode] * Math.exp(state.ionLevels[g] - charge * phi);
    }
    matrix.solve(column);
  }
  if (withVoltage) {
    columns[groups].set(assembly.byVoltage);
    matrix.solve(columns[groups]);
  }
  // Border rows: r·y + D z = ρ with y = y_F + Σ Y_k z_k.
  const dense = new Float64Array(size * size);
  const right = new Float64Array(size);
  for (let g = 0; g < groups; g++) {
    const { charge, firstNode, lastNode, width, number } = problem.ions[g];
    dense[g * size + g] += 1;
    for (let i = firstNode; i <= lastNode; i++) {
      const behind = i > state.cut;
      const phi = state.potential[i] + (behind ? potentialStep : 0);
      const weight = (charge * width[i - firstNode] * Math.exp(state.ionLevels[g] - charge * phi)) / number;
      right[g] += weight * step[i * 3];
      for (let k = 0; k < size; k++) dense[g * size + k] -= weight * columns[k][i * 3];
      if (withVoltage && behind) dense[g * size + groups] -= weight * problem.sign;
    }
  }
  if (withVoltage) {
    const byBalance = assembly.balanceNoise < assembly.currentNoise;
    const equation = circuitEquation(problem, operation, steadyCurrent(assembly), state.voltage);
    const derivatives = byBalance ? assembly.balanceByState : assembly.currentByState;
    const first = byBalance ? 0 : state.cut * 3;
    const row = groups * size;
    right[groups] = -equation.value;
    for (let j = 0; j < derivatives.length; j++) {
      const weight = equation.byCurrent * derivatives[j];
      right[groups] -= weight * step[first + j];
      for (let k = 0; k < size; k++) dense[row + k] += weight * columns[k][first + j];
    }
    dense[row + groups] += equation.byCurrent * (byBalance ? 0 : assembly.currentByVoltage) + equation.byVoltage;
  }
  if (!solveDense(dense, right)) return null;
  for (let k = 0; k < size; k++) {
    const column = columns[k];
    const amount = right[k];
    for (let j = 0; j < step.length; j++) step[j] += amount * column[j];
  }
  return withVoltage ? right[groups] : 0;
}

/** Change of ln(density) for a linear change a. */
function limited(a: number): number {
  if (a >= 0) return Math.log1p(a);
  return a > -0.9 ? Math.log1p(a) : -2.302585 - Math.log1p(-0.9 - a);
}

/** Newton's method on `state`, in place: on failure it holds the last iterate. */
export function newton(
  problem: Problem,
  state: State,
  drive: Drive,
  operation: Operation,
  work: Workspace,
  options: NewtonOptions,
): NewtonOutcome {
  const { assembly } = work;
  const ionsFollow = drive.heldIons === null;
  if (!voltageIsUnknown(problem, operation) && operation.kind === "voltage")
    state.voltage = operation.voltage / problem.thermalVoltage;
  let residual = Infinity;
  let smallest = Infinity;
  let sinceSmallest = 0;
  for (let iteration = 1; iteration <= options.iterations; iteration++) {
    if (options.signal?.aborted) return { status: "aborted", iterations: iteration - 1, residual };
    if (ionsFollow) balanceIons(problem, state);
    assemble(problem, state, drive, assembly, null);
    if (iteration === 1 && assembly.leastConductingEdge !== state.cut) {
      moveCut(problem, state, assembly.leastConductingEdge);
      assemble(problem, state, drive, assembly, null);
    }
    const voltageStep = linearStep(problem, state, work, operation, ionsFollow);
    if (voltageStep === null) return { status: "singular", iterations: iteration, residual };
    residual = takeStep(problem, state, assembly.residual, voltageStep);
    if (!(residual < Infinity)) return { status: "singular", iterations: iteration, residual: smallest };
    if (residual < options.tolerance) return { status: "solved", iterations: iteration, residual };
    if (residual < smallest) {
      smallest = residual;
      sinceSmallest = 0;
    } else sinceSmallest += 1;
    // Newton's steps no longer shrink: rounding where they are small, divergence where they are large.
    if (sinceSmallest >= 3 && residual < roundingStep) return { status: "solved", iterations: iteration, residual };
    if (sinceSmallest >= 5 && iteration > 8 && residual > 1e6) break;
  }
  return { status: "notConverged", iterations: options.iterations, residual };
}

/** Steps (in kT) that may be rounding where Newton's method stands still: 10⁻⁴ of some density that is nearly undetermined. */
const roundingStep = 1e-4;

/** Apply a step, limited; returns its largest unlimited change of ln(density), φ̃ or v. */
function takeStep(problem: Problem, state: State, step: Float64Array, voltageStep: number): number {
  const { potential, electronEnergy, holeEnergy } = state;
  let largest = Math.abs(voltageStep);
  for (let i = 0; i < problem.nodes; i++) {
    const potentialStep = step[i * 3];
    const electrons = potentialStep + step[i * 3 + 1];
    const holes = -potentialStep - step[i * 3 + 2];
    const size = Math.max(Math.abs(potentialStep), Math.abs(electrons), Math.abs(holes));
    if (!(size <= largest)) largest = size;
    potential[i] += potentialStep;
    electronEnergy[i] += limited(electrons) - potentialStep;
    holeEnergy[i] += -limited(holes) - potentialStep;
  }
  state.voltage += voltageStep;
  return largest;
}
