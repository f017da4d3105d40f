/** Samples: the physical devices that were measured. */
import { and, asc, count, eq, isNotNull, isNull, sql } from "drizzle-orm";
import { measurements, samples } from "../../drizzle/schema";
import { recordActivity } from "./activity.server";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";

export type Sample = typeof samples.$inferSelect;

/** What a person says about a sample; areas in cm², null where not known. */
export interface SampleDescription {
  name: string;
  group: string;
  contactSequence: string;
  activeAreaCm2: number | null;
  litAreaCm2: number | null;
  maskedAreaCm2: number | null;
  preconditioning: string;
}

interface Actor {
  labId: string;
  userId: string | null;
}

const measured = sql<number>`(select count(*) from measurements where measurements.sample_id = ${samples.id} and measurements.archived_at is null)`;

/** The lab's samples by group and name, each with the number of its measurements outside the archive. */
export async function listSamples(labId: string, archived = false): Promise<(Sample & { measured: number })[]> {
  const rows = await database()
    .select({ sample: samples, measured })
    .from(samples)
    .where(and(eq(samples.labId, labId), archived ? isNotNull(samples.archivedAt) : isNull(samples.archivedAt)))
    .orderBy(asc(samples.group), asc(sql`lower(${samples.name})`), asc(samples.id));
  return rows.map((row) => ({ ...row.sample, measured: Number(row.measured) }));
}

export async function findSample(labId: string, sampleId: string): Promise<Sample | undefined> {
  return database()
    .select()
    .from(samples)
    .where(and(eq(samples.labId, labId), eq(samples.id, sampleId)))
    .get();
}

/** How many samples the archive holds. */
export async function countArchivedSamples(labId: string): Promise<number> {
  const row = await database()
    .select({ archived: count() })
    .from(samples)
    .where(and(eq(samples.labId, labId), isNotNull(samples.archivedAt)))
    .get();
  return row?.archived ?? 0;
}

/** The queries that make a sample; give them to `write()` together with what refers to it. */
export function newSample(
  { labId, userId }: Actor,
  description: Partial<SampleDescription> & { name: string },
  at: Date,
) {
  const id = newId(at.getTime());
  return {
    id,
    queries: [
      database()
        .insert(samples)
        .values({ id, labId, ...description, createdBy: userId, createdAt: at, updatedAt: at }),
      recordActivity(
        { labId, userId, kind: "created", objectKind: "sample", objectId: id, text: description.name },
        at,
      ),
    ] as const,
  };
}

export async function createSample(
  actor: Actor,
  description: Partial<SampleDescription> & { name: string },
): Promise<string> {
  const { id, queries } = newSample(actor, description, new Date());
  await write(...queries);
  return id;
}

/** False where the lab has no such sample. */
export async function updateSample(
  { labId, userId }: Actor,
  sampleId: string,
  description: SampleDescription,
): Promise<boolean> {
  if (!(await findSample(labId, sampleId))) return false;
  const at = new Date();
  await write(
    database()
      .update(samples)
      .set({ ...description, updatedAt: at })
      .where(and(eq(samples.labId, labId), eq(samples.id, sampleId))),
    recordActivity(
      { labId, userId, kind: "changed", objectKind: "sample", objectId: sampleId, text: description.name },
      at,
    ),
  );
  return true;
}

/** Puts a sample into the archive or takes it out; its measurements stay. False where the lab has no such sample. */
export async function setSampleArchived(
  { labId, userId }: Actor,
  sampleId: string,
  archived: boolean,
): Promise<boolean> {
  const sample = await findSample(labId, sampleId);
  if (!sample) return false;
  const at = new Date();
  await write(
    database()
      .update(samples)
      .set({ archivedAt: archived ? at : null })
      .where(and(eq(samples.labId, labId), eq(samples.id, sampleId))),
    recordActivity(
      {
        labId,
        userId,
        kind: archived ? "archived" : "took out of the archive",
        objectKind: "sample",
        objectId: sampleId,
        text: sample.name,
      },
      at,
    ),
  );
  return true;
}

/** Ids of a sample's measurements, the archive's too, for pages that list them. */
export async function listMeasurementsOfSample(labId: string, sampleId: string) {
  return database()
    .select({
      id: measurements.id,
      name: measurements.name,
      technique: measurements.technique,
      archivedAt: measurements.archivedAt,
    })
    .from(measurements)
    .where(and(eq(measurements.labId, labId), eq(measurements.sampleId, sampleId)))
    .orderBy(asc(sql`lower(${measurements.name})`));
}
