/**
 * The linear response about a steady state: one linearisation, two right-hand sides (light, voltage).
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | K, M | −∂F/∂y and storage (assembly.ts), extended by an energy of each ion species per node | nodes × m × m |
 * | Q_i | δJ/(q δΦ) at fixed V_i | 1 |
 * | Y_i | −δJ/δV_i in constant light | S m⁻² |
 *
 *     (K + iωM) δy = ∂F/∂Φ δΦ + ∂F/∂v δv,    δJ = δJ_n + δJ_p + q(δF_c − δF_a) + iωε δE at any depth
 *
 * The voltage is an e.m.f. across the edge of least conductance and δy the deviation from that step (state.ts), so the
 * current does not drown in the cancellation of large numbers. Method: S. E. Laux, IEEE Trans. Electron Devices 32, 2028
 * (1985).
 */
import { elementaryCharge } from "../constants.ts";
import { harmonicSolver } from "../linearAlgebra/harmonicSolver.ts";
import type { HarmonicRelaxation, HarmonicSolution, HarmonicSystem } from "../linearAlgebra/harmonicSystem.ts";
import { type Assembly, assemble, createAssembly, type Drive } from "./assembly.ts";
import { freezeIons } from "./continuation.ts";
import { edgeFlux, fieldFactor, flux } from "./fluxes.ts";
import type { Problem } from "./problem.ts";
import { copyState, moveCut, type State } from "./state.ts";
import { trapRelaxations } from "./traps.ts";

export interface Linearisation {
  problem: Problem;
  state: State;
  system: HarmonicSystem;
  /** Unknown of each ion species that is followed, or −1. */
  cationUnknown: number;
  anionUnknown: number;
}

/** Right-hand sides of the system. */
export const lightColumn = 0;
export const voltageColumn = 1;

/** Ion rows: fluxes, storage and charge of a group, with an energy per node. */
function addIons(problem: Problem, state: State, target: Assembly, unknown: number, g: number): void {
  const m = target.blockSize;
  const block = m * m;
  const { sign, permittivity, nodes } = problem;
  const step = sign * state.voltage;
  const { charge, firstNode, lastNode, width, conductance } = problem.ions[g];
  const level = state.ionLevels[g];
  const { lower, diagonal, upper, byVoltage, storage } = target;
  const logDensity = (i: number) => level - charge * (state.potential[i] + (i > state.cut ? step : 0));
  for (let i = firstNode; i <= lastNode; i++) {
    const ions = width[i - firstNode] * Math.exp(logDensity(i));
    const d = i * block;
    if (i > 0 && i < nodes - 1) {
      diagonal[d] += ions;
      diagonal[d + unknown] += ions;
    }
    const row = d + unknown * m;
    storage![row] = -charge * ions;
    storage![row + unknown] = -charge * ions;
  }
  for (let e = firstNode; e < lastNode; e++) {
    const f = e + 1;
    const atCut = e === state.cut;
    const potentialStep = state.potential[f] - state.potential[e] + (atCut ? step : 0);
    const mean = 0.5 * (logDensity(e) + logDensity(f));
    edgeFlux(conductance[e - firstNode], mean, potentialStep, fieldFactor(potentialStep), 0);
    const c = charge * flux[1];
    diagonal[e * block + unknown * m + unknown] -= c;
    upper[e * block + unknown * m + unknown] += c;
    lower[f * block + unknown * m + unknown] += c;
    diagonal[f * block + unknown * m + unknown] -= c;
    if (atCut) {
      byVoltage[e * m + unknown] += sign * c;
      byVoltage[f * m + unknown] -= sign * c;
    }
  }
  void permittivity;
}

/** Linearise about a solved state. */
export function linearise(problem: Problem, solved: State, drive: Drive): Linearisation {
  const follow = drive.frozenIonCharge === null;
  const has = (charge: 1 | -1) => follow && problem.ions.some((group) => group.charge === charge);
  let unknowns = 3;
  const cationUnknown = has(1) ? unknowns++ : -1;
  const anionUnknown = has(-1) ? unknowns++ : -1;
  const { nodes } = problem;
  const size = nodes * unknowns * unknowns;
  const matrix = {
    nodes,
    blockSize: unknowns,
    lower: new Float64Array(size),
    diagonal: new Float64Array(size),
    upper: new Float64Array(size),
  };
  const target = createAssembly(matrix, true);
  const state = copyState(solved);
  const relaxations: HarmonicRelaxation[] = [];
  const held = { flux: drive.flux, frozenIonCharge: drive.frozenIonCharge ?? freezeIons(problem, state) };
  assemble(problem, state, held, target, trapRelaxations(problem, target, relaxations));
  if (target.leastConductingEdge !== state.cut) {
    moveCut(problem, state, target.leastConductingEdge);
    relaxations.length = 0;
    assemble(problem, state, held, target, trapRelaxations(problem, target, relaxations));
  }
  if (follow) {
    problem.ions.forEach((group, g) => {
      addIons(problem, state, target, group.charge === 1 ? cationUnknown : anionUnknown, g);
    });
    for (const unknown of [cationUnknown, anionUnknown]) {
      if (unknown < 0) continue;
      for (let i = 0; i < nodes; i++) {
        const place = (i * unknowns + unknown) * unknowns + unknown;
        if (target.diagonal[place] === 0) target.diagonal[place] = 1;
      }
    }
  }
  const light = new Float64Array(nodes * unknowns);
  for (let i = 0; i < nodes; i++) {
    light[i * unknowns + 1] = problem.modulationGeneration[i];
    light[i * unknowns + 2] = problem.modulationGeneration[i];
  }
  return {
    problem,
    state,
    cationUnknown,
    anionUnknown,
    system: {
      nodes,
      blockSize: unknowns,
      lower: target.lower,
      diagonal: target.diagonal,
      upper: target.upper,
      storage: target.storage!,
      relaxations,
      rightHandSides: [light, target.byVoltage],
    },
  };
}

