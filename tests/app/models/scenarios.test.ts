import { parseScenario, ScenarioError } from "@demilune/solver";
import { beforeAll, describe, expect, it } from "vitest";
import { newScenario } from "~/lib/stackEdits";
import { starters } from "~/lib/starters";
import { listActivity } from "~/models/activity.server";
import { createLab } from "~/models/labs.server";
import {
  type Actor,
  countScenarios,
  createScenario,
  dropDraft,
  duplicateScenario,
  findDraft,
  findRevision,
  findScenario,
  listRevisions,
  listScenarios,
  restoreRevision,
  saveDraft,
  saveRevision,
  setArchived,
} from "~/models/scenarios.server";
import { ensureUser } from "~/models/users.server";
import { seedScenarios } from "../../../drizzle/seedScenarios";
import { withTemporaryDatabase } from "./temporaryDatabase";

withTemporaryDatabase();

let actor: Actor & { userId: string };
let stranger: Actor & { userId: string };

beforeAll(async () => {
  const [one, other] = [
    await ensureUser("one@lab.example", "Iben Holt"),
    await ensureUser("two@lab.example", "Tor Lund"),
  ];
  actor = { labId: (await createLab("first", [{ userId: one.id, role: "researcher" }])).id, userId: one.id };
  stranger = { labId: (await createLab("second", [{ userId: other.id, role: "owner" }])).id, userId: other.id };
});

const document = (name: string, thicknessNm = 500) => {
  const start = newScenario(name);
  return { ...start, stack: { ...start.stack, layers: [{ ...start.stack.layers[0], thicknessNm }] } };
};

