import { createHash, randomBytes } from "node:crypto";
import { and, desc, eq, gt } from "drizzle-orm";
import { settings } from "~/services/settings.server";
import { sessions, users } from "../../drizzle/schema";
import { database, write } from "./database.server";
import { newId } from "./identifier.server";
import type { User } from "./users.server";

export type Session = typeof sessions.$inferSelect;

const touchAfterMs = 5 * 60_000;
const hash = (token: string) => createHash("sha256").update(token).digest("hex");

/** Starts a session and returns its token: 256 random bits, of which only the hash is kept. */
export async function createSession(
  userId: string,
  client: { userAgent: string; address: string },
  now = new Date(),
): Promise<string> {
  const token = randomBytes(32).toString("base64url");
  await write(
    database()
      .insert(sessions)
      .values({
        id: newId(),
        tokenHash: hash(token),
        userId,
        createdAt: now,
        lastSeenAt: now,
        expiresAt: new Date(now.getTime() + settings().sessionMs),
        userAgent: client.userAgent.slice(0, 200),
        address: client.address,
      }),
  );
  return token;
}

/** The live session behind a token and its user; ended, idle and over-age ones are undefined, and so are those of disabled users. */
export async function findSession(
  token: string,
  now = new Date(),
): Promise<{ session: Session; user: User } | undefined> {
  const found = await database()
    .select({ session: sessions, user: users })
    .from(sessions)
    .innerJoin(users, eq(users.id, sessions.userId))
    .where(and(eq(sessions.tokenHash, hash(token)), ...isLive(now)))
    .get();
  if (!found || found.user.disabledAt) return undefined;
  if (now.getTime() - found.session.lastSeenAt.getTime() > touchAfterMs)
    await write(database().update(sessions).set({ lastSeenAt: now }).where(eq(sessions.id, found.session.id)));
  return found;
}

const isLive = (now: Date) => [
  gt(sessions.expiresAt, now),
  gt(sessions.lastSeenAt, new Date(now.getTime() - settings().sessionIdleMs)),
];

export async function listSessions(userId: string, now = new Date()): Promise<Session[]> {
  return database()
    .select()
    .from(sessions)
    .where(and(eq(sessions.userId, userId), ...isLive(now)))
    .orderBy(desc(sessions.lastSeenAt));
}

/** Ends one session of this user; true if there was one. */
export async function endSession(userId: string, sessionId: string): Promise<boolean> {
  const [result] = await write(
    database()
      .delete(sessions)
      .where(and(eq(sessions.id, sessionId), eq(sessions.userId, userId))),
  );
  return result.rowsAffected === 1;
}
