import type { Technique } from "@demilune/solver";
import { ComplexPlane } from "~/components/charts/ComplexPlane";
import { OverFrequency } from "~/components/charts/OverFrequency";
import type { SpectrumSeries } from "~/components/charts/spectrum";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { techniqueNames, techniqueSymbols } from "~/lib/spectrumNames";

interface PlottedSpectrum {
  id: string;
  label: string;
  frequencyHz: number[];
  re: number[];
  im: number[];
  masked?: boolean[];
}

interface MeasuredPlotsProps {
  technique: Technique;
  unit: string;
  spectra: readonly PlottedSpectrum[];
  /** Width that the server draws with. */
  initialWidth?: number;
}

const marks = ["circle", "square", "triangle"] as const;

/** Hollow marks, alone in ink, several told apart by mark and colour. */
function measuredSeries(spectra: readonly PlottedSpectrum[]): SpectrumSeries[] {
  return spectra.map((spectrum, index) => ({
    ...spectrum,
    kind: "measured",
    mark: marks[index % marks.length],
    colour: spectra.length === 1 ? "ink" : (index % 5) + 1,
  }));
}

/** Measured spectra in the complex plane and over frequency. */
export function MeasuredPlots({ technique, unit, spectra, initialWidth = 616 }: MeasuredPlotsProps) {
  const linked = useLinkedCursor();
  const series = measuredSeries(spectra);
  const symbol = techniqueSymbols[technique];
  const name = techniqueNames[technique];
  const shared = { spectra: series, symbol, unit, initialWidth, ...linked };
  return (
    <div className="grid gap-2">
      <ComplexPlane
        {...shared}
        title={`${name}, measured, in the complex plane`}
        imUp={false}
        height={310}
        legend={series.length > 1 ? "right" : "none"}
      />
      <OverFrequency {...shared} title={`Modulus of the measured ${name}`} part="modulus" height={164} xLabelsHidden />
      <OverFrequency {...shared} title={`Phase of the measured ${name}`} part="phase" height={184} />
    </div>
  );
}
