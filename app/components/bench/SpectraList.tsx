import { type Bias, quantities, techniques } from "@demilune/solver";
import { memo, useState } from "react";
import { LineSelect } from "~/components/fields/ChoiceField";
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
  const [fluxes, setFluxes] = useState(false);
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
          <div key={id}>
            <div className="flex h-6 items-center gap-1.5 border-line border-b">
              <span className="w-3 text-ink-soft">{index + 1}</span>
              <LineSelect
                label={`technique, ${context}`}
                choices={techniques.map((value) => ({ value, label: techniqueNames[value] }))}
                value={spectrum.technique}
                readOnly={readOnly}
                onChange={(technique) =>
                  replace(spectra.with(index, { ...spectrum, technique }), `spectra.${index}.technique`)
                }
              />
              <LineSelect
                label={`operating point, ${context}`}
                choices={biases}
                value={typeof bias === "object" ? "voltage" : bias}
                readOnly={readOnly}
                onChange={(next) =>
                  replace(
                    spectra.with(index, { ...spectrum, bias: next === "voltage" ? { voltageV: 0.5 } : next }),
                    `spectra.${index}.bias`,
                  )
                }
              />
              {!readOnly && spectra.length > 1 && (
                <button
                  type="button"
                  className="action ml-auto w-6 justify-center"
                  aria-label={`Take out spectrum ${index + 1}`}
                  title="Take out"
                  onClick={() => replace(spectra.toSpliced(index, 1), "take out a spectrum")}
                >
                  ×
                </button>
              )}
            </div>
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
            {(fluxes || spectrum.fluxPerCm2S !== undefined) && (
              <DocumentNumber
                {...props}
                keys={["spectra", index, "fluxPerCm2S"]}
                quantity="fluxPerCm2S"
                label="flux of its own *Φ*"
                context={context}
                fallback={document.light.fluxPerCm2S}
                emptyMeans="as the light"
              />
            )}
          </div>
        );
      })}
      {!readOnly && (
        <div className="flex flex-wrap justify-between gap-x-4">
          <button
            type="button"
            className="action text-small"
            onClick={() => replace([...spectra, { technique: "imps", bias: "shortCircuit" }], "add a spectrum")}
          >
            Add a spectrum
          </button>
          <button type="button" className="action text-small" aria-expanded={fluxes} onClick={() => setFluxes(!fluxes)}>
            {fluxes ? "Hide fluxes of their own" : "Fluxes of their own"}
          </button>
        </div>
      )}
    </NumberGroup>
  );
});
