/** What can be chosen in place of what was understood. */
import type { FindingKey } from "~/lib/textImport/reading";
import type { ColumnRole } from "~/lib/textImport/settings";

export const roleWords: Record<ColumnRole, string> = {
  frequency: "frequency",
  real: "Re",
  imaginary: "Im",
  minusImaginary: "−Im",
  modulus: "modulus",
  phase: "phase",
  sigma: "standard deviation",
  time: "time",
  notUsed: "not used",
};

type Choices = readonly (readonly [value: string, label: string])[];

const direction: Choices = [
  ["asWritten", "as written"],
  ["reversed", "turned over"],
];

export const choices: Partial<Record<FindingKey, Choices>> = {
  encoding: [
    ["utf-8", "UTF-8"],
    ["windows-1252", "windows-1252"],
    ["utf-16le", "UTF-16, low byte first"],
    ["utf-16be", "UTF-16, high byte first"],
  ],
  delimiter: [
    ["tab", "tab"],
    ["semicolon", "semicolon"],
    ["comma", "comma"],
    ["spaces", "spaces"],
  ],
  decimalMark: [
    ["point", "point"],
    ["comma", "comma"],
    ["either", "point or comma"],
  ],
  restart: [
    ["newSpectrum", "starts a new spectrum"],
    ["repeat", "repeats the spectrum"],
  ],
  imaginarySign: direction,
  polarity: direction,
  technique: [
    ["imps", "IMPS"],
    ["imvs", "IMVS"],
    ["impedance", "impedance"],
  ],
  bias: [
    ["shortCircuit", "short circuit"],
    ["openCircuit", "open circuit"],
    ["voltage", "a voltage:"],
  ],
};

/** Units of the number fields, as placeholders. */
export const numberUnits: Partial<Record<FindingKey, string>> = {
  fluxPerCm2S: "cm⁻² s⁻¹",
  areaCm2: "cm²",
  modulatedFluxPerCm2S: "cm⁻² s⁻¹",
  wavelengthNm: "nm",
  temperatureK: "K",
};
