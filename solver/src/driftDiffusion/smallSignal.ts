/**
 * The linear response about a steady state: one linearisation, two drives (light, voltage).
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | y | δφ̃, δu_n, δu_p, ion energies: oscillating parts of the unknowns | kT/q, kT |
 * | δJ_n, δJ_p | C Δδu + J [± mean δu ± mean δφ̃ + s Δδφ̃] (+ electrons, − holes), s = fieldSlope (fluxes.ts) | m⁻² s⁻¹ |
 * | δD | ε Δδφ̃ as charges | m⁻² |
 * | Q_i | δJ/(q δΦ) at fixed V_i | 1 |
 * | Y_i | −δJ/δV_i in constant light | S m⁻² |
 *
 * The equations stay fluxes through edges and balances at nodes (conservativeSystem.ts); the fluxes are δD, δJ_n, −δJ_p and those
 * of the ions, with the signs with which they enter the balances:
 *
 *     j_i − j_{i−1} = (local + iω storage) y − (generation) δΦ,    δJ = δJ_n + δJ_p + δF_c − δF_a − iω δD at any depth
 *
 * The voltage is an e.m.f. across the edge of least conductance and y the deviation from that step (state.ts), so the
 * current does not drown in the cancellation of large numbers. Method: S. E. Laux, IEEE Trans. Electron Devices 32, 2028
 * (1985).
 */
import { elementaryCharge } from "../constants.ts";
import { conservativeSolver } from "../linearAlgebra/conservativeSolver.ts";
import type { ConservativeSystem, Relaxation } from "../linearAlgebra/conservativeSystem.ts";
import { assemble, createAssembly, type Drive, type SmallSignalParts } from "./assembly.ts";
import { edgeFlux, fieldFactor, flux } from "./fluxes.ts";
import { holdIons, type IonGroup } from "./ions.ts";
import type { Problem } from "./problem.ts";
import { copyState, moveCut, type State } from "./state.ts";
import { trapRelaxations } from "./traps.ts";

export interface Linearisation {
  problem: Problem;
  /** Driven by light (δΦ = 1) and by voltage (δv = 1); read as the current / q in the direction of x. */
  system: ConservativeSystem;
  /** The state with its e.m.f. across the cut edge. */
  state: State;
  /** Ion species of unknowns 3, 4, … */
  ionUnknowns: readonly { charge: 1 | -1; unknown: number }[];
}

/** Drives of the system. */
export const lightColumn = 0;
export const voltageColumn = 1;

/** Fluxes of carriers and displacement in terms of steps and means of the unknowns. */
function carrierFluxes(problem: Problem, parts: SmallSignalParts, m: number) {
  const edges = problem.nodes - 1;
  const byStep = new Float64Array(edges * m * m);
  const byMean = new Float64Array(edges * m * m);
  for (let e = 0; e < edges; e++) {
    const displacement = e * m * m;
    const electrons = displacement + m;
    const holes = electrons + m;
    byStep[displacement] = problem.permittivity[e];
    byStep[electrons] = parts.electronFlux[e] * parts.fieldSlope[e];
    byStep[electrons + 1] = parts.electronConductance[e];
    byMean[electrons] = parts.electronFlux[e];
    byMean[electrons + 1] = parts.electronFlux[e];
    byStep[holes] = -parts.holeFlux[e] * parts.fieldSlope[e];
    byStep[holes + 2] = -parts.holeConductance[e];
    byMean[holes] = parts.holeFlux[e];
    byMean[holes + 2] = parts.holeFlux[e];
  }
  return { byStep, byMean };
}

/** Charge, storage and flux of an ion group, with an energy per node. */
function addIons(
  problem: Problem,
  state: State,
  { local, storage }: SmallSignalParts,
  byStep: Float64Array,
  group: IonGroup,
  level: number,
  unknown: number,
): void {
  const { nodes } = problem;
  const m = Math.sqrt(local.length / nodes);
  const step = problem.sign * state.voltage;
  const { charge, firstNode, lastNode, width } = group;
  const logDensity = (i: number) => level - charge * (state.potential[i] + (i > state.cut ? step : 0));
  for (let i = firstNode; i <= lastNode; i++) {
    const ions = width[i - firstNode] * Math.exp(logDensity(i));
    const charges = i * m * m;
    const balance = charges + unknown * m;
    local[charges] += ions;
    local[charges + unknown] += ions;
    storage[balance] = -charge * ions;
    storage[balance + unknown] = -charge * ions;
  }
  for (let e = firstNode; e < lastNode; e++) {
    const potentialStep = state.potential[e + 1] - state.potential[e] + (e === state.cut ? step : 0);
    const mean = 0.5 * (logDensity(e) + logDensity(e + 1));
    edgeFlux(group.conductance[e - firstNode], mean, potentialStep, fieldFactor(potentialStep), 0);
    byStep[(e * m + unknown) * m + unknown] = -charge * flux[1];
  }
}

