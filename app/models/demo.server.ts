import { and, eq, isNull } from "drizzle-orm";
import { scenarios } from "../../drizzle/schema";
import { database } from "./database.server";
import { findLabByName, type Lab } from "./labs.server";

/** The invented lab that the demo opens into. */
export const demoLabName = "Halden thin-film group";

export const findDemoLab = (): Promise<Lab | undefined> => findLabByName(demoLabName);

/** The scenario of this name that a newcomer meets first; undefined once it was renamed or archived. */
export async function findScenarioByName(labId: string, name: string): Promise<string | undefined> {
  const row = await database()
    .select({ id: scenarios.id })
    .from(scenarios)
    .where(and(eq(scenarios.labId, labId), eq(scenarios.name, name), isNull(scenarios.archivedAt)))
    .orderBy(scenarios.createdAt)
    .limit(1)
    .get();
  return row?.id;
}
