/** What a person should know about a stack that is solved all the same. */
import { builtInVoltage, netDoping } from "../equilibrium.ts";
import type { Warning } from "../result.ts";
import type { Device } from "./device.ts";
import type { ResolvedScenario } from "./resolved.ts";
import type { Side } from "./schema.ts";

/** Formula units of a halide perovskite per m³ (from memory): a tenth is marginal for dilute ions, all of them impossible. */
const latticeSites = 4e27;

function contactWarnings({ model }: ResolvedScenario, device: Device): Warning[] {
  const builtIn = builtInVoltage(device);
  const half = device.layers[model.absorber].gap / 2;
  const low: Warning[] =
    builtIn < half
      ? [
          {
            path: "stack.back.workFunctionEV",
            message: `gives with the front contact a built-in voltage of ${builtIn.toFixed(3)} V, below half the gap of the absorber (${half.toFixed(3)} V)`,
          },
        ]
      : [];
  const undoped = (["front", "back"] as Side[]).flatMap((side) => {
    const layer = side === "front" ? 0 : device.layers.length - 1;
    if (device[side].workFunction !== "ohmic" || netDoping(device.layers[layer]) !== 0) return [];
    const message = "is ohmic at an undoped layer: the contact then lies near mid-gap";
    return { path: `stack.${side}.workFunctionEV`, message };
  });
  return [...low, ...undoped];
}

function ionWarnings(device: Device): Warning[] {
  return device.layers.flatMap((layer, k) =>
    (["cations", "anions"] as const).flatMap((ions) => {
      const share = layer[ions] / latticeSites;
      if (share <= 0.1) return [];
      const verdict = share > 1 ? "is more than the lattice has sites" : "fills a good part of the lattice's sites";
      return {
        path: `stack.layers.${k}.ions.${ions}PerCm3`,
        message: `${verdict} (about ${latticeSites / 1e6} per cm³); ions are treated as dilute`,
      };
    }),
  );
}

/**
 * Warnings about contacts, ions and mirror. The built-in voltage matters to all but the diffusion models, ions only to
 * the full model, and a mirror is left out by all others.
 */
export function warningsOf(scenario: ResolvedScenario, device: Device): Warning[] {
  const { kind } = scenario.model;
  const full = kind === "driftDiffusion";
  const diffusion = kind === "diffusion" || kind === "diffusionLayers";
  const mirror =
    !full && device.backMirrorReflectance > 0
      ? [{ path: "light.backMirrorReflectance", message: `is left out by the model ${kind}` }]
      : [];
  return [...(diffusion ? [] : contactWarnings(scenario, device)), ...(full ? ionWarnings(device) : []), ...mirror];
}
