/** Files that come with a form. */
import { data } from "react-router";
import { importLimits } from "~/lib/textImport/settings";
import { consume } from "~/models/rateLimits.server";
import { limits } from "./limits.server";

/** Counts one upload of this person. @throws 429 where it is one too many. */
export async function countUpload(userId: string): Promise<void> {
  if (await consume(`upload:${userId}`, limits.upload)) return;
  throw data(`At most ${limits.upload[0]} files are taken from one person in an hour.`, {
    status: 429,
    headers: { "Retry-After": String(limits.upload[1]) },
  });
}

/** A file's name without a path and without characters that no name needs. */
function plainFileName(name: string): string {
  const last = name.split(/[\\/]/).at(-1) ?? "";
  const plain = last
    .replace(/[\p{Cc}\p{Cf}]/gu, "")
    .trim()
    .slice(0, 200);
  return plain === "" || plain === "." || plain === ".." ? "pasted.txt" : plain;
}

export interface Upload {
  name: string;
  bytes: Uint8Array;
}

/** The file or the pasted text of a form; null where there is neither, a sentence where it is too large. */
export async function uploadOf(form: FormData): Promise<Upload | { refused: string } | null> {
  const file = form.get("file");
  const pasted = form.get("pasted");
  const upload =
    file instanceof File && file.size > 0
      ? { name: plainFileName(file.name), bytes: new Uint8Array(await file.arrayBuffer()) }
      : typeof pasted === "string" && pasted.trim() !== ""
        ? { name: "pasted.txt", bytes: new TextEncoder().encode(pasted) }
        : null;
  if (upload && upload.bytes.length > importLimits.bytes) {
    return {
      refused: `The file has ${(upload.bytes.length / 1e6).toFixed(1)} MB; allowed: up to ${importLimits.bytes / 1e6} MB.`,
    };
  }
  return upload;
}
