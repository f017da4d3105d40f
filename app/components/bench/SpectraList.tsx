import { type Bias, quantities, techniques } from "@demilune/solver";
import { memo } from "react";
import { ChoiceLine } from "~/components/fields/ChoiceField";
import { QuantityLine } from "~/components/fields/QuantityLine";
import { NumberGroup } from "~/components/stack/NumberGroup";
import type { StackProps } from "~/components/stack/stackProps";
import { defaultBias, techniqueNames } from "~/lib/spectrumNames";
import { DocumentNumber } from "./DocumentNumber";

const biases = [
  { value: "shortCircuit", label: "short circuit" },
  { value: "openCircuit", label: "open circuit" },
  { value: "voltage", label: "a voltage" },
] as const;

/** The spectra that are asked for: technique, operating point, and a flux of their own. */
export const SpectraList = memo(function SpectraList(props: StackProps) {
  const { document, onChange, readOnly } = props;
  const spectra = document.spectra ?? [];
  // The place in the list is what a row stands for: it has no other identity.
  const rows = spectra.map((spectrum, index) => ({ spectrum, index, id: `spectrum-${index}` }));
  const replace = (next: typeof spectra, path: string, live = false) =>
    onChange({ ...document, spectra: next }, { path, live });
  return (
    <NumberGroup title="Spectra">
      {rows.map(({ spectrum, index, id }) => {
        const bias: Bias = spectrum.bias ?? defaultBias(spectrum.technique);
        const context = `spectrum ${index + 1}`;
        return (
          <div key={id} className="mb-1">
            <ChoiceLine
              label={`${index + 1}, technique`}
              context={context}
              choices={techniques.map((value) => ({ value, label: techniqueNames[value] }))}
              value={spectrum.technique}
              onChange={(technique) =>
                replace(spectra.with(index, { ...spectrum, technique }), `spectra.${index}.technique`)
              }
            />
            <ChoiceLine
              label="at"
              context={context}
              choices={biases}
              value={typeof bias === "object" ? "voltage" : bias}
              onChange={(next) =>
                replace(
                  spectra.with(index, { ...spectrum, bias: next === "voltage" ? { voltageV: 0.5 } : next }),
                  `spectra.${index}.bias`,
                )
              }
            />
            {typeof bias === "object" && (
              <QuantityLine
                quantity={quantities.voltageV}
                label="voltage *V*"
                context={context}
                value={bias.voltageV}
                readOnly={readOnly}
                onChange={(voltageV, { live }) =>
                  typeof voltageV === "number" &&
                  replace(
                    spectra.with(index, { ...spectrum, bias: { voltageV } }),
                    `spectra.${index}.bias.voltageV`,
                    live,
                  )
                }
              />
            )}
            <DocumentNumber
              {...props}
              keys={["spectra", index, "fluxPerCm2S"]}
              quantity="fluxPerCm2S"
              label="flux of its own *Φ*"
              context={context}
              fallback={document.light.fluxPerCm2S}
              emptyMeans="as the light"
            />
            {!readOnly && spectra.length > 1 && (
              <button
                type="button"
                className="action text-small"
                aria-label={`Take out spectrum ${index + 1}`}
                onClick={() => replace(spectra.toSpliced(index, 1), "take out a spectrum")}
              >
                Take out
              </button>
            )}
          </div>
        );
      })}
      {!readOnly && (
        <button
          type="button"
          className="action text-small"
          onClick={() => replace([...spectra, { technique: "imps", bias: "shortCircuit" }], "add a spectrum")}
        >
          Add a spectrum
        </button>
      )}
    </NumberGroup>
  );
});
