/**
 * What a person can correct about the reading of a file. Everything left out is decided from the file itself.
 * The small build of zod, because this runs in the page, where the content policy forbids generated code.
 */
import * as z from "zod/mini";

const encodings = ["utf-8", "utf-16le", "utf-16be", "windows-1252"] as const;
const delimiters = ["tab", "semicolon", "comma", "spaces"] as const;
const decimalMarks = ["point", "comma", "either"] as const;
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

const within = (low: number, high: number) => z.number().check(z.minimum(low), z.maximum(high));
const direction = z.enum(["asWritten", "reversed"]);
const bias = z.union([z.enum(["shortCircuit", "openCircuit"]), z.strictObject({ voltageV: within(-1000, 1000) })]);
const place = z.string().check(z.regex(/^\d{1,4}$/));

/** Conditions of the measurement; for all spectra of the file, or for one of them. */
const conditions = {
  technique: z.optional(z.enum(["imps", "imvs", "impedance"])),
  bias: z.optional(bias),
  /** Photons cm⁻² s⁻¹ of the steady light. */
  fluxPerCm2S: z.optional(within(0, 1e20)),
  temperatureK: z.optional(within(50, 1000)),
};

export const importSettingsSchema = z.strictObject({
  encoding: z.optional(z.enum(encodings)),
  delimiter: z.optional(z.enum(delimiters)),
  decimalMark: z.optional(z.enum(decimalMarks)),
  /** By column number of the file, from 0. */
  columns: z.optional(
    z.record(
      place,
      z.strictObject({
        role: z.optional(z.enum(columnRoles)),
        unit: z.optional(z.string().check(z.maxLength(40))),
      }),
    ),
  ),
  /** Sign of Im (or of the phase) after the column's own meaning was followed. */
  imaginarySign: z.optional(direction),
  /** Sign of the whole response. */
  polarity: z.optional(direction),
  /** What a frequency that starts again means. */
  restart: z.optional(z.enum(["newSpectrum", "repeat"])),
  ...conditions,
  areaCm2: z.optional(within(1e-12, 1e6)),
  /** Amplitude of the modulated flux, photons cm⁻² s⁻¹, where the file holds amplitudes of current or voltage. */
  modulatedFluxPerCm2S: z.optional(within(1, 1e20)),
  wavelengthNm: z.optional(within(1, 1e6)),
  spectra: z.optional(z.record(place, z.strictObject(conditions))),
});

export type ImportSettings = z.infer<typeof importSettingsSchema>;

/** Largest file and table that are taken. */
export const importLimits = { bytes: 25_000_000, lines: 2_000_000, lineLength: 100_000, spectra: 500 } as const;
