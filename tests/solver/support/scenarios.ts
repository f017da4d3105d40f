/** Scenario documents that tests vary. */
import type { LayerDocument, ScenarioDocument } from "@demilune/solver";

type Change<Part> = { [Field in keyof Part]?: Part[Field] };

/** A doped single layer between contacts with a built-in voltage of 1 V, light through the electron contact. */
export function scenario(
  change: Change<ScenarioDocument> & {
    layer?: Change<LayerDocument>;
    stackChange?: Change<ScenarioDocument["stack"]>;
  } = {},
): ScenarioDocument {
  const { layer, stackChange, ...rest } = change;
  return {
    format: "demilune.scenario/1",
    stack: {
      front: { workFunctionEV: 4 },
      back: { workFunctionEV: 5 },
      layers: [
        {
          thicknessNm: 500,
          relativePermittivity: 10,
          affinityEV: 4,
          gapEV: 1.5,
          conductionStatesPerCm3: 1e19,
          valenceStatesPerCm3: 1e19,
          electronMobilityCm2PerVs: 1,
          holeMobilityCm2PerVs: 1,
          absorptionPerCm: 5e4,
          recombination: { electronLifetimeNs: 10, holeLifetimeNs: 10 },
          ...layer,
        },
      ],
      ...stackChange,
    },
    light: { fluxPerCm2S: 1e16 },
    spectra: [{ technique: "imps" }],
    frequencies: { listHz: [1] },
    ...rest,
  };
}
