/**
 * Scenarios, their revisions and drafts. A revision is written once and never changed; a draft belongs to one person
 * and one scenario. Every query names the lab: what belongs to another lab does not exist here.
 */
import { hashOf, parseScenario, type ScenarioDocument } from "@demilune/solver";
import { and, asc, count, desc, eq, isNotNull, isNull, like, sql } from "drizzle-orm";
import { drafts, revisions, scenarios, users } from "../../drizzle/schema";
import { recordActivity } from "./activity.server";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";

export interface Scenario {
  id: string;
  labId: string;
  name: string;
  createdAt: Date;
  updatedAt: Date;
  archivedAt: Date | null;
}

export interface Revision {
  id: string;
  number: number;
  document: ScenarioDocument;
  /** Of the resolved document and the solver's version: the name of its run. */
  hash: string;
  note: string;
  createdAt: Date;
  authorName: string | null;
}

/** Who acts, in which lab. */
export interface Actor {
  labId: string;
  userId: string | null;
}

export const scenarioSorts = ["updated", "name", "created"] as const;
export type ScenarioSort = (typeof scenarioSorts)[number];

const sortColumns = { updated: scenarios.updatedAt, name: sql`lower(${scenarios.name})`, created: scenarios.createdAt };
export const scenariosPerPage = 50;

const parsed = (text: string) => JSON.parse(text) as ScenarioDocument;
const revisionColumns = {
  id: revisions.id,
  number: revisions.number,
  document: revisions.document,
  hash: revisions.hash,
  note: revisions.note,
  createdAt: revisions.createdAt,
  authorName: users.name,
};
const latestNumber = sql`(select max(number) from revisions as latest where latest.scenario_id = ${scenarios.id})`;

/** A page of the lab's scenarios, each with its latest revision. */
export async function listScenarios(
  labId: string,
  options: { archived?: boolean; filter?: string; sort?: ScenarioSort; descending?: boolean; page?: number } = {},
) {
  const { archived = false, filter = "", sort = "updated", descending = sort !== "name", page = 1 } = options;
  const escaped = filter.replace(/[\\%_]/g, (sign) => `\\${sign}`);
  const where = and(
    eq(scenarios.labId, labId),
    archived ? isNotNull(scenarios.archivedAt) : isNull(scenarios.archivedAt),
    filter === "" ? undefined : sql`${like(scenarios.name, `%${escaped}%`)} escape '\\'`,
  );
  const order = descending ? desc : asc;
  const [rows, total] = await Promise.all([
    database()
      .select({ scenario: scenarios, ...revisionColumns })
      .from(scenarios)
      .innerJoin(revisions, and(eq(revisions.scenarioId, scenarios.id), eq(revisions.number, latestNumber)))
      .leftJoin(users, eq(users.id, revisions.authorId))
      .where(where)
      .orderBy(order(sortColumns[sort]), order(scenarios.id))
      .limit(scenariosPerPage)
      .offset((page - 1) * scenariosPerPage),
    database().select({ total: count() }).from(scenarios).where(where).get(),
  ]);
  return {
    total: total?.total ?? 0,
    scenarios: rows.map(({ scenario, document, ...revision }) => ({
      ...scenario,
      revision: { ...revision, document: parsed(document) },
    })),
  };
}

/** How many scenarios the lab has outside and inside the archive. */
export async function countScenarios(labId: string): Promise<{ kept: number; archived: number }> {
  const row = await database()
    .select({ all: count(), archived: count(scenarios.archivedAt) })
    .from(scenarios)
    .where(eq(scenarios.labId, labId))
    .get();
  return { kept: (row?.all ?? 0) - (row?.archived ?? 0), archived: row?.archived ?? 0 };
}

/** A scenario of the lab, archived ones included; undefined where the lab has none of this id. */
export async function findScenario(labId: string, scenarioId: string): Promise<Scenario | undefined> {
  return database()
    .select()
    .from(scenarios)
    .where(and(eq(scenarios.labId, labId), eq(scenarios.id, scenarioId)))
    .get();
}

