/** Technique, operating point and the quantities of the set-up: chosen by the person, said in the file, or assumed. */
import { formatQuantity } from "~/lib/numberFormat";
import { techniqueOfUnit } from "./convert";
import type { Bias, Note, Notes, Technique } from "./notes";
import type { Finding } from "./reading";
import type { Column } from "./roles";
import type { ImportSettings } from "./settings";

export interface Resolved<Value> {
  value: Value;
  reason: string;
  /** Neither chosen nor said in the file. */
  assumed: boolean;
}

export const techniqueWords: Record<Technique, string> = { imps: "IMPS", imvs: "IMVS", impedance: "impedance" };

export const from = (note: Note<unknown>) => (note.line < 0 ? "from the file's name" : `from line ${note.line + 1}`);

function pick<Value>(
  chosen: Value | undefined,
  note: Note<Value> | undefined,
  fallback: Resolved<Value>,
): Resolved<Value> {
  if (chosen !== undefined) return { value: chosen, reason: "chosen by you", assumed: false };
  if (note) return { value: note.value, reason: from(note), assumed: false };
  return fallback;
}

function techniqueOfNames(columns: readonly Column[]): Technique | null {
  const names = columns
    .filter(({ role }) => role !== "notUsed" && role !== "frequency" && role !== "time")
    .map(({ name }) => name);
  if (names.some((name) => /\bimvs\b/i.test(name) || /(?:^|[^A-Za-z])W(?:[^A-Za-z]|$)/.test(name))) return "imvs";
  if (names.some((name) => /\bimps\b/i.test(name) || /(?:^|[^A-Za-z])(?:Q|Y|H|EQE)(?:[^A-Za-z]|$)/.test(name)))
    return "imps";
  if (names.some((name) => /impedance|(?:^|[^A-Za-z])Z(?:[^A-Za-z]|$)|^-?z(?:'|re|im|mod|phz)/i.test(name)))
    return "impedance";
  return null;
}

export function resolveTechnique(
  chosen: Technique | undefined,
  notes: Notes,
  columns: readonly Column[],
  unit: string | null,
): Resolved<Technique> {
  const named = techniqueOfNames(columns);
  const byUnit = techniqueOfUnit(unit);
  const fallback: Resolved<Technique> = named
    ? { value: named, reason: "from the headings", assumed: false }
    : byUnit
      ? { value: byUnit, reason: `the unit ${unit} fits it`, assumed: byUnit === "impedance" }
      : { value: "imps", reason: "nothing in the file says it", assumed: true };
  return pick(chosen, notes.technique, fallback);
}

export function resolveBias(chosen: Bias | undefined, notes: Notes, technique: Technique): Resolved<Bias> {
  return pick(chosen, notes.bias, {
    value: technique === "imps" ? "shortCircuit" : "openCircuit",
    reason: `usual for ${techniqueWords[technique]}; the file does not say it`,
    assumed: true,
  });
}

export function resolveNumber(chosen: number | undefined, note: Note<number> | undefined): Resolved<number | null> {
  return pick<number | null>(chosen, note, { value: null, reason: "the file does not say it", assumed: true });
}

/** Amplitude of the modulated flux: given, or depth times the steady flux. */
export function resolveModulatedFlux(
  settings: ImportSettings,
  notes: Notes,
  flux: number | null,
): Resolved<number | null> {
  const given = resolveNumber(settings.modulatedFluxPerCm2S, notes.modulatedFluxPerCm2S);
  if (given.value !== null || !notes.modulationDepth || flux === null) return given;
  return {
    value: notes.modulationDepth.value * flux,
    reason: `${notes.modulationDepth.value * 100} % (${from(notes.modulationDepth)}) of the flux`,
    assumed: false,
  };
}

export function biasWords(bias: Bias): string {
  if (bias === "shortCircuit") return "short circuit";
  return bias === "openCircuit" ? "open circuit" : `${bias.voltageV} V`;
}

export function quantityFinding(
  key: Finding["key"],
  label: string,
  resolved: Resolved<number | null>,
  unit: string,
): Finding {
  const value = resolved.value === null ? null : formatQuantity(Number(resolved.value.toPrecision(6)), unit);
  return { key, label, value, reason: resolved.reason };
}
