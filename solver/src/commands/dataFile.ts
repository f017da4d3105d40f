/**
 * Data files of `validate` and `fit`: lines "# key: value" (technique is required; bias, fluxPerCm2S), then a header and
 * the columns frequencyHz, re, im and, where given, sigma and timeS. Rows stand in any order; equal frequencies are
 * repeats in the order of the file.
 */
import type { Measured } from "../analysis/measured.ts";
import { type Fault, ScenarioError } from "../scenario/errors.ts";
import { permitted, quantities } from "../scenario/quantities.ts";
import { type Bias, type Technique, techniques } from "../scenario/schema.ts";

export interface DataFile extends Measured {
  name: string;
  technique: Technique;
  /** Absent where the file does not say: as in the scenario. */
  bias?: Bias;
  fluxPerCm2S?: number;
}

const required = ["frequencyHz", "re", "im"] as const;
const optional = ["sigma", "timeS"] as const;
type Column = (typeof required)[number] | (typeof optional)[number];
const columnWords = "frequencyHz,re,im[,sigma][,timeS]";

const isColumn = (name: string): name is Column => [...required, ...optional].some((column) => column === name);
const isTechnique = (text: string): text is Technique => techniques.some((technique) => technique === text);

/** A decimal number, nothing else: no blanks inside, no units, not empty. */
const numberOf = (text: string): number =>
  /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/.test(text) ? Number(text) : Number.NaN;

/** Sizes of data other than 0, so that neither squares nor their ratios leave the range of numbers. */
const sizes = { min: 1e-50, max: 1e50 };

const inside = (value: number, { min, max }: { min: number; max: number }): boolean => value >= min && value <= max;

function biasOf(text: string): Bias | null {
  if (text === "shortCircuit" || text === "openCircuit") return text;
  const voltageV = numberOf(text);
  return inside(voltageV, quantities.voltageV) ? { voltageV } : null;
}

/**
 * Read a data file.
 * @throws ScenarioError with every fault found, each with its line.
 */
export function parseDataFile(text: string, name: string): DataFile {
  const faults: Fault[] = [];
  const fault = (line: number, message: string, allowed: string) =>
    faults.push({ path: `${name}, line ${line}`, message, allowed });
  const notes: { technique?: Technique; bias?: Bias; fluxPerCm2S?: number } = {};
  let columns: Column[] | null = null;
  const values: Record<Column, number[]> = { frequencyHz: [], re: [], im: [], sigma: [], timeS: [] };

  const note = (line: number, key: string, value: string) => {
    if (key === "technique") {
      if (isTechnique(value)) notes.technique = value;
      else fault(line, `technique is "${value}"`, techniques.join(", "));
    } else if (key === "bias") {
      const bias = biasOf(value);
      if (bias === null) fault(line, `bias is "${value}"`, "shortCircuit, openCircuit or volts within -1000 to 1000");
      else notes.bias = bias;
    } else if (key === "fluxPerCm2S") {
      const flux = numberOf(value);
      if (inside(flux, quantities.fluxPerCm2S)) notes.fluxPerCm2S = flux;
      else fault(line, `fluxPerCm2S is "${value}"`, permitted(quantities.fluxPerCm2S));
    }
  };

  const header = (line: number, names: string[]) => {
    columns = names.filter(isColumn);
    const unknown = names.filter((column) => !isColumn(column));
    const missing = required.filter((column) => !names.includes(column));
    if (unknown.length > 0) fault(line, `column "${unknown[0]}" is not known`, columnWords);
    else if (missing.length > 0) fault(line, `column ${missing[0]} is missing`, columnWords);
    else if (new Set(names).size < names.length) fault(line, "a column is there twice", columnWords);
  };

  const row = (line: number, cells: string[], names: Column[]) => {
    if (cells.length !== names.length) {
      fault(line, `has ${cells.length} values`, `${names.length} values: ${names.join(",")}`);
      return;
    }
    cells.forEach((cell, k) => {
      const column = names[k];
      const value = numberOf(cell);
      values[column].push(value);
      if (!Number.isFinite(value)) fault(line, `${column} is "${cell}"`, "a number");
      else if (column === "frequencyHz" && !inside(value, quantities.frequencyHz))
        fault(line, `frequencyHz is ${cell}`, permitted(quantities.frequencyHz));
      else if (value !== 0 && !inside(Math.abs(value), sizes))
        fault(line, `${column} is ${cell}`, `0, or a size of ${sizes.min} to ${sizes.max}`);
      else if (column === "sigma" && !(value > 0)) fault(line, `sigma is ${cell}`, "above 0");
    });
  };

  text
    .replace(/^\uFEFF/, "")
    .split(/\r\n|\n|\r/)
    .forEach((content, index) => {
      const trimmed = content.trim();
      const line = index + 1;
      if (trimmed === "") return;
      if (trimmed.startsWith("#")) {
        const colon = trimmed.indexOf(":");
        if (colon > 0) note(line, trimmed.slice(1, colon).trim(), trimmed.slice(colon + 1).trim());
        return;
      }
      const cells = trimmed.split(",").map((cell) => cell.trim());
      if (columns === null) header(line, cells);
      else row(line, cells, columns);
    });

  const { technique } = notes;
  if (technique === undefined && !faults.some(({ message }) => message.startsWith("technique")))
    faults.push({ path: name, message: "has no technique", allowed: `a line "# technique: ${techniques.join("|")}"` });
  if (columns === null) faults.push({ path: name, message: "has no header", allowed: columnWords });
  else if (values.frequencyHz.length === 0) faults.push({ path: name, message: "has no rows", allowed: "one or more" });
  if (faults.length > 0 || technique === undefined) throw new ScenarioError(faults);
  const { frequencyHz, re, im, sigma, timeS } = values;
  return {
    name,
    ...notes,
    technique,
    frequencyHz,
    re,
    im,
    ...(sigma.length > 0 && { sigma }),
    ...(timeS.length > 0 && { timeS }),
  };
}
