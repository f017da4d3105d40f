/**
 * Profiles over depth at an operating point, in bench units.
 *
 * Points: the nodes of each layer, front to back; an interface appears twice, once as the end of the layer in front and
 * once as the start of the layer behind, because densities and band edges jump there. Fields and currents live on edges
 * and are averaged to the nodes of their layer. Energies count from the electron contact's Fermi level.
 */
import { elementaryCharge } from "../constants.ts";
import type { Failure } from "../result.ts";
import { currentFromSI, fluxToSI } from "../scenario/device.ts";
import type { Bias } from "../scenario/schema.ts";
import { failureOf } from "./failures.ts";
import { edgeFlux, fieldFactor, flux } from "./fluxes.ts";
import { holdIons } from "./ions.ts";
import type { OperatingPoint, OperatingPoints } from "./operatingPoints.ts";
import type { Problem } from "./problem.ts";
import { excessProduct, layerRates } from "./recombination.ts";
import type { State } from "./state.ts";
import { boltzmann } from "./statistics.ts";

export interface Profiles {
  status: "solved";
  voltageV: number;
  currentMAPerCm2: number;
  /** Depth of the points and the layer each belongs to. */
  depthNm: Float64Array;
  layer: Int32Array;
  conductionEdgeEV: Float64Array;
  valenceEdgeEV: Float64Array;
  electronFermiEV: Float64Array;
  holeFermiEV: Float64Array;
  potentialV: Float64Array;
  fieldVPerCm: Float64Array;
  electronsPerCm3: Float64Array;
  holesPerCm3: Float64Array;
  /** Zero outside the layers that carry them. */
  cationsPerCm3: Float64Array;
  anionsPerCm3: Float64Array;
  /** Occupancy of dynamic traps, 0 to 1; zero where there are none. */
  trapOccupancy: Float64Array;
  generationPerCm3S: Float64Array;
  shockleyReadHallPerCm3S: Float64Array;
  bandToBandPerCm3S: Float64Array;
  augerPerCm3S: Float64Array;
  /** Delivered current carried by each carrier. */
  electronCurrentMAPerCm2: Float64Array;
  holeCurrentMAPerCm2: Float64Array;
  interfaces: { afterLayer: number; depthNm: number; recombinationPerCm2S: number }[];
}

/** Nodes and layers of the points, in order. */
export function profilePoints(problem: Problem): { node: Int32Array; layer: Int32Array } {
  const node: number[] = [];
  const layer: number[] = [];
  problem.edgeLayer.forEach((k, e) => {
    if (e === 0 || problem.edgeLayer[e - 1] !== k) {
      node.push(e);
      layer.push(k);
    }
    node.push(e + 1);
    layer.push(k);
  });
  return { node: Int32Array.from(node), layer: Int32Array.from(layer) };
}

/** Edge values averaged, by spacing, to the points of their layer. */
export function edgesToPoints(
  problem: Problem,
  points: { node: Int32Array; layer: Int32Array },
  values: Float64Array,
): Float64Array {
  const { edgeLayer, spacing } = problem;
  return Float64Array.from(points.node, (i, k) => {
    const before = i > 0 && edgeLayer[i - 1] === points.layer[k] ? i - 1 : i;
    const after = i < edgeLayer.length && edgeLayer[i] === points.layer[k] ? i : before;
    return (values[before] * spacing[after] + values[after] * spacing[before]) / (spacing[before] + spacing[after]);
  });
}

/** φ̃ and energies on the front's scale. */
function trueValues(problem: Problem, state: State) {
  const step = problem.sign * state.voltage;
  const shifted = (values: Float64Array, shift: number) =>
    values.map((value, i) => (i > state.cut ? value + shift : value));
  return {
    potential: shifted(state.potential, step),
    electronEnergy: shifted(state.electronEnergy, -step),
    holeEnergy: shifted(state.holeEnergy, -step),
  };
}

