import type { Side } from "@demilune/solver";
import { memo } from "react";
import { ChoiceLine } from "~/components/fields/ChoiceField";
import { FluxField } from "~/components/fields/FluxField";
import type { StackProps } from "~/components/stack/stackProps";
import { withField } from "~/lib/documentNumbers";
import { DocumentNumbers } from "./DocumentNumbers";

const sides = [
  { value: "front", label: "front" },
  { value: "back", label: "back" },
] as const;

const numbers = [
  { keys: ["light", "modulationDepth"], quantity: "modulationDepth", label: "modulation δ*Φ*/*Φ*" },
  { keys: ["light", "wavelengthNm"], quantity: "wavelengthNm", label: "wavelength *λ*", emptyMeans: "not given" },
  {
    keys: ["light", "modulationWavelengthNm"],
    quantity: "modulationWavelengthNm",
    label: "*λ* of modulation",
    emptyMeans: "not given",
  },
  { keys: ["light", "frontReflectance"], quantity: "frontReflectance", label: "reflectance, lit face" },
  { keys: ["light", "backMirrorReflectance"], quantity: "backMirrorReflectance", label: "reflectance, opposite face" },
] as const;

/** The operating light: flux in three units, side, modulation, wavelengths, reflectances. */
export const LightNumbers = memo(function LightNumbers(props: StackProps) {
  const { document, onChange, readOnly } = props;
  const { light } = document;
  return (
    <DocumentNumbers
      {...props}
      title="Light"
      tone="lamp"
      numbers={numbers}
      first={
        <>
          <FluxField
            fluxPerCm2S={light.fluxPerCm2S}
            wavelengthNm={light.wavelengthNm ?? undefined}
            readOnly={readOnly}
            onChange={(fluxPerCm2S, step, wavelengthNm) =>
              onChange(
                {
                  ...document,
                  light: { ...light, fluxPerCm2S, ...(wavelengthNm === undefined ? {} : { wavelengthNm }) },
                },
                { ...step, path: "light.fluxPerCm2S" },
              )
            }
          />
          <ChoiceLine
            label="enters from"
            context="light"
            choices={sides}
            value={light.side ?? "front"}
            readOnly={readOnly}
            onChange={(side: Side) =>
              onChange(withField(document, ["light", "side"], side), { path: "light.side", live: false })
            }
          />
        </>
      }
    />
  );
});