/** The e.m.f. δv = 1 as sources in the cut edge: a step of the potential up and of all energies down. */
function voltageSources({ nodes, sign }: Problem, byStep: Float64Array, cut: number, m: number): Float64Array {
  const sources = new Float64Array((nodes - 1) * m);
  for (let row = 0; row < m; row++) {
    const at = (cut * m + row) * m;
    sources[cut * m + row] = sign * (row === 0 ? byStep[at] : byStep[at] - byStep[at + row]);
  }
  return sources;
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
  const relaxations: Relaxation[] = [];
  const withIons = { flux: drive.flux, heldIons: drive.heldIons ?? holdIons(problem, state) };
  const fill = () => {
    relaxations.length = 0;
    assemble(problem, state, withIons, target, trapRelaxations(problem, target, relaxations));
  };
  fill();
  if (target.leastConductingEdge !== state.cut) {
    moveCut(problem, state, target.leastConductingEdge);
    fill();
  }
  const { byStep, byMean } = carrierFluxes(problem, parts, m);
  for (const { charge, unknown } of ionUnknowns) {
    problem.ions.forEach((group, g) => {
      if (group.charge === charge) addIons(problem, state, parts, byStep, group, state.ionLevels[g], unknown);
    });
    for (let i = 0; i < nodes; i++) {
      // where the species does not exist its energy is an equation of its own
      const own = (i * m + unknown) * m + unknown;
      if (parts.storage[own] === 0) parts.local[own] = 1;
    }
  }
  const light = new Float64Array(nodes * m);
  for (let i = 0; i < nodes; i++) {
    light[i * m + 1] = problem.modulationGeneration[i];
    light[i * m + 2] = problem.modulationGeneration[i];
  }
  const held = new Uint8Array(nodes * m);
  held[0] = 1;
  held[(nodes - 1) * m] = 1;
  return {
    problem,
    state,
    ionUnknowns,
    system: {
      nodes,
      blockSize: m,
      byStep,
      byMean,
      local: parts.local,
      storage: parts.storage,
      relaxations,
      held,
      drives: [{ atNodes: light }, { inEdges: voltageSources(problem, byStep, state.cut, m) }],
      reading: {
        weight: Float64Array.of(0, 1, -1, ...ionUnknowns.map(({ charge }) => -charge)),
        harmonicWeight: Float64Array.of(-1, ...new Float64Array(m - 1)),
      },
    },
  };
}

/** A total smaller than this part of its contributions is zero within rounding: the spread is then relative to them. */
const roundingFloor = 1e-8;
/** Frequencies between two looks at the abort signal. */
const frequenciesAtOnce = 64;

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
  { problem, system }: Linearisation,
  frequencies: Float64Array,
  signal?: { readonly aborted: boolean },
): Response {
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
  const solver = conservativeSolver(system);
  // Any edge may be read, but the elimination meets there, and over many stacks it lost least when it met mid-stack (spreads of
  // 4e-6 at worst, where meeting at the cut or at the back gave 5e-2).
  const edge = (system.nodes >> 1) - 1;
  const perVoltage = (-problem.sign * elementaryCharge) / problem.thermalVoltage;
  for (let start = 0; start < count; start += frequenciesAtOnce) {
    if (signal?.aborted) return { ...result, status: "aborted" };
    const omegas = frequencies.slice(start, start + frequenciesAtOnce).map((f) => 2 * Math.PI * f);
    const { real, imaginary, difference, part, status } = solver.read(omegas, { edge });
    if (status.includes("singular")) return { ...result, status: "singular" };
    const spreadAt = (at: number) => {
      const size = Math.max(Math.hypot(real[at], imaginary[at]), roundingFloor * part[at]);
      return size > 0 ? difference[at] / size : 0;
    };
    for (let k = 0; k < omegas.length; k++) {
      const light = 2 * k + lightColumn;
      const voltage = 2 * k + voltageColumn;
      result.yieldReal[start + k] = problem.sign * real[light];
      result.yieldImaginary[start + k] = problem.sign * imaginary[light];
      result.admittanceReal[start + k] = perVoltage * real[voltage];
      result.admittanceImaginary[start + k] = perVoltage * imaginary[voltage];
      result.spread[0] = Math.max(result.spread[0], spreadAt(light));
      result.spread[1] = Math.max(result.spread[1], spreadAt(voltage));
    }
  }
  return result;
}
