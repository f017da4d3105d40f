/**
 * The mesh over depth: every layer boundary is a node, and the spacing grows away from boundaries.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | h₀ | spacing wanted at a layer boundary: a fraction of the shortest screening length beside it | m |
 * | g | growth of the spacing with distance from a boundary | 1 |
 * | h_max | largest spacing in a layer | m |
 *
 * Wanted spacing h(x) = min(h₀ + g·distance, h_max) from either boundary; nodes divide ∫dx/h evenly. Thin space-charge
 * regions sit at boundaries (contacts, junctions, ions), so nothing else is needed to find them.
 */
import { elementaryCharge, vacuumPermittivity } from "../constants.ts";
import type { Layer } from "../scenario/device.ts";

export interface Mesh {
  /** Depth of the nodes, m; first 0. */
  x: Float64Array;
  /** Layer of each edge, one fewer than nodes. */
  edgeLayer: Int32Array;
}

const growth = 0.06;
const cellsAcrossLayer = 100;
const fewestCells = 480;
const mostCells = 2000;
const fractionOfScreening = 0.02;

/** ∫dx/h from a boundary to distance s. */
function cellsWithin(s: number, atBoundary: number, largest: number): number {
  const reach = (largest - atBoundary) / growth;
  return s <= reach
    ? Math.log1p((growth * s) / atBoundary) / growth
    : Math.log(largest / atBoundary) / growth + (s - reach) / largest;
}

/** Distance from a boundary at which ∫dx/h has a value: the inverse of `cellsWithin`. */
function distanceAfter(cells: number, atBoundary: number, largest: number): number {
  const reach = (largest - atBoundary) / growth;
  const inside = Math.log(largest / atBoundary) / growth;
  return cells <= inside ? (atBoundary * Math.expm1(growth * cells)) / growth : reach + (cells - inside) * largest;
}

/** Debye length of a density (m⁻³) in a layer, m. */
const screeningLength = (layer: Layer, density: number, thermalVoltage: number) =>
  Math.sqrt((layer.relativePermittivity * vacuumPermittivity * thermalVoltage) / (elementaryCharge * density));

/** Spacing wanted at the boundaries of a layer. */
function boundarySpacing(layer: Layer, thermalVoltage: number): number {
  // An accumulation layer or inverted surface screens like a density near the effective density of states.
  const density = Math.max(
    Math.min(1e25, 0.05 * Math.max(layer.conductionStates, layer.valenceStates)),
    layer.donors,
    layer.acceptors,
    layer.cations + layer.anions,
    layer.traps?.density ?? 0,
  );
  const absorption = Math.max(layer.absorption, layer.modulationAbsorption);
  const wanted = Math.min(
    fractionOfScreening * screeningLength(layer, density, thermalVoltage),
    absorption > 0 ? 0.1 / absorption : Infinity,
  );
  return Math.min(Math.max(wanted, layer.thickness * 1e-7, 1e-12), layer.thickness / cellsAcrossLayer);
}

/**
 * Mesh of a stack.
 * @param nodes total number of nodes wanted, or null for the default; at least two edges a layer are kept
 */
export function buildMesh(layers: readonly Layer[], thermalVoltage: number, nodes: number | null): Mesh {
  const spacing = layers.map((layer) => boundarySpacing(layer, thermalVoltage));
  const natural = layers.map(
    (layer, k) => 2 * cellsWithin(layer.thickness / 2, spacing[k], layer.thickness / cellsAcrossLayer),
  );
  const total = natural.reduce((sum, cells) => sum + cells, 0);
  const share = nodes === null ? Math.max(fewestCells / total, Math.min(1, mostCells / total)) : (nodes - 1) / total;
  const counts = natural.map((cells) => Math.max(2, Math.round(cells * share)));
  if (nodes !== null) {
    // Rounding leaves a few edges over or short: the layers with the most edges take them.
    let rest = nodes - 1 - counts.reduce((sum, cells) => sum + cells, 0);
    while (rest !== 0) {
      const largest = counts.indexOf(Math.max(...counts));
      if (rest < 0 && counts[largest] <= 2) break;
      counts[largest] += Math.sign(rest);
      rest -= Math.sign(rest);
    }
  }
  const edges = counts.reduce((sum, cells) => sum + cells, 0);
  const x = new Float64Array(edges + 1);
  const edgeLayer = new Int32Array(edges);
  let node = 0;
  let start = 0;
  for (let k = 0; k < layers.length; k++) {
    const { thickness } = layers[k];
    const largest = thickness / cellsAcrossLayer;
    for (let j = 1; j <= counts[k]; j++) {
      const fraction = j / counts[k];
      const near = Math.min(fraction, 1 - fraction);
      const distance = distanceAfter(near * natural[k], spacing[k], largest);
      edgeLayer[node] = k;
      node += 1;
      x[node] = start + (j === counts[k] ? thickness : fraction <= 0.5 ? distance : thickness - distance);
    }
    start += thickness;
  }
  return { x, edgeLayer };
}
