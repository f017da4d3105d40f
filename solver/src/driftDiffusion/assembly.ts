/**
 * Residual F and Jacobian K = −∂F/∂y of the discrete equations, and the storage M of F = M dy/dt, in one pass.
 *
 * | row of a node | equation | unit |
 * |---|---|---|
 * | 0 | Poisson: difference of ε ∂φ̃/∂x over the control volume + charges in it | m⁻² |
 * | 1 | electrons: difference of J_n/q + generation − recombination − flow into the contact | m⁻² s⁻¹ |
 * | 2 | holes: likewise | m⁻² s⁻¹ |
 * | 3, 4 | ions where they are followed in time: difference of their flux | m⁻² s⁻¹ |
 *
 * Unknowns in the same order: φ̃, u_n, u_p, ion energies. Shapes: blocks nodes × m × m row-major, F nodes × m.
 * Box method: Selberherr 1984, ch. 6; linearised about the state as S. E. Laux, IEEE Trans. Electron Devices 32, 2028 (1985).
 */
import { edgeFlux, fieldFactor, fieldSlope, flux } from "./fluxes.ts";
import type { HeldIons, IonGroup } from "./ions.ts";
import type { Problem } from "./problem.ts";
import { excessProduct } from "./recombination.ts";
import type { State } from "./state.ts";
import { boltzmann } from "./statistics.ts";

export interface BlockMatrix {
  nodes: number;
  blockSize: number;
  lower: Float64Array;
  diagonal: Float64Array;
  upper: Float64Array;
}

/** What the small signal needs besides the blocks. */
export interface SmallSignalParts {
  /** Coefficient of iω in the diagonal blocks, nodes × m × m. */
  storage: Float64Array;
  /** The part of the diagonal blocks that belongs to nodes, not to edges, nodes × m × m. */
  local: Float64Array;
  /** Per edge: fluxes J/q of both carriers, their derivatives by Δu, and the slope by Δφ of ln of either (fluxes.ts). */
  electronFlux: Float64Array;
  holeFlux: Float64Array;
  electronConductance: Float64Array;
  holeConductance: Float64Array;
  fieldSlope: Float64Array;
}

export interface Assembly {
  blockSize: number;
  lower: Float64Array;
  diagonal: Float64Array;
  upper: Float64Array;
  /** nodes × m. */
  residual: Float64Array;
  /** ∂F/∂v, nodes × m. */
  byVoltage: Float64Array;
  /** Only for the small signal. */
  smallSignal: SmallSignalParts | null;
  /** Current through the cut edge / q in the direction of x, and its derivatives. */
  current: number;
  currentByVoltage: number;
  /** By φ̃, u_n, u_p of the node in front of the cut, then of the node behind it. */
  currentByState: Float64Array;
  /** The same current from generation − recombination − flow into the wrong contacts, and its derivatives, nodes × m. */
  balance: number;
  balanceByState: Float64Array;
  /** Rounding to expect in `current` and in `balance`. */
  currentNoise: number;
  balanceNoise: number;
  /** Edge with the smallest sum of conductances of both carriers. */
  leastConductingEdge: number;
}

/** @param matrix where the blocks are written */
export function createAssembly(matrix: BlockMatrix, forSmallSignal: boolean): Assembly {
  const { nodes, blockSize, lower, diagonal, upper } = matrix;
  const size = diagonal.length;
  const perEdge = () => new Float64Array(nodes - 1);
  return {
    blockSize,
    lower,
    diagonal,
    upper,
    residual: new Float64Array(nodes * blockSize),
    byVoltage: new Float64Array(nodes * blockSize),
    smallSignal: forSmallSignal
      ? {
          storage: new Float64Array(size),
          local: new Float64Array(size),
          electronFlux: perEdge(),
          holeFlux: perEdge(),
          electronConductance: perEdge(),
          holeConductance: perEdge(),
          fieldSlope: perEdge(),
        }
      : null,
    current: 0,
    currentByVoltage: 0,
    currentByState: new Float64Array(6),
    balance: 0,
    balanceByState: new Float64Array(nodes * blockSize),
    currentNoise: 0,
    balanceNoise: 0,
    leastConductingEdge: 0,
  };
}

