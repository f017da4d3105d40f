/** The fields by which a reading is corrected: the same in the browser, in the address and on the server. */
import { type Quantity, quantities } from "@demilune/solver";
import { readQuantity } from "./quantityText";
import { columnRoles, type ImportSettings, importSettingsSchema } from "./textImport/settings";

/** FormData and URLSearchParams alike. */
interface Fields {
  get(name: string): unknown;
  keys(): Iterable<string>;
}

export interface FormFault {
  field: string;
  message: string;
}

export const areaQuantity: Quantity = { label: "area", symbol: "A", unit: "cm²", min: 1e-8, max: 1e6 };

/** Number fields of the form. */
const importQuantities = {
  fluxPerCm2S: quantities.fluxPerCm2S,
  areaCm2: areaQuantity,
  modulatedFluxPerCm2S: { ...quantities.fluxPerCm2S, label: "modulated flux", min: 1 } as Quantity,
  wavelengthNm: quantities.wavelengthNm,
  temperatureK: { ...quantities.temperatureK, default: undefined } as Quantity,
} as const;

type NumberField = keyof typeof importQuantities;

const words = ["encoding", "delimiter", "decimalMark", "imaginarySign", "polarity", "restart", "technique"] as const;

const text = (fields: Fields, name: string): string => {
  const value = fields.get(name);
  return typeof value === "string" ? value.trim() : "";
};

function readNumber(fields: Fields, name: string, quantity: Quantity, faults: FormFault[]): number | undefined {
  const typed = text(fields, name);
  if (typed === "") return undefined;
  const reading = readQuantity(typed, quantity);
  if (reading.ok) return reading.value ?? undefined;
  faults.push({ field: name, message: `${quantity.label}: ${reading.error}` });
  return undefined;
}

function readBias(fields: Fields, faults: FormFault[]): ImportSettings["bias"] {
  const bias = text(fields, "bias");
  if (bias === "shortCircuit" || bias === "openCircuit") return bias;
  if (bias !== "voltage") return undefined;
  const voltageV = readNumber(fields, "biasVoltageV", quantities.voltageV, faults);
  if (voltageV === undefined && faults.every(({ field }) => field !== "biasVoltageV")) {
    faults.push({ field: "biasVoltageV", message: "terminal voltage: a value is needed" });
  }
  return voltageV === undefined ? undefined : { voltageV };
}

function readColumns(fields: Fields): ImportSettings["columns"] {
  const columns: Record<string, { role?: (typeof columnRoles)[number]; unit?: string }> = {};
  for (const name of new Set(fields.keys())) {
    const match = /^(role|unit)-(\d{1,4})$/.exec(name);
    const value = match && text(fields, name);
    if (!match || !value) continue;
    columns[match[2]] ??= {};
    const role = columnRoles.find((known) => known === value);
    if (match[1] === "role" && role) columns[match[2]].role = role;
    if (match[1] === "unit") columns[match[2]].unit = value.slice(0, 40);
  }
  return Object.keys(columns).length > 0 ? columns : undefined;
}

function readSpectra(fields: Fields, faults: FormFault[]): ImportSettings["spectra"] {
  const spectra: NonNullable<ImportSettings["spectra"]> = {};
  for (const name of new Set(fields.keys())) {
    const index = /^flux-(\d{1,4})$/.exec(name)?.[1];
    if (!index) continue;
    const fluxPerCm2S = readNumber(fields, name, quantities.fluxPerCm2S, faults);
    if (fluxPerCm2S !== undefined) spectra[index] = { fluxPerCm2S };
  }
  return Object.keys(spectra).length > 0 ? spectra : undefined;
}

/** Reads the corrections; an empty field leaves the decision to the file. Faults name their field. */
export function readImportForm(fields: Fields): { settings: ImportSettings; faults: FormFault[] } {
  const faults: FormFault[] = [];
  const found: Record<string, unknown> = {};
  for (const name of words) found[name] = text(fields, name) || undefined;
  for (const [name, quantity] of Object.entries(importQuantities)) {
    found[name] = readNumber(fields, name, quantity, faults);
  }
  found.bias = readBias(fields, faults);
  found.columns = readColumns(fields);
  found.spectra = readSpectra(fields, faults);
  const parsed = importSettingsSchema.safeParse(found);
  if (parsed.success) return { settings: parsed.data, faults };
  for (const issue of parsed.error.issues) {
    faults.push({ field: String(issue.path[0] ?? ""), message: `${issue.path.join(".")} ${issue.message}` });
  }
  return { settings: {}, faults };
}

/** Settings as the form's fields, for reading a stored file again. */
export function importFormValues(settings: ImportSettings): Record<string, string> {
  const values: Record<string, string> = {};
  for (const name of words) if (settings[name]) values[name] = settings[name];
  for (const name of Object.keys(importQuantities) as NumberField[]) {
    const value = settings[name];
    if (value !== undefined) values[name] = String(value);
  }
  if (typeof settings.bias === "object") {
    values.bias = "voltage";
    values.biasVoltageV = String(settings.bias.voltageV);
  } else if (settings.bias) values.bias = settings.bias;
  for (const [index, { role, unit }] of Object.entries(settings.columns ?? {})) {
    if (role) values[`role-${index}`] = role;
    if (unit) values[`unit-${index}`] = unit;
  }
  for (const [index, { fluxPerCm2S }] of Object.entries(settings.spectra ?? {})) {
    if (fluxPerCm2S !== undefined) values[`flux-${index}`] = String(fluxPerCm2S);
  }
  return values;
}
