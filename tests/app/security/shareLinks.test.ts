/** Share links over HTTP: the secret leaves the address at once, and nothing is shown without it (ASVS 5.0.0, 14.2.1). */
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type RunningServer, startServer } from "../../support/server";
import { Visitor } from "../../support/visitor";

let server: RunningServer;
let shares: string;
let owner: Visitor;

beforeAll(async () => {
  server = await startServer();
  owner = new Visitor(server.origin);
  const labPath = await owner.enterDemo("researcher");
  const list = await (await owner.get(`${labPath}/scenarios`)).text();
  const scenarioId = /\/scenarios\/([0-9A-Z]{26})/.exec(list)![1];
  shares = `${labPath}/scenarios/${scenarioId}/shares`;
});
afterAll(() => server.stop());

/** A new link: its path with the secret. */
async function link(): Promise<string> {
  const page = await (await owner.post(shares, { intent: "create", revisionNumber: "1", days: "90", note: "" })).text();
  return /\/s\/[\w-]{43}/.exec(page)![0];
}

describe("a share link", () => {
  it("moves the secret from the address into a cookie of its own and leaves no trace", async () => {
    const guest = new Visitor(server.origin);
    const path = await link();
    const opened = await guest.get(path);
    expect(opened.status).toBe(303);
    const to = opened.headers.get("location")!;
    expect(to).toMatch(/^\/shared\/[0-9A-Z]{26}$/);
    expect(opened.headers.get("cache-control")).toContain("no-store");
    expect(opened.headers.get("referrer-policy")).toBe("no-referrer");
    expect(opened.headers.get("x-robots-tag")).toContain("noindex");
    expect(opened.headers.get("set-cookie")).toMatch(/^share-[0-9A-Z]{26}=.*HttpOnly.*SameSite=Lax/i);
    const page = await guest.get(to);
    expect(page.status).toBe(200);
    expect(page.headers.get("referrer-policy")).toBe("no-referrer");
    expect(await page.text()).not.toContain(path.slice(3));
    expect(server.output()).not.toContain(path.slice(3));
  });

  it("shows nothing without its cookie, and one link's cookie opens no other", async () => {
    const [one, other] = [new Visitor(server.origin), new Visitor(server.origin)];
    const first = (await one.get(await link())).headers.get("location")!;
    const second = (await other.get(await link())).headers.get("location")!;
    expect((await new Visitor(server.origin).get(first)).status).toBe(404);
    expect((await one.get(second)).status).toBe(404);
    const [, token] = [...one.cookies].find(([name]) => name.startsWith("share-"))!;
    one.cookies.set(`share-${second.split("/").at(-1)}`, token);
    expect((await one.get(second)).status).toBe(404);
  });

  it("is gone everywhere the moment it is revoked", async () => {
    const guest = new Visitor(server.origin);
    const path = await link();
    const to = (await guest.get(path)).headers.get("location")!;
    await owner.post(shares, { intent: "revoke", shareId: to.split("/").at(-1)! });
    for (const gone of [await guest.get(path), await guest.get(to)]) {
      expect(gone.status).toBe(410);
      expect(await gone.text()).toContain("revoked");
    }
  });

  it("lets a guest store nothing without signing in", async () => {
    const guest = new Visitor(server.origin);
    const to = (await guest.get(await link())).headers.get("location")!;
    const answer = await guest.post(`${to}/copy`, { labId: "", document: "{}" });
    expect(answer.status).toBe(303);
    expect(answer.headers.get("location")).toMatch(/^\/sign-in/);
  });

  it("cannot be guessed at speed", async () => {
    const guesser = new Visitor(server.origin);
    const statuses: number[] = [];
    for (let turn = 0; turn < 25; turn++) statuses.push((await guesser.get(`/s/guess${turn}`)).status);
    expect(statuses.slice(0, 10)).toEqual(Array(10).fill(404));
    expect(statuses.at(-1)).toBe(429);
  });
});
