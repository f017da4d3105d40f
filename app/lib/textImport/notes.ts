/** What the text around the data says about the measurement: exact `# key: value` lines, and free wording. */
import { readNumber } from "./numbers";
import type { DecimalMark } from "./settings";
import { parseUnit } from "./units";

export interface Note<Value> {
  value: Value;
  /** Line number, from 0; −1 for the file's name. */
  line: number;
}

export type Technique = "imps" | "imvs" | "impedance";
export type Bias = "shortCircuit" | "openCircuit" | { voltageV: number };

interface NoteValues {
  technique: Technique;
  bias: Bias;
  fluxPerCm2S: number;
  modulatedFluxPerCm2S: number;
  modulationDepth: number;
  areaCm2: number;
  wavelengthNm: number;
  temperatureK: number;
  sample: string;
}

export type Notes = { [Key in keyof NoteValues]?: Note<NoteValues[Key]> };

const amount = String.raw`([+-]?\d[\d.,]*(?:\s*[eE][+-]?\d+|\s*[·×x*]\s*10\^?[+-]?\d+)?)`;
/** At most a few words between a name and its number; never across another number. */
const gap = String.raw`[^\d+\-;\n]{0,40}?`;
const named = (words: string, units: string) => new RegExp(`(?:${words})${gap}${amount}\\s*(${units})`, "i");
const bracketed = (words: string, units: string) =>
  new RegExp(`(?:${words})[^\\d;]{0,20}?[\\[(]\\s*(${units})\\s*[\\])]${gap}${amount}`, "i");

const areaUnits = String.raw`cm\^?[2²]|mm\^?[2²]|m\^?[2²]`;
const fluxUnits = String.raw`(?:photons?|ph)?[\s/·]*(?:cm|m)\^?[-−⁻]?[2²][\s/·]*s?(?:\^?[-−⁻][1¹])?(?:\s*s)?`;

function number(text: string, mark: DecimalMark): number | undefined {
  const packed = text.replaceAll(/\s+/g, "").replace(/[.,]$/, "");
  const value =
    readNumber(packed, mark) ?? readNumber(packed, "either") ?? readNumber(packed.replace(/[x*](?=10)/, "×"), "either");
  return value !== undefined && Number.isFinite(value) ? value : undefined;
}

function match(text: string, words: string, units: string, mark: DecimalMark): { value: number; unit: string } | null {
  const after = named(words, units).exec(text);
  if (after) {
    const value = number(after[1], mark);
    if (value !== undefined) return { value, unit: after[2] };
  }
  const before = bracketed(words, units).exec(text);
  const value = before ? number(before[2], mark) : undefined;
  return before && value !== undefined ? { value, unit: before[1] } : null;
}

const positive = (value: number | undefined, most: number): value is number =>
  value !== undefined && value > 0 && value <= most;

function area(text: string, mark: DecimalMark): number | undefined {
  const found = match(text, String.raw`\barea|fläche|surface\b`, areaUnits, mark);
  const unit = found && parseUnit(found.unit);
  const value = unit ? found.value * unit.factor * 1e4 : undefined;
  return positive(value, 1e6) ? value : undefined;
}

function flux(text: string, words: string, mark: DecimalMark): number | undefined {
  const found = match(text, words, fluxUnits, mark);
  const value = found
    ? found.value * (/(?:^|[^c])m/.test(found.unit.replace(/photons?|ph/i, "")) ? 1e-4 : 1)
    : undefined;
  if (positive(value, 1e20)) return value;
  const bare = new RegExp(`(?:${words})\\s*[:=]?\\s*${amount}`, "i").exec(text);
  const plain = bare ? number(bare[1], mark) : undefined;
  // Without a unit only a number that can be nothing else is taken.
  return positive(plain, 1e20) && plain > 1e10 ? plain : undefined;
}

function technique(text: string): Technique | undefined {
  if (/\bimvs\b|photovoltage spectr/i.test(text)) return "imvs";
  if (/\bimps\b|photocurrent spectr/i.test(text)) return "imps";
  if (/\bimpedance\b|\bEIS\b|\bimpedanz/i.test(text)) return "impedance";
  return undefined;
}

