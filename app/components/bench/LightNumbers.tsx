import type { Side } from "@demilune/solver";
import { memo } from "react";
import { ChoiceLine } from "~/components/fields/ChoiceField";
import { FluxField } from "~/components/fields/FluxField";
import { NumberGroup } from "~/components/stack/NumberGroup";
import type { StackProps } from "~/components/stack/stackProps";
import { withField } from "~/lib/documentNumbers";
import { DocumentNumber } from "./DocumentNumber";

const sides = [
  { value: "front", label: "front" },
  { value: "back", label: "back" },
] as const;

/** The operating light: flux in three units, side, modulation, wavelengths, reflectances. */
export const LightNumbers = memo(function LightNumbers(props: StackProps) {
  const { document, onChange } = props;
  const { light } = document;
  const number = { ...props };
  return (
    <NumberGroup title="Light" tone="lamp">
      <FluxField
        fluxPerCm2S={light.fluxPerCm2S}
        wavelengthNm={light.wavelengthNm ?? undefined}
        onChange={(fluxPerCm2S, step, wavelengthNm) =>
          onChange(
            { ...document, light: { ...light, fluxPerCm2S, ...(wavelengthNm === undefined ? {} : { wavelengthNm }) } },
            { ...step, path: "light.fluxPerCm2S" },
          )
        }
      />
      <ChoiceLine
        label="enters from"
        context="light"
        choices={sides}
        value={light.side ?? "front"}
        onChange={(side: Side) =>
          onChange(withField(document, ["light", "side"], side), { path: "light.side", live: false })
        }
      />
      <DocumentNumber
        {...number}
        keys={["light", "modulationDepth"]}
        quantity="modulationDepth"
        label="modulation δ*Φ*/*Φ*"
      />
      <DocumentNumber
        {...number}
        keys={["light", "wavelengthNm"]}
        quantity="wavelengthNm"
        label="wavelength *λ*"
        emptyMeans="not given"
      />
      <DocumentNumber
        {...number}
        keys={["light", "modulationWavelengthNm"]}
        quantity="modulationWavelengthNm"
        label="*λ* of modulation"
        emptyMeans="not given"
      />
      <DocumentNumber
        {...number}
        keys={["light", "frontReflectance"]}
        quantity="frontReflectance"
        label="reflectance, lit face"
      />
      <DocumentNumber
        {...number}
        keys={["light", "backMirrorReflectance"]}
        quantity="backMirrorReflectance"
        label="reflectance, opposite face"
      />
    </NumberGroup>
  );
});
