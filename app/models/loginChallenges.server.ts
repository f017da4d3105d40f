import { createHash } from "node:crypto";
import { and, eq, gt, isNull, lt, sql } from "drizzle-orm";
import { loginChallenges } from "../../drizzle/schema";
import { database, write } from "./database.server";

export type LoginChallenge = typeof loginChallenges.$inferSelect;

const hash = (challengeId: string) => createHash("sha256").update(challengeId).digest("hex");
const dayMs = 86_400_000;

/** Stores a challenge; those asked for the same address before it are void, those of yesterday are forgotten. */
export async function createChallenge(
  challengeId: string,
  challenge: Omit<LoginChallenge, "idHash" | "attempts" | "usedAt">,
): Promise<void> {
  const now = challenge.createdAt;
  await write(
    database()
      .update(loginChallenges)
      .set({ usedAt: now })
      .where(and(eq(loginChallenges.email, challenge.email), isNull(loginChallenges.usedAt))),
    database()
      .delete(loginChallenges)
      .where(lt(loginChallenges.expiresAt, new Date(now.getTime() - dayMs))),
    database()
      .insert(loginChallenges)
      .values({ idHash: hash(challengeId), ...challenge }),
  );
}

const isOpen = (challengeId: string, now: Date) =>
  and(
    eq(loginChallenges.idHash, hash(challengeId)),
    isNull(loginChallenges.usedAt),
    gt(loginChallenges.expiresAt, now),
  );

/**
 * Counts an attempt and only then hands the challenge out, in one statement: attempts that arrive together are all
 * counted before any is compared.
 * @returns undefined when the challenge is unknown, used, void, over age, or has had its attempts
 */
export async function countAttempt(
  challengeId: string,
  allowed: number,
  now: Date,
): Promise<LoginChallenge | undefined> {
  const [counted] = await write(
    database()
      .update(loginChallenges)
      .set({ attempts: sql`${loginChallenges.attempts} + 1` })
      .where(and(isOpen(challengeId, now), lt(loginChallenges.attempts, allowed)))
      .returning({ idHash: loginChallenges.idHash }),
  );
  if (counted.rows.length === 0) return undefined;
  return database()
    .select()
    .from(loginChallenges)
    .where(eq(loginChallenges.idHash, hash(challengeId)))
    .get();
}

/** Uses the challenge up; true for the one request that did. */
export async function spendChallenge(challengeId: string, now: Date): Promise<boolean> {
  const [used] = await write(database().update(loginChallenges).set({ usedAt: now }).where(isOpen(challengeId, now)));
  return used.rowsAffected === 1;
}
