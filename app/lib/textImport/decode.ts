/** Bytes of a file to text, with the reason for the encoding; or one sentence that says why it is no text. */
import { type Encoding, importLimits } from "./settings";

export type Decoded =
  | { status: "text"; text: string; encoding: Encoding; reason: string }
  | { status: "refused"; message: string };

const refused = (message: string): Decoded => ({ status: "refused", message });

const signatures: readonly [readonly number[], string][] = [
  [[0x50, 0x4b, 0x03, 0x04], "a ZIP archive or a spreadsheet workbook; save the sheet as CSV or text"],
  [[0xd0, 0xcf, 0x11, 0xe0], "a spreadsheet workbook; save the sheet as CSV or text"],
  [[0x1f, 0x8b], "compressed (gzip); unpack it first"],
  [[0x25, 0x50, 0x44, 0x46], "a PDF; export the numbers as text"],
  [[0x89, 0x50, 0x4e, 0x47], "a PNG picture; export the numbers as text"],
];

/** Bytes that no text export writes: control characters other than tab, line ends, form feed and an end-of-file mark. */
function isControl(byte: number): boolean {
  return (byte < 0x20 && byte !== 9 && byte !== 10 && byte !== 12 && byte !== 13 && byte !== 26) || byte === 0x7f;
}

function decode(bytes: Uint8Array, encoding: Encoding): string {
  return new TextDecoder(encoding).decode(bytes);
}

/**
 * Decodes a file: byte-order mark first, then strict UTF-8, else windows-1252, which takes every byte.
 * Never throws.
 */
export function decodeText(bytes: Uint8Array, chosen?: Encoding): Decoded {
  if (bytes.length === 0) return refused("The file is empty.");
  if (bytes.length > importLimits.bytes) {
    return refused(
      `The file has ${(bytes.length / 1e6).toFixed(1)} MB; allowed: up to ${importLimits.bytes / 1e6} MB.`,
    );
  }
  const known = signatures.find(([start]) => start.every((byte, index) => bytes[index] === byte));
  if (known) return refused(`The file is ${known[1]}.`);
  if (chosen) {
    const text = decode(bytes, chosen);
    return text.includes("\0")
      ? refused("Read in this encoding the file holds NUL characters, so it is no text in it.")
      : { status: "text", text, encoding: chosen, reason: "chosen by you" };
  }
  const mark =
    bytes[0] === 0xff && bytes[1] === 0xfe ? "utf-16le" : bytes[0] === 0xfe && bytes[1] === 0xff ? "utf-16be" : null;
  if (mark) {
    const text = decode(bytes, mark);
    if (text.includes("\0")) return refused("The file begins like UTF-16 text but holds NUL characters; it is binary.");
    return { status: "text", text, encoding: mark, reason: "byte-order mark at the start" };
  }
  let controls = 0;
  for (let index = 0; index < bytes.length; index++) {
    if (bytes[index] === 0) {
      return refused(`The file is binary (a NUL byte at position ${index + 1}); export it as text or CSV first.`);
    }
    if (isControl(bytes[index])) controls++;
  }
  if (controls > bytes.length / 100) {
    return refused("The file is binary (too many control characters for a text); export it as text or CSV first.");
  }
  try {
    const text = new TextDecoder("utf-8", { fatal: true }).decode(bytes);
    const marked = bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf;
    const plain = !marked && text.length === bytes.length;
    const reason = marked ? "byte-order mark at the start" : plain ? "only plain characters" : "valid throughout";
    return { status: "text", text, encoding: "utf-8", reason };
  } catch {
    return { status: "text", text: decode(bytes, "windows-1252"), encoding: "windows-1252", reason: "not valid UTF-8" };
  }
}
