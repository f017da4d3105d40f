/**
 * The steady state at an operating point, from nothing or from a neighbouring state.
 *
 * Strategy, each stage only where the one before does not suffice:
 * 1. a neighbouring state, if one is given: Newton's method straight to the operating point;
 * 2. equilibrium (Poisson alone), ions with it;
 * 3. light at V_i = 0: at once, else in steps of its logarithm, halved on failure;
 * 4. the voltage V_i inside the series resistance in steps, predicted by the secant of the last two states, doubled after
 *    easy steps and halved on failure, until the circuit's equation changes sign or the given voltage is reached;
 * 5. Newton's method with V_i as an unknown.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | v | V_i / V_T | 1 |
 */
import { elementaryCharge } from "../constants.ts";
import { assemble, type Drive } from "./assembly.ts";
import { neutralState, solveEquilibrium } from "./equilibrium.ts";
import {
  circuitEquation,
  createWorkspace,
  type NewtonOutcome,
  newton,
  type Operation,
  steadyCurrent,
  type Workspace,
} from "./newton.ts";
import type { Problem } from "./problem.ts";
import { copyState, moveCut, type State } from "./state.ts";

export interface SteadyOptions {
  /** Newton iterations in total. */
  iterations?: number;
  signal?: { readonly aborted: boolean };
  /** A state to begin from: of this problem, with its own light and voltage. */
  start?: State;
}

type SteadyStatus = "solved" | "notConverged" | "singular" | "budgetExhausted" | "aborted";

export interface SteadyState {
  status: SteadyStatus;
  /** What was being done, in words. */
  step: string;
  /** Best iterate; the solution where solved. */
  state: State;
  /** Delivered by the cell itself, inside shunt and series resistance, A m⁻². */
  current: number;
  drive: Drive;
  residual: number;
  iterations: number;
}

const tolerance = 1e-8;
const iterationsPerStep = 25;
const defaultIterations = 4000;

/** Carries the counters and the best iterate through the stages. */
class Walk {
  iterations = 0;
  residual = Infinity;
  step = "equilibrium in the dark";
  status: SteadyStatus = "solved";
  readonly work: Workspace;
  readonly problem: Problem;
  readonly limit: number;
  readonly signal: { readonly aborted: boolean } | undefined;

  constructor(problem: Problem, options: SteadyOptions) {
    this.problem = problem;
    this.work = createWorkspace(problem);
    this.limit = options.iterations ?? defaultIterations;
    this.signal = options.signal;
  }

  /** True when nothing more may be computed. */
  get stopped(): boolean {
    return this.status === "aborted" || this.status === "budgetExhausted";
  }

  /** Newton's method on a copy; null when it did not converge. */
  solve(start: State, drive: Drive, operation: Operation): { state: State; iterations: number } | null {
    if (this.iterations >= this.limit) this.status = "budgetExhausted";
    if (this.stopped) return null;
    const state = copyState(start);
    const outcome: NewtonOutcome = newton(this.problem, state, drive, operation, this.work, {
      iterations: Math.min(iterationsPerStep, this.limit - this.iterations),
      tolerance,
      signal: this.signal,
    });
    this.iterations += outcome.iterations;
    this.residual = outcome.residual;
    this.status = outcome.status;
    return outcome.status === "solved" ? { state, iterations: outcome.iterations } : null;
  }

  /** The circuit's equation at the state that was solved last. */
  imbalance(operation: Operation, state: State): number {
    return circuitEquation(this.problem, operation, steadyCurrent(this.work.assembly), state.voltage).value;
  }
}

/** Both states extrapolated linearly in v. */
function predicted(problem: Problem, older: State, newer: State, voltage: number): State {
  const from = copyState(older);
  moveCut(problem, from, newer.cut);
  const state = copyState(newer);
  const ratio = (voltage - newer.voltage) / (newer.voltage - from.voltage);
  for (let i = 0; i < problem.nodes; i++) {
    state.potential[i] += ratio * (newer.potential[i] - from.potential[i]);
    state.electronEnergy[i] += ratio * (newer.electronEnergy[i] - from.electronEnergy[i]);
    state.holeEnergy[i] += ratio * (newer.holeEnergy[i] - from.holeEnergy[i]);
  }
  state.voltage = voltage;
  return state;
}

