/** A reading made small enough to draw and to send: long spectra thinned, their true length kept. */
import type { ImportedSpectrum, ImportReading } from "./reading";

export interface PreviewSpectrum extends ImportedSpectrum {
  pointCount: number;
}

export type PreviewReading =
  | Extract<ImportReading, { status: "refused" }>
  | (Omit<Extract<ImportReading, { status: "read" }>, "spectra"> & { spectra: PreviewSpectrum[] });

/** Points of one spectrum that are drawn. */
const drawn = 1500;
/** Spectra of one file that are drawn and listed. */
const listed = 60;

function thinned(spectrum: ImportedSpectrum): PreviewSpectrum {
  const pointCount = spectrum.frequencyHz.length;
  const step = Math.ceil(pointCount / drawn);
  const every = <Value>(values: Value[]) => (step === 1 ? values : values.filter((_, index) => index % step === 0));
  return {
    ...spectrum,
    frequencyHz: every(spectrum.frequencyHz),
    re: every(spectrum.re),
    im: every(spectrum.im),
    sigma: spectrum.sigma && every(spectrum.sigma),
    timeS: null,
    pointCount,
  };
}

export function previewOf(reading: ImportReading): PreviewReading {
  return reading.status === "refused"
    ? reading
    : { ...reading, spectra: reading.spectra.slice(0, listed).map(thinned) };
}
