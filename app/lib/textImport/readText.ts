/** The reading of a text file from bytes to spectra. Never throws, whatever the bytes. */
import { decodeText } from "./decode";
import { decideFormat } from "./format";
import { readHeadings } from "./headings";
import { lineList, splitCells, splitLines } from "./lines";
import { type Notes, notesOfName, readNotes } from "./notes";
import type { Finding, ImportReading, PreviewLine } from "./reading";
import { assignRoles } from "./roles";
import type { Format } from "./rows";
import { type ImportSettings, importLimits } from "./settings";
import { describeTrace, noSpectrumSentence, readSpectra } from "./spectra";
import { type DataTable, readTable } from "./table";

const previewTextLines = 40;
const previewRows = 12;
const delimiterWords = { tab: "tab", semicolon: "semicolon", comma: "comma", spaces: "spaces" };
const decimalWords = { point: "point", comma: "comma", either: "point or comma" };
const encodingWords = {
  "utf-8": "UTF-8",
  "utf-16le": "UTF-16, low byte first",
  "utf-16be": "UTF-16, high byte first",
  "windows-1252": "windows-1252",
};

/** Lines of text that may say something: those in front of, between and behind the data. */
function textLines(lines: readonly string[], table: DataTable, headingLines: readonly (number | null)[]): number[] {
  const first = table.lineOfRow[0];
  const last = table.lineOfRow[table.lineOfRow.length - 1];
  const numbers: number[] = [];
  for (let line = Math.max(0, first - 500); line < first; line++) numbers.push(line);
  for (const section of table.sections.slice(1, 2)) numbers.push(...section.textBefore.slice(0, 50));
  for (let line = last + 1; line < Math.min(lines.length, last + 100); line++) numbers.push(line);
  return numbers.filter((line) => !headingLines.includes(line));
}

function previewOf(
  lines: readonly string[],
  table: DataTable,
  format: Format,
  headingLines: readonly (number | null)[],
): PreviewLine[] {
  const first = table.lineOfRow[0];
  const shown: PreviewLine[] = [];
  const cut = (text: string) => (text.length > 300 ? `${text.slice(0, 300)}…` : text);
  for (let line = Math.max(0, first - previewTextLines); line < first; line++) {
    if (headingLines.includes(line)) {
      const text = lines[line].replace(/^\s*#+\s*/, "");
      shown.push({ line: line + 1, kind: "heading", cells: splitCells(text, format.delimiter).map(cut) });
    } else if (lines[line].trim() !== "") shown.push({ line: line + 1, kind: "text", cells: [cut(lines[line])] });
  }
  for (let row = 0; row < Math.min(previewRows, table.lineOfRow.length); row++) {
    const line = table.lineOfRow[row];
    shown.push({ line: line + 1, kind: "data", cells: splitCells(lines[line], format.delimiter).map(cut) });
  }
  return shown;
}

/**
 * Reads a file.
 * @param bytes the file as it is
 * @param fileName only read for the name of a technique
 * @param settings what a person has corrected
 */
export function readMeasurementText(bytes: Uint8Array, fileName: string, settings: ImportSettings): ImportReading {
  const decoded = decodeText(bytes, settings.encoding);
  if (decoded.status === "refused") return decoded;
  const markup = /^\s*(?:([{[]\s*["{[])|<[!?A-Za-z])/.exec(decoded.text.slice(0, 1000));
  if (markup) {
    const kind = markup[1] ? "JSON" : "XML or HTML";
    return { status: "refused", message: `The file is ${kind}, not columns of numbers; export it as text or CSV.` };
  }
  const lines = splitLines(decoded.text);
  if (!lines) {
    return { status: "refused", message: `The file has more than ${importLimits.lines} lines; split it first.` };
  }
  const { format, delimiterReason, decimalReason } = decideFormat(lines, settings);
  const table = readTable(lines, format);
  if (!table) return { status: "refused", message: "The file holds no block of at least three rows of numbers." };

  const headings = readHeadings(lines, table, format);
  const headingLines = [headings.nameLine, headings.unitLine];
  const columns = assignRoles(table.columns, headings.columns, table.values, settings.columns);
  const notes: Notes = {
    ...notesOfName(fileName),
    ...readNotes(lines, textLines(lines, table, headingLines), format.decimalMark),
  };
  const headingNotes = readNotes(
    lines,
    headingLines.filter((line) => line !== null),
    format.decimalMark,
  );
  const firstLine = table.lineOfRow[0];
  const findings: Finding[] = [
    { key: "encoding", label: "Encoding", value: encodingWords[decoded.encoding], reason: decoded.reason },
    { key: "delimiter", label: "Separator", value: delimiterWords[format.delimiter], reason: delimiterReason },
    { key: "decimalMark", label: "Decimal sign", value: decimalWords[format.decimalMark], reason: decimalReason },
    {
      key: "header",
      label: "Header",
      value: firstLine === 0 ? "none" : firstLine === 1 ? "1 line" : `${firstLine} lines`,
      reason: firstLine === 0 ? "numbers from the first line on" : `the rows of numbers begin in line ${firstLine + 1}`,
    },
  ];
  const understood = readSpectra({
    lines,
    table,
    columns,
    format,
    notes: { ...notes, technique: notes.technique ?? headingNotes.technique },
    settings,
  });
  const warnings = [...understood.warnings];
  if (table.oddLines.length > 0) {
    warnings.push(`Passed over, because the count of numbers differs: ${lineList(table.oddLines)}.`);
  }
  const long = lines.findIndex((line) => line.length > importLimits.lineLength);
  if (long >= 0)
    warnings.push(`Line ${long + 1} is longer than ${importLimits.lineLength} characters and was passed over.`);
  const trace = understood.spectra.length === 0 ? describeTrace(table, columns, headings) : null;
  return {
    status: "read",
    findings: [...findings, ...understood.findings],
    questions: understood.questions,
    warnings,
    problem: understood.spectra.length > 0 ? null : (understood.problem ?? noSpectrumSentence(table, columns, trace)),
    needs: understood.needs,
    columns,
    preview: previewOf(lines, table, format, headingLines),
    lineCount: lines.length,
    rowCount: table.lineOfRow.length,
    spectra: understood.spectra,
    trace,
    sampleName: notes.sample?.value ?? null,
    resolved: { encoding: decoded.encoding, ...format, ...understood.resolved },
  };
}
