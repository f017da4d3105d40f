/** Measured spectra beside the spectra of a scenario: which belongs to which, and in what scale they are compared. */
import { type Bias, frequenciesOf, limits, quantities, type ScenarioDocument, type Technique } from "@demilune/solver";
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

/** What says which spectrum a measurement belongs to. */
type Conditions = Pick<OverlayMeasurement, "technique"> & { bias: Bias | null; fluxPerCm2S?: number | null };

interface Request {
  technique: Technique;
  bias?: Bias;
  fluxPerCm2S?: number;
}

const biasOf = ({ technique, bias }: Request): Bias => bias ?? (technique === "imps" ? "shortCircuit" : "openCircuit");

/** How far a request is from the measurement's conditions; infinite for another technique. */
function distance(request: Request, lightFlux: number, measurement: Conditions): number {
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
export function spectrumFor(document: ScenarioDocument, measurement: Conditions): number | null {
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

/** The real part at the lowest unmasked frequency, by which a spectrum is normalised; 1 where that is no use. */
function lowFrequencyLimit({ re, masked }: { re: ArrayLike<number>; masked?: ArrayLike<boolean> }): number {
  let index = 0;
  while (masked?.[index] && index < re.length - 1) index++;
  const value = re[index];
  return Number.isFinite(value) && value !== 0 ? value : 1;
}

interface Curve {
  re: ArrayLike<number>;
  im: ArrayLike<number>;
  masked?: ArrayLike<boolean>;
}

/** A spectrum divided by its low-frequency limit, times a new limit. */
export function withLimit<Kind extends Curve>(curve: Kind, limit = 1): Kind {
  const factor = limit / lowFrequencyLimit(curve);
  const part = (values: ArrayLike<number>) => Array.from(values, (value) => value * factor);
  return { ...curve, re: part(curve.re), im: part(curve.im) };
}

/** A measurement without an absolute scale, brought to the prediction's size at its own lowest frequency. */
export function scaledTo<Kind extends Curve & { frequencyHz: ArrayLike<number> }>(
  measurement: Kind,
  prediction: { frequencyHz: ArrayLike<number>; re: ArrayLike<number> },
): Kind {
  const from = measurement.frequencyHz[0];
  let index = 0;
  while (index < prediction.frequencyHz.length - 1 && prediction.frequencyHz[index] < from) index++;
  return withLimit(measurement, prediction.re[index]);
}

/**
 * The document asked at the measurements' own frequencies besides its own, so that residuals need no interpolation.
 * The document itself where that would be more frequencies than are allowed.
 */
export function withMeasuredFrequencies(
  document: ScenarioDocument,
  measurements: readonly { frequencyHz: readonly number[] }[],
): ScenarioDocument {
  if (measurements.length === 0) return document;
  const { listHz, fromHz, toHz, pointsPerDecade } = document.frequencies ?? {};
  const range = {
    fromHz: fromHz ?? quantities.fromHz.default,
    toHz: toHz ?? quantities.toHz.default,
    pointsPerDecade: pointsPerDecade ?? quantities.pointsPerDecade.default,
  };
  const { min, max } = quantities.frequencyHz;
  const all = new Set(listHz ?? (range.fromHz <= range.toHz ? frequenciesOf(range) : []));
  for (const { frequencyHz } of measurements) {
    for (const frequency of frequencyHz) if (frequency >= min && frequency <= max) all.add(frequency);
  }
  if (all.size === 0 || all.size > limits.frequencies) return document;
  return { ...document, frequencies: { listHz: [...all].sort((first, second) => first - second) } };
}
