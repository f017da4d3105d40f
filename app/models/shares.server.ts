/**
 * Share links: whoever has one may look at one revision of a scenario, with the measurements sent along, until it
 * expires or is revoked. The secret in the link is 256 random bits, of which only the hash is kept; a guest's browser
 * then holds the same secret in a cookie for that link alone.
 */
import { createHash, randomBytes } from "node:crypto";
import type { ScenarioDocument } from "@demilune/solver";
import { and, desc, eq, sql } from "drizzle-orm";
import { labs, revisions, scenarios, shareLinks, users } from "../../drizzle/schema";
import { recordActivity } from "./activity.server";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";
import { findMeasurements } from "./measurements.server";
import { findRevision, findScenario } from "./scenarios.server";

export const shareDays = { usual: 90, most: 365 } as const;

const hash = (token: string) => createHash("sha256").update(token).digest("hex");

interface Actor {
  labId: string;
  userId: string | null;
}

export interface ShareRequest {
  revisionNumber: number;
  /** Of the lab; those of other labs are passed over. */
  measurementIds: readonly string[];
  /** Paths of the numbers that the guest may move; null for all. */
  exposed: string[] | null;
  days: number;
  note: string;
}

/** Makes a link and returns its secret, which is shown this once. Undefined where the lab has no such revision. */
export async function createShare(
  { labId, userId }: Actor,
  scenarioId: string,
  request: ShareRequest,
  at = new Date(),
): Promise<{ id: string; token: string } | undefined> {
  const [scenario, revision, measurements] = await Promise.all([
    findScenario(labId, scenarioId),
    findRevision(labId, scenarioId, request.revisionNumber),
    findMeasurements(labId, request.measurementIds),
  ]);
  if (!scenario || !revision) return undefined;
  const token = randomBytes(32).toString("base64url");
  const id = newId(at.getTime());
  await write(
    database()
      .insert(shareLinks)
      .values({
        id,
        labId,
        scenarioId,
        revisionId: revision.id,
        tokenHash: hash(token),
        note: request.note,
        exposed: request.exposed,
        measurementIds: measurements.map((measurement) => measurement.id),
        createdBy: userId,
        createdAt: at,
        expiresAt: new Date(at.getTime() + request.days * 86_400_000),
      }),
    recordActivity(
      {
        labId,
        userId,
        kind: "shared",
        objectKind: "scenario",
        objectId: scenarioId,
        text: `${scenario.name}, revision ${revision.number}`,
      },
      at,
    ),
  );
  return { id, token };
}

/** The links of a scenario, the latest first, without their secrets, which nobody has. */
export async function listShares(labId: string, scenarioId: string) {
  return database()
    .select({
      id: shareLinks.id,
      note: shareLinks.note,
      revisionNumber: revisions.number,
      measurementIds: shareLinks.measurementIds,
      exposed: shareLinks.exposed,
      createdBy: users.name,
      createdAt: shareLinks.createdAt,
      expiresAt: shareLinks.expiresAt,
      revokedAt: shareLinks.revokedAt,
      openings: shareLinks.openings,
      lastOpenedAt: shareLinks.lastOpenedAt,
    })
    .from(shareLinks)
    .innerJoin(revisions, eq(revisions.id, shareLinks.revisionId))
    .leftJoin(users, eq(users.id, shareLinks.createdBy))
    .where(and(eq(shareLinks.labId, labId), eq(shareLinks.scenarioId, scenarioId)))
    .orderBy(desc(shareLinks.createdAt), desc(shareLinks.id));
}

/** Ends a link at once. False where the scenario has no such link, or it is ended already. */
export async function revokeShare({ labId, userId }: Actor, scenarioId: string, shareId: string): Promise<boolean> {
  const scenario = await findScenario(labId, scenarioId);
  if (!scenario) return false;
  const at = new Date();
  const [ended] = await write(
    database()
      .update(shareLinks)
      .set({ revokedAt: at })
      .where(
        and(
          eq(shareLinks.labId, labId),
          eq(shareLinks.scenarioId, scenarioId),
          eq(shareLinks.id, shareId),
          sql`${shareLinks.revokedAt} is null`,
        ),
      ),
    recordActivity(
      {
        labId,
        userId,
        kind: "revoked a share link of",
        objectKind: "scenario",
        objectId: scenarioId,
        text: scenario.name,
      },
      at,
    ),
  );
  return ended.rowsAffected === 1;
}

export interface Share {
  id: string;
  labId: string;
  labName: string;
  labInvented: boolean;
  scenarioName: string;
  revisionNumber: number;
  document: ScenarioDocument;
  exposed: string[] | null;
  measurementIds: string[];
  expiresAt: Date;
}

export type ShareState = { state: "open"; share: Share } | { state: "expired" | "revoked" | "unknown" };

/** What a secret opens at this moment. */
export async function findShare(token: string, now = new Date()): Promise<ShareState> {
  const row = await database()
    .select({ link: shareLinks, revision: revisions, scenarioName: scenarios.name, lab: labs })
    .from(shareLinks)
    .innerJoin(revisions, eq(revisions.id, shareLinks.revisionId))
    .innerJoin(scenarios, eq(scenarios.id, shareLinks.scenarioId))
    .innerJoin(labs, eq(labs.id, shareLinks.labId))
    .where(eq(shareLinks.tokenHash, hash(token)))
    .get();
  if (!row) return { state: "unknown" };
  const { link, revision, scenarioName, lab } = row;
  if (link.revokedAt) return { state: "revoked" };
  if (link.expiresAt <= now) return { state: "expired" };
  return {
    state: "open",
    share: {
      id: link.id,
      labId: lab.id,
      labName: lab.name,
      labInvented: lab.invented,
      scenarioName,
      revisionNumber: revision.number,
      document: JSON.parse(revision.document) as ScenarioDocument,
      exposed: link.exposed,
      measurementIds: link.measurementIds,
      expiresAt: link.expiresAt,
    },
  };
}

/** Counts one opening of a link. */
export async function countOpening(shareId: string, at = new Date()): Promise<void> {
  await write(
    database()
      .update(shareLinks)
      .set({ openings: sql`${shareLinks.openings} + 1`, lastOpenedAt: at })
      .where(eq(shareLinks.id, shareId)),
  );
}