/** Light and ions of an operating point, as the equations see them. */
export interface Drive {
  /** Photons m⁻² s⁻¹ at the bias wavelength. */
  flux: number;
  /** Ions held where they are; null where they follow. */
  heldIons: HeldIons | null;
}

/** Dynamic traps of one piece, for the small signal (see traps.ts). */
export interface TrapSink {
  add(piece: number, electrons: number, holes: number): void;
}

export function assemble(problem: Problem, state: State, drive: Drive, target: Assembly, traps: TrapSink | null): void {
  target.lower.fill(0);
  target.diagonal.fill(0);
  target.upper.fill(0);
  target.byVoltage.fill(0);
  target.smallSignal?.storage.fill(0);
  const m = target.blockSize;
  const { residual } = target;
  residual.fill(0);
  for (let i = 0; i < problem.nodes; i++) residual[i * m + 1] = drive.flux * problem.biasGeneration[i];
  for (let i = 0; i < problem.nodes; i++) residual[i * m + 2] = drive.flux * problem.biasGeneration[i];
  addPieces(problem, state, target, traps);
  addInterfaces(problem, state, target);
  addContact(problem, state, target, 0);
  addContact(problem, state, target, problem.nodes - 1);
  if (drive.heldIons) for (let i = 0; i < problem.nodes; i++) residual[i * m] += drive.heldIons.charge[i];
  else for (let g = 0; g < problem.ions.length; g++) addIonCharge(problem, problem.ions[g], state, g, target);
  target.smallSignal?.local.set(target.diagonal);
  balanceCurrent(problem, state, drive, target);
  addEdges(problem, state, target);
  fixPotential(problem, state, target, 0);
  fixPotential(problem, state, target, problem.nodes - 1);
}

