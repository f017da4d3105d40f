/**
 * Generation of electron–hole pairs over depth: Beer–Lambert with one flux through the stack, reflectance of the lit
 * face and an optional mirror at the opposite face that sends the remaining flux back once.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | reaching[k] | flux entering layer k on the first pass, per incident photon | 1 |
 * | returning[k] | flux entering layer k on its way back from the mirror, per incident photon | 1 |
 * | from, to | depth inside a layer, counted from the front | m |
 */
import type { Device, Layer } from "../scenario/device.ts";
import { lightOrder, transmissions } from "./absorption.ts";

export type Wavelength = "bias" | "modulation";

/** Part of a layer: an interval of depth counted from the layer's front. */
export interface Interval {
  layer: number;
  from: number;
  to: number;
}

export interface LightPath {
  reaching: number[];
  returning: number[];
  /** Photons absorbed per incident photon, one per layer, both passes. */
  absorbed: number[];
  /** Pairs generated in an interval per incident photon: the exact integral of the generation rate. */
  generationIn: (interval: Interval) => number;
  /** The same for every interval. */
  generationOver: (intervals: readonly Interval[]) => Float64Array;
}

export const absorptionAt = (layer: Layer, wavelength: Wavelength): number =>
  wavelength === "bias" ? layer.absorption : layer.modulationAbsorption;

/** The light of one wavelength on its way through the stack. */
export function lightThrough(device: Device, wavelength: Wavelength): LightPath {
  const { layers, lightSide, frontReflectance, backMirrorReflectance } = device;
  const coefficients = layers.map((layer) => absorptionAt(layer, wavelength));
  const depths = layers.map((layer, k) => coefficients[k] * layer.thickness);
  const entering = 1 - frontReflectance;
  const reaching = transmissions(depths, lightSide).map((part) => part * entering);
  const last = lightOrder(layers.length, lightSide).at(-1) ?? 0;
  const mirrored = reaching[last] * Math.exp(-depths[last]) * backMirrorReflectance;
  const returning = transmissions(depths, lightSide === "front" ? "back" : "front").map((part) => part * mirrored);
  const absorbed = depths.map((depth, k) => -Math.expm1(-depth) * (reaching[k] + returning[k]));

  const generationIn = ({ layer, from, to }: Interval): number => {
    const coefficient = coefficients[layer];
    const fromFront = Math.exp(-coefficient * from);
    const fromBack = Math.exp(-coefficient * (layers[layer].thickness - to));
    const [first, second] = lightSide === "front" ? [fromFront, fromBack] : [fromBack, fromFront];
    const within = -Math.expm1(-coefficient * (to - from));
    return layers[layer].carrierYield * within * (reaching[layer] * first + returning[layer] * second);
  };
  return {
    reaching,
    returning,
    absorbed,
    generationIn,
    generationOver: (intervals) => Float64Array.from(intervals, generationIn),
  };
}
