/** Imported files as they came, in chunks of at most 1 MiB, with their checksum. */
import { createHash } from "node:crypto";
import { and, asc, eq } from "drizzle-orm";
import { rawFileChunks, rawFiles } from "../../drizzle/schema";
import { database, type Query } from "./database.server";
import { newId } from "./identifier.server";

const chunkBytes = 1_048_576;

export interface RawFile {
  id: string;
  name: string;
  sha256: string;
  size: number;
}

const columns = { id: rawFiles.id, name: rawFiles.name, sha256: rawFiles.sha256, size: rawFiles.size };

/**
 * The queries that keep a file; give them to `write()` together with what refers to it.
 * @param name as the person's computer calls it, without a path
 */
export function keepRawFile(
  { labId, userId }: { labId: string; userId: string | null },
  name: string,
  bytes: Uint8Array,
  at: Date,
): { id: string; queries: [Query, ...Query[]] } {
  const id = newId(at.getTime());
  const sha256 = createHash("sha256").update(bytes).digest("hex");
  const chunks = Array.from({ length: Math.ceil(bytes.length / chunkBytes) }, (_, index) =>
    Buffer.from(bytes.subarray(index * chunkBytes, (index + 1) * chunkBytes)),
  );
  return {
    id,
    queries: [
      database()
        .insert(rawFiles)
        .values({ id, labId, name, sha256, size: bytes.length, uploadedBy: userId, createdAt: at }),
      ...chunks.map((data, index) => database().insert(rawFileChunks).values({ rawFileId: id, index, data })),
    ],
  };
}

/** A file of the lab and its bytes; undefined where the lab has none of this id. */
export async function findRawFile(
  labId: string,
  rawFileId: string,
): Promise<{ file: RawFile; bytes: Uint8Array } | undefined> {
  const file = await database()
    .select(columns)
    .from(rawFiles)
    .where(and(eq(rawFiles.labId, labId), eq(rawFiles.id, rawFileId)))
    .get();
  if (!file) return undefined;
  const chunks = await database()
    .select({ data: rawFileChunks.data })
    .from(rawFileChunks)
    .where(eq(rawFileChunks.rawFileId, file.id))
    .orderBy(asc(rawFileChunks.index));
  return { file, bytes: new Uint8Array(Buffer.concat(chunks.map(({ data }) => data))) };
}