/** Sign with which a row's flux counts in the current: electrons and anions enter their rows with the opposite one. */
const rowSign = (linear: Linearisation, unknown: number) => (unknown === 1 || unknown === linear.anionUnknown ? -1 : 1);

export interface EdgeCurrent {
  /** Conduction by each unknown's row (1 electrons, 2 holes, 3, 4 ions); 0 is the displacement. */
  real: Float64Array;
  imaginary: Float64Array;
}

/** Contributions to J_x/q through edge e, by unknown, for one solution; fills `current`. */
export function edgeCurrent(
  linear: Linearisation,
  solution: HarmonicSolution,
  frequency: number,
  omega: number,
  column: number,
  e: number,
  current: EdgeCurrent,
): void {
  const { system, problem, state } = linear;
  const m = system.blockSize;
  const stored = solution.lastNode - solution.firstNode + 1;
  const base = ((frequency * system.rightHandSides.length + column) * stored + e - solution.firstNode) * m;
  const { real, imaginary } = solution;
  const emf = column === voltageColumn && e === state.cut;
  for (let row = 1; row < m; row++) {
    let re = 0;
    let im = 0;
    const fromLeft = ((e + 1) * m + row) * m;
    const fromRight = (e * m + row) * m;
    for (let c = 0; c < m; c++) {
      const l = -system.lower[fromLeft + c];
      const u = system.upper[fromRight + c];
      re += l * real[base + c] + u * real[base + m + c];
      im += l * imaginary[base + c] + u * imaginary[base + m + c];
    }
    if (emf) re += system.rightHandSides[voltageColumn][(e + 1) * m + row];
    const sign = rowSign(linear, row);
    current.real[row] = sign * re;
    current.imaginary[row] = sign * im;
  }
  const step = emf ? problem.sign : 0;
  current.real[0] = omega * problem.permittivity[e] * (imaginary[base + m] - imaginary[base]);
  current.imaginary[0] = -omega * problem.permittivity[e] * (real[base + m] - real[base] + step);
}

export interface Response {
  frequencies: Float64Array;
  yieldReal: Float64Array;
  yieldImaginary: Float64Array;
  /** S m⁻². */
  admittanceReal: Float64Array;
  admittanceImaginary: Float64Array;
  /** Largest relative spread over depth, per right-hand side. */
  spread: [number, number];
  singular: boolean;
}

/** Q_i and Y_i at every frequency (Hz). */
export function respond(linear: Linearisation, frequencies: Float64Array, signal?: AbortSignal): Response | null {
  const { problem, state, system } = linear;
  const count = frequencies.length;
  const result: Response = {
    frequencies,
    yieldReal: new Float64Array(count),
    yieldImaginary: new Float64Array(count),
    admittanceReal: new Float64Array(count),
    admittanceImaginary: new Float64Array(count),
    spread: [0, 0],
    singular: false,
  };
  const solver = harmonicSolver(system);
  const current: EdgeCurrent = { real: new Float64Array(5), imaginary: new Float64Array(5) };
  const perVoltage = (-problem.sign * elementaryCharge) / problem.thermalVoltage;
  const batch = Math.max(1, Math.min(16, Math.floor(200_000 / (problem.nodes * system.blockSize))));
  for (let start = 0; start < count; start += batch) {
    if (signal?.aborted) return null;
    const omegas = frequencies.slice(start, start + batch).map((f) => 2 * Math.PI * f);
    const solution = solver.solve(omegas, { refinements: 1 });
    if (solution.status.includes("singular")) result.singular = true;
    for (let k = 0; k < omegas.length; k++)
      for (const column of [lightColumn, voltageColumn]) {
        let re = 0;
        let im = 0;
        const total = (e: number) => {
          edgeCurrent(linear, solution, k, omegas[k], column, e, current);
          re = current.real.reduce((sum, value) => sum + value, 0);
          im = current.imaginary.reduce((sum, value) => sum + value, 0);
        };
        total(state.cut);
        const [cutRe, cutIm] = [re, im];
        let spread = 0;
        for (let e = 0; e < problem.nodes - 1; e++) {
          total(e);
          spread = Math.max(spread, Math.hypot(re - cutRe, im - cutIm));
        }
        const size = Math.hypot(cutRe, cutIm);
        if (size > 0) result.spread[column] = Math.max(result.spread[column], spread / size);
        const f = start + k;
        if (column === lightColumn) {
          result.yieldReal[f] = problem.sign * cutRe;
          result.yieldImaginary[f] = problem.sign * cutIm;
        } else {
          result.admittanceReal[f] = perVoltage * cutRe;
          result.admittanceImaginary[f] = perVoltage * cutIm;
        }
      }
  }
  return result;
}
