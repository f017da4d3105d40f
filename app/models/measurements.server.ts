/** Measured spectra: their points, their provenance, and the reading of the file they came from. */
import type { Bias, Technique } from "@demilune/solver";
import { and, asc, count, desc, eq, inArray, isNotNull, isNull, like, or, type SQL, sql } from "drizzle-orm";
import { type MeasuredPoints, packPoints, unpackPoints } from "~/lib/measuredPoints";
import type { ImportedSpectrum } from "~/lib/textImport/reading";
import type { ImportSettings } from "~/lib/textImport/settings";
import { measurementPoints, measurements, samples } from "../../drizzle/schema";
import { recordActivity } from "./activity.server";
import { database, type Query, write } from "./database.server";
import { newId } from "./identifier.server";
import { findRawFile, keepRawFile } from "./rawFiles.server";
import { newSample } from "./samples.server";

interface Actor {
  labId: string;
  userId: string | null;
}

/** How the file was read: enough to read it again, or differently. */
interface ImportRecord {
  settings: ImportSettings;
  /** Which of the file's spectra this is. */
  spectrum: number;
  /** Only the shape is known: no absolute scale. */
  relative: boolean;
}

/** What a person says about a measurement besides its numbers. */
export interface Provenance {
  name: string;
  bias: Bias;
  fluxPerCm2S: number | null;
  temperatureK: number | null;
  instrument: string;
  measuredAt: string;
  note: string;
  licence: string;
}

export interface Measurement extends Provenance {
  id: string;
  sampleId: string | null;
  sampleName: string | null;
  rawFileId: string | null;
  technique: Technique;
  importRecord: ImportRecord;
  invented: boolean;
  pointCount: number;
  createdAt: Date;
  updatedAt: Date;
  archivedAt: Date | null;
}

/** Most points of one measurement. */
export const pointLimit = 20_000;

export const measurementSorts = ["updated", "name", "technique", "sample"] as const;
type MeasurementSort = (typeof measurementSorts)[number];
const measurementsPerPage = 50;

const sortColumns: Record<MeasurementSort, SQL | typeof measurements.updatedAt | typeof measurements.technique> = {
  updated: measurements.updatedAt,
  name: sql`lower(${measurements.name})`,
  technique: measurements.technique,
  sample: sql`lower(coalesce(${samples.name}, ''))`,
};

type Row = { measurement: typeof measurements.$inferSelect; sampleName: string | null };

function ofRow({ measurement, sampleName }: Row): Measurement {
  const { importSettings, bias, labId: _lab, createdBy: _author, ...rest } = measurement;
  return { ...rest, sampleName, bias: bias as Bias, importRecord: importSettings as ImportRecord };
}

const select = () =>
  database()
    .select({ measurement: measurements, sampleName: samples.name })
    .from(measurements)
    .leftJoin(samples, eq(samples.id, measurements.sampleId));

export interface MeasurementList {
  archived?: boolean;
  filter?: string;
  technique?: Technique;
  sort?: MeasurementSort;
  descending?: boolean;
  page?: number;
}

/** A page of the lab's measurements; the filter looks at names of measurements and samples. */
export async function listMeasurements(labId: string, options: MeasurementList = {}) {
  const {
    archived = false,
    filter = "",
    technique,
    sort = "updated",
    descending = sort === "updated",
    page = 1,
  } = options;
  const pattern = `%${filter.replace(/[\\%_]/g, (sign) => `\\${sign}`)}%`;
  const where = and(
    eq(measurements.labId, labId),
    archived ? isNotNull(measurements.archivedAt) : isNull(measurements.archivedAt),
    technique && eq(measurements.technique, technique),
    filter === ""
      ? undefined
      : or(
          sql`${like(measurements.name, pattern)} escape '\\'`,
          sql`${like(samples.name, pattern)} escape '\\'`,
          sql`${like(samples.group, pattern)} escape '\\'`,
        ),
  );
  const order = descending ? desc : asc;
  const [rows, total] = await Promise.all([
    select()
      .where(where)
      .orderBy(order(sortColumns[sort]), order(measurements.id))
      .limit(measurementsPerPage)
      .offset((page - 1) * measurementsPerPage),
    database()
      .select({ total: count() })
      .from(measurements)
      .leftJoin(samples, eq(samples.id, measurements.sampleId))
      .where(where)
      .get(),
  ]);
  return {
    measurements: rows.map(ofRow),
    total: total?.total ?? 0,
    pages: Math.max(1, Math.ceil((total?.total ?? 0) / measurementsPerPage)),
  };
}

