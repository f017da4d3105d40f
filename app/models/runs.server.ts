/** Runs: results of scenario documents, found again by the hash of document and solver version. */
import { type ResultDocument, solverVersion } from "@demilune/solver";
import { and, asc, eq } from "drizzle-orm";
import { type PackedResult, type ResultHead, unpackResult } from "~/queue/packedResult";
import { runChunks, runs } from "../../drizzle/schema";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";

/** Float64 numbers of one chunk: 1 MiB. */
const chunkNumbers = 131_072;

export interface KeptRun {
  id: string;
  result: ResultDocument;
  /** Computed by an older solver: readable, and worth computing again. */
  outdated: boolean;
  milliseconds: number | null;
  finishedAt: Date | null;
}

// Blobs are little-endian on every machine this runs on (x64, arm64), so that a view over the bytes is the numbers.
const bytesOf = (numbers: Float64Array) => Buffer.from(numbers.buffer, numbers.byteOffset, numbers.byteLength);

function numbersOf(chunks: readonly Uint8Array[]): Float64Array {
  const bytes = Buffer.concat(chunks);
  return new Float64Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));
}

/** The run of a lab with this hash, with its numbers; undefined where it was not computed or did not end well. */
export async function findRun(labId: string, hash: string): Promise<KeptRun | undefined> {
  const run = await database()
    .select()
    .from(runs)
    .where(and(eq(runs.labId, labId), eq(runs.hash, hash), eq(runs.status, "done")))
    .get();
  if (!run) return undefined;
  const chunks = await database()
    .select({ data: runChunks.data })
    .from(runChunks)
    .where(eq(runChunks.runId, run.id))
    .orderBy(asc(runChunks.index));
  return {
    id: run.id,
    result: unpackResult({ head: run.summary as ResultHead, numbers: numbersOf(chunks.map(({ data }) => data)) }),
    outdated: run.solverVersion !== solverVersion,
    milliseconds: run.milliseconds,
    finishedAt: run.finishedAt,
  };
}

/** Keep a result under its hash. A second one with the same hash changes nothing: it has the same numbers. */
export async function keepRun(
  labId: string,
  userId: string,
  document: unknown,
  { head, numbers }: PackedResult,
  timing: { startedAt: Date; milliseconds: number },
): Promise<void> {
  if (await findRun(labId, head.hash)) return;
  const id = newId();
  const now = new Date();
  const pieces = Array.from({ length: Math.ceil(numbers.length / chunkNumbers) }, (_, index) =>
    numbers.subarray(index * chunkNumbers, (index + 1) * chunkNumbers),
  );
  const stored = write(
    database()
      .insert(runs)
      .values({
        id,
        labId,
        hash: head.hash,
        solverVersion: head.solver,
        document: JSON.stringify(document),
        status: "done",
        summary: head,
        milliseconds: timing.milliseconds,
        requestedBy: userId,
        createdAt: timing.startedAt,
        startedAt: timing.startedAt,
        finishedAt: now,
      }),
    ...pieces.map((piece, index) =>
      database()
        .insert(runChunks)
        .values({ runId: id, index, data: bytesOf(piece) }),
    ),
  );
  // Two requests for the same hash may come in together; the one that was stored serves both.
  await stored.catch(async (error: unknown) => {
    if (!(await findRun(labId, head.hash))) throw error;
  });
}
