/** Which measurements lie over which scenario. */
import { and, asc, eq, isNull } from "drizzle-orm";
import type { OverlayMeasurement } from "~/lib/overlay";
import { measurements, overlays, scenarios } from "../../drizzle/schema";
import { database, write } from "./database.server";
import { findMeasurements, findPoints, type Measurement } from "./measurements.server";

interface Actor {
  labId: string;
  userId: string | null;
}

/** Measurements with their points, as the bench and the guest's page draw them. */
async function withPoints(labId: string, found: readonly Measurement[]): Promise<OverlayMeasurement[]> {
  const points = await findPoints(
    labId,
    found.map(({ id }) => id),
  );
  return found.flatMap((measurement) => {
    const own = points.get(measurement.id);
    if (!own) return [];
    const { id, name, technique, bias, fluxPerCm2S, invented, importRecord } = measurement;
    return [{ id, name, technique, bias, fluxPerCm2S, invented, relative: importRecord.relative, ...own }];
  });
}

/** The measurements laid over a scenario, in the order they were attached. */
export async function listOverlays(labId: string, scenarioId: string): Promise<OverlayMeasurement[]> {
  const rows = await database()
    .select({ id: overlays.measurementId })
    .from(overlays)
    .innerJoin(scenarios, eq(scenarios.id, overlays.scenarioId))
    .innerJoin(measurements, eq(measurements.id, overlays.measurementId))
    .where(and(eq(scenarios.labId, labId), eq(measurements.labId, labId), eq(scenarios.id, scenarioId)))
    .orderBy(asc(overlays.createdAt), asc(overlays.measurementId));
  return withPoints(
    labId,
    await findMeasurements(
      labId,
      rows.map(({ id }) => id),
    ),
  );
}

/** These measurements of the lab with their points, for a share link. */
export const listSharedMeasurements = async (labId: string, ids: readonly string[]): Promise<OverlayMeasurement[]> =>
  withPoints(labId, await findMeasurements(labId, ids));

/** Measurements outside the archive that could be laid over something, names only. */
export async function listAttachable(labId: string) {
  return database()
    .select({
      id: measurements.id,
      name: measurements.name,
      technique: measurements.technique,
      fluxPerCm2S: measurements.fluxPerCm2S,
    })
    .from(measurements)
    .where(and(eq(measurements.labId, labId), isNull(measurements.archivedAt)))
    .orderBy(asc(measurements.name));
}

async function bothInLab(labId: string, scenarioId: string, measurementId: string): Promise<boolean> {
  const row = await database()
    .select({ id: measurements.id })
    .from(measurements)
    .innerJoin(scenarios, eq(scenarios.labId, measurements.labId))
    .where(and(eq(measurements.labId, labId), eq(measurements.id, measurementId), eq(scenarios.id, scenarioId)))
    .get();
  return row !== undefined;
}

/** Lays a measurement over a scenario. False where the lab lacks one of the two. */
export async function attachMeasurement(
  { labId, userId }: Actor,
  scenarioId: string,
  measurementId: string,
): Promise<boolean> {
  if (!(await bothInLab(labId, scenarioId, measurementId))) return false;
  await write(
    database()
      .insert(overlays)
      .values({ scenarioId, measurementId, createdBy: userId, createdAt: new Date() })
      .onConflictDoNothing(),
  );
  return true;
}

/** Takes a measurement off a scenario. False where the lab lacks one of the two. */
export async function detachMeasurement({ labId }: Actor, scenarioId: string, measurementId: string): Promise<boolean> {
  if (!(await bothInLab(labId, scenarioId, measurementId))) return false;
  await write(
    database()
      .delete(overlays)
      .where(and(eq(overlays.scenarioId, scenarioId), eq(overlays.measurementId, measurementId))),
  );
  return true;
}

/** The scenarios that a measurement lies over. */
export async function listScenariosUnder(labId: string, measurementId: string) {
  return database()
    .select({ id: scenarios.id, name: scenarios.name })
    .from(overlays)
    .innerJoin(scenarios, eq(scenarios.id, overlays.scenarioId))
    .where(and(eq(scenarios.labId, labId), eq(overlays.measurementId, measurementId)))
    .orderBy(asc(scenarios.name));
}
