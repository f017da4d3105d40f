/** Measured spectra beside the spectra of a scenario: which belongs to which, and in what scale they are compared. */
import type { Bias, ScenarioDocument, Technique } from "@demilune/solver";
import type { MeasuredPoints } from "./measuredPoints";

export interface OverlayMeasurement extends MeasuredPoints {
  id: string;
  name: string;
  technique: Technique;
  bias: Bias;
  fluxPerCm2S: number | null;
  invented: boolean;
  /** Only the shape is known: it can be compared after normalising only. */
  relative: boolean;
}

interface Request {
  technique: Technique;
  bias?: Bias;
  fluxPerCm2S?: number;
}

const biasOf = ({ technique, bias }: Request): Bias => bias ?? (technique === "imps" ? "shortCircuit" : "openCircuit");

/** How far a request is from the measurement's conditions; infinite for another technique. */
function distance(request: Request, lightFlux: number, measurement: OverlayMeasurement): number {
  if (request.technique !== measurement.technique) return Number.POSITIVE_INFINITY;
  const sameBias = JSON.stringify(biasOf(request)) === JSON.stringify(measurement.bias);
  const flux = request.fluxPerCm2S ?? lightFlux;
  const decades =
    measurement.fluxPerCm2S && flux > 0 && measurement.fluxPerCm2S > 0
      ? Math.abs(Math.log10(flux / measurement.fluxPerCm2S))
      : 0;
  return (sameBias ? 0 : 100) + decades;
}

/**
 * Index of the spectrum of a document that a measurement is compared with: the same technique, then the same
 * operating point, then the nearest light; null where the technique is not asked for.
 */
export function spectrumFor(document: ScenarioDocument, measurement: OverlayMeasurement): number | null {
  const requests: readonly Request[] = document.spectra ?? [{ technique: "imps" }];
  let best: number | null = null;
  let smallest = Number.POSITIVE_INFINITY;
  requests.forEach((request, index) => {
    const own = distance(request, document.light.fluxPerCm2S, measurement);
    if (own < smallest) {
      smallest = own;
      best = index;
    }
  });
  return best;
}

interface Spectrum {
  frequencyHz: ArrayLike<number>;
  re: ArrayLike<number>;
  im: ArrayLike<number>;
}

/** The real part at the lowest unmasked frequency, by whose size a spectrum is normalised; 1 where that is no use. */
export function lowFrequencyLimit({ re, masked }: { re: ArrayLike<number>; masked?: ArrayLike<boolean> }): number {
  let index = 0;
  while (masked?.[index] && index < re.length - 1) index++;
  const value = re[index];
  return Number.isFinite(value) && value !== 0 ? value : 1;
}

/** A spectrum divided by a number. */
export function scaled<Kind extends Spectrum>(spectrum: Kind, divisor: number): Kind {
  const part = (values: ArrayLike<number>) => Array.from(values, (value) => value / divisor);
  return { ...spectrum, re: part(spectrum.re), im: part(spectrum.im) };
}

/** Frequencies of several measurements as `listHz` takes them: ascending, each once. */
export function frequenciesOf(measurements: readonly MeasuredPoints[]): number[] {
  const all = new Set<number>();
  for (const { frequencyHz } of measurements) for (const frequency of frequencyHz) all.add(frequency);
  return [...all].sort((first, second) => first - second);
}