/** One revision by its number, the latest where none is given. */
export async function findRevision(labId: string, scenarioId: string, number?: number): Promise<Revision | undefined> {
  const row = await database()
    .select(revisionColumns)
    .from(revisions)
    .innerJoin(scenarios, eq(scenarios.id, revisions.scenarioId))
    .leftJoin(users, eq(users.id, revisions.authorId))
    .where(
      and(
        eq(scenarios.labId, labId),
        eq(scenarios.id, scenarioId),
        number === undefined ? undefined : eq(revisions.number, number),
      ),
    )
    .orderBy(desc(revisions.number))
    .limit(1)
    .get();
  return row && { ...row, document: parsed(row.document) };
}

/** The revisions of a scenario without their documents, the latest first. */
export async function listRevisions(labId: string, scenarioId: string): Promise<Omit<Revision, "document">[]> {
  const { document: _, ...columns } = revisionColumns;
  return database()
    .select(columns)
    .from(revisions)
    .innerJoin(scenarios, eq(scenarios.id, revisions.scenarioId))
    .leftJoin(users, eq(users.id, revisions.authorId))
    .where(and(eq(scenarios.labId, labId), eq(scenarios.id, scenarioId)))
    .orderBy(desc(revisions.number));
}

const newRevision = (
  scenarioId: string,
  values: { number: number; document: ScenarioDocument; note: string; userId: string | null; at: Date },
) =>
  database()
    .insert(revisions)
    .values({
      id: newId(values.at.getTime()),
      scenarioId,
      number: values.number,
      document: JSON.stringify(values.document),
      hash: hashOf(parseScenario(values.document)),
      note: values.note,
      authorId: values.userId,
      createdAt: values.at,
    });

const nameOf = (document: ScenarioDocument): string => document.name?.trim() || "Scenario without a name";

/**
 * A new scenario with its revision 1.
 * @returns its id
 * @throws ScenarioError where the document cannot be solved as written
 */
export async function createScenario(
  { labId, userId }: Actor,
  document: ScenarioDocument,
  { note = "", kind = "created", at = new Date() }: { note?: string; kind?: string; at?: Date } = {},
): Promise<string> {
  const id = newId(at.getTime());
  const name = nameOf(document);
  const revision = newRevision(id, { number: 1, document, note, userId, at });
  await write(
    database().insert(scenarios).values({ id, labId, name, createdBy: userId, createdAt: at, updatedAt: at }),
    revision,
    recordActivity({ labId, userId, kind, objectKind: "scenario", objectId: id, text: name }, at),
  );
  return id;
}

export type SaveOutcome =
  | { ok: true; number: number }
  /** Somebody saved in between; nothing was written. */
  | { ok: false; conflict: { latest: number } };

/**
 * The next revision of a scenario. Written only where `baseRevisionNumber` is still the latest, so that nobody's work
 * is covered up unseen; the author's draft goes with it.
 * @throws ScenarioError where the document cannot be solved as written
 */
export async function saveRevision(
  { labId, userId }: Actor,
  scenarioId: string,
  save: { document: ScenarioDocument; baseRevisionNumber: number; note?: string; kind?: string },
): Promise<SaveOutcome | undefined> {
  const { document, baseRevisionNumber, note = "", kind = "saved a revision of" } = save;
  const at = new Date();
  const number = baseRevisionNumber + 1;
  const name = nameOf(document);
  const revision = newRevision(scenarioId, { number, document, note, userId, at });
  const latest = await findRevision(labId, scenarioId);
  if (!latest) return undefined;
  if (latest.number !== baseRevisionNumber) return { ok: false, conflict: { latest: latest.number } };
  const where = and(eq(scenarios.labId, labId), eq(scenarios.id, scenarioId));
  try {
    await write(
      revision,
      database().update(scenarios).set({ name, updatedAt: at }).where(where),
      database()
        .delete(drafts)
        .where(and(eq(drafts.scenarioId, scenarioId), eq(drafts.userId, userId ?? ""))),
      recordActivity(
        { labId, userId, kind, objectKind: "scenario", objectId: scenarioId, text: `${name}, revision ${number}` },
        at,
      ),
    );
  } catch (error) {
    // Two saves at once: the second number is taken already.
    if (error instanceof Error && error.message.includes("UNIQUE")) return { ok: false, conflict: { latest: number } };
    throw error;
  }
  return { ok: true, number };
}

