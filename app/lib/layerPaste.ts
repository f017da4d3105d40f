/**
 * A table of layers pasted from a spreadsheet: tab-separated, one row a layer, a head row optional. A table with one
 * row a number and one column a layer is turned over. Heads may be the document's field names, the words or symbols of
 * the trade, with a unit in brackets or behind a slash; without heads the columns are those of `layerFields` behind the
 * name.
 */
import { type LayerDocument, quantities } from "@demilune/solver";
import { readQuantity } from "./quantityText";
import { plainText } from "./richText";
import { withNumber } from "./stackEdits";
import { type LayerField, layerFields, numberAt, quantityOf } from "./stackFields";
import { normaliseText, parseUnit } from "./units";

interface PasteColumn {
  /** The head as pasted, or the field's words where there was none. */
  head: string;
  /** What the column holds; null where it is not known and left out. */
  holds: LayerField | "name" | null;
  /** Unit in the head, put behind values that bring none. */
  unit: string;
}

interface PasteCell {
  text: string;
  /** What is wrong with it, or how it was read where that is not plain. */
  error: string | null;
  note: string | null;
}

interface PasteRow {
  cells: PasteCell[];
  /** Values that a layer needs and the row does not have. */
  missing: string | null;
  /** The layer the row gives; null while anything is wrong with it. */
  layer: LayerDocument | null;
}

export interface PasteReading {
  columns: PasteColumn[];
  rows: PasteRow[];
  /** What was made of the table as a whole, one sentence each. */
  notes: string[];
}

const bareSymbol = (text: string): string => normaliseText(text).replace(/[\^_{}\s.,:-]/g, "");
const bareHead = (text: string): string => bareSymbol(text).toLowerCase();

/** Every head a field answers to. */
const heads = new Map<string, LayerField | "name">(
  ["name", "layer", "material"].map((word): [string, "name"] => [word, "name"]),
);
/** Symbols keep their case: B and µ_n are numbers, b is none. */
const symbols = new Map<string, LayerField>();
for (const field of layerFields) {
  const { label, symbol } = quantityOf(field);
  const spoken = plainText(field.label);
  for (const head of [field.path.join("."), field.path[field.path.length - 1], label, spoken, spoken.split(" ")[0]])
    if (bareHead(head).length > 2 && !heads.has(bareHead(head))) heads.set(bareHead(head), field);
  if (!symbols.has(bareSymbol(symbol))) symbols.set(bareSymbol(symbol), field);
}

const meantBy = (head: string): LayerField | "name" | null =>
  heads.get(bareHead(head)) ?? symbols.get(bareSymbol(head)) ?? null;

/** A head and the unit in it: "thickness (nm)", "t / nm", "µ_n [cm²/Vs]". */
function readHead(text: string): PasteColumn {
  const bracketed = /^(.*?)\s*[([]([^)\]]*)[)\]]\s*$/.exec(text);
  const slashed = /^(.*?)\s+\/\s+(.+)$/.exec(text);
  const [name, unit] = bracketed ? [bracketed[1], bracketed[2]] : slashed ? [slashed[1], slashed[2]] : [text, ""];
  const holds = meantBy(name) ?? meantBy(text);
  return { head: text.trim(), holds, unit: parseUnit(normaliseText(unit)) ? unit : "" };
}

const known = (texts: readonly string[]): number => texts.filter((text) => readHead(text).holds !== null).length;
const isNumber = (text: string): boolean => /^[+-]?[\d.,]*\d/.test(normaliseText(text));

const transposed = (table: string[][]): string[][] =>
  Array.from({ length: Math.max(...table.map((row) => row.length)) }, (_, column) =>
    table.map((row) => row[column] ?? ""),
  );