describe("scenarios", () => {
  it("keep revisions that never change, with author, note and hash", async () => {
    const id = await createScenario(actor, document("first"), { note: "start" });
    const saved = await saveRevision(actor, id, {
      document: document("first", 400),
      baseRevisionNumber: 1,
      note: "thinner",
    });
    expect(saved).toEqual({ ok: true, number: 2 });
    const [one, two] = [await findRevision(actor.labId, id, 1), await findRevision(actor.labId, id)];
    expect(one?.document.stack.layers[0].thicknessNm).toBe(500);
    expect(two).toMatchObject({ number: 2, note: "thinner", authorName: "Iben Holt" });
    expect(two?.document.stack.layers[0].thicknessNm).toBe(400);
    expect(one?.hash).not.toBe(two?.hash);
    expect((await listRevisions(actor.labId, id)).map(({ number }) => number)).toEqual([2, 1]);
    const happenings = await listActivity(actor.labId);
    expect(happenings[0]).toMatchObject({
      kind: "saved a revision of",
      text: "first, revision 2",
      userName: "Iben Holt",
    });
  });

  it("refuse to save over somebody else's revision, also when two save at the same time", async () => {
    const id = await createScenario(actor, document("contested"));
    const both = await Promise.all(
      [300, 200].map((nm) => saveRevision(actor, id, { document: document("contested", nm), baseRevisionNumber: 1 })),
    );
    expect(both.filter((outcome) => outcome?.ok)).toHaveLength(1);
    expect(both.find((outcome) => !outcome?.ok)).toEqual({ ok: false, conflict: { latest: 2 } });
    expect(await listRevisions(actor.labId, id)).toHaveLength(2);
    expect(await saveRevision(actor, id, { document: document("contested"), baseRevisionNumber: 7 })).toEqual({
      ok: false,
      conflict: { latest: 2 },
    });
  });

  it("restore an earlier revision as a new one", async () => {
    const id = await createScenario(actor, document("restored", 500));
    await saveRevision(actor, id, { document: document("restored", 100), baseRevisionNumber: 1 });
    expect(await restoreRevision(actor, id, 1)).toEqual({ ok: true, number: 3 });
    const latest = await findRevision(actor.labId, id);
    expect(latest?.document.stack.layers[0].thicknessNm).toBe(500);
    expect(latest?.note).toBe("Restored from revision 1");
    expect(await restoreRevision(actor, id, 9)).toBeUndefined();
  });

  it("refuse a document that cannot be solved, and store nothing of it", async () => {
    const before = await countScenarios(actor.labId);
    await expect(createScenario(actor, document("bad", -5))).rejects.toThrow(ScenarioError);
    expect(await countScenarios(actor.labId)).toEqual(before);
  });

  it("keep a draft per person that need not be valid, and drop it with the save", async () => {
    const id = await createScenario(actor, document("drafted"));
    expect(await findDraft(actor, id)).toBeUndefined();
    await saveDraft(actor, id, { document: { half: "typed" }, baseRevisionNumber: 1 });
    await saveDraft(actor, id, { document: { half: "typed more" }, baseRevisionNumber: 1 });
    expect(await findDraft(actor, id)).toMatchObject({ document: { half: "typed more" }, baseRevisionNumber: 1 });
    expect(await findDraft({ ...actor, userId: stranger.userId }, id)).toBeUndefined();
    await saveRevision(actor, id, { document: document("drafted", 10), baseRevisionNumber: 1 });
    expect(await findDraft(actor, id)).toBeUndefined();
    await saveDraft(actor, id, { document: {}, baseRevisionNumber: 2 });
    await dropDraft(actor, id);
    expect(await findDraft(actor, id)).toBeUndefined();
  });

  it("are copied, archived and taken out again", async () => {
    const id = await createScenario(actor, document("original"));
    const copy = await duplicateScenario(actor, id);
    expect(await findScenario(actor.labId, copy!)).toMatchObject({ name: "original, copy" });
    expect(await setArchived(actor, id, true)).toBe(true);
    const names = async (archived: boolean) =>
      (await listScenarios(actor.labId, { archived })).scenarios.map(({ name }) => name);
    expect(await names(false)).not.toContain("original");
    expect(await names(true)).toEqual(["original"]);
    await setArchived(actor, id, false);
    expect(await names(true)).toEqual([]);
  });

  it("are filtered as typed, sorted and paged", async () => {
    for (const name of ["100% yield", "1000 yield", "alpha_1", "alphab1"]) await createScenario(actor, document(name));
    const filtered = async (filter: string) =>
      (await listScenarios(actor.labId, { filter })).scenarios.map(({ name }) => name);
    expect(await filtered("0%")).toEqual(["100% yield"]);
    expect(await filtered("ALPHA_")).toEqual(["alpha_1"]);
    const { scenarios: byName, total } = await listScenarios(actor.labId, { sort: "name" });
    expect(byName.map(({ name }) => name)).toEqual(
      byName.map(({ name }) => name).toSorted((a, b) => a.toLowerCase().localeCompare(b.toLowerCase(), "en")),
    );
    expect(total).toBe(byName.length);
    expect((await listScenarios(actor.labId, { page: 2 })).scenarios).toEqual([]);
  });

  it("do not exist for another lab", async () => {
    const id = await createScenario(actor, document("secret"));
    const { labId } = stranger;
    expect(await findScenario(labId, id)).toBeUndefined();
    expect(await findRevision(labId, id)).toBeUndefined();
    expect(await listRevisions(labId, id)).toEqual([]);
    expect(await saveRevision(stranger, id, { document: document("taken"), baseRevisionNumber: 1 })).toBeUndefined();
    expect(await restoreRevision(stranger, id, 1)).toBeUndefined();
    expect(await duplicateScenario(stranger, id)).toBeUndefined();
    expect(await setArchived(stranger, id, true)).toBe(false);
    expect(await saveDraft(stranger, id, { document: {}, baseRevisionNumber: 1 })).toBe(false);
    await dropDraft(stranger, id);
    expect(await findScenario(actor.labId, id)).toMatchObject({ name: "secret", archivedAt: null });
    expect((await listScenarios(labId)).scenarios).toEqual([]);
  });
});

describe("starters", () => {
  it("are valid scenarios with names of their own", () => {
    for (const { document } of starters) expect(() => parseScenario(document)).not.toThrow();
    expect(new Set(starters.map(({ document }) => document.name)).size).toBe(7);
  });

  it("are seeded once, the landing scenario on top", async () => {
    await seedScenarios(stranger.labId, stranger.userId);
    await seedScenarios(stranger.labId, stranger.userId);
    const { scenarios, total } = await listScenarios(stranger.labId);
    expect(total).toBe(7);
    expect(scenarios[0].name).toBe(starters[0].document.name);
  });
});
