/**
 * Attacks on the sign-in by e-mailed code, over HTTP against the built server with a real SMTP conversation.
 * Requirements: OWASP ASVS 5.0.0, V6.3, V6.5, V6.6, V7.2, V7.4 (numbers beside the tests).
 */
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { codeIn, type FakeMailServer, startMailServer } from "../../fakes/mailServer";
import { type RunningServer, startServer } from "../../support/server";
import { Visitor } from "../../support/visitor";

let mail: FakeMailServer;
let server: RunningServer;
let count = 0;

/** Addresses and clients that no other test uses, so that the limits do not carry over. */
const person = (name: string) => `${name}${++count}@halden.example`;
const visit = () => new Visitor(server.origin, `192.0.2.${++count}`);

beforeAll(async () => {
  mail = await startMailServer();
  server = await startServer({ MAIL_URL: mail.url, TRUST_PROXY: "1" });
});
afterAll(async () => {
  await server.stop();
  await mail.stop();
});

async function ask(visitor: Visitor, email: string, to = "/") {
  return visitor.post("/sign-in", { email, to });
}

async function askAndTake(visitor: Visitor, email: string) {
  await ask(visitor, email);
  return codeIn(await mail.take(email));
}

const wrong = (code: string) => String((Number(code) + 1) % 100_000_000).padStart(8, "0");
const isSignedIn = async (visitor: Visitor) => (await visitor.get("/account")).status === 200;

