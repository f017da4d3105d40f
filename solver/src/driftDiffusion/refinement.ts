/**
 * A mesh for a state: no edge carries more than a part of kT/q, spacing grows gently, nodes divide ∫dx/h evenly.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | Δφ̃ | potential step across an edge | kT/q |
 * | θ | step wanted at most | kT/q |
 * | g | largest growth of the spacing per distance | 1 |
 *
 * The exponential fit is exact for a constant current, but between nodes it adds the diffusion D (Δφ̃/2) coth(Δφ̃/2) − D, of
 * which a strong field must not make much. Equidistribution: C. de Boor, in Lecture Notes in Mathematics 363 (1974).
 */
import type { Device } from "../scenario/device.ts";
import type { Mesh } from "./mesh.ts";
import type { Problem } from "./problem.ts";
import { layerRates } from "./recombination.ts";
import type { State } from "./state.ts";
import { boltzmann } from "./statistics.ts";

const wantedStep = 0.19;
const acceptedStep = 0.27;
/** Error wanted of the recombination summed over depth, relative, and how far an edge may be from it. */
const wantedError = 4e-5;
const acceptedDivision = 1.5;
const growth = 0.2;
/** The refined mesh has at most this many times the nodes of the first one. */
const growthOfNodes = 2.5;

/** |Δφ̃| of each edge. */
function potentialSteps(problem: Problem, state: State): Float64Array {
  return Float64Array.from(problem.edgeLayer, (_, e) =>
    Math.abs(state.potential[e + 1] - state.potential[e] + (e === state.cut ? problem.sign * state.voltage : 0)),
  );
}

/** How many times finer each edge should be for the recombination summed at nodes, h R (Δ ln R)²/12 divided evenly. */
function recombinationDivision(problem: Problem, state: State): Float64Array {
  const { spacing, edgeLayer, layers } = problem;
  const rate = (i: number, k: number) => {
    const n = boltzmann(layers.electronLevel[k] + state.potential[i] + state.electronEnergy[i]);
    const p = boltzmann(layers.holeLevel[k] - state.potential[i] - state.holeEnergy[i]);
    const rates = layerRates(layers, k, n, p, state.electronEnergy[i] - state.holeEnergy[i]);
    return Math.abs(rates.shockleyReadHall + rates.bandToBand + rates.auger);
  };
  const errors = new Float64Array(edgeLayer.length);
  let total = 0;
  for (let e = 0; e < edgeLayer.length; e++) {
    const [left, right] = [rate(e, edgeLayer[e]), rate(e + 1, edgeLayer[e])];
    const sum = left + right;
    if (!(sum > 0)) continue;
    const change = (2 * (right - left)) / sum;
    total += 0.5 * sum * spacing[e];
    errors[e] = (0.5 * sum * spacing[e] * change * change) / 12;
  }
  return errors.map((error) => (total > 0 ? Math.cbrt((error * edgeLayer.length) / (total * wantedError)) : 0));
}

/**
 * A finer or better divided mesh for states of a problem, or null where the present one does.
 * @param nodes total number of nodes to keep, null where the mesh may grow
 * @param most largest number of cells where it may grow
 */
export function refinedMesh(
  problem: Problem,
  states: readonly State[],
  nodes: number | null,
  most: number,
): Mesh | null {
  const { spacing, edgeLayer } = problem;
  const edges = edgeLayer.length;
  const division = new Float64Array(edges);
  let needed = false;
  for (const state of states) {
    const steps = potentialSteps(problem, state);
    const parts = recombinationDivision(problem, state);
    for (let e = 0; e < edges; e++) {
      if (steps[e] > acceptedStep || parts[e] > acceptedDivision) needed = true;
      division[e] = Math.max(division[e], steps[e] / wantedStep, parts[e]);
    }
  }
  if (!needed) return null;
  const wanted = spacing.map((h, e) => h / Math.max(1, division[e]));
  for (let e = 1; e < edges; e++)
    wanted[e] = Math.min(wanted[e], wanted[e - 1] + 0.5 * growth * (spacing[e] + spacing[e - 1]));
  for (let e = edges - 2; e >= 0; e--)
    wanted[e] = Math.min(wanted[e], wanted[e + 1] + 0.5 * growth * (spacing[e] + spacing[e + 1]));
  const cells = wanted.map((h, e) => spacing[e] / h);
  const total = cells.reduce((sum, count) => sum + count, 0);
  const budget = nodes === null ? Math.min(total, most) : nodes - 1;
  const share = budget / total;
  const x: number[] = [0];
  const layerOf: number[] = [];
  let e = 0;
  let node = 0;
  problem.device.layers.forEach((_, k) => {
    const firstEdge = e;
    let sum = 0;
    while (e < edges && edgeLayer[e] === k) sum += cells[e++];
    const last = k === problem.device.layers.length - 1;
    const count = Math.max(2, nodes !== null && last ? nodes - 1 - node : Math.round(sum * share));
    let from = firstEdge;
    let before = 0;
    for (let j = 1; j <= count; j++) {
      const target = (sum * j) / count;
      while (from < e - 1 && before + cells[from] < target) before += cells[from++];
      layerOf.push(k);
      x.push(j === count ? problem.x[e] : problem.x[from] + ((target - before) / cells[from]) * spacing[from]);
    }
    node += count;
  });
  return { x: Float64Array.from(x), edgeLayer: Int32Array.from(layerOf) };
}

export const largestMesh = (problem: Problem): number => Math.round(growthOfNodes * problem.nodes);

/** The mesh of one stack stretched onto another with the same number of layers; null where they do not correspond. */
export function stretchedMesh(from: Problem, to: Device): Mesh | null {
  if (from.device.layers.length !== to.layers.length) return null;
  const x = new Float64Array(from.nodes);
  let start = 0;
  let sourceStart = 0;
  let e = 0;
  to.layers.forEach((layer, k) => {
    const source = from.device.layers[k].thickness;
    const scale = layer.thickness / source;
    while (e < from.edgeLayer.length && from.edgeLayer[e] === k) {
      x[e + 1] = start + (from.x[e + 1] - sourceStart) * scale;
      e += 1;
    }
    start += layer.thickness;
    sourceStart += source;
    x[e] = start;
  });
  return { x, edgeLayer: from.edgeLayer };
}
