/**
 * Absorption along the one path of the light through the stack (Beer–Lambert).
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | absorption | α_k at one wavelength | 1/length |
 * | thickness | t_k | length |
 * | transmission | Φ_k/Φ_1, before layer k in the direction of the light | 1 |
 */
import type { ResolvedLayer } from "../scenario/resolved.ts";
import type { Side } from "../scenario/schema.ts";

/** Indices of the layers in the order in which the light meets them. */
export function lightOrder(count: number, side: Side): number[] {
  const order = Array.from({ length: count }, (_, k) => k);
  return side === "front" ? order : order.reverse();
}

/**
 * Fraction of the light entering the stack that reaches each layer on the first pass.
 *
 * @param opticalDepths α_k t_k, front to back.
 * @returns one transmission per layer, front to back.
 */
export function transmissions(opticalDepths: readonly number[], side: Side): number[] {
  const result = opticalDepths.map(() => 1);
  let depth = 0;
  for (const k of lightOrder(opticalDepths.length, side)) {
    result[k] = Math.exp(-depth);
    depth += opticalDepths[k];
  }
  return result;
}

/** Index of the layer that absorbs the largest fraction of the bias light on its first pass; the first where none absorbs. */
export function mostAbsorbing(layers: readonly ResolvedLayer[], side: Side): number {
  const depths = layers.map((layer) => layer.absorptionPerCm * layer.thicknessNm * 1e-7);
  const fractions = transmissions(depths, side).map((reaching, k) => -reaching * Math.expm1(-depths[k]));
  return fractions.indexOf(Math.max(...fractions));
}
