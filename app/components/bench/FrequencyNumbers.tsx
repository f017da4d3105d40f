import { memo } from "react";
import { NumberGroup } from "~/components/stack/NumberGroup";
import type { StackProps } from "~/components/stack/stackProps";
import { DocumentNumbers } from "./DocumentNumbers";

const numbers = [
  { keys: ["frequencies", "fromHz"], quantity: "fromHz", label: "from", context: "frequencies" },
  { keys: ["frequencies", "toHz"], quantity: "toHz", label: "to", context: "frequencies" },
  { keys: ["frequencies", "pointsPerDecade"], quantity: "pointsPerDecade", label: "points per decade" },
] as const;

/** The frequencies of all spectra, equally spaced on a logarithmic axis, or a list that came with the document. */
export const FrequencyNumbers = memo(function FrequencyNumbers(props: StackProps) {
  const { document, onChange, readOnly } = props;
  const list = document.frequencies?.listHz;
  if (list)
    return (
      <NumberGroup title="Frequencies">
        <p className="py-0.5 text-ink-soft">
          A list of {list.length}, from {Math.min(...list)} to {Math.max(...list)} Hz.{" "}
          {!readOnly && (
            <button
              type="button"
              className="action"
              onClick={() =>
                onChange(
                  {
                    ...document,
                    frequencies: { fromHz: Math.min(...list), toHz: Math.max(...list), pointsPerDecade: 10 },
                  },
                  { path: "frequencies", live: false },
                )
              }
            >
              Space them equally
            </button>
          )}
        </p>
      </NumberGroup>
    );
  return <DocumentNumbers {...props} title="Frequencies" numbers={numbers} />;
});