/** Turn the light on at v = 0. */
function light(walk: Walk, dark: State, drive: Drive): State | null {
  walk.step = "light at zero voltage";
  const at = (flux: number): Drive => ({ ...drive, flux });
  const short: Operation = { kind: "voltage", voltage: 0 };
  const direct = walk.solve(dark, drive, { ...short, inside: true });
  if (direct || walk.stopped) return direct?.state ?? null;
  let state = dark;
  let exponent = -16;
  let factor = 4;
  while (exponent < 0) {
    const next = Math.min(0, exponent + factor);
    const solved = walk.solve(state, at(drive.flux * 10 ** next), { ...short, inside: true });
    if (walk.stopped) return null;
    if (solved) {
      state = solved.state;
      exponent = next;
      factor *= 1.5;
    } else {
      factor *= 0.5;
      if (factor < 1e-3) return null;
    }
  }
  return state;
}

/** Move v until the circuit's equation holds. */
function applyVoltage(walk: Walk, lit: State, drive: Drive, operation: Operation): State | null {
  const { problem } = walk;
  walk.step = operation.kind === "openCircuit" ? "voltage towards open circuit" : "voltage steps";
  const inside = (voltage: number): Operation => ({
    kind: "voltage",
    voltage: voltage * problem.thermalVoltage,
    inside: true,
  });
  let newer = lit;
  let older: State | null = null;
  // The sign of the imbalance says which way to go: J falls with v, and both circuit equations are monotone in it.
  const settled = walk.solve(newer, drive, inside(newer.voltage));
  if (!settled) return null;
  newer = settled.state;
  const rising = operation.kind === "openCircuit" ? 1 : -1;
  const begin = walk.imbalance(operation, newer) * rising;
  if (begin === 0) return newer;
  const direction = Math.sign(begin);
  const known = operation.kind === "voltage" && problem.device.circuit.seriesResistance === 0;
  const goal = known ? operation.voltage / problem.thermalVoltage : direction * Infinity;
  let size = 4;
  while (newer.voltage !== goal) {
    const next = Math.abs(goal - newer.voltage) <= size ? goal : newer.voltage + direction * size;
    const guess = older ? predicted(problem, older, newer, next) : { ...copyState(newer), voltage: next };
    const solved = walk.solve(guess, drive, inside(next));
    if (walk.stopped) return null;
    if (!solved) {
      size *= 0.5;
      if (size < 1e-4) return null;
      continue;
    }
    older = newer;
    newer = solved.state;
    if (solved.iterations <= 5) size *= 2;
    if (!known && Math.sign(walk.imbalance(operation, newer)) * rising !== direction) break;
    if (Math.abs(newer.voltage) > 2e6) return null;
  }
  if (known) return newer;
  walk.step = operation.kind === "openCircuit" ? "open circuit" : "voltage behind the series resistance";
  let low = older ?? lit;
  let high = newer;
  for (let attempt = 0; attempt < 60; attempt++) {
    for (const start of [high, low]) {
      const solved = walk.solve(start, drive, operation);
      if (solved || walk.stopped) return solved?.state ?? null;
    }
    const middle = 0.5 * (low.voltage + high.voltage);
    const solved = walk.solve(predicted(problem, low, high, middle), drive, inside(middle));
    if (!solved) return null;
    if (Math.sign(walk.imbalance(operation, solved.state)) * rising === direction) low = solved.state;
    else high = solved.state;
  }
  return null;
}

/** The steady state of a problem at an operating point; the ions follow unless their charge is given. */
export function steadyState(
  problem: Problem,
  operation: Operation,
  drive: Drive,
  options: SteadyOptions = {},
): SteadyState {
  const walk = new Walk(problem, options);
  let best = options.start ?? neutralState(problem);
  const finish = (state: State | null): SteadyState => {
    const last = state ?? best;
    assemble(problem, last, drive, walk.work.assembly, null);
    return {
      status: state ? "solved" : walk.status === "solved" ? "notConverged" : walk.status,
      step: walk.step,
      state: last,
      current: problem.sign * elementaryCharge * steadyCurrent(walk.work.assembly),
      drive,
      residual: walk.residual,
      iterations: walk.iterations,
    };
  };
  if (options.start) {
    walk.step = "operating point from a neighbouring state";
    const solved = walk.solve(options.start, drive, operation);
    if (solved || walk.stopped) return finish(solved?.state ?? null);
    const moved = applyVoltage(walk, options.start, drive, operation);
    if (moved || walk.stopped) return finish(moved);
  }
  walk.step = "equilibrium in the dark";
  const dark = neutralState(problem);
  const outcome = solveEquilibrium(problem, dark, drive.heldIons);
  walk.iterations += outcome.iterations;
  walk.residual = outcome.residual;
  walk.status = outcome.status;
  best = dark;
  if (outcome.status !== "solved") return finish(null);
  const lit = drive.flux > 0 ? light(walk, dark, drive) : dark;
  if (!lit) return finish(null);
  best = lit;
  return finish(applyVoltage(walk, lit, drive, operation));
}
