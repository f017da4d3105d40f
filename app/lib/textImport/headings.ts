/** Names and units of columns, from the lines of text in front of the data. */
import { splitCells } from "./lines";
import { readNumber } from "./numbers";
import type { Format } from "./rows";
import type { DataTable } from "./table";
import { parseUnit } from "./units";

export interface Heading {
  name: string;
  unit: string | null;
}

export interface Headings {
  /** In the order of the table's columns; an empty name where there is none. */
  columns: Heading[];
  /** Line numbers used, from 0. */
  nameLine: number | null;
  unitLine: number | null;
  /** First sample and distance of samples, where the file gives these instead of a column of time. */
  start: number | null;
  increment: number | null;
}

const comment = /^\s*(?:#+|%+|\/\/|!)\s*/;
const linesLooked = 4;

/** Cells of a heading; headings of columns set with spaces are parted by wider gaps than words. */
function headingCells(line: string, format: Format, columns: number): string[] {
  const text = line.replace(comment, "");
  if (format.delimiter !== "spaces") return splitCells(text, format.delimiter);
  const wide = text.trim().split(/\s{2,}|\t+/);
  return wide.length >= columns ? wide : splitCells(text, "spaces");
}

/** Name and unit from "name (unit)", "name [unit]", "name / unit", "name in unit", "name_unit". */
function splitHeading(text: string): Heading {
  const trimmed = text.trim();
  if (trimmed.length > 200) return { name: trimmed.slice(0, 200), unit: null };
  for (const bracket of trimmed.matchAll(/[([]([^()[\]]*(?:\([^()]*\))?[^()[\]]*)[)\]]/g)) {
    const name = `${trimmed.slice(0, bracket.index).trim()}${trimmed.slice(bracket.index + bracket[0].length)}`.trim();
    if (bracket.index > 0 && parseUnit(bracket[1])) return { name, unit: bracket[1].trim() };
  }
  for (let slash = trimmed.indexOf("/"); slash > 0; slash = trimmed.indexOf("/", slash + 1)) {
    const unit = trimmed.slice(slash + 1).replace(/^\s*\((.*)\)\s*$/, "$1");
    if (parseUnit(unit)) return { name: trimmed.slice(0, slash).trim(), unit: unit.trim() };
  }
  const worded = /^(.+?)(?:\s+in\s+|\s*,\s*)(\S.*)$/i.exec(trimmed);
  if (worded && parseUnit(worded[2])) return { name: worded[1], unit: worded[2].trim() };
  const last = /^(.+?)[\s_.]+([A-Za-z°Ωµ%][^\s_]*)$/.exec(trimmed);
  if (last && last[2].length > 1 && parseUnit(last[2])) return { name: last[1], unit: last[2] };
  const joined = /^(frequency|freq|f)(Hz|KHz|kHz|MHz)$/.exec(trimmed);
  if (joined) return { name: joined[1], unit: joined[2] };
  return { name: trimmed, unit: null };
}

const bare = (text: string) => text.replace(/^[([]\s*|\s*[)\]]$/g, "").trim();

/** Whether a line is a row of units: most of its cells over the data columns are units, and none is a number. */
function isUnitLine(cells: readonly string[], columns: readonly number[], format: Format): boolean {
  let units = 0;
  let filled = 0;
  for (const column of columns) {
    const cell = cells[column] ?? "";
    if (cell === "") continue;
    if (readNumber(cell, format.decimalMark) !== undefined) return false;
    filled++;
    if (parseUnit(bare(cell))) units++;
  }
  return units > 0 && units >= filled / 2;
}

function isNameLine(cells: readonly string[], columns: readonly number[], format: Format): boolean {
  const texts = columns.filter((column) => {
    const cell = cells[column] ?? "";
    return cell !== "" && readNumber(cell, format.decimalMark) === undefined;
  });
  if (texts.length > columns.length / 2) return true;
  // A first name followed by numbers that name the others: a value for each column.
  return texts[0] === columns[0] && columns.every((column) => (cells[column] ?? "") !== "");
}

/** Reads the headings directly above the block. */
export function readHeadings(lines: readonly string[], table: DataTable, format: Format): Headings {
  const { columns } = table;
  const none: Headings = {
    columns: columns.map(() => ({ name: "", unit: null })),
    nameLine: null,
    unitLine: null,
    start: null,
    increment: null,
  };
  const above: { line: number; cells: string[] }[] = [];
  for (let line = table.lineOfRow[0] - 1; line >= 0 && above.length < linesLooked; line--) {
    if (lines[line].replace(comment, "").trim() === "" || lines[line].length > 20_000) continue;
    above.push({ line, cells: headingCells(lines[line], format, columns.length) });
  }
  let unitRow = above[0] && isUnitLine(above[0].cells, columns, format) ? above[0] : null;
  let nameRow = above.slice(unitRow ? 1 : 0).find(({ cells }) => isNameLine(cells, columns, format)) ?? null;
  // One row of names that are units by accident ("s", "A") is still the row of names.
  if (unitRow && !nameRow) {
    nameRow = unitRow;
    unitRow = null;
  }
  if (!nameRow) return none;
  const named = columns.map((column): Heading => {
    const heading = splitHeading(nameRow.cells[column] ?? "");
    const below = unitRow ? bare(unitRow.cells[column] ?? "") : "";
    return parseUnit(below)
      ? { name: heading.unit ? heading.name : (nameRow.cells[column] ?? ""), unit: below }
      : heading;
  });
  return {
    ...none,
    columns: named,
    nameLine: nameRow.line,
    unitLine: unitRow?.line ?? null,
    ...sampling(nameRow.cells, unitRow?.cells ?? [], format),
  };
}

/** "Start" and "Increment" as further names with their numbers in the row below. */
function sampling(names: readonly string[], below: readonly string[], format: Format) {
  const numberUnder = (pattern: RegExp) => {
    const index = names.findIndex((name) => pattern.test(name));
    const value = index < 0 ? undefined : readNumber(below[index] ?? "", format.decimalMark);
    return value !== undefined && Number.isFinite(value) ? value : null;
  };
  return { start: numberUnder(/^start/i), increment: numberUnder(/^(increment|interval|step)/i) };
}
