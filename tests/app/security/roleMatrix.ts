/**
 * Who may do what: one row a route (its id in `app/routes.ts`, which is its file without the extension), one entry a
 * method. A route without a row, or a row without a route, fails the test beside this file.
 *
 * To add a route: add its row here. If its path has a parameter besides `labId`, name in `parameters` where an object
 * of a given lab is found.
 */
import type { Visitor } from "../../support/visitor";

/** The least that is needed. `everybody` includes visitors; the roles are roles in the lab of the address. */
export type Needed = "everybody" | "signedIn" | "viewer" | "researcher" | "owner";

export interface Access {
  needed: Needed;
  /** What is sent; the empty form where absent. It need not be valid: a 400 shows that one was let in. */
  form?: Record<string, string>;
  /** The answer for those who may, where it is one that otherwise means refusal. */
  answer?: number;
  /** Whether it signs in or out; whoever asked starts afresh then. */
  changesSession?: boolean;
  /** The query string to ask with. */
  query?: string;
}

/** `GET` is the page or the data, `POST` stands for every unsafe method. */
export type Row = Partial<Record<"GET" | "POST", Access>>;

const everybody: Access = { needed: "everybody" };
const signedIn: Access = { needed: "signedIn" };
const viewer: Access = { needed: "viewer" };
const researcher: Access = { needed: "researcher" };

export const matrix: Record<string, Row> = {
  "routes/public/landing": { GET: everybody },
  "routes/public/notFound": { GET: { needed: "everybody", answer: 404 }, POST: { needed: "everybody", answer: 404 } },
  "routes/public/mailbox": { GET: everybody },
  "routes/public/demo": { POST: { needed: "everybody", form: { role: "viewer" }, changesSession: true } },
  "routes/public/theme": { POST: everybody },
  "routes/account/signIn": { GET: everybody, POST: everybody },
  "routes/account/signInCode": { GET: everybody, POST: everybody },
  "routes/account/signOut": { POST: { needed: "everybody", changesSession: true } },
  "routes/account/account": { GET: signedIn, POST: signedIn },
  "routes/account/newLab": { POST: signedIn },
  "routes/lab/layout": { GET: viewer },
  "routes/lab/index": { GET: viewer },
  "routes/lab/people": { GET: viewer },
  "routes/lab/activity": { GET: viewer },
  "routes/lab/scenarios/overlays": { POST: researcher },
  "routes/lab/scenarios/shares": { GET: researcher, POST: researcher },
  "routes/shared/open": { GET: { needed: "everybody", answer: 404 } },
  "routes/shared/guest": { GET: { needed: "everybody", answer: 404 } },
  "routes/shared/copy": { POST: { needed: "signedIn", answer: 404 } },
  "routes/lab/measurements/list": { GET: viewer },
  "routes/lab/measurements/import": { GET: researcher, POST: researcher },
  "routes/lab/measurements/measurement": { GET: viewer, POST: researcher },
  "routes/lab/measurements/raw": { GET: viewer },
  "routes/lab/samples/list": { GET: viewer, POST: researcher },
  "routes/lab/samples/sample": { GET: viewer, POST: researcher },
  "routes/lab/scenarios/bench": { GET: viewer, POST: { needed: "researcher", form: { intent: "discard" } } },
  "routes/lab/scenarios/predictionCsv": { GET: viewer },
  "routes/lab/scenarios/list": { GET: viewer, POST: researcher },
  "routes/lab/scenarios/new": { GET: researcher, POST: researcher },
  "routes/lab/scenarios/stack": { GET: viewer, POST: researcher },
  "routes/lab/scenarios/revisions": { GET: viewer, POST: researcher },
  "routes/lab/scenarios/revision": { GET: viewer },
  "routes/lab/scenarios/difference": { GET: viewer },
  "routes/lab/scenarios/document": { GET: viewer },
  "routes/lab/materials/list": { GET: viewer, POST: researcher },
  "routes/lab/materials/new": { GET: researcher, POST: researcher },
  "routes/lab/materials/material": { GET: viewer, POST: researcher },
};

export interface LabWorld {
  id: string;
  /** Signed in as owner of this lab; may make what the seed lacks. */
  owner: Visitor;
  /** The first column of the first row; `?` is the lab's id. */
  select(sql: string): Promise<string | undefined>;
}

/** A measurement of the lab, imported where it has none. */
async function measurementOf(lab: LabWorld): Promise<string | undefined> {
  const find = () => lab.select("SELECT id FROM measurements WHERE lab_id = ?");
  const kept = await find();
  if (kept) return kept;
  const pasted = "frequencyHz,re,im\n1,0.8,-0.01\n10,0.7,-0.1\n100,0.1,-0.2\n1000,0.01,-0.05\n";
  const form = { intent: "store", pasted, "name-0": "Matrix", sampleName: "Matrix sample" };
  await lab.owner.post(`/lab/${lab.id}/measurements/import`, form);
  return find();
}

/** A sample of the lab; an import brings one along. */
async function sampleOf(lab: LabWorld): Promise<string | undefined> {
  const find = () => lab.select("SELECT id FROM samples WHERE lab_id = ?");
  const kept = await find();
  if (kept) return kept;
  await lab.owner.post(`/lab/${lab.id}/samples`, { name: "Matrix sample" });
  return find();
}

/** Where the value of a path's parameter comes from. */
export const parameters: Record<string, (lab: LabWorld) => Promise<string | undefined>> = {
  "*": async () => "no/such/page",
  token: async () => "a-secret-that-was-never-made",
  shareId: async () => "01JZZZZZZZZZZZZZZZZZZZZZZZ",
  measurementId: measurementOf,
  sampleId: sampleOf,
  scenarioId: (lab) => lab.select("SELECT id FROM scenarios WHERE lab_id = ? ORDER BY id LIMIT 1"),
  materialId: (lab) => lab.select("SELECT id FROM materials WHERE lab_id = ? ORDER BY created_at LIMIT 1"),
  number: async () => "1",
};
