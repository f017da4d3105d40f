import type { ComplexProfile, HarmonicProfiles } from "@demilune/solver";
import { useMemo } from "react";
import type { Series } from "~/components/charts/series";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { XYPlot } from "~/components/charts/XYPlot";
import { RichText } from "~/components/ui/RichText";
import { formatPrefixed } from "~/lib/numberFormat";
import { techniqueNames } from "~/lib/spectrumNames";
import { useDetail } from "~/workers/useDetail";
import { useAddressChoice } from "../useAddressChoice";
import { DetailState } from "./DetailState";
import { LayerEdges } from "./LayerEdges";
import { PaneChoice } from "./PaneChoice";
import type { PaneContext } from "./pane";

interface Choice {
  id: string;
  label: string;
  unit: string;
  curves: readonly { key: keyof HarmonicProfiles; label: string }[];
}

const choices: readonly Choice[] = [
  {
    id: "currents",
    label: "currents",
    unit: "mA/cm²",
    curves: [
      { key: "electronCurrentMAPerCm2", label: "electrons" },
      { key: "holeCurrentMAPerCm2", label: "holes" },
      { key: "ionCurrentMAPerCm2", label: "ions" },
      { key: "displacementCurrentMAPerCm2", label: "displacement" },
    ],
  },
  {
    id: "carriers",
    label: "carriers",
    unit: "cm⁻³",
    curves: [
      { key: "electronsPerCm3", label: "δ*n*" },
      { key: "holesPerCm3", label: "δ*p*" },
    ],
  },
  { id: "potential", label: "potential", unit: "V", curves: [{ key: "potentialV", label: "δ*φ*" }] },
  {
    id: "ions",
    label: "ions",
    unit: "cm⁻³",
    curves: [
      { key: "cationsPerCm3", label: "δ*c*" },
      { key: "anionsPerCm3", label: "δ*a*" },
    ],
  },
];

/** Real part as a line, imaginary part dashed, in the colour of the quantity. */
function seriesOf(profiles: HarmonicProfiles, choice: Choice): Series[] {
  return choice.curves.flatMap(({ key, label }, position) => {
    const { re, im } = profiles[key] as ComplexProfile;
    if (re.every((value) => value === 0) && im.every((value) => value === 0)) return [];
    const style = { kind: "prediction", colour: position + 1, width: 1.8, x: profiles.depthNm } as const;
    return [
      { ...style, id: `${key}:re`, label: `${label}, Re`, y: re },
      { ...style, id: `${key}:im`, label: `${label}, Im`, y: im, dash: "5 3", unlisted: true },
    ];
  });
}

/** The small oscillation over depth at the cursor's frequency. */
export function HarmonicOverDepth({ document, spectrum, linked, waiting }: PaneContext) {
  const [wanted, choose] = useAddressChoice("oscillation", choices[0].id);
  const choice = choices.find(({ id }) => id === wanted) ?? choices[0];
  const frequencyHz =
    linked.cursor?.at ??
    (spectrum?.status === "solved" ? spectrum.frequencyHz[Math.floor(spectrum.frequencyHz.length / 2)] : 1);
  const point =
    spectrum &&
    JSON.stringify({
      technique: spectrum.technique,
      bias: spectrum.bias,
      fluxPerCm2S: spectrum.fluxPerCm2S,
      frequencyHz,
    });
  const ask = useMemo(() => (point && !waiting ? JSON.parse(point) : null), [point, waiting]);
  const detail = useDetail("harmonicProfiles", document, ask);
  const own = useLinkedCursor();
  const series = useMemo(() => (detail.value ? seriesOf(detail.value, choice) : []), [detail.value, choice]);
  return (
    <>
      <PaneChoice
        words={
          <>
            {spectrum && techniqueNames[spectrum.technique]} at the cursor's{" "}
            <RichText text={formatPrefixed(frequencyHz, "Hz")} />, per{" "}
            {spectrum?.technique === "impedance" ? "volt" : "relative change of the light"}; lines Re, dashes Im
          </>
        }
        value={choice.id}
        options={choices}
        onChoose={choose}
      />
      <DetailState detail={detail}>
        {() => (
          <XYPlot
            key={choice.id}
            title={`Oscillation over depth: ${choice.label}`}
            xAxis={{ label: "depth", unit: "nm", scale: "linear" }}
            yAxis={{ label: choice.label, unit: choice.unit, scale: "linear" }}
            series={series}
            height={300}
            below={(geometry) => <LayerEdges layers={document.stack.layers} geometry={geometry} />}
            {...own}
          />
        )}
      </DetailState>
    </>
  );
}