describe("sign-in by e-mailed code", () => {
  it("lets in whoever types the code that was sent, spaces and hyphens allowed", async () => {
    const victim = person("victim");
    const visitor = visit();
    const code = await askAndTake(visitor, victim);
    expect(code).toMatch(/^\d{8}$/);
    const response = await visitor.post("/sign-in/code", {
      code: `${code.slice(0, 4)} ${code.slice(4, 6)}-${code.slice(6)}`,
    });
    expect(response.status).toBe(303);
    expect(await isSignedIn(visitor)).toBe(true);
    expect(await (await visitor.get("/account")).text()).toContain(victim);
  });

  it("does not let one's own code open somebody else's account (6.6.2)", async () => {
    const victim = person("victim");
    const attacker = person("attacker");
    const visitor = visit();
    const own = await askAndTake(visitor, attacker);
    const ownChallenge = new Map(visitor.cookies);
    await askAndTake(visitor, victim);
    const victimChallenge = new Map(visitor.cookies);
    // The own code on the victim's challenge, by every name an address could travel under.
    const swapped = await visitor.post("/sign-in/code", { code: own, email: attacker });
    expect(swapped.status).toBe(400);
    visitor.cookies.clear();
    for (const [name, value] of ownChallenge) visitor.cookies.set(name, value);
    visitor.cookies.set("_totp", new URLSearchParams({ email: victim }).toString());
    const named = await visitor.post("/sign-in/code", { code: own, email: victim });
    if (named.status === 303) expect(await (await visitor.get("/account")).text()).not.toContain(victim);
    expect([...victimChallenge.values()].join()).not.toContain("halden");
    expect([...ownChallenge.keys()]).not.toContain("_totp");
  });

  it("refuses a challenge that it did not give out", async () => {
    const victim = person("victim");
    const visitor = visit();
    const code = await askAndTake(visitor, victim);
    for (const name of visitor.cookies.keys()) visitor.cookies.set(name, btoa(JSON.stringify("A".repeat(43))));
    expect((await visitor.post("/sign-in/code", { code })).status).toBe(400);
    visitor.cookies.clear();
    expect((await visitor.post("/sign-in/code", { code })).status).toBe(400);
    expect(await isSignedIn(visitor)).toBe(false);
  });

  it("compares exactly five codes of fifty that arrive together, and then not even the right one (6.3.1)", async () => {
    const victim = person("victim");
    const visitor = visit();
    const code = await askAndTake(visitor, victim);
    // Fifty clients that share the stolen challenge: the limit per client is not what holds them.
    const guesses = Array.from({ length: 50 }, () => {
      const guesser = visit();
      for (const [name, value] of visitor.cookies) guesser.cookies.set(name, value);
      return guesser.post("/sign-in/code", { code: wrong(code) });
    });
    const texts = await Promise.all(guesses.map(async (guess) => (await guess).text()));
    expect(texts.filter((text) => text.includes("not the code"))).toHaveLength(5);
    expect((await visitor.post("/sign-in/code", { code })).status).toBe(400);
    expect(await isSignedIn(visitor)).toBe(false);
  });

  it("takes a code once (6.5.1)", async () => {
    const victim = person("victim");
    const visitor = visit();
    const code = await askAndTake(visitor, victim);
    const challenge = new Map(visitor.cookies);
    const twins = await Promise.all([0, 1].map(() => visitor.post("/sign-in/code", { code })));
    expect(twins.map((response) => response.status).sort()).toEqual([303, 400]);
    const replay = visit();
    for (const [name, value] of challenge) replay.cookies.set(name, value);
    expect((await replay.post("/sign-in/code", { code })).status).toBe(400);
    expect(await isSignedIn(replay)).toBe(false);
  });

  it("makes an older challenge void when a newer one is asked for", async () => {
    const victim = person("victim");
    const first = visit();
    const second = visit();
    const firstCode = await askAndTake(first, victim);
    const secondCode = await askAndTake(second, victim);
    expect((await first.post("/sign-in/code", { code: firstCode })).status).toBe(400);
    expect((await second.post("/sign-in/code", { code: secondCode })).status).toBe(303);
  });

  it("sends one address five mails an hour, whoever asks (6.6.3)", async () => {
    const victim = person("victim");
    const answers: number[] = [];
    for (let asked = 0; asked < 12; asked++) answers.push((await ask(visit(), victim)).status);
    expect(answers).toEqual([...Array(5).fill(303), ...Array(7).fill(429)]);
    for (let sent = 0; sent < 5; sent++) await mail.take(victim);
    expect(mail.mails.filter(({ recipients }) => recipients.includes(victim))).toHaveLength(5);
  });

  it("lets one client ask ten times in ten minutes, for whatever addresses", async () => {
    const answers: number[] = [];
    const visitor = visit();
    for (let asked = 0; asked < 14; asked++) answers.push((await ask(visitor, person("somebody"))).status);
    expect(answers).toEqual([...Array(10).fill(303), ...Array(4).fill(429)]);
  });

  it("keeps counting after a restart", async () => {
    const victim = person("victim");
    const dataFolder = mkdtempSync(join(tmpdir(), "demilune-restart-"));
    const life = { MAIL_URL: mail.url, DATA_DIR: dataFolder };
    const first = await startServer(life);
    for (let asked = 0; asked < 5; asked++) await ask(new Visitor(first.origin), victim);
    await first.stop();
    const second = await startServer(life);
    expect((await ask(new Visitor(second.origin), victim)).status).toBe(429);
    await second.stop();
    rmSync(dataFolder, { recursive: true });
  });

  it.each([
    "victim@refused.example\r\nBcc: everybody@refused.example",
    "victim@refused.example\nSubject: hello",
    "victim@refused.example, other@refused.example",
    "Name <victim@refused.example>",
    "victim@refused.example;other@refused.example",
    '"a b"@refused.example',
    "victim@refused.example\u0000",
    "victim@refused",
    `${"a".repeat(250)}@refused.example`,
    "",
  ])("refuses %j as an address, says so, and mails nobody (1.3.11)", async (address) => {
    const response = await ask(visit(), address);
    expect(response.status).toBe(400);
    expect(await response.text()).toContain("is not an e-mail address");
    expect(mail.mails.flatMap(({ recipients }) => recipients).join()).not.toContain("refused.example");
  });

  it("goes nowhere else after sign-in (3.7.2)", async () => {
    const victim = person("victim");
    const visitor = visit();
    await ask(visitor, victim, "//elsewhere.example/page");
    const code = codeIn(await mail.take(victim));
    const response = await visitor.post("/sign-in/code", { code, to: "https://elsewhere.example" });
    expect(response.headers.get("location")).toBe("/");
  });

  it("builds the link in the mail from the configured origin alone, and opening it signs nobody in (7.6.2)", async () => {
    const victim = person("victim");
    const visitor = visit();
    await visitor.post(
      "/sign-in",
      { email: victim },
      { "x-forwarded-host": "elsewhere.example", forwarded: "host=elsewhere.example" },
    );
    const text = (await mail.take(victim)).text ?? "";
    expect(text).not.toContain("elsewhere");
    const link = /https?:\/\/\S+/.exec(text)![0];
    expect(link.startsWith(`${server.origin}/`)).toBe(true);
    const opened = await visitor.get(link.slice(server.origin.length));
    expect(opened.status).toBe(200);
    expect(opened.headers.getSetCookie().join()).not.toContain("sid=");
    expect(await isSignedIn(visitor)).toBe(false);
  });

  it("gives a new session at sign-in, whatever cookie came along (7.2.4), and ends it on the server (7.4.1)", async () => {
    const victim = person("victim");
    const visitor = visit();
    const planted = btoa(JSON.stringify("planted"));
    visitor.cookies.set("sid", planted);
    const code = await askAndTake(visitor, victim);
    await visitor.post("/sign-in/code", { code });
    const token = visitor.cookies.get("sid")!;
    expect(token).not.toBe(planted);
    const out = await visitor.post("/sign-out");
    expect(out.headers.get("clear-site-data")).toBe('"cache", "storage"');
    const thief = visit();
    thief.cookies.set("sid", token);
    expect(await isSignedIn(thief)).toBe(false);
  });

  it("answers the same for an address it knows and one it does not (6.3.8)", async () => {
    const known = "astrid@halden.example";
    const unknown = "nobody@halden.example";
    const closed = await startServer({ MAIL_URL: mail.url, SIGN_UP: "off" });
    const answer = async (email: string) => {
      const visitor = new Visitor(closed.origin);
      const asked = await ask(visitor, email);
      const page = await (await visitor.get("/sign-in/code")).text();
      const tried = await visitor.post("/sign-in/code", { code: "00000000" });
      const withoutNonces = (text: string) => text.replace(/nonce(=|\\?":\\?)"[^"]+"/g, "");
      return [
        asked.status,
        asked.headers.get("location"),
        [...visitor.cookies.keys()],
        withoutNonces(page),
        tried.status,
        withoutNonces(await tried.text()),
      ];
    };
    expect(await answer(unknown)).toEqual(await answer(known));
    await mail.take(known);
    await closed.stop();
    expect(mail.mails.flatMap(({ recipients }) => recipients)).not.toContain(unknown);
  });

  it("writes no code, token or cookie into the log (16.2.5)", async () => {
    const victim = person("victim");
    const visitor = visit();
    const code = await askAndTake(visitor, victim);
    await visitor.get(`/sign-in/code?code=${code}`);
    await visitor.post("/sign-in/code", { code });
    const printed = server.output();
    for (const secret of [code, `${code.slice(0, 4)} ${code.slice(4)}`, ...visitor.cookies.values()])
      expect(printed).not.toContain(secret);
    expect(printed).toContain('"event":"signedIn"');
    expect(printed).toContain('"event":"codeSent"');
  });
});
