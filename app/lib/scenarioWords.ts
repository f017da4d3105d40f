/** What scenarios are called on screen and where their pages are. */
import type { ModelKind, ScenarioDocument } from "@demilune/solver";
import { layerName } from "./stackEdits";

const modelWords: Record<ModelKind, string> = {
  transit: "transit in a uniform field",
  gaertner: "depletion layer with diffusion",
  diffusion: "diffusion and recombination",
  diffusionLayers: "diffusion through layers",
  driftDiffusion: "drift–diffusion with ions and traps",
};

export const modelOf = (document: ScenarioDocument): string => modelWords[document.model?.kind ?? "driftDiffusion"];

/** "hole conductor / absorber", front first. */
export const layersOf = ({ stack }: ScenarioDocument): string => stack.layers.map(layerName).join(" / ");

/** Where a scenario is worked on; its other pages lie below. */
export const scenarioPath = (labId: string, scenarioId: string): string => `/lab/${labId}/scenarios/${scenarioId}`;
