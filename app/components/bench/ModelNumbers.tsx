import { type ModelKind, type Quantity, type QuantityName, quantities, type SpectrumResult } from "@demilune/solver";
import { memo } from "react";
import { ChoiceLine } from "~/components/fields/ChoiceField";
import { NumberGroup } from "~/components/stack/NumberGroup";
import type { StackProps } from "~/components/stack/stackProps";
import { fieldAt, withField } from "~/lib/documentNumbers";
import { layerName } from "~/lib/stackEdits";
import { DocumentNumber } from "./DocumentNumber";

/** Numbers that may replace what a model derives from the stack, in the order of the model. */
const overrideNumbers: Record<ModelKind, readonly QuantityName[]> = {
  driftDiffusion: [],
  transit: ["electronTransitTimeNs", "holeTransitTimeNs", "fieldVPerCm"],
  gaertner: [
    "depletionWidthNm",
    "diffusionCm2PerS",
    "lifetimeNs",
    "absorptionPerCm",
    "saturationCurrentMAPerCm2",
    "depletionTransitTimeNs",
    "backVelocityCmPerS",
    "builtInVoltageV",
    "transferPerS",
    "surfaceRecombinationPerS",
    "helmholtzCapacitanceFPerCm2",
  ],
  diffusion: [
    "diffusionCm2PerS",
    "lifetimeNs",
    "absorptionPerCm",
    "thicknessNm",
    "extractionVelocityCmPerS",
    "farVelocityCmPerS",
    "idealityFactor",
  ],
  diffusionLayers: ["extractionVelocityCmPerS", "farVelocityCmPerS", "idealityFactor"],
};

interface WordOverride {
  name: string;
  label: string;
  words: Record<string, string>;
}

const carrier: WordOverride = { name: "carrier", label: "carrier", words: { electron: "electrons", hole: "holes" } };

const overrideWords: Record<ModelKind, readonly WordOverride[]> = {
  driftDiffusion: [],
  transit: [
    {
      name: "variant",
      label: "current is",
      words: { twoCarrier: "both carriers, induced, exact", collected: "collected", induced: "induced" },
    },
    { name: "carrier", label: "carrier", words: { electron: "electrons", hole: "holes", both: "both" } },
  ],
  gaertner: [{ name: "bulk", label: "bulk", words: { thick: "thick", finite: "finite" } }],
  diffusion: [carrier],
  diffusionLayers: [carrier],
};

interface ModelNumbersProps extends StackProps {
  /** Where the values come from that a model derived. */
  spectrum: SpectrumResult | undefined;
}

/** The layer that a closed form takes its parameters from, the values that replace derived ones, the mesh. */
export const ModelNumbers = memo(function ModelNumbers({ spectrum, ...props }: ModelNumbersProps) {
  const { document, onChange, readOnly } = props;
  const kind = document.model?.kind ?? "driftDiffusion";
  const derived = spectrum?.status === "solved" ? spectrum.derived : undefined;
  const { layers } = document.stack;
  const absorbers = [
    { value: "most", label: "layer that absorbs most" },
    ...layers.map((layer, index) => ({ value: String(index), label: layerName(layer, index) })),
  ];
  const rows = overrideNumbers[kind].map((name) => {
    const used = derived?.[name];
    const row: Quantity = quantities[name];
    return {
      key: name,
      row: (
        <DocumentNumber
          {...props}
          keys={["model", "overrides", name]}
          quantity={name}
          context="model"
          fallback={typeof used === "number" ? used : null}
          emptyMeans={(used === null && row.nullMeans) || "from the stack"}
        />
      ),
    };
  });
  const mesh = {
    key: "nodes",
    usual: document.model?.nodes === undefined,
    row: (
      <DocumentNumber
        {...props}
        keys={["model", "nodes"]}
        quantity="nodes"
        label="mesh nodes"
        fallback={null}
        emptyMeans="the solver's choice"
      />
    ),
  };
  const hasMesh = kind === "driftDiffusion" || kind === "diffusionLayers";
  return (
    <NumberGroup
      title={kind === "driftDiffusion" ? "Mesh" : "Values of the model"}
      rows={hasMesh ? [...rows, mesh] : rows}
    >
      {kind !== "driftDiffusion" && kind !== "diffusionLayers" && (
        <ChoiceLine
          label="parameters of"
          readOnly={readOnly}
          choices={absorbers}
          value={String(document.model?.absorber ?? "most")}
          onChange={(next) =>
            onChange(withField(document, ["model", "absorber"], next === "most" ? undefined : Number(next)), {
              path: "model.absorber",
              live: false,
            })
          }
        />
      )}
      {overrideWords[kind].map(({ name, label, words }) => {
        const derivedWord = derived?.[name];
        const usual =
          typeof derivedWord === "string" && words[derivedWord] ? `as derived: ${words[derivedWord]}` : "as derived";
        return (
          <ChoiceLine
            key={name}
            label={label}
            context="model"
            readOnly={readOnly}
            choices={[
              { value: "", label: usual },
              ...Object.entries(words).map(([value, word]) => ({ value, label: word })),
            ]}
            value={String(fieldAt(document, ["model", "overrides", name]) ?? "")}
            onChange={(next) =>
              onChange(withField(document, ["model", "overrides", name], next || undefined), {
                path: `model.overrides.${name}`,
                live: false,
              })
            }
          />
        );
      })}
    </NumberGroup>
  );
});
