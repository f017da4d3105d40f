/** Limits of sessions (OWASP ASVS 5.0.0, 7.3.1, 7.3.2, 7.4.2) with the clock in hand. */
import { eq } from "drizzle-orm";
import { describe, expect, it } from "vitest";
import { database, write } from "~/models/database.server";
import { createSession, endSession, findSession, listSessions } from "~/models/sessions.server";
import { ensureUser } from "~/models/users.server";
import { sessions, users } from "../../../drizzle/schema";
import { withTemporaryDatabase } from "./temporaryDatabase";

withTemporaryDatabase();

const hour = 3_600_000;
const start = new Date("2026-01-01T00:00:00Z");
const hoursLater = (hours: number) => new Date(start.getTime() + hours * hour);
const client = { userAgent: "a browser", address: "192.0.2.1" };

let count = 0;
async function signedIn() {
  const user = await ensureUser(`user${++count}@lab.example`, "Iben Holt");
  return { user, token: await createSession(user.id, client, start) };
}

describe("a session", () => {
  it("has a token of 256 bits, of which the database knows the hash alone", async () => {
    const { user, token } = await signedIn();
    expect(Buffer.from(token, "base64url")).toHaveLength(32);
    const row = await database().select().from(sessions).where(eq(sessions.userId, user.id)).get();
    expect(row?.tokenHash).toMatch(/^[0-9a-f]{64}$/);
    expect(JSON.stringify(row)).not.toContain(token);
  });

  it("ends after a day without a request", async () => {
    const { token } = await signedIn();
    expect(await findSession(token, hoursLater(23.9))).toBeDefined();
    expect(await findSession(token, hoursLater(47.8))).toBeDefined();
    expect(await findSession(token, hoursLater(72))).toBeUndefined();
  });

  it("ends after fourteen days, however busy", async () => {
    const { token } = await signedIn();
    for (let hours = 12; hours < 14 * 24; hours += 12)
      expect(await findSession(token, hoursLater(hours))).toBeDefined();
    expect(await findSession(token, hoursLater(14 * 24))).toBeUndefined();
  });

  it("ends with the account", async () => {
    const { user, token } = await signedIn();
    await write(database().update(users).set({ disabledAt: start }).where(eq(users.id, user.id)));
    expect(await findSession(token, hoursLater(1))).toBeUndefined();
  });

  it("can be ended by its own user and by nobody else", async () => {
    const { user, token } = await signedIn();
    const { user: other } = await signedIn();
    const [session] = await listSessions(user.id, hoursLater(1));
    expect(await endSession(other.id, session.id)).toBe(false);
    expect(await findSession(token, hoursLater(1))).toBeDefined();
    expect(await endSession(user.id, session.id)).toBe(true);
    expect(await findSession(token, hoursLater(1))).toBeUndefined();
  });
});
