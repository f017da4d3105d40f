/**
 * Absorbed light per piece of depth: Beer–Lambert with one flux through the stack and an optional mirror.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | α_k, η_k | absorption coefficient, carriers per absorbed photon of layer k | m⁻¹, 1 |
 * | R, R_b | reflectance of the lit face and of the opposite face | 1 |
 *
 * ∫G dx over a piece inside one layer is η (flux in − flux out), exact for any spacing.
 */
import type { Device } from "../scenario/device.ts";

export type Wavelength = "bias" | "modulation";

/**
 * Electron–hole pairs generated per incident photon in each interval of an ascending list of depths.
 * @param depths m, ascending, first 0, last the total thickness
 * @param layerOf layer of each interval, one fewer than depths
 * @returns one number per interval, 1
 */
export function generationPerPhoton(
  device: Device,
  depths: Float64Array,
  layerOf: Int32Array,
  wavelength: Wavelength,
): Float64Array {
  const count = layerOf.length;
  const generated = new Float64Array(count);
  const absorption = device.layers.map((layer) =>
    wavelength === "bias" ? layer.absorption : layer.modulationAbsorption,
  );
  const pass = (flux: number, forward: boolean) => {
    for (let j = 0; j < count; j++) {
      const k = forward ? j : count - 1 - j;
      const layer = layerOf[k];
      const absorbed = -Math.expm1(-absorption[layer] * (depths[k + 1] - depths[k]));
      generated[k] += device.layers[layer].carrierYield * flux * absorbed;
      flux *= 1 - absorbed;
    }
    return flux;
  };
  const fromFront = device.lightSide === "front";
  const remaining = pass(1 - device.frontReflectance, fromFront);
  if (device.backMirrorReflectance > 0) pass(remaining * device.backMirrorReflectance, !fromFront);
  return generated;
}
