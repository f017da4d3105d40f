/** From results and measurements to the series that the plots draw. */
import type { Bias, SpectrumResult, Technique } from "@demilune/solver";
import type { SpectrumSeries } from "~/components/charts/spectrum";
import { formatNumber, formatPrefixed, thinSpace } from "~/lib/numberFormat";
import { scaledTo } from "~/lib/overlay";
import { biasWords } from "~/lib/spectrumNames";

/** A measured spectrum laid over the prediction. */
export interface Measurement {
  id: string;
  name: string;
  technique: Technique;
  bias: Bias | null;
  fluxPerCm2S?: number | null;
  frequencyHz: readonly number[];
  re: readonly number[];
  im: readonly number[];
  masked?: readonly boolean[];
  /** Only the shape is known: drawn at the prediction's size. */
  relative?: boolean;
  /** Made for the demo, not measured. */
  invented?: boolean;
}

/** A curve that was held: what it showed, and the document it came from. */
export interface HeldCurve {
  label: string;
  spectra: readonly SpectrumResult[];
}

export const predictionId = "prediction";

const marks = ["circle", "square", "triangle"] as const;

/** Words for the operating point of a solved spectrum: "open circuit, V = 1.008 V". */
function pointWords(spectrum: SpectrumResult): string {
  const { bias } = spectrum;
  const voltage = spectrum.status === "solved" ? spectrum.operatingPoint.voltageV : null;
  if (bias !== "openCircuit" || voltage === null) return biasWords(bias);
  return `${biasWords(bias)}, *V* = ${formatNumber(voltage, 4)}${thinSpace}V`;
}

const hertz = (frequency: number) => formatPrefixed(frequency, "Hz");

function measuredSeries(measurement: Measurement, position: number, count: number): SpectrumSeries {
  const { id, name, frequencyHz, re, im, masked, relative, invented } = measurement;
  const range = frequencyHz.length ? `, ${hertz(Math.min(...frequencyHz))} to ${hertz(Math.max(...frequencyHz))}` : "";
  return {
    id: `measured:${id}`,
    label: `${invented ? "invented data" : "measured"}, ${name}${range}${relative ? ", scaled" : ""}`,
    kind: "measured",
    frequencyHz,
    re,
    im,
    masked,
    mark: marks[position % marks.length],
    colour: count === 1 ? "ink" : 2 + (position % 4),
  };
}

/** Everything one tab draws: what is held lies below, then measurements, then the prediction. */
export function seriesOf(
  spectrum: SpectrumResult | undefined,
  held: HeldCurve | null,
  measurements: readonly Measurement[],
): SpectrumSeries[] {
  const series: SpectrumSeries[] = [];
  if (spectrum && held) {
    const earlier = held.spectra.find(
      (other) => other.technique === spectrum.technique && JSON.stringify(other.bias) === JSON.stringify(spectrum.bias),
    );
    if (earlier?.status === "solved") {
      const { frequencyHz, re, im } = earlier;
      series.push({ id: "held", label: `held: ${held.label}`, kind: "held", frequencyHz, re, im });
    }
  }
  const own = measurements.filter(({ technique }) => technique === spectrum?.technique);
  for (const [position, measurement] of own.entries()) {
    const drawn = measuredSeries(measurement, position, own.length);
    series.push(measurement.relative && spectrum?.status === "solved" ? scaledTo(drawn, spectrum) : drawn);
  }
  if (spectrum?.status === "solved") {
    const { frequencyHz, re, im } = spectrum;
    series.push({
      id: predictionId,
      label: `prediction, ${pointWords(spectrum)}`,
      kind: "prediction",
      frequencyHz,
      re,
      im,
    });
  }
  return series;
}
