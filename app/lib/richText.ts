/**
 * The small notation in which symbols and units are written: `*W*` italic, `^{…}` and Unicode superscripts raised,
 * `_{…}` lowered. Web fonts lack most superscript characters, so they are set as raised ordinary digits.
 */
export interface TextRun {
  text: string;
  /** Where the run begins in the notation. */
  start: number;
  style: "plain" | "italic" | "superscript" | "subscript";
}

const ordinary: Record<string, string> = {
  "⁰": "0",
  "¹": "1",
  "²": "2",
  "³": "3",
  "⁴": "4",
  "⁵": "5",
  "⁶": "6",
  "⁷": "7",
  "⁸": "8",
  "⁹": "9",
  "⁻": "−",
};
const pattern = /\*([^*]+)\*|\^\{([^}]*)\}|_\{([^}]*)\}|([⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+)/g;

/** Split a text in the notation above into runs of one style. */
export function textRuns(notation: string): TextRun[] {
  const runs: TextRun[] = [];
  let end = 0;
  for (const match of notation.matchAll(pattern)) {
    if (match.index > end) runs.push({ text: notation.slice(end, match.index), start: end, style: "plain" });
    const [whole, italic, raised, lowered, digits] = match;
    const start = match.index;
    if (italic !== undefined) runs.push({ text: italic, start, style: "italic" });
    else if (lowered !== undefined) runs.push({ text: lowered, start, style: "subscript" });
    else
      runs.push({ text: raised ?? [...digits].map((digit) => ordinary[digit]).join(""), start, style: "superscript" });
    end = match.index + whole.length;
  }
  if (end < notation.length) runs.push({ text: notation.slice(end), start: end, style: "plain" });
  return runs;
}

/** The same text without marks of style, for accessible names and file headers. */
export const plainText = (notation: string): string =>
  notation.replace(/\*([^*]+)\*/g, "$1").replace(/[\^_]\{([^}]*)\}/g, "$1");

/** A symbol of the quantity table ("µ_n": italic letter, upright subscript) in the notation. */
export function symbolNotation(symbol: string): string {
  return symbol
    .split(/(\s*[−/]\s*)/)
    .map((part, position) => {
      if (position % 2 === 1) return part;
      const [letter, subscript] = part.split("_");
      const prefix = letter.startsWith("δ") ? "δ" : "";
      return `${prefix}*${letter.slice(prefix.length)}*${subscript ? `_{${subscript}}` : ""}`;
    })
    .join("");
}
