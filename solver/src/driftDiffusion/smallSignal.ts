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
import { ComplexBlockTridiagonal } from "../linearAlgebra/complexBlockTridiagonal.ts";
import { harmonicSolver } from "../linearAlgebra/harmonicSolver.ts";
import type { HarmonicRelaxation } from "../linearAlgebra/harmonicSystem.ts";
import { type Assembly, assemble, createAssembly, type Drive } from "./assembly.ts";
import { edgeFlux, fieldFactor, flux } from "./fluxes.ts";
import { holdIons, type IonGroup } from "./ions.ts";
import {
  addCorrection,
  type EdgeFluxes,
  type Field,
  type LinearEquations,
  linearFluxes,
  linearResidual,
  totalCurrent,
} from "./linearFluxes.ts";
import type { Problem } from "./problem.ts";
import { copyState, moveCut, type State } from "./state.ts";
import { trapRelaxations } from "./traps.ts";

export interface Linearisation extends LinearEquations {
  /** The state with its e.m.f. across the cut edge. */
  state: State;
  /** Ion species of unknowns 3, 4, … */
  ionUnknowns: readonly { charge: 1 | -1; unknown: number }[];
}

/** Right-hand sides of the system. */
export const lightColumn = 0;
export const voltageColumn = 1;

/** Ion rows of a group: charge, storage and fluxes, with an energy per node. */
function addIons(
  problem: Problem,
  state: State,
  target: Assembly,
  group: IonGroup,
  level: number,
  unknown: number,
  conductance: Float64Array,
): void {
  const m = target.blockSize;
  const block = m * m;
  const { sign, nodes } = problem;
  const step = sign * state.voltage;
  const { charge, firstNode, lastNode, width } = group;
  const { lower, diagonal, upper, byVoltage } = target;
  const { storage, local } = target.smallSignal!;
  const logDensity = (i: number) => level - charge * (state.potential[i] + (i > state.cut ? step : 0));
  for (let i = firstNode; i <= lastNode; i++) {
    const ions = width[i - firstNode] * Math.exp(logDensity(i));
    const d = i * block;
    if (i > 0 && i < nodes - 1)
      for (const blocks of [diagonal, local]) {
        blocks[d] += ions;
        blocks[d + unknown] += ions;
      }
    const row = d + unknown * m;
    storage[row] = -charge * ions;
    storage[row + unknown] = -charge * ions;
  }
  const corner = unknown * m + unknown;
  for (let e = firstNode; e < lastNode; e++) {
    const f = e + 1;
    const atCut = e === state.cut;
    const potentialStep = state.potential[f] - state.potential[e] + (atCut ? step : 0);
    const mean = 0.5 * (logDensity(e) + logDensity(f));
    edgeFlux(group.conductance[e - firstNode], mean, potentialStep, fieldFactor(potentialStep), 0);
    conductance[e] = flux[1];
    const c = charge * flux[1];
    diagonal[e * block + corner] -= c;
    upper[e * block + corner] += c;
    lower[f * block + corner] += c;
    diagonal[f * block + corner] -= c;
    if (atCut) {
      byVoltage[e * m + unknown] += sign * c;
      byVoltage[f * m + unknown] -= sign * c;
    }
  }
}

/** Linearise about a solved state. */
export function linearise(problem: Problem, solved: State, drive: Drive): Linearisation {
  const follow = drive.heldIons === null;
  const ionUnknowns = ([1, -1] as const)
    .filter((charge) => follow && problem.ions.some((group) => group.charge === charge))
    .map((charge, k) => ({ charge, unknown: 3 + k }));
  const m = 3 + ionUnknowns.length;
  const { nodes } = problem;
  const size = nodes * m * m;
  const matrix = {
    nodes,
    blockSize: m,
    lower: new Float64Array(size),
    diagonal: new Float64Array(size),
    upper: new Float64Array(size),
  };
  const target = createAssembly(matrix, true);
  const parts = target.smallSignal!;
  const state = copyState(solved);
  const relaxations: HarmonicRelaxation[] = [];
  const held = { flux: drive.flux, heldIons: drive.heldIons ?? holdIons(problem, state) };
  const fill = () => {
    relaxations.length = 0;
    assemble(problem, state, held, target, trapRelaxations(problem, target, relaxations));
  };
  fill();
  if (target.leastConductingEdge !== state.cut) {
    moveCut(problem, state, target.leastConductingEdge);
    fill();
  }
  const ionConductance = ionUnknowns.map(({ charge, unknown }) => {
    const conductance = new Float64Array(nodes - 1);
    problem.ions.forEach((group, g) => {
      if (group.charge === charge) addIons(problem, state, target, group, state.ionLevels[g], unknown, conductance);
    });
    for (let i = 0; i < nodes; i++) {
      const corner = (i * m + unknown) * m + unknown;
      if (target.diagonal[corner] !== 0) continue;
      target.diagonal[corner] = 1;
      parts.local[corner] = 1;
    }
    return conductance;
  });
  const light = new Float64Array(nodes * m);
  for (let i = 0; i < nodes; i++) {
    light[i * m + 1] = problem.modulationGeneration[i];
    light[i * m + 2] = problem.modulationGeneration[i];
  }
  return {
    problem,
    state,
    parts,
    cut: state.cut,
    ionUnknowns,
    ionConductance,
    ionCharge: ionUnknowns.map(({ charge }) => charge),
    system: {
      nodes,
      blockSize: m,
      lower: target.lower,
      diagonal: target.diagonal,
      upper: target.upper,
      storage: parts.storage,
      relaxations,
      rightHandSides: [light, target.byVoltage],
    },
  };
}