/** Displacement and carrier currents through all edges. */
function addEdges(problem: Problem, state: State, target: Assembly): void {
  const { electronConductance, holeConductance, permittivity, edgeLayer } = problem;
  const { electronLevel, holeLevel } = problem.layers;
  const { potential, electronEnergy, holeEnergy, cut } = state;
  const { lower, diagonal, upper, residual, byVoltage, smallSignal: parts } = target;
  const m = target.blockSize;
  const block = m * m;
  const { sign } = problem;
  const step = sign * state.voltage;
  let least = Infinity;
  let leastEdge = 0;
  let noise = 0;
  for (let e = 0; e < problem.nodes - 1; e++) {
    const f = e + 1;
    const layer = edgeLayer[e];
    const shift = e === cut ? step : 0;
    const potentialStep = potential[f] - potential[e] + shift;
    const factor = fieldFactor(potentialStep);
    const slope = fieldSlope(potentialStep);
    const left = e * block;
    const right = f * block;

    const displacement = permittivity[e] * potentialStep;
    residual[e * m] += displacement;
    residual[f * m] -= displacement;
    diagonal[left] += permittivity[e];
    diagonal[right] += permittivity[e];
    upper[left] -= permittivity[e];
    lower[right] -= permittivity[e];

    const mean = 0.5 * (potential[e] + potential[f] + electronEnergy[e] + electronEnergy[f]) + electronLevel[layer];
    edgeFlux(electronConductance[e], mean, potentialStep, factor, electronEnergy[f] - electronEnergy[e] - shift);
    const electrons = flux[0];
    const electronsByRight = flux[1];
    const electronsByLeft = -flux[2];
    const electronsByPotential = electrons * slope;
    residual[e * m + 1] += electrons;
    residual[f * m + 1] -= electrons;
    let row = left + m;
    diagonal[row] -= 0.5 * electrons - electronsByPotential;
    diagonal[row + 1] -= electronsByLeft;
    upper[row] -= 0.5 * electrons + electronsByPotential;
    upper[row + 1] -= electronsByRight;
    row = right + m;
    lower[row] += 0.5 * electrons - electronsByPotential;
    lower[row + 1] += electronsByLeft;
    diagonal[row] += 0.5 * electrons + electronsByPotential;
    diagonal[row + 1] += electronsByRight;

    const meanHoles = holeLevel[layer] - 0.5 * (potential[e] + potential[f] + holeEnergy[e] + holeEnergy[f]);
    edgeFlux(holeConductance[e], meanHoles, potentialStep, factor, holeEnergy[f] - holeEnergy[e] - shift);
    const holes = flux[0];
    const holesByLeft = -flux[1];
    const holesByRight = flux[2];
    const holesByPotential = holes * slope;
    residual[e * m + 2] -= holes;
    residual[f * m + 2] += holes;
    row = left + 2 * m;
    diagonal[row] += -0.5 * holes - holesByPotential;
    diagonal[row + 2] += holesByLeft;
    upper[row] += -0.5 * holes + holesByPotential;
    upper[row + 2] += holesByRight;
    row = right + 2 * m;
    lower[row] -= -0.5 * holes - holesByPotential;
    lower[row + 2] -= holesByLeft;
    diagonal[row] -= -0.5 * holes + holesByPotential;
    diagonal[row + 2] -= holesByRight;

    const conductance = electronsByRight - electronsByLeft + holesByRight - holesByLeft;
    const rounding =
      (electronsByRight - electronsByLeft) * Math.abs(electronEnergy[e]) +
      (holesByRight - holesByLeft) * Math.abs(holeEnergy[e]);
    if (rounding > noise) noise = rounding;
    if (conductance < least) {
      least = conductance;
      leastEdge = e;
    }
    if (parts) {
      parts.electronFlux[e] = electrons;
      parts.holeFlux[e] = holes;
      parts.electronConductance[e] = 0.5 * (electronsByRight - electronsByLeft);
      parts.holeConductance[e] = 0.5 * (holesByRight - holesByLeft);
      parts.fieldSlope[e] = slope;
    }
    if (e === cut) {
      const electronsByVoltage = sign * (electronsByPotential - 0.5 * (electronsByRight - electronsByLeft));
      const holesByVoltage = sign * (holesByPotential - 0.5 * (holesByRight - holesByLeft));
      byVoltage[e * m] += sign * permittivity[e];
      byVoltage[f * m] -= sign * permittivity[e];
      byVoltage[e * m + 1] += electronsByVoltage;
      byVoltage[f * m + 1] -= electronsByVoltage;
      byVoltage[e * m + 2] -= holesByVoltage;
      byVoltage[f * m + 2] += holesByVoltage;
      target.current = electrons + holes;
      target.currentByVoltage = electronsByVoltage + holesByVoltage;
      const by = target.currentByState;
      by[0] = 0.5 * electrons - electronsByPotential - 0.5 * holes - holesByPotential;
      by[1] = electronsByLeft;
      by[2] = holesByLeft;
      by[3] = 0.5 * electrons + electronsByPotential - 0.5 * holes + holesByPotential;
      by[4] = electronsByRight;
      by[5] = holesByRight;
    }
  }
  target.currentNoise = 1.1e-16 * noise;
  target.leastConductingEdge = leastEdge;
}

/**
 * The current through the cut edge as a balance: electrons made on the hole contact's side of it and holes made on the
 * electron contact's side, less what recombines there or leaves through the wrong contact. Called while rows 1 and 2 hold
 * nothing but that.
 */
function balanceCurrent(problem: Problem, state: State, drive: Drive, target: Assembly): void {
  const { residual, diagonal, balanceByState, blockSize: m } = target;
  const { sign } = problem;
  balanceByState.fill(0);
  let sum = 0;
  let noise = 0;
  for (let i = 0; i < problem.nodes; i++) {
    const behind = i > state.cut;
    const row = behind === sign > 0 ? 1 : 2;
    const value = residual[i * m + row];
    sum += value;
    noise += Math.abs(value) + drive.flux * problem.biasGeneration[i];
    for (let c = 0; c < 3; c++) balanceByState[i * m + c] = -sign * diagonal[(i * m + row) * m + c];
  }
  // A flow into a contact is a difference of two large numbers wherever the contact is nearly in equilibrium.
  const [electronSide, holeSide] = sign > 0 ? [problem.front, problem.back] : [problem.back, problem.front];
  noise += electronSide.holeVelocity * electronSide.holeDensity + holeSide.electronVelocity * holeSide.electronDensity;
  target.balance = sign * sum;
  target.balanceNoise = 2.2e-16 * noise;
}

