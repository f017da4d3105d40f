/** The age of a code and of the limits around it, with the clock in hand. */
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import { consume } from "~/models/rateLimits.server";
import { ensureUser } from "~/models/users.server";
import { readMailbox } from "~/services/mail/mail.server";
import { askForCode, checkCode } from "~/services/signIn.server";
import { withTemporaryDatabase } from "./temporaryDatabase";

withTemporaryDatabase();

const start = new Date("2026-01-01T00:00:00Z");
const tenMinutes = 600_000;
let count = 0;

/** Asks for a code and finds it in the mailbox. */
async function challenge() {
  const email = `user${++count}@lab.example`;
  await ensureUser(email, "Tor Lund");
  const asked = await askForCode(email, "/account", `192.0.2.${count}`);
  if (asked.outcome !== "asked") throw new Error(asked.outcome);
  const mail = await vi.waitFor(() => {
    const found = readMailbox()?.find(({ to }) => to === email);
    if (!found) throw new Error("not yet");
    return found;
  });
  const [, left, right] = /(\d{4}) (\d{4})/.exec(mail.text)!;
  return { id: asked.challengeId, code: left + right, client: `192.0.2.${count}` };
}

beforeEach(() => {
  vi.useFakeTimers({ toFake: ["Date"], now: start });
});
afterEach(() => {
  vi.useRealTimers();
});

describe("a code", () => {
  it("is good for ten minutes (OWASP ASVS 5.0.0, 6.5.5)", async () => {
    const { id, code, client } = await challenge();
    vi.setSystemTime(start.getTime() + tenMinutes - 1);
    expect((await checkCode(id, code, client)).outcome).toBe("signedIn");
  });

  it("is not good for longer", async () => {
    const { id, code, client } = await challenge();
    vi.setSystemTime(start.getTime() + tenMinutes);
    expect((await checkCode(id, code, client)).outcome).toBe("ended");
  });

  it("is still good after four wrong ones, and dead after five", async () => {
    const first = await challenge();
    const wrong = first.code === "00000000" ? "00000001" : "00000000";
    for (let tries = 0; tries < 4; tries++)
      expect((await checkCode(first.id, wrong, first.client)).outcome).toBe("wrong");
    expect((await checkCode(first.id, first.code, first.client)).outcome).toBe("signedIn");
    const second = await challenge();
    for (let tries = 0; tries < 5; tries++) await checkCode(second.id, "", second.client);
    expect((await checkCode(second.id, second.code, second.client)).outcome).toBe("ended");
  });
});

describe("a limit", () => {
  it("counts in a window that begins with the first use", async () => {
    const limit = [3, 60] as const;
    const at = (seconds: number) => new Date(1_800_000_000_000 + seconds * 1000);
    const uses = [0, 10, 20, 30, 59].map((seconds) => consume("window", limit, at(seconds)));
    expect(await Promise.all(uses)).toEqual([true, true, true, false, false]);
    expect(await consume("window", limit, at(60))).toBe(true);
  });
});