/** Columns of a table without heads: the name where the first column holds words, then every number in order. */
function columnsWithoutHeads(table: string[][]): PasteColumn[] {
  const named = table.some(([first = ""]) => first.trim() !== "" && !isNumber(first));
  const order: (LayerField | "name")[] = named ? ["name", ...layerFields] : [...layerFields];
  const count = Math.max(...table.map((row) => row.length));
  return Array.from({ length: count }, (_, index) => {
    const holds = order[index] ?? null;
    const head = holds === null ? `column ${index + 1}` : holds === "name" ? "name" : quantityOf(holds).label;
    return { head, holds, unit: "" };
  });
}

function readCell(text: string, { holds, unit }: PasteColumn): PasteCell & { value?: number | null | undefined } {
  if (holds === null || holds === "name" || text.trim() === "") return { text, error: null, note: null };
  const bare = /[^\d.,eE+\-·^x ]/.test(normaliseText(text)) ? text : `${text} ${unit}`;
  const reading = readQuantity(bare, quantityOf(holds), holds.emptyMeans);
  return reading.ok
    ? { text, error: null, note: reading.note, value: reading.value }
    : { text, error: reading.error, note: null };
}

const neededFields = layerFields.filter((field) => field.required);

function readRow(
  texts: readonly string[],
  columns: readonly PasteColumn[],
  present: readonly LayerDocument[],
): PasteRow {
  const cells = columns.map((column, index) => readCell(texts[index] ?? "", column));
  const nameColumn = columns.findIndex(({ holds }) => holds === "name");
  const name = nameColumn < 0 ? "" : (texts[nameColumn] ?? "").trim();
  const base = name === "" ? undefined : present.find((layer) => layer.name === name);
  let layer = { ...(base ?? {}), ...(name === "" ? {} : { name }) } as LayerDocument;
  cells.forEach(({ value, text, error }, index) => {
    const { holds } = columns[index];
    if (holds !== null && holds !== "name" && error === null && text.trim() !== "")
      layer = withNumber(layer, holds, value ?? undefined);
  });
  if (layer.traps && !layer.traps.kind) layer = { ...layer, traps: { ...layer.traps, kind: "acceptor" } };
  const given = (field: LayerField) =>
    numberAt(layer, field) !== undefined || columns.some(({ holds }, index) => holds === field && cells[index].error);
  const missing = neededFields.filter((field) => !given(field));
  const wrong = missing.length > 0 || cells.some(({ error }) => error !== null);
  return {
    cells: cells.map(({ text, error, note }) => ({ text, error, note })),
    missing: missing.length === 0 ? null : missing.map((field) => quantities[field.quantity].label).join(", "),
    layer: wrong ? null : layer,
  };
}

/**
 * Read a pasted table.
 * @param present layers of the stack: a row named like one of them keeps the values the table does not give
 */
export function readLayerTable(text: string, present: readonly LayerDocument[]): PasteReading {
  let table = text
    .replace(/\r\n?/g, "\n")
    .split("\n")
    .filter((line) => line.trim() !== "")
    .map((line) => line.split("\t").map((cell) => cell.trim()));
  if (table.length === 0) return { columns: [], rows: [], notes: [] };
  const notes: string[] = [];
  const firstColumn = table.map(([first]) => first);
  if (known(firstColumn) > known(table[0]) && known(firstColumn) > 1) {
    table = transposed(table);
    notes.push("The table has one row a number; it was turned over.");
    if (known([table[0][0]]) === 0) table[0][0] = "name";
  }
  const headed = known(table[0]) > 0 && !table[0].every(isNumber);
  const columns = headed ? table[0].map(readHead) : columnsWithoutHeads(table);
  if (!headed) notes.push("No head row was found; the columns are read in the order of the table of layers.");
  const unknown = columns.filter(({ holds }) => holds === null).map(({ head }) => `“${head}”`);
  if (unknown.length > 0) notes.push(`Left out, not known here: ${unknown.join(", ")}.`);
  const rows = (headed ? table.slice(1) : table).map((row) => readRow(row, columns, present));
  return { columns, rows, notes };
}
