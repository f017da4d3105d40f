/** Text to lines and lines to cells, whatever the line ends, delimiters and quotes. */
import { type Delimiter, importLimits } from "./settings";

const lineFeed = 10;
const carriageReturn = 13;

/**
 * Splits at LF, CR LF, CR CR LF (and more) and lone CR. One pass: the time grows with the length only.
 * Returns null when there are more lines than allowed.
 */
export function splitLines(text: string): string[] | null {
  const lines: string[] = [];
  let start = 0;
  let index = 0;
  while (index < text.length) {
    const code = text.charCodeAt(index);
    if (code !== lineFeed && code !== carriageReturn) {
      index++;
      continue;
    }
    lines.push(text.slice(start, index));
    let end = index;
    while (text.charCodeAt(end) === carriageReturn) end++;
    if (text.charCodeAt(end) === lineFeed) end++;
    // Returns in front of a line feed are one line end together; without it each is one of its own.
    else for (let more = index + 1; more < end && lines.length <= importLimits.lines; more++) lines.push("");
    index = end;
    start = end;
    if (lines.length > importLimits.lines) return null;
  }
  if (start < text.length) lines.push(text.slice(start));
  return lines;
}

const characters: Record<Exclude<Delimiter, "spaces">, string> = { tab: "\t", semicolon: ";", comma: "," };

function splitQuoted(line: string, delimiter: string): string[] {
  const cells: string[] = [];
  let cell = "";
  let quoted = false;
  for (const character of line) {
    if (character === '"') quoted = !quoted;
    else if (character === delimiter && !quoted) {
      cells.push(cell.trim());
      cell = "";
    } else cell += character;
  }
  cells.push(cell.trim());
  return cells;
}

/** Cells of one line, trimmed, without quotes; a delimiter at the very end opens no further cell. */
export function splitCells(line: string, delimiter: Delimiter): string[] {
  if (line.length > importLimits.lineLength) return [];
  if (delimiter === "spaces") {
    const trimmed = line.trim();
    return trimmed === "" ? [] : trimmed.split(/\s+/);
  }
  const character = characters[delimiter];
  const cells = line.includes('"') ? splitQuoted(line, character) : line.split(character);
  for (let index = 0; index < cells.length; index++) cells[index] = cells[index].trim();
  while (cells.length > 0 && cells[cells.length - 1] === "") cells.pop();
  return cells;
}

/** "lines 3, 7 and 9", shortened when there are many. */
export function lineList(lines: readonly number[]): string {
  const shown = lines.slice(0, 5).map((line) => line + 1);
  const more = lines.length - shown.length;
  const text = more > 0 ? `${shown.join(", ")} and ${more} more` : shown.join(", ").replace(/, (\d+)$/, " and $1");
  return `${lines.length === 1 ? "line" : "lines"} ${text}`;
}
