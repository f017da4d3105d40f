/** What the reading of a file comes to: everything that was understood with its reason, and the numbers. */
import type { Need } from "./convert";
import type { Bias, Technique } from "./notes";
import type { Column } from "./roles";
import type { DecimalMark, Delimiter, Encoding } from "./settings";

export type FindingKey =
  | "encoding"
  | "delimiter"
  | "decimalMark"
  | "header"
  | "order"
  | "restart"
  | "unit"
  | "phaseUnit"
  | "imaginarySign"
  | "polarity"
  | "technique"
  | "bias"
  | "fluxPerCm2S"
  | "areaCm2"
  | "modulatedFluxPerCm2S"
  | "wavelengthNm"
  | "temperatureK"
  | "sample";

export interface Finding {
  key: FindingKey;
  /** In words: "Decimal sign". */
  label: string;
  /** In words: "comma"; null where the file does not say it. */
  value: string | null;
  reason: string;
}

/** A line of the file as the preview shows it. */
export interface PreviewLine {
  /** Line number, from 1. */
  line: number;
  kind: "text" | "heading" | "data";
  cells: string[];
}

export interface ImportedSpectrum {
  /** From the text in front of the sweep or the column that names it; "" where there is only one. */
  label: string;
  technique: Technique;
  bias: Bias;
  fluxPerCm2S: number | null;
  temperatureK: number | null;
  /** Unit of the technique, or the file's own while something is needed. */
  unit: string;
  /** Only the shape is known. */
  relative: boolean;
  /** Ascending; repeats of one frequency in the order of the file. */
  frequencyHz: number[];
  re: number[];
  im: number[];
  /** Standard deviation of Re and of Im, each. */
  sigma: number[] | null;
  timeS: number[] | null;
  repeats: number;
}

/** Values the resolved reading used, for the fields of the preview. */
export interface ResolvedSettings {
  encoding: Encoding;
  delimiter: Delimiter;
  decimalMark: DecimalMark;
  imaginarySign: "asWritten" | "reversed";
  polarity: "asWritten" | "reversed";
  restart: "newSpectrum" | "repeat";
  technique: Technique;
  bias: Bias;
  fluxPerCm2S: number | null;
  areaCm2: number | null;
  modulatedFluxPerCm2S: number | null;
  wavelengthNm: number | null;
  temperatureK: number | null;
}

/** A table of samples over time instead of a spectrum. */
export interface TraceDescription {
  samples: number;
  channels: string[];
  startS: number | null;
  intervalS: number | null;
}

export type ImportReading =
  | { status: "refused"; message: string }
  | {
      status: "read";
      findings: Finding[];
      /** What should be looked at before storing, one sentence each. */
      questions: string[];
      /** What was passed over, one sentence each. */
      warnings: string[];
      /** Why no spectrum came out, where none did. */
      problem: string | null;
      needs: Need[];
      columns: Column[];
      preview: PreviewLine[];
      lineCount: number;
      rowCount: number;
      spectra: ImportedSpectrum[];
      trace: TraceDescription | null;
      sampleName: string | null;
      resolved: ResolvedSettings;
    };