/** Profiles of a solved operating point. */
function profilesAt(point: OperatingPoint): Profiles {
  const { problem, steady } = point;
  const { thermalVoltage, layers, device, edgeLayer, sign } = problem;
  const { state, drive } = steady;
  const points = profilePoints(problem);
  const { potential, electronEnergy, holeEnergy } = trueValues(problem, state);
  // Energies from the electron contact: the front's scale, or v above it with the electron contact at the back.
  const reference = sign === 1 ? 0 : state.voltage;
  const ions = drive.heldIons ?? holdIons(problem, state);
  const atPoints = (value: (i: number, k: number) => number) =>
    Float64Array.from(points.node, (i, p) => value(i, points.layer[p]));
  const perNode = (values: Float64Array, inLayer: (k: number) => boolean) =>
    atPoints((i, k) => (inLayer(k) ? values[i] * 1e-6 : 0));
  const electrons = (i: number, k: number) =>
    boltzmann(layers.electronLevel[k] + state.potential[i] + state.electronEnergy[i]);
  const holes = (i: number, k: number) => boltzmann(layers.holeLevel[k] - state.potential[i] - state.holeEnergy[i]);
  const rates = Array.from(points.node, (i, p) => {
    const k = points.layer[p];
    return layerRates(layers, k, electrons(i, k), holes(i, k), state.electronEnergy[i] - state.holeEnergy[i]);
  });
  const field = new Float64Array(edgeLayer.length);
  const electronCurrent = new Float64Array(edgeLayer.length);
  const holeCurrent = new Float64Array(edgeLayer.length);
  for (let e = 0; e < edgeLayer.length; e++) {
    const k = edgeLayer[e];
    const emf = e === state.cut ? sign * state.voltage : 0;
    const potentialStep = state.potential[e + 1] - state.potential[e] + emf;
    const factor = fieldFactor(potentialStep);
    field[e] = (-potentialStep * thermalVoltage) / problem.spacing[e] / 100;
    const meanPotential = 0.5 * (state.potential[e] + state.potential[e + 1]);
    const carried = (conductance: number, mean: number, energies: Float64Array) => {
      edgeFlux(conductance, mean, potentialStep, factor, energies[e + 1] - energies[e] - emf);
      return currentFromSI(sign * elementaryCharge * flux[0]);
    };
    const { electronEnergy: un, holeEnergy: up } = state;
    const electronMean = layers.electronLevel[k] + meanPotential + 0.5 * (un[e] + un[e + 1]);
    const holeMean = layers.holeLevel[k] - meanPotential - 0.5 * (up[e] + up[e + 1]);
    electronCurrent[e] = carried(problem.electronConductance[e], electronMean, un);
    holeCurrent[e] = carried(problem.holeConductance[e], holeMean, up);
  }
  const generation = problem.biasGeneration.map((value) => value * drive.flux);
  const width = new Float64Array(problem.nodes);
  problem.pieceNode.forEach((i, piece) => {
    width[i] += problem.pieceWidth[piece];
  });
  const traps = (i: number, k: number) => {
    const [n, p] = [electrons(i, k), holes(i, k)];
    const filling = layers.holeLifetime[k] * n + layers.electronLifetime[k] * layers.trapHoles[k];
    const emptying = layers.holeLifetime[k] * layers.trapElectrons[k] + layers.electronLifetime[k] * p;
    return filling / (filling + emptying);
  };
  return {
    status: "solved",
    voltageV: point.voltage,
    currentMAPerCm2: currentFromSI(point.current),
    depthNm: atPoints((i) => problem.x[i] * 1e9),
    layer: points.layer,
    conductionEdgeEV: atPoints((i, k) => -(potential[i] + reference) * thermalVoltage - device.layers[k].affinity),
    valenceEdgeEV: atPoints(
      (i, k) => -(potential[i] + reference) * thermalVoltage - device.layers[k].affinity - device.layers[k].gap,
    ),
    electronFermiEV: atPoints((i) => (electronEnergy[i] - reference) * thermalVoltage),
    holeFermiEV: atPoints((i) => (holeEnergy[i] - reference) * thermalVoltage),
    potentialV: atPoints((i) => (potential[i] + reference) * thermalVoltage),
    fieldVPerCm: edgesToPoints(problem, points, field),
    electronsPerCm3: atPoints((i, k) => electrons(i, k) * 1e-6),
    holesPerCm3: atPoints((i, k) => holes(i, k) * 1e-6),
    cationsPerCm3: perNode(ions.cations, (k) => device.layers[k].cations > 0),
    anionsPerCm3: perNode(ions.anions, (k) => device.layers[k].anions > 0),
    trapOccupancy: atPoints((i, k) => (layers.trapDensity[k] > 0 ? traps(i, k) : 0)),
    generationPerCm3S: atPoints((i, k) => generationAt(problem, generation, width, i, k)),
    shockleyReadHallPerCm3S: Float64Array.from(rates, (rate) => rate.shockleyReadHall * 1e-6),
    bandToBandPerCm3S: Float64Array.from(rates, (rate) => rate.bandToBand * 1e-6),
    augerPerCm3S: Float64Array.from(rates, (rate) => rate.auger * 1e-6),
    electronCurrentMAPerCm2: edgesToPoints(problem, points, electronCurrent),
    holeCurrentMAPerCm2: edgesToPoints(problem, points, holeCurrent),
    interfaces: interfaceRates(problem, state),
  };
}

/** Generation rate at a node inside a layer; at its ends that of the nearest node inside. */
function generationAt(problem: Problem, generation: Float64Array, width: Float64Array, i: number, k: number): number {
  const { edgeLayer, nodes } = problem;
  const inFront = i > 0 && edgeLayer[i - 1] === k;
  const behind = i < nodes - 1 && edgeLayer[i] === k;
  const node = inFront && behind ? i : inFront ? i - 1 : i + 1;
  return (generation[node] / width[node]) * 1e-6;
}

function interfaceRates(problem: Problem, state: State): Profiles["interfaces"] {
  const { interfaces, device } = problem;
  return Array.from(interfaces.node, (i, k) => {
    const n = boltzmann(interfaces.electronLevel[k] + state.potential[i] + state.electronEnergy[i]);
    const p = boltzmann(interfaces.holeLevel[k] - state.potential[i] - state.holeEnergy[i]);
    const excess = excessProduct(n * p, interfaces.balanceSquared[k], state.electronEnergy[i] - state.holeEnergy[i]);
    const balance = interfaces.balance[k];
    const rate = excess / ((n + balance) / interfaces.holeVelocity[k] + (p + balance) / interfaces.electronVelocity[k]);
    return {
      afterLayer: device.interfaces[k].afterLayer,
      depthNm: problem.x[i] * 1e9,
      recombinationPerCm2S: rate / fluxToSI(1),
    };
  });
}

/** Profiles at a bias and a photon flux (cm⁻² s⁻¹), or how the steady state failed. */
export function profilesOf(
  points: OperatingPoints,
  { bias, fluxPerCm2S }: { bias: Bias; fluxPerCm2S: number },
): Profiles | { status: "failed"; failure: Failure } {
  const point = points.at(bias, fluxPerCm2S);
  return point.steady.status === "solved" ? profilesAt(point) : { status: "failed", failure: failureOf(point) };
}