/** Current / q in the direction of x on the cut edge, and its spread over depth relative to its size. */
interface Reading {
  re: number;
  im: number;
  spread: number;
}

/** A total smaller than this part of its contributions is zero within rounding: the spread is then relative to them. */
const roundingFloor = 1e-8;

function readCurrent(linear: Linearisation, field: Field, omega: number, emf: number): Reading {
  const m = linear.system.blockSize;
  const fluxes: EdgeFluxes = { re: new Float64Array(m), im: new Float64Array(m) };
  linearFluxes(linear, field, linear.cut, emf, fluxes);
  const { re, im } = totalCurrent(fluxes, omega);
  let largestDifference = 0;
  let largestPart = 0;
  for (let e = 0; e < linear.problem.nodes - 1; e++) {
    linearFluxes(linear, field, e, emf, fluxes);
    const here = totalCurrent(fluxes, omega);
    const difference = Math.hypot(here.re - re, here.im - im);
    if (difference > largestDifference) largestDifference = difference;
    const part = Math.hypot(fluxes.re[1], fluxes.im[1]);
    if (part > largestPart) largestPart = part;
  }
  const size = Math.max(Math.hypot(re, im), roundingFloor * largestPart);
  return { re, im, spread: size > 0 ? largestDifference / size : 0 };
}

/** Above this spread a solution is refined in conservative form. */
const spreadWanted = 3e-9;
const refinementLimit = 4;

/**
 * Solutions at one frequency (rad/s) to the last digit of the conservative equations.
 * @returns fields of light and voltage and their readings; null when singular
 */
export function solveRefined(linear: Linearisation, omega: number): { field: Field; reading: Reading }[] | null {
  const { system } = linear;
  const matrix = new ComplexBlockTridiagonal(system);
  if (!matrix.factor(omega)) return null;
  return [lightColumn, voltageColumn].map((column) => {
    const b = system.rightHandSides[column];
    const emf = column === voltageColumn ? 1 : 0;
    const field: Field = { re: b.slice(), im: new Float64Array(b.length), lowRe: null, lowIm: null };
    matrix.solve(field.re, field.im);
    let best = { field, reading: readCurrent(linear, field, omega, emf) };
    const residual = { re: new Float64Array(b.length), im: new Float64Array(b.length) };
    for (let step = 0; step < refinementLimit && best.reading.spread > 0.01 * spreadWanted; step++) {
      const next = {
        re: best.field.re.slice(),
        im: best.field.im.slice(),
        lowRe: best.field.lowRe?.slice() ?? null,
        lowIm: best.field.lowIm?.slice() ?? null,
      };
      linearResidual(linear, next, omega, emf ? null : b, emf, residual);
      matrix.solve(residual.re, residual.im);
      addCorrection(next, residual.re, residual.im);
      const reading = readCurrent(linear, next, omega, emf);
      if (!(reading.spread < best.reading.spread)) break;
      best = { field: next, reading };
    }
    return best;
  });
}

export interface Response {
  /** Hz. */
  frequencies: Float64Array;
  yieldReal: Float64Array;
  yieldImaginary: Float64Array;
  /** S m⁻². */
  admittanceReal: Float64Array;
  admittanceImaginary: Float64Array;
  /** Largest spread of the current over depth relative to its size: of light, of voltage. */
  spread: [number, number];
  status: "solved" | "singular" | "aborted";
}

/** Q_i and Y_i at every frequency (Hz). */
export function respond(
  linear: Linearisation,
  frequencies: Float64Array,
  signal?: { readonly aborted: boolean },
): Response {
  const { problem, system } = linear;
  const { nodes, blockSize: m } = system;
  const count = frequencies.length;
  const result: Response = {
    frequencies,
    yieldReal: new Float64Array(count),
    yieldImaginary: new Float64Array(count),
    admittanceReal: new Float64Array(count),
    admittanceImaginary: new Float64Array(count),
    spread: [0, 0],
    status: "solved",
  };
  const solver = harmonicSolver(system);
  const perVoltage = (-problem.sign * elementaryCharge) / problem.thermalVoltage;
  const length = nodes * m;
  const batch = Math.max(1, Math.min(16, Math.floor(200_000 / length)));
  for (let start = 0; start < count; start += batch) {
    const omegas = frequencies.slice(start, start + batch).map((f) => 2 * Math.PI * f);
    const solution = solver.solve(omegas);
    for (let k = 0; k < omegas.length; k++) {
      if (signal?.aborted) return { ...result, status: "aborted" };
      let readings = [lightColumn, voltageColumn].map((column) => {
        const from = (k * system.rightHandSides.length + column) * length;
        const re = solution.real.subarray(from, from + length);
        const im = solution.imaginary.subarray(from, from + length);
        return readCurrent(linear, { re, im, lowRe: null, lowIm: null }, omegas[k], column === voltageColumn ? 1 : 0);
      });
      if (solution.status[k] === "singular" || readings.some(({ spread }) => !(spread < spreadWanted))) {
        const refined = solveRefined(linear, omegas[k]);
        if (!refined) return { ...result, status: "singular" };
        readings = refined.map(({ reading }, c) => (reading.spread < readings[c].spread ? reading : readings[c]));
      }
      const [light, voltage] = readings;
      result.yieldReal[start + k] = problem.sign * light.re;
      result.yieldImaginary[start + k] = problem.sign * light.im;
      result.admittanceReal[start + k] = perVoltage * voltage.re;
      result.admittanceImaginary[start + k] = perVoltage * voltage.im;
      readings.forEach(({ spread }, c) => {
        if (spread > result.spread[c]) result.spread[c] = spread;
      });
    }
  }
  return result;
}