/** How many measurements the lab has outside and inside the archive. */
export async function countMeasurements(labId: string): Promise<{ kept: number; archived: number }> {
  const row = await database()
    .select({ all: count(), archived: count(measurements.archivedAt) })
    .from(measurements)
    .where(eq(measurements.labId, labId))
    .get();
  return { kept: (row?.all ?? 0) - (row?.archived ?? 0), archived: row?.archived ?? 0 };
}

export async function findMeasurement(labId: string, measurementId: string): Promise<Measurement | undefined> {
  const row = await select()
    .where(and(eq(measurements.labId, labId), eq(measurements.id, measurementId)))
    .get();
  return row && ofRow(row);
}

/** Points of these measurements, those of the lab only, in no order. */
export async function findPoints(labId: string, ids: readonly string[]): Promise<Map<string, MeasuredPoints>> {
  if (ids.length === 0) return new Map();
  const rows = await database()
    .select({ id: measurementPoints.measurementId, data: measurementPoints.data })
    .from(measurementPoints)
    .innerJoin(measurements, eq(measurements.id, measurementPoints.measurementId))
    .where(and(eq(measurements.labId, labId), inArray(measurements.id, [...ids])));
  return new Map(rows.map(({ id, data }) => [id, unpackPoints(data)]));
}

/** Measurements of the lab by id, in the order asked for; ids of other labs are passed over. */
export async function findMeasurements(labId: string, ids: readonly string[]): Promise<Measurement[]> {
  if (ids.length === 0) return [];
  const rows = await select().where(and(eq(measurements.labId, labId), inArray(measurements.id, [...ids])));
  const byId = new Map(rows.map((row) => [row.measurement.id, ofRow(row)]));
  return ids.flatMap((id) => byId.get(id) ?? []);
}

export interface StoredSpectrum {
  /** Position among the file's spectra. */
  index: number;
  name: string;
  spectrum: ImportedSpectrum;
}

const pointsOf = ({ frequencyHz, re, im, sigma }: ImportedSpectrum): MeasuredPoints => ({
  frequencyHz,
  re,
  im,
  sigma,
  masked: frequencyHz.map(() => false),
});

/**
 * Stores a file and the spectra read from it, all or nothing.
 * @param sample an existing sample's id, the name of a new one, or null
 * @returns the ids of the measurements
 */
