/** The data block of a file: its columns as numbers, its rows with their line numbers, and where it is interrupted. */
import { splitCells } from "./lines";
import { readNumber } from "./numbers";
import { type Format, findRuns, longestRun, patternOf, type Run } from "./rows";

/** A stretch of data rows; `textBefore` are the lines of text between it and the stretch before. */
interface Section {
  firstRow: number;
  textBefore: number[];
}

export interface DataTable {
  /** Column numbers of the file that hold numbers, ascending. */
  columns: number[];
  /** One Float64Array a column, in the order of `columns`; NaN where a value is missing. */
  values: Float64Array[];
  /** Line number of the file, from 0, of each row. */
  lineOfRow: Int32Array;
  sections: Section[];
  /** Lines between the first and the last row that hold numbers but were passed over. */
  oddLines: number[];
}

/** Columns that are numbers in most rows of the run and text in almost none: blocks may stand side by side. */
function numericColumns(patterns: readonly string[], run: Run): number[] {
  const counts = new Map<string, number>();
  for (let line = run.start; line < run.end; line++) counts.set(patterns[line], (counts.get(patterns[line]) ?? 0) + 1);
  const numbers: number[] = [];
  const texts: number[] = [];
  for (const [pattern, count] of counts) {
    for (let column = 0; column < pattern.length; column++) {
      if (pattern[column] === "1") numbers[column] = (numbers[column] ?? 0) + count;
      if (pattern[column] === "x") texts[column] = (texts[column] ?? 0) + count;
    }
  }
  const rows = run.end - run.start;
  const found: number[] = [];
  for (let column = 0; column < numbers.length; column++) {
    if ((numbers[column] ?? 0) >= rows / 2 && (texts[column] ?? 0) <= rows / 10) found.push(column);
  }
  return found;
}

/** Whether a line continues the block with some values left empty. */
function continues(pattern: string, columns: ReadonlySet<number>): boolean {
  let numbers = 0;
  for (let index = 0; index < pattern.length; index++) {
    if (pattern[index] === "0") continue;
    if (pattern[index] === "x" || !columns.has(index)) return false;
    numbers++;
  }
  return numbers > 0 && numbers >= columns.size / 2;
}

const leastRows = 3;

interface Part {
  start: number;
  end: number;
}

/** Stretches that belong to the block: runs of its shape, and rows with empty cells. */
function partsOf(patterns: readonly string[], runs: readonly Run[], best: Run, columns: readonly number[]): Part[] {
  const set = new Set(columns);
  const answers = new Map<string, boolean>();
  const mayContinue = (pattern: string) => {
    let answer = answers.get(pattern);
    if (answer === undefined) {
      answer = continues(pattern, set);
      answers.set(pattern, answer);
    }
    return answer;
  };
  const parts: Part[] = [];
  const add = (start: number, end: number) => {
    const last = parts[parts.length - 1];
    if (last && last.end === start) last.end = end;
    else parts.push({ start, end });
  };
  for (const run of runs) {
    if (run.firstColumn === best.firstColumn && run.count === best.count) add(run.start, run.end);
    else for (let line = run.start; line < run.end; line++) if (mayContinue(patterns[line])) add(line, line + 1);
  }
  // A row or two far away from the rest is a number in some text, not data.
  return parts.filter((part, index) => {
    if (part.end - part.start >= 3 || part.start === best.start) return true;
    const before = parts[index - 1];
    const after = parts[index + 1];
    return (before && part.start - before.end <= 2) || (after && after.start - part.end <= 2);
  });
}

/** Finds the data block; null where fewer than three rows hold numbers. */
export function readTable(lines: readonly string[], format: Format): DataTable | null {
  const patterns = lines.map((line) => patternOf(line, format));
  const runs = findRuns(patterns);
  const { run: best } = longestRun(runs, patterns);
  if (!best) return null;
  const columns = numericColumns(patterns, best);
  const parts = partsOf(patterns, runs, best, columns);
  const rows = parts.reduce((sum, part) => sum + part.end - part.start, 0);
  if (rows < leastRows || columns.length === 0) return null;
  const values = columns.map(() => new Float64Array(rows).fill(Number.NaN));
  const lineOfRow = new Int32Array(rows);
  const sections: Section[] = [];
  const oddLines: number[] = [];
  let row = 0;
  let previousEnd = parts[0].start;
  for (const part of parts) {
    const textBefore: number[] = [];
    for (let line = previousEnd; line < part.start; line++) {
      if (patterns[line].includes("1")) oddLines.push(line);
      if (patterns[line].includes("x") || lines[line].trim() === "") textBefore.push(line);
    }
    sections.push({ firstRow: row, textBefore });
    for (let line = part.start; line < part.end; line++, row++) {
      lineOfRow[row] = line;
      const cells = splitCells(lines[line], format.delimiter);
      for (let index = 0; index < columns.length; index++) {
        const cell = cells[columns[index]];
        if (cell) values[index][row] = readNumber(cell, format.decimalMark) ?? Number.NaN;
      }
    }
    previousEnd = part.end;
  }
  return { columns, values, lineOfRow, sections, oddLines };
}
