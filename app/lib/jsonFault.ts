/** Where a text stops being JSON (RFC 8259): the engine's own message names no place in every case. */

const token =
  /[ \t\r\n]*("(?:[^"\\\n\r\t]|\\(?:["\\/bfnrt]|u[\da-fA-F]{4}))*"|-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?|true|false|null|[[\]{},:])/y;

type Expected = "value" | "valueOrEnd" | "key" | "keyOrEnd" | "colon" | "commaOrEnd" | "nothing";

/** What may come after a token, or null where the token may not stand there. `open` holds the brackets around it. */
function after(sign: string, expected: Expected, open: string[]): Expected | null {
  const done = (): Expected => (open.length === 0 ? "nothing" : "commaOrEnd");
  const isValue = expected === "value" || expected === "valueOrEnd";
  const isKey = expected === "key" || expected === "keyOrEnd";
  const inside = open.at(-1);
  if (sign === "{" || sign === "[") {
    if (!isValue) return null;
    open.push(sign);
    return sign === "{" ? "keyOrEnd" : "valueOrEnd";
  }
  if (sign === "}" || sign === "]") {
    const closes = inside === (sign === "}" ? "{" : "[");
    if (!closes || !["commaOrEnd", sign === "}" ? "keyOrEnd" : "valueOrEnd"].includes(expected)) return null;
    open.pop();
    return done();
  }
  if (sign === ",") return expected === "commaOrEnd" ? (inside === "{" ? "key" : "value") : null;
  if (sign === ":") return expected === "colon" ? "value" : null;
  if (isKey) return sign.startsWith('"') ? "colon" : null;
  return isValue ? done() : null;
}

/** Line and column, from 1, of the first sign that cannot stand where it does; of the end where the text breaks off. */
export function jsonFaultPlace(text: string): { line: number; column: number } {
  const open: string[] = [];
  let expected: Expected = "value";
  let end = 0;
  for (;;) {
    token.lastIndex = end;
    const match = token.exec(text);
    const next: Expected | null = match && after(match[1], expected, open);
    if (!match || next === null) break;
    expected = next;
    end = token.lastIndex;
  }
  const rest = text.slice(end);
  const lines = text.slice(0, end + (rest.length - rest.trimStart().length)).split("\n");
  return { line: lines.length, column: lines[lines.length - 1].length + 1 };
}
