/** What a solved state strains: said beside the result. */
import type { Warning } from "../result.ts";
import { holdIons } from "./ions.ts";
import type { OperatingPoint } from "./operatingPoints.ts";

/** Densities of ions (m⁻³) above which a dilute species is marginal, and fails: formula units of a halide perovskite, from memory. */
const marginalDensity = 4e26;
const formulaUnits = 4e27;

/** Warnings of one operating point, one per layer and ion species. */
export function stateWarnings(point: OperatingPoint): Warning[] {
  const { problem, steady } = point;
  const { device, edgeLayer } = problem;
  const ions = steady.drive.heldIons ?? holdIons(problem, steady.state);
  return ([1, -1] as const).flatMap((charge) => {
    const densities = charge === 1 ? ions.cations : ions.anions;
    return device.layers.flatMap((layer, k) => {
      const name = charge === 1 ? "cations" : "anions";
      if (layer[name] === 0) return [];
      let highest = 0;
      for (let e = 0; e < edgeLayer.length; e++)
        if (edgeLayer[e] === k) highest = Math.max(highest, densities[e], densities[e + 1]);
      if (highest < marginalDensity) return [];
      const verdict =
        highest < formulaUnits
          ? "is marginal: ions without a site limit come near the number of sites"
          : "fails: there are fewer sites than ions, which have no site limit here";
      return {
        path: `stack.layers.${k}.ions.${name}PerCm3`,
        message: `gather up to ${(highest * 1e-6).toExponential(1)} cm⁻³ in this layer, which ${verdict}`,
      };
    });
  });
}
