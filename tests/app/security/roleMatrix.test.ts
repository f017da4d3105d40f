/** Every route and method, asked for by everybody, over HTTP against the built server. */
import { createClient } from "@libsql/client";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { type RunningServer, startServer } from "../../support/server";
import { Visitor } from "../../support/visitor";
import { type Access, type LabWorld, matrix, type Needed, parameters } from "./roleMatrix";

interface BuiltRoute {
  id: string;
  parentId?: string;
  path?: string;
  index?: boolean;
  module: { loader?: unknown; action?: unknown; default?: unknown };
}
const { build } = (await import("../../../build/server/index.js" as string)) as {
  build: { routes: Record<string, BuiltRoute> };
};

/** Layouts without a path of their own answer nothing by themselves. */
const routes = Object.values(build.routes).filter((route) => route.path || route.index);

const pattern = (route: BuiltRoute): string => {
  const parent = route.parentId ? build.routes[route.parentId] : undefined;
  return (parent ? pattern(parent) : "") + (route.path ? `/${route.path}` : "");
};
const methodsOf = ({ module }: BuiltRoute) => [
  ...(module.loader || module.default ? (["GET"] as const) : []),
  ...(module.action ? (["POST"] as const) : []),
];
const isInLab = (route: BuiltRoute) => pattern(route).startsWith("/lab/:labId");
const otherParameters = (route: BuiltRoute) =>
  [...pattern(route).matchAll(/:(\w+)|\*/g)].map(([whole, name]) => name ?? whole).filter((name) => name !== "labId");

const actors = ["stranger", "viewer", "researcher", "owner", "otherOwner"] as const;
type Actor = (typeof actors)[number];
const rank: Record<Needed, number> = { everybody: 0, signedIn: 1, viewer: 2, researcher: 3, owner: 4 };
const standing: Record<Actor, number> = { stranger: 0, otherOwner: 1, viewer: 2, researcher: 3, owner: 4 };

let server: RunningServer;
let labs: Record<"own" | "other", LabWorld>;
const visitors = new Map<Actor, Visitor>();

/** Signs in through the demo's entrance, the other lab's owner by a code from the mailbox. */
async function signIn(actor: Actor): Promise<Visitor> {
  const visitor = new Visitor(server.origin);
  if (actor === "otherOwner") {
    await visitor.post("/sign-in", { email: "orla@kestrel.example" });
    const code = /code is (\d{4} \d{4})/.exec(await (await visitor.get("/mailbox")).text())![1];
    const answer = await visitor.post("/sign-in/code", { code });
    if (answer.status !== 303) throw new Error(`Sign-in answered ${answer.status}`);
  } else if (actor !== "stranger") await visitor.enterDemo(actor);
  return visitor;
}

async function labWorld(name: string, actor: Actor): Promise<LabWorld> {
  const client = createClient({ url: `file:${server.dataFolder}/demilune.db`, timeout: 10_000 });
  const select = async (sql: string, args: string[]) => {
    const row = (await client.execute({ sql, args })).rows[0];
    return row === undefined ? undefined : String(row[0]);
  };
  const id = await select("SELECT id FROM labs WHERE name = ?", [name]);
  if (!id) throw new Error(`There is no lab called ${name}`);
  return {
    id,
    // Looked up at each use: the test that signs out begins a new session.
    get owner() {
      return visitors.get(actor)!;
    },
    select: (sql) => select(sql, [id]),
  };
}

async function pathOf(route: BuiltRoute, lab: LabWorld, objectsOf = lab): Promise<string> {
  let path = pattern(route).replace(":labId", lab.id) || "/";
  for (const name of otherParameters(route)) {
    const find = parameters[name];
    if (!find) throw new Error(`roleMatrix.ts does not say where a value of the parameter ${name} comes from`);
    const value = await find(objectsOf);
    if (!value) throw new Error(`The lab has nothing to put in the place of the parameter ${name}`);
    path = path.replace(name === "*" ? "*" : `:${name}`, value);
  }
  return path;
}

beforeAll(async () => {
  server = await startServer();
  for (const actor of actors) visitors.set(actor, await signIn(actor));
  labs = {
    own: await labWorld("Halden thin-film group", "owner"),
    other: await labWorld("Kestrel photoelectrode lab", "otherOwner"),
  };
});
afterAll(() => server.stop());

function ask(visitor: Visitor, method: string, path: string, access: Access) {
  return method === "GET" ? visitor.get(path + (access.query ?? "")) : visitor.post(path, access.form ?? {});
}

const leadsToSignIn = (response: Response) =>
  response.status === 303 && /^\/sign-in/.test(response.headers.get("location") ?? "");

describe("the role matrix", () => {
  it("has a row for every route and method, and none besides", () => {
    const rows = Object.entries(matrix).flatMap(([id, row]) => Object.keys(row).map((method) => `${method} ${id}`));
    expect(rows.sort()).toEqual(
      routes.flatMap((route) => methodsOf(route).map((method) => `${method} ${route.id}`)).sort(),
    );
  });

  const cases = routes.flatMap((route) =>
    methodsOf(route).flatMap((method) => actors.map((actor) => ({ route, id: route.id, method, actor }))),
  );
  it.each(cases)("$method $id as $actor", async ({ route, method, actor }) => {
    const access = matrix[route.id]?.[method];
    if (!access) throw new Error(`${method} ${route.id} has no row`);
    const response = await ask(visitors.get(actor)!, method, await pathOf(route, labs.own), access);
    const { status } = response;
    if (standing[actor] >= rank[access.needed]) {
      expect(leadsToSignIn(response)).toBe(false);
      expect(status).toBeLessThan(500);
      if (access.answer) expect(status).toBe(access.answer);
      else expect([401, 403, 404, 405]).not.toContain(status);
    } else if (actor === "stranger") expect(leadsToSignIn(response) || status === 404).toBe(true);
    else expect(status).toBe(actor === "otherOwner" ? 404 : 403);
    if (access.changesSession) visitors.set(actor, await signIn(actor));
  });

  const labRoutes = routes.filter(isInLab);
  it.each(labRoutes.filter((route) => route.module.loader))(
    "does not hand the data of $id alone to those outside the lab",
    async (route) => {
      const path = `${await pathOf(route, labs.own)}.data?_routes=${encodeURIComponent(route.id)}`;
      expect((await visitors.get("owner")!.get(path)).status).toBe(200);
      for (const actor of ["stranger", "otherOwner"] as const) {
        const response = await visitors.get(actor)!.get(path);
        // A redirect travels inside a 202; a refusal has the status of the refusal.
        if (actor === "stranger")
          expect([response.status, await response.text()]).toEqual([202, expect.stringContaining("/sign-in")]);
        else expect(response.status).toBe(404);
      }
    },
  );

  const objectRoutes = labRoutes
    .filter((route) => otherParameters(route).length > 0)
    .flatMap((route) => methodsOf(route).map((method) => ({ route, id: route.id, method })));
  for (const { route, id, method } of objectRoutes)
    it(`${method} ${id} does not find another lab's object through one's own lab`, async () => {
      const path = await pathOf(route, labs.own, labs.other);
      const response = await ask(visitors.get("owner")!, method, path, matrix[id]![method]!);
      expect(response.status).toBe(404);
    });
});
