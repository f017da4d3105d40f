import { type ModelKind, modelKinds, type ScenarioDocument } from "@demilune/solver";
import { memo } from "react";
import type { StackProps } from "~/components/stack/stackProps";
import { modelNames } from "~/lib/spectrumNames";

/** Overrides belong to one model and are dropped with it. */
function withModel(document: ScenarioDocument, kind: ModelKind): ScenarioDocument {
  const absorber = document.model?.absorber;
  return { ...document, model: absorber === undefined ? { kind } : { kind, absorber } };
}

/** Which of the models predicts, in the title line. */
export const ModelChoice = memo(function ModelChoice({ document, onChange, readOnly }: StackProps) {
  return (
    <label className="flex min-w-0 items-baseline gap-1.5 text-ink-soft">
      model
      <select
        className="h-6 min-w-0 grow rounded-[2px] bg-transparent text-ink"
        disabled={readOnly}
        value={document.model?.kind ?? "driftDiffusion"}
        onChange={(event) =>
          onChange(withModel(document, event.currentTarget.value as ModelKind), { path: "model.kind", live: false })
        }
      >
        {modelKinds.toReversed().map((kind) => (
          <option key={kind} value={kind} className="bg-sheet text-ink">
            {modelNames[kind]}
          </option>
        ))}
      </select>
    </label>
  );
});