/** Charges, recombination and storage in all pieces of control volumes. */
function addPieces(problem: Problem, state: State, target: Assembly, traps: TrapSink | null): void {
  const { pieceNode, pieceLayer, pieceWidth, layers } = problem;
  const { potential, electronEnergy, holeEnergy } = state;
  const { diagonal, residual } = target;
  const storage = target.smallSignal?.storage;
  const m = target.blockSize;
  for (let k = 0; k < pieceNode.length; k++) {
    const i = pieceNode[k];
    const layer = pieceLayer[k];
    const width = pieceWidth[k];
    const n = boltzmann(layers.electronLevel[layer] + potential[i] + electronEnergy[i]);
    const p = boltzmann(layers.holeLevel[layer] - potential[i] - holeEnergy[i]);
    const d = i * m * m;
    const chargeRow = i * m;
    residual[chargeRow] += width * (p - n + layers.fixedCharge[layer]);
    diagonal[d] += width * (n + p);
    diagonal[d + 1] += width * n;
    diagonal[d + 2] += width * p;
    if (storage) {
      storage[d + m] += width * n;
      storage[d + m + 1] += width * n;
      storage[d + 2 * m] -= width * p;
      storage[d + 2 * m + 2] -= width * p;
    }
    const product = n * p;
    const excess = excessProduct(product, layers.intrinsicSquared[layer], electronEnergy[i] - holeEnergy[i]);
    const electronLifetime = layers.electronLifetime[layer];
    let coefficient = layers.radiative[layer] + layers.augerElectron[layer] * n + layers.augerHole[layer] * p;
    let byElectrons = layers.augerElectron[layer] * n;
    let byHoles = layers.augerHole[layer] * p;
    if (electronLifetime < Infinity) {
      const holeLifetime = layers.holeLifetime[layer];
      const denominator =
        holeLifetime * (n + layers.trapElectrons[layer]) + electronLifetime * (p + layers.trapHoles[layer]);
      const trapDensity = layers.trapDensity[layer];
      if (trapDensity > 0) {
        // f = (τ_p n + τ_n p_1)/(τ_p (n+n_1) + τ_n (p+p_1)): Shockley and Read 1952.
        const filled = (holeLifetime * n + electronLifetime * layers.trapHoles[layer]) / denominator;
        const amount = width * trapDensity;
        residual[chargeRow] += amount * (layers.emptyTrapCharge[layer] - filled);
        const empty = (holeLifetime * layers.trapElectrons[layer] + electronLifetime * p) / denominator;
        if (traps) traps.add(k, n, p);
        else {
          const filledByElectrons = (amount * holeLifetime * n * empty) / denominator;
          const filledByHoles = (-amount * electronLifetime * p * filled) / denominator;
          diagonal[d] += filledByElectrons - filledByHoles;
          diagonal[d + 1] += filledByElectrons;
          diagonal[d + 2] -= filledByHoles;
        }
      }
      if (!(traps && trapDensity > 0)) {
        coefficient += 1 / denominator;
        byElectrons -= (holeLifetime * n) / (denominator * denominator);
        byHoles -= (electronLifetime * p) / (denominator * denominator);
      } else {
        const rate = (width * excess) / denominator;
        residual[chargeRow + 1] -= rate;
        residual[chargeRow + 2] -= rate;
      }
    }
    const rate = width * excess * coefficient;
    residual[chargeRow + 1] -= rate;
    residual[chargeRow + 2] -= rate;
    const byPotential = width * excess * (byElectrons - byHoles);
    const byElectronEnergy = width * (product * coefficient + excess * byElectrons);
    const byHoleEnergy = -width * (product * coefficient + excess * byHoles);
    for (let row = d + m; row <= d + 2 * m; row += m) {
      diagonal[row] += byPotential;
      diagonal[row + 1] += byElectronEnergy;
      diagonal[row + 2] += byHoleEnergy;
    }
  }
}

