/**
 * Which lines of a text are rows of numbers. A line is described by its pattern, one letter a cell:
 * 1 a number (or a value the file marks as missing), 0 empty, x text. Lines of one pattern share the description.
 */
import { splitCells } from "./lines";
import { readNumber } from "./numbers";
import type { DecimalMark, Delimiter } from "./settings";

export interface Format {
  delimiter: Delimiter;
  decimalMark: DecimalMark;
}

/** A stretch of neighbouring rows whose first group of numbers begins in the same column and has the same length. */
export interface Run {
  start: number;
  /** One past the last line. */
  end: number;
  firstColumn: number;
  count: number;
}

const widest = 4000;

export function patternOf(line: string, format: Format): string {
  const cells = splitCells(line, format.delimiter);
  const width = Math.min(cells.length, widest);
  let pattern = "";
  for (let index = 0; index < width; index++) {
    pattern += cells[index] === "" ? "0" : readNumber(cells[index], format.decimalMark) === undefined ? "x" : "1";
  }
  return pattern;
}

function group(pattern: string): { firstColumn: number; count: number } | null {
  const firstColumn = pattern.indexOf("1");
  if (firstColumn < 0) return null;
  let end = firstColumn;
  while (pattern[end] === "1") end++;
  return { firstColumn, count: end - firstColumn };
}

/** All stretches of rows in the order of the file; `patterns` has one entry a line. */
export function findRuns(patterns: readonly string[]): Run[] {
  const groups = new Map<string, ReturnType<typeof group>>();
  const runs: Run[] = [];
  let open: Run | null = null;
  for (let line = 0; line < patterns.length; line++) {
    const pattern = patterns[line];
    let found = groups.get(pattern);
    if (found === undefined) {
      found = group(pattern);
      groups.set(pattern, found);
    }
    if (found && open && found.firstColumn === open.firstColumn && found.count === open.count) {
      open.end = line + 1;
      continue;
    }
    open = found && { start: line, end: line + 1, ...found };
    if (open) runs.push(open);
  }
  return runs;
}

/** Weight of a row: its numbers, wherever they stand, less half of its texts (cells that a wrong delimiter tore). */
function weight(pattern: string): number {
  let sum = 0;
  for (let index = 0; index < pattern.length; index++) {
    if (pattern[index] === "1") sum += 1;
    else if (pattern[index] === "x") sum -= 0.5;
  }
  return sum;
}

/** The run with the most numbers, the earlier one of two equals, and its weight. */
export function longestRun(runs: readonly Run[], patterns: readonly string[]): { run: Run | null; weight: number } {
  const weights = new Map<string, number>();
  let best: Run | null = null;
  let heaviest = 0;
  for (const run of runs) {
    let sum = 0;
    for (let line = run.start; line < run.end; line++) {
      const pattern = patterns[line];
      let own = weights.get(pattern);
      if (own === undefined) {
        own = weight(pattern);
        weights.set(pattern, own);
      }
      sum += own;
    }
    if (best === null || sum > heaviest) {
      best = run;
      heaviest = sum;
    }
  }
  return { run: best, weight: heaviest };
}