export async function importMeasurements(
  actor: Actor,
  file: { name: string; bytes: Uint8Array },
  spectra: readonly StoredSpectrum[],
  about: {
    settings: ImportSettings;
    sample: { id: string } | { name: string } | null;
    instrument: string;
    measuredAt: string;
    note: string;
    licence: string;
    invented?: boolean;
  },
): Promise<string[]> {
  const { labId, userId } = actor;
  const at = new Date();
  const { settings, sample, ...provenance } = about;
  const raw = keepRawFile(actor, file.name, file.bytes, at);
  const made = sample && "name" in sample ? newSample(actor, sample, at) : null;
  const sampleId = made?.id ?? (sample && "id" in sample ? sample.id : null);
  const ids: string[] = [];
  const queries: Query[] = spectra.flatMap(({ index, name, spectrum }) => {
    const id = newId(at.getTime());
    ids.push(id);
    const record: ImportRecord = { settings, spectrum: index, relative: spectrum.relative };
    return [
      database()
        .insert(measurements)
        .values({
          id,
          labId,
          sampleId,
          rawFileId: raw.id,
          name,
          technique: spectrum.technique,
          bias: spectrum.bias,
          fluxPerCm2S: spectrum.fluxPerCm2S,
          temperatureK: spectrum.temperatureK,
          importSettings: record,
          ...provenance,
          pointCount: spectrum.frequencyHz.length,
          createdBy: userId,
          createdAt: at,
          updatedAt: at,
        }),
      database()
        .insert(measurementPoints)
        .values({ measurementId: id, data: packPoints(pointsOf(spectrum)) }),
      recordActivity({ labId, userId, kind: "imported", objectKind: "measurement", objectId: id, text: name }, at),
    ];
  });
  await write(...raw.queries, ...(made?.queries ?? []), ...queries);
  return ids;
}

/** Puts a new reading of the same file in the place of the old one. False where the lab has no such measurement. */
export async function replaceReading(
  { labId, userId }: Actor,
  measurementId: string,
  { index, spectrum }: Omit<StoredSpectrum, "name">,
  settings: ImportSettings,
): Promise<boolean> {
  const measurement = await findMeasurement(labId, measurementId);
  if (!measurement) return false;
  const at = new Date();
  const record: ImportRecord = { settings, spectrum: index, relative: spectrum.relative };
  await write(
    database()
      .update(measurements)
      .set({
        technique: spectrum.technique,
        bias: spectrum.bias,
        fluxPerCm2S: spectrum.fluxPerCm2S,
        temperatureK: spectrum.temperatureK ?? measurement.temperatureK,
        importSettings: record,
        pointCount: spectrum.frequencyHz.length,
        updatedAt: at,
      })
      .where(and(eq(measurements.labId, labId), eq(measurements.id, measurementId))),
    database()
      .update(measurementPoints)
      .set({ data: packPoints(pointsOf(spectrum)) })
      .where(eq(measurementPoints.measurementId, measurementId)),
    recordActivity(
      {
        labId,
        userId,
        kind: "imported again",
        objectKind: "measurement",
        objectId: measurementId,
        text: measurement.name,
      },
      at,
    ),
  );
  return true;
}

/** False where the lab has no such measurement. */
export async function updateProvenance(
  { labId, userId }: Actor,
  measurementId: string,
  provenance: Provenance & { sampleId: string | null },
): Promise<boolean> {
  if (!(await findMeasurement(labId, measurementId))) return false;
  const at = new Date();
  await write(
    database()
      .update(measurements)
      .set({ ...provenance, updatedAt: at })
      .where(and(eq(measurements.labId, labId), eq(measurements.id, measurementId))),
    recordActivity(
      { labId, userId, kind: "changed", objectKind: "measurement", objectId: measurementId, text: provenance.name },
      at,
    ),
  );
  return true;
}

/** Puts a measurement into the archive or takes it out. False where the lab has no such measurement. */
export async function setMeasurementArchived(
  { labId, userId }: Actor,
  measurementId: string,
  archived: boolean,
): Promise<boolean> {
  const measurement = await findMeasurement(labId, measurementId);
  if (!measurement) return false;
  const at = new Date();
  await write(
    database()
      .update(measurements)
      .set({ archivedAt: archived ? at : null })
      .where(and(eq(measurements.labId, labId), eq(measurements.id, measurementId))),
    recordActivity(
      {
        labId,
        userId,
        kind: archived ? "archived" : "took out of the archive",
        objectKind: "measurement",
        objectId: measurementId,
        text: measurement.name,
      },
      at,
    ),
  );
  return true;
}

/** The file a measurement came from. */
export async function findRawFileOf(labId: string, measurement: Measurement) {
  return measurement.rawFileId === null ? undefined : findRawFile(labId, measurement.rawFileId);
}
