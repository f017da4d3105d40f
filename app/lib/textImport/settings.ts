/** What a person can correct about the reading of a file. Everything left out is decided from the file itself. */
import { z } from "zod";

export const encodings = ["utf-8", "utf-16le", "utf-16be", "windows-1252"] as const;
export const delimiters = ["tab", "semicolon", "comma", "spaces"] as const;
export const decimalMarks = ["point", "comma", "either"] as const;
export const columnRoles = [
  "frequency",
  "real",
  "imaginary",
  "minusImaginary",
  "modulus",
  "phase",
  "sigma",
  "time",
  "notUsed",
] as const;

export type Encoding = (typeof encodings)[number];
export type Delimiter = (typeof delimiters)[number];
export type DecimalMark = (typeof decimalMarks)[number];
export type ColumnRole = (typeof columnRoles)[number];

const direction = z.enum(["asWritten", "reversed"]);
const bias = z.union([
  z.enum(["shortCircuit", "openCircuit"]),
  z.strictObject({ voltageV: z.number().min(-1000).max(1000) }),
]);
const flux = z.number().min(0).max(1e20);

/** Conditions of the measurement; for all spectra of the file, or for one of them. */
const conditions = {
  technique: z.enum(["imps", "imvs", "impedance"]).optional(),
  bias: bias.optional(),
  /** Photons cm⁻² s⁻¹ of the steady light. */
  fluxPerCm2S: flux.optional(),
  temperatureK: z.number().min(50).max(1000).optional(),
};

export const importSettingsSchema = z.strictObject({
  encoding: z.enum(encodings).optional(),
  delimiter: z.enum(delimiters).optional(),
  decimalMark: z.enum(decimalMarks).optional(),
  /** By column number of the file, from 0. */
  columns: z
    .record(
      z.string().regex(/^\d{1,4}$/),
      z.strictObject({ role: z.enum(columnRoles).optional(), unit: z.string().max(40).optional() }),
    )
    .optional(),
  /** Sign of Im (or of the phase) after the column's own meaning was followed. */
  imaginarySign: direction.optional(),
  /** Sign of the whole response. */
  polarity: direction.optional(),
  /** What a frequency that starts again means. */
  restart: z.enum(["newSpectrum", "repeat"]).optional(),
  ...conditions,
  areaCm2: z.number().positive().max(1e6).optional(),
  /** Amplitude of the modulated flux, photons cm⁻² s⁻¹, where the file holds amplitudes of current or voltage. */
  modulatedFluxPerCm2S: flux.positive().optional(),
  wavelengthNm: z.number().min(1).max(1e6).optional(),
  spectra: z.record(z.string().regex(/^\d{1,4}$/), z.strictObject(conditions)).optional(),
});

export type ImportSettings = z.infer<typeof importSettingsSchema>;

/** Largest file and table that are taken. */
export const importLimits = { bytes: 25_000_000, lines: 2_000_000, lineLength: 100_000, spectra: 500 } as const;
