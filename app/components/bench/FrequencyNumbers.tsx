import { memo } from "react";
import { NumberGroup } from "~/components/stack/NumberGroup";
import type { StackProps } from "~/components/stack/stackProps";
import { DocumentNumber } from "./DocumentNumber";

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
  return (
    <NumberGroup title="Frequencies">
      <DocumentNumber
        {...props}
        keys={["frequencies", "fromHz"]}
        quantity="fromHz"
        label="from"
        context="frequencies"
      />
      <DocumentNumber {...props} keys={["frequencies", "toHz"]} quantity="toHz" label="to" context="frequencies" />
      <DocumentNumber
        {...props}
        keys={["frequencies", "pointsPerDecade"]}
        quantity="pointsPerDecade"
        label="points per decade"
      />
    </NumberGroup>
  );
});