/** An earlier revision's document as the newest revision. */
export async function restoreRevision(
  actor: Actor,
  scenarioId: string,
  number: number,
): Promise<SaveOutcome | undefined> {
  const [earlier, latest] = await Promise.all([
    findRevision(actor.labId, scenarioId, number),
    findRevision(actor.labId, scenarioId),
  ]);
  if (!earlier || !latest) return undefined;
  return saveRevision(actor, scenarioId, {
    document: earlier.document,
    baseRevisionNumber: latest.number,
    note: `Restored from revision ${number}`,
    kind: "restored a revision of",
  });
}

export interface Draft {
  /** What was typed, as JSON; it need not be a valid scenario. */
  document: unknown;
  baseRevisionNumber: number;
  updatedAt: Date;
}

/** A person's unsaved work on a scenario. */
export async function findDraft({ labId, userId }: Actor, scenarioId: string): Promise<Draft | undefined> {
  const row = await database()
    .select({
      document: drafts.document,
      baseRevisionNumber: drafts.baseRevisionNumber,
      updatedAt: drafts.updatedAt,
    })
    .from(drafts)
    .innerJoin(scenarios, eq(scenarios.id, drafts.scenarioId))
    .where(and(eq(scenarios.labId, labId), eq(scenarios.id, scenarioId), eq(drafts.userId, userId ?? "")))
    .get();
  return row && { ...row, document: JSON.parse(row.document) as unknown };
}

/** Keep a person's unsaved work, in place of what was kept before. False where the lab has no such scenario. */
export async function saveDraft(
  { labId, userId }: Actor & { userId: string },
  scenarioId: string,
  draft: { document: unknown; baseRevisionNumber: number },
): Promise<boolean> {
  if (!(await findScenario(labId, scenarioId))) return false;
  const values = {
    document: JSON.stringify(draft.document),
    baseRevisionNumber: draft.baseRevisionNumber,
    updatedAt: new Date(),
  };
  await write(
    database()
      .insert(drafts)
      .values({ scenarioId, userId, ...values })
      .onConflictDoUpdate({ target: [drafts.scenarioId, drafts.userId], set: values }),
  );
  return true;
}

/** Forget a person's unsaved work. */
export async function dropDraft({ labId, userId }: Actor & { userId: string }, scenarioId: string): Promise<void> {
  if (!(await findScenario(labId, scenarioId))) return;
  await write(
    database()
      .delete(drafts)
      .where(and(eq(drafts.scenarioId, scenarioId), eq(drafts.userId, userId))),
  );
}

/** A copy of the latest revision as a scenario of its own. Undefined where the lab has no such scenario. */
export async function duplicateScenario(actor: Actor, scenarioId: string): Promise<string | undefined> {
  const [scenario, latest] = await Promise.all([
    findScenario(actor.labId, scenarioId),
    findRevision(actor.labId, scenarioId),
  ]);
  if (!scenario || !latest) return undefined;
  const document = { ...latest.document, name: `${scenario.name}, copy` };
  const note = `Copied from ${scenario.name}, revision ${latest.number}`;
  return createScenario(actor, document, { note, kind: "copied" });
}

/** Put a scenario into the archive or take it out again. False where the lab has no such scenario. */
export async function setArchived({ labId, userId }: Actor, scenarioId: string, archived: boolean): Promise<boolean> {
  const scenario = await findScenario(labId, scenarioId);
  if (!scenario) return false;
  const at = new Date();
  await write(
    database()
      .update(scenarios)
      .set({ archivedAt: archived ? at : null })
      .where(and(eq(scenarios.labId, labId), eq(scenarios.id, scenarioId))),
    recordActivity(
      {
        labId,
        userId,
        kind: archived ? "archived" : "took out of the archive",
        objectKind: "scenario",
        objectId: scenarioId,
        text: scenario.name,
      },
      at,
    ),
  );
  return true;
}