/** Recombination at layer interfaces, out of both carriers. */
function addInterfaces(problem: Problem, state: State, target: Assembly): void {
  const { interfaces } = problem;
  const { diagonal, residual } = target;
  const m = target.blockSize;
  for (let k = 0; k < interfaces.node.length; k++) {
    const i = interfaces.node[k];
    const phi = state.potential[i];
    const n = boltzmann(interfaces.electronLevel[k] + phi + state.electronEnergy[i]);
    const p = boltzmann(interfaces.holeLevel[k] - phi - state.holeEnergy[i]);
    const splitting = state.electronEnergy[i] - state.holeEnergy[i];
    const product = n * p;
    const excess = excessProduct(product, interfaces.balanceSquared[k], splitting);
    const perElectron = 1 / interfaces.holeVelocity[k];
    const perHole = 1 / interfaces.electronVelocity[k];
    const balance = interfaces.balance[k];
    const coefficient = 1 / ((n + balance) * perElectron + (p + balance) * perHole);
    const byElectrons = -n * perElectron * coefficient * coefficient;
    const byHoles = -p * perHole * coefficient * coefficient;
    const rate = excess * coefficient;
    residual[i * m + 1] -= rate;
    residual[i * m + 2] -= rate;
    for (let row = i * m * m + m; row <= i * m * m + 2 * m; row += m) {
      diagonal[row] += excess * (byElectrons - byHoles);
      diagonal[row + 1] += product * coefficient + excess * byElectrons;
      diagonal[row + 2] -= product * coefficient + excess * byHoles;
    }
  }
}

/** Flows into a contact. */
function addContact(problem: Problem, state: State, target: Assembly, i: number): void {
  const contact = i === 0 ? problem.front : problem.back;
  const m = target.blockSize;
  const d = i * m * m;
  const electrons = contact.electronVelocity * contact.electronDensity;
  const holes = contact.holeVelocity * contact.holeDensity;
  const electronExponent = Math.min(state.electronEnergy[i], 140);
  const holeExponent = Math.min(-state.holeEnergy[i], 140);
  target.residual[i * m + 1] -= electrons * Math.expm1(electronExponent);
  target.diagonal[d + m + 1] += electrons * Math.exp(electronExponent);
  target.residual[i * m + 2] -= holes * Math.expm1(holeExponent);
  target.diagonal[d + 2 * m + 2] -= holes * Math.exp(holeExponent);
}

/** Charge of ions in equilibrium with the state; their level is held here and is bordered by Newton's method. */
function addIonCharge(problem: Problem, group: IonGroup, state: State, g: number, target: Assembly): void {
  const m = target.blockSize;
  const step = problem.sign * state.voltage;
  const { charge, firstNode, lastNode, width } = group;
  const level = state.ionLevels[g];
  for (let i = firstNode; i <= lastNode; i++) {
    const behind = i > state.cut;
    const ions = width[i - firstNode] * boltzmann(level - charge * (state.potential[i] + (behind ? step : 0)));
    target.residual[i * m] += charge * ions;
    target.diagonal[i * m * m] += ions;
    if (behind) target.byVoltage[i * m] -= problem.sign * ions;
  }
}

/** The potential of a contact is given. */
function fixPotential(problem: Problem, state: State, target: Assembly, i: number): void {
  const m = target.blockSize;
  const contact = i === 0 ? problem.front : problem.back;
  for (let c = 0; c < m; c++) {
    target.diagonal[i * m * m + c] = 0;
    target.lower[i * m * m + c] = 0;
    target.upper[i * m * m + c] = 0;
  }
  target.diagonal[i * m * m] = 1;
  target.residual[i * m] = contact.potential - state.potential[i];
  target.byVoltage[i * m] = 0;
}