function bias(text: string, mark: DecimalMark): Bias | undefined {
  if (/short[\s_-]*circuit|\bJsc\b|kurzschluss/i.test(text)) return "shortCircuit";
  if (/open[\s_-]*circuit|leerlauf/i.test(text)) return "openCircuit";
  const found = match(
    text,
    String.raw`bias(?:\s+voltage)?|d\.?c\.?[\s_-]*(?:voltage|potential|bias)|\bVdc\b|V_dc|\bEdc\b|applied voltage`,
    "mV|V",
    mark,
  );
  const voltageV = found ? found.value * (/^m/.test(found.unit) ? 1e-3 : 1) : undefined;
  return voltageV !== undefined && Math.abs(voltageV) <= 1000 ? { voltageV } : undefined;
}

function temperature(text: string, mark: DecimalMark): number | undefined {
  const found = match(text, String.raw`temp(?:erature)?|\bT\b`, String.raw`°\s*C|K\b|deg\s*C|C\b`, mark);
  if (!found) return undefined;
  const value = /k/i.test(found.unit) ? found.value : found.value + 273.15;
  return value >= 50 && value <= 1000 ? value : undefined;
}

/** "sample: name", "device = name", or in running text "sample K-17" (then it holds a digit). */
function sampleName(text: string): string | undefined {
  const word = String.raw`["']?([\p{L}\p{N}][\p{L}\p{N}_.+-]{0,60})`;
  const stated = new RegExp(
    String.raw`\b(?:sample|probe|device)(?:\s*(?:name|id|no\.?))?\s*[:=\t]\s*${word}`,
    "iu",
  ).exec(text)?.[1];
  if (stated) return stated;
  const running = new RegExp(String.raw`\b(?:sample|probe|device)\s+${word}`, "iu").exec(text)?.[1];
  return running && /\d/.test(running) && /\p{L}/u.test(running) ? running : undefined;
}

/** Lines of the exact kind that the command line reads. */
function exact(text: string, line: number, notes: Notes): boolean {
  const found = /^#\s*(technique|bias|fluxPerCm2S)\s*:\s*(\S+)\s*$/.exec(text);
  if (!found) return false;
  const [, key, value] = found;
  if (key === "technique" && (value === "imps" || value === "imvs" || value === "impedance")) {
    notes.technique = { value, line };
  } else if (key === "bias" && (value === "shortCircuit" || value === "openCircuit")) notes.bias = { value, line };
  else if (key === "bias" && Math.abs(Number(value)) <= 1000) notes.bias = { value: { voltageV: Number(value) }, line };
  else if (key === "fluxPerCm2S" && Number(value) >= 0 && Number(value) <= 1e20) {
    notes.fluxPerCm2S = { value: Number(value), line };
  } else return false;
  return true;
}

function keep<Key extends keyof NoteValues>(notes: Notes, key: Key, value: NoteValues[Key] | undefined, line: number) {
  if (value !== undefined && notes[key] === undefined) notes[key] = { value, line } as Notes[Key];
}

/** Reads the given lines; the first mention of a thing counts. */
export function readNotes(lines: readonly string[], numbers: readonly number[], mark: DecimalMark): Notes {
  const notes: Notes = {};
  for (const line of numbers) {
    const text = lines[line];
    if (text.length > 2000 || exact(text, line, notes)) continue;
    keep(notes, "technique", technique(text), line);
    keep(notes, "bias", bias(text, mark), line);
    keep(notes, "areaCm2", area(text, mark), line);
    keep(
      notes,
      "modulatedFluxPerCm2S",
      flux(text, "modulated (?:photon )?flux|flux (?:modulation|amplitude)|δΦ", mark),
      line,
    );
    if (!/modulated|amplitude/i.test(text))
      keep(notes, "fluxPerCm2S", flux(text, String.raw`\bflux\b|fluxPerCm2S|photonenfluss|\bΦ`, mark), line);
    keep(notes, "temperatureK", temperature(text, mark), line);
    const wavelength =
      match(text, "wavelength|wellenlänge|LED|laser|λ", "nm", mark)?.value ??
      Number(/\b(\d{3,4})\s*nm\b/.exec(text)?.[1]);
    keep(notes, "wavelengthNm", positive(wavelength, 1e5) ? wavelength : undefined, line);
    const depth = match(text, String.raw`modulation(?:\s+depth)?`, "%", mark)?.value;
    keep(notes, "modulationDepth", positive(depth, 100) ? depth / 100 : undefined, line);
    keep(notes, "sample", sampleName(text), line);
  }
  return notes;
}

/** What a file's name says: technique and sometimes the bias. */
export function notesOfName(fileName: string): Notes {
  const text = fileName.slice(0, 300).replaceAll(/[_.-]+/g, " ");
  const notes: Notes = {};
  keep(notes, "technique", technique(text), -1);
  return notes;
}
