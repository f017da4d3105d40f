/**
 * The model `diffusionLayers`: the linear problem of `closedForm/diffusion.ts` through all layers, each with its own
 * diffusion coefficient, lifetime and absorption, by finite volumes.
 */
import { type Carrier, diffusionOf, minorityCarrier, recombinationRate } from "../closedForm/absorber.ts";
import { collectingSide, extractionVelocityOf, solveFilm } from "../closedForm/diffusion.ts";
import { inverseDiffusionLength } from "../closedForm/film.ts";
import { type Interval, lightThrough, type Wavelength } from "../light/generation.ts";
import { type Complex, modulus } from "../numerics/complex.ts";
import type { Device } from "../scenario/device.ts";
import { frequenciesOf } from "../scenario/frequencies.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { SolvedSpectra } from "../solve.ts";
import { collectedBy, type LadderLayer, ladderOf } from "./ladder.ts";
import { nodesOf } from "./mesh.ts";

/** The layers from the collecting contact on. */
interface OrderedLayer extends LadderLayer {
  index: number;
}

function orderedLayers(scenario: ResolvedScenario, device: Device, carrier: Carrier): OrderedLayer[] {
  const highest = 2 * Math.PI * (frequenciesOf(scenario.frequencies).at(-1) ?? 0);
  const indices = device.layers.map((_, k) => k);
  if (collectingSide(device, carrier) === "back") indices.reverse();
  const layers = indices.map((index) => {
    const layer = device.layers[index];
    const diffusion = diffusionOf(layer, carrier, device.temperature);
    const rate = recombinationRate(layer, carrier);
    const decay = modulus(inverseDiffusionLength({ diffusion, rate }, highest));
    const steepest = Math.max(decay, layer.absorption, layer.modulationAbsorption, 1 / layer.thickness);
    return {
      index,
      diffusion,
      rate,
      thickness: layer.thickness,
      smallestLength: Math.max(1 / steepest, layer.thickness * 1e-9),
    };
  });
  const nodes = nodesOf(layers, scenario.model.nodes);
  return layers.map(({ index, diffusion, rate }, k) => ({ index, diffusion, rate, nodes: nodes[k] }));
}

/** Pairs generated in the volume of every node per incident photon. */
function generationAtNodes(
  device: Device,
  layers: readonly OrderedLayer[],
  wavelength: Wavelength,
  fromFront: boolean,
) {
  // As in the closed forms, the mirror behind the stack is left out.
  const { generationIn } = lightThrough({ ...device, backMirrorReflectance: 0 }, wavelength);
  const generation = new Float64Array(layers.reduce((sum, { nodes }) => sum + nodes.length - 1, 1));
  let i = 0;
  for (const { index, nodes } of layers) {
    const { thickness } = device.layers[index];
    const between = (from: number, to: number): Interval =>
      fromFront ? { layer: index, from, to } : { layer: index, from: thickness - to, to: thickness - from };
    for (let k = 1; k < nodes.length; k++, i++) {
      const middle = (nodes[k - 1] + nodes[k]) / 2;
      generation[i] += generationIn(between(nodes[k - 1], middle));
      generation[i + 1] += generationIn(between(middle, nodes[k]));
    }
  }
  return generation;
}

/**
 * Diffusion–recombination through all layers.
 *
 * @throws ScenarioError for a voltage, and where model.nodes is too small for the layers.
 */
export function solveLayeredDiffusion(scenario: ResolvedScenario, device: Device): SolvedSpectra {
  const { model } = scenario;
  const overrides = model.kind === "diffusionLayers" ? model.overrides : {};
  const carrier = overrides.carrier ?? minorityCarrier(device.layers[model.absorber]);
  const side = collectingSide(device, carrier);
  const derived = {
    carrier,
    extractionVelocityCmPerS: extractionVelocityOf(scenario, side, carrier, overrides),
    farVelocityCmPerS: overrides.farVelocityCmPerS ?? 0,
    idealityFactor: overrides.idealityFactor ?? 1,
  };
  const layers = orderedLayers(scenario, device, carrier);
  const solveAt = ladderOf(layers, derived.farVelocityCmPerS / 100);
  const modulation = generationAtNodes(device, layers, "modulation", side === "front");
  const bias = generationAtNodes(device, layers, "bias", side === "front");
  const responses = new Map<number, { conductance: Complex; collection: Complex }>();
  const responseAt = (omega: number) => {
    const known = responses.get(omega);
    if (known) return known;
    const state = solveAt(omega);
    const response = { conductance: state.conductance, collection: collectedBy(state, modulation) };
    responses.set(omega, response);
    return response;
  };
  return solveFilm(scenario, device, {
    collection: (omega) => responseAt(omega).collection,
    steadyCollection: collectedBy(solveAt(0), bias).re,
    conductance: (omega) => responseAt(omega).conductance,
    extractionVelocity: (derived.extractionVelocityCmPerS ?? Infinity) / 100,
    idealityFactor: derived.idealityFactor,
    derived,
  });
}
