/**
 * Nodes through a stack of layers, finer towards every face where densities or light change quickly.
 *
 * Within a layer the nodes lie at equal steps of `M(x) = A x/t + ln(1 + x/x_0) + ln((t + x_0)/(t − x + x_0))`, so that
 * twice as many intervals halve every step and the error falls with its square.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | t | thickness of the layer | m |
 * | x_0 | smallest length over which something changes in it | m |
 * | A | weight of the even part | 1 |
 */
import { rootBetween } from "../numerics/root.ts";
import { refuse } from "../scenario/errors.ts";

export interface LayerScale {
  thickness: number;
  smallestLength: number;
}

/** Intervals per unit of M where the number of nodes is left to the solver, and their ceiling in total. */
const intervalsPerUnit = 80;
const mostIntervals = 9999;
/** Layers much thicker than the smallest length need even steps too, or a wave through them loses phase. */
const evenWeight = ({ thickness, smallestLength }: LayerScale): number => 10 + Math.min(thickness / smallestLength, 50);

function meshFunction(scale: LayerScale): (x: number) => number {
  const { thickness, smallestLength } = scale;
  const weight = evenWeight(scale) / thickness;
  return (x) => weight * x + Math.log1p(x / smallestLength) - Math.log1p(-x / (thickness + smallestLength));
}

/** Whole numbers that add up to the total, each at least one, in proportion to the weights (largest remainders). */
function apportion(weights: readonly number[], total: number): number[] {
  const sum = weights.reduce((a, b) => a + b, 0);
  const spare = total - weights.length;
  const shares = weights.map((weight) => (spare * weight) / sum);
  const counts = shares.map((share) => 1 + Math.floor(share));
  const left = total - counts.reduce((a, b) => a + b, 0);
  const byRemainder = shares.map((share, k) => [share - Math.floor(share), k]).sort(([a], [b]) => b - a);
  for (const [, k] of byRemainder.slice(0, left)) counts[k]++;
  return counts;
}

/**
 * Depths of the nodes inside each layer, both faces included, counted from the first face of the layer.
 *
 * @param nodes nodes in total (faces between layers counted once), or null for the solver's choice.
 * @throws ScenarioError where there are too few nodes for the layers.
 */
export function nodesOf(layers: readonly LayerScale[], nodes: number | null): Float64Array[] {
  const functions = layers.map(meshFunction);
  const ends = layers.map(({ thickness }, k) => functions[k](thickness));
  if (nodes !== null && nodes < layers.length + 1)
    refuse("model.nodes", `is ${nodes}, too few for ${layers.length} layers`, `at least ${layers.length + 1}`);
  const chosen = Math.min(mostIntervals, Math.ceil(intervalsPerUnit * ends.reduce((a, b) => a + b, 0)));
  const counts = apportion(ends, nodes === null ? chosen : nodes - 1);
  return layers.map(({ thickness }, k) =>
    Float64Array.from({ length: counts[k] + 1 }, (_, i) => {
      if (i === 0) return 0;
      if (i === counts[k]) return thickness;
      const target = (ends[k] * i) / counts[k];
      return rootBetween((x) => functions[k](x) - target, 0, thickness);
    }),
  );
}
