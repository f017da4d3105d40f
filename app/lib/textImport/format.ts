/** Delimiter and decimal mark, decided once per file by how many numbers stand in equal rows. */
import { type Format, findRuns, longestRun, patternOf, type Run } from "./rows";
import type { DecimalMark, Delimiter } from "./settings";

interface Candidate {
  format: Format;
  run: Run | null;
  weight: number;
}

export interface FormatDecision {
  format: Format;
  delimiterReason: string;
  decimalReason: string;
}

/** In order of preference where two explain the text equally well. */
const combinations: readonly [Delimiter, DecimalMark][] = [
  ["tab", "point"],
  ["tab", "comma"],
  ["semicolon", "point"],
  ["semicolon", "comma"],
  ["comma", "point"],
  ["spaces", "point"],
  ["spaces", "comma"],
  ["comma", "comma"],
  ["tab", "either"],
  ["semicolon", "either"],
  ["spaces", "either"],
];

const names: Record<Delimiter, string> = { tab: "a tab", semicolon: "a semicolon", comma: "a comma", spaces: "spaces" };

/** Beginning, middle and end of a long text, so that a long preamble does not decide. */
function sample(lines: readonly string[]): readonly string[] {
  if (lines.length <= 4000) return lines;
  const middle = Math.floor(lines.length / 2);
  return [...lines.slice(0, 2000), ...lines.slice(middle, middle + 1000), ...lines.slice(-1000)];
}

function measure(lines: readonly string[], format: Format): Candidate {
  const patterns = lines.map((line) => patternOf(line, format));
  const { run, weight } = longestRun(findRuns(patterns), patterns);
  return { format, run, weight };
}

function countMarks(lines: readonly string[], run: Run) {
  let commas = 0;
  let points = 0;
  for (const line of lines.slice(run.start, run.end)) {
    if (line.includes(",")) commas++;
    if (line.includes(".")) points++;
  }
  return { commas, points };
}

function decimalReason(lines: readonly string[], best: Candidate, chosen: boolean): string {
  if (chosen) return "chosen by you";
  if (!best.run) return "no numbers found";
  const { commas, points } = countMarks(lines, best.run);
  const rows = best.run.end - best.run.start;
  if (best.format.decimalMark === "either") {
    return `marks are mixed: ${commas} rows have commas, ${points} have points; each was read as a decimal mark`;
  }
  if (best.format.decimalMark === "comma") {
    return points === 0
      ? `commas in ${commas} of ${rows} rows, points in none`
      : "most numbers fit with a comma as the mark";
  }
  if (points === 0) return "no number has a decimal mark";
  return best.format.delimiter === "comma" || commas === 0
    ? `points in ${points} of ${rows} rows`
    : "most numbers fit with a point as the mark";
}

/** Picks the format; what a person chose stands and only the rest is decided. */
export function decideFormat(
  lines: readonly string[],
  chosen: { delimiter?: Delimiter; decimalMark?: DecimalMark },
): FormatDecision {
  const tried = sample(lines);
  const hint = /^\s*sep=(.)\s*$/i.exec(lines[0] ?? "")?.[1];
  const hinted: Delimiter | undefined =
    hint === ";" ? "semicolon" : hint === "," ? "comma" : hint === "\t" ? "tab" : undefined;
  const delimiter = chosen.delimiter ?? hinted;
  let open: readonly [Delimiter, DecimalMark][] = combinations.filter(
    ([column, mark]) => (!delimiter || column === delimiter) && (!chosen.decimalMark || mark === chosen.decimalMark),
  );
  if (open.length === 0) open = [[delimiter ?? "tab", chosen.decimalMark ?? "point"]];
  const candidates = open.map(([column, decimalMark]) => measure(tried, { delimiter: column, decimalMark }));
  const best = candidates.reduce((first, second) => (second.weight > first.weight ? second : first));
  const delimiterReason = chosen.delimiter
    ? "chosen by you"
    : hinted
      ? "the first line says so"
      : best.run
        ? whyDelimiter(best, candidates)
        : "no numbers found";
  return { format: best.format, delimiterReason, decimalReason: decimalReason(tried, best, !!chosen.decimalMark) };
}

function whyDelimiter(best: Candidate, candidates: readonly Candidate[]): string {
  const run = best.run as Run;
  const rows = run.end - run.start;
  const perRow = ({ weight, run: own }: Candidate) => (own ? Math.round(weight / (own.end - own.start)) : 0);
  const count = perRow(best);
  const same = `${count === 1 ? "one number" : `${count} numbers`} in each of ${rows} neighbouring lines`;
  const rival = candidates
    .filter((candidate) => candidate.format.delimiter !== best.format.delimiter)
    .reduce<Candidate | null>((first, second) => (first && first.weight >= second.weight ? first : second), null);
  if (!rival?.run || run.count === 1) return same;
  return rival.weight === best.weight ? same : `${same}; ${names[rival.format.delimiter]} would give ${perRow(rival)}`;
}
