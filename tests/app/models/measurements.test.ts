import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { starterNamed } from "~/lib/starters";
import { readMeasurementText } from "~/lib/textImport/readText";
import { createLab } from "~/models/labs.server";
import {
  findMeasurement,
  findPoints,
  findRawFileOf,
  importMeasurements,
  listMeasurements,
  replaceReading,
  setMeasurementArchived,
} from "~/models/measurements.server";
import { attachMeasurement, detachMeasurement, listOverlays } from "~/models/overlays.server";
import { createScenario } from "~/models/scenarios.server";
import { createShare, findShare, listShares, revokeShare } from "~/models/shares.server";
import { ensureUser } from "~/models/users.server";
import { withTemporaryDatabase } from "./temporaryDatabase";

withTemporaryDatabase();

const bytes = new TextEncoder().encode(
  `# technique: imps\n# bias: shortCircuit\n# fluxPerCm2S: 1e16\nfrequencyHz,re,im,sigma\n${"# filler ".repeat(1)}\n1,0.8,-0.01,0.001\n10,0.7,-0.2,0.001\n10,0.71,-0.21,0.001\n100,0.2,-0.3,0.002\n1000,0.02,-0.08,0.003\n`,
);

let labs = 0;
async function lab() {
  const user = await ensureUser(`person${++labs}@halden.example`, "Person");
  const made = await createLab(`Lab ${labs}`, [{ userId: user.id, role: "owner" }]);
  return { labId: made.id, userId: user.id };
}

async function imported(actor: { labId: string; userId: string }, content = bytes) {
  const reading = readMeasurementText(content, "a.csv", {});
  if (reading.status === "refused") throw new Error(reading.message);
  const [id] = await importMeasurements(
    actor,
    { name: "a.csv", bytes: content },
    [{ index: 0, name: "First", spectrum: reading.spectra[0] }],
    { settings: {}, sample: { name: "K-1" }, instrument: "", measuredAt: "", note: "", licence: "" },
  );
  return id;
}

const scenario = (actor: { labId: string; userId: string }) =>
  createScenario(actor, structuredClone(starterNamed("dye-film")!.document));

describe("measurements", () => {
  it("keep points, repeats and sample, and the raw file byte for byte", async () => {
    const actor = await lab();
    const id = await imported(actor);
    const measurement = await findMeasurement(actor.labId, id);
    expect(measurement).toMatchObject({
      name: "First",
      technique: "imps",
      sampleName: "K-1",
      pointCount: 5,
      fluxPerCm2S: 1e16,
    });
    expect((await findPoints(actor.labId, [id])).get(id)).toEqual({
      frequencyHz: [1, 10, 10, 100, 1000],
      re: [0.8, 0.7, 0.71, 0.2, 0.02],
      im: [-0.01, -0.2, -0.21, -0.3, -0.08],
      sigma: [0.001, 0.001, 0.001, 0.002, 0.003],
      masked: [false, false, false, false, false],
    });
    const raw = await findRawFileOf(actor.labId, measurement!);
    expect(raw?.bytes).toEqual(bytes);
    expect(raw?.file.sha256).toBe(createHash("sha256").update(bytes).digest("hex"));
  });

  it("keep a file of several chunks whole", async () => {
    const actor = await lab();
    const filler = new TextEncoder().encode("# filler line of a long file\n".repeat(90_000));
    const long = new Uint8Array([...filler, ...bytes]);
    const id = await imported(actor, long);
    const raw = await findRawFileOf(actor.labId, (await findMeasurement(actor.labId, id))!);
    expect(Buffer.from(raw!.bytes).equals(Buffer.from(long))).toBe(true);
  });

  it("can be read again differently, filtered and archived", async () => {
    const actor = await lab();
    const id = await imported(actor);
    const again = readMeasurementText(bytes, "a.csv", { imaginarySign: "reversed", technique: "imvs" });
    if (again.status === "refused") throw new Error(again.message);
    await replaceReading(actor, id, { index: 0, spectrum: again.spectra[0] }, { imaginarySign: "reversed" });
    expect((await findMeasurement(actor.labId, id))?.technique).toBe("imvs");
    expect((await findPoints(actor.labId, [id])).get(id)?.im[0]).toBe(0.01);
    expect((await listMeasurements(actor.labId, { filter: "k-1" })).total).toBe(1);
    expect((await listMeasurements(actor.labId, { filter: "%" })).total).toBe(0);
    await setMeasurementArchived(actor, id, true);
    expect((await listMeasurements(actor.labId)).total).toBe(0);
    expect((await listMeasurements(actor.labId, { archived: true })).total).toBe(1);
  });

  it("of another lab do not exist", async () => {
    const own = await lab();
    const other = await lab();
    const id = await imported(other);
    expect(await findMeasurement(own.labId, id)).toBeUndefined();
    expect((await findPoints(own.labId, [id])).size).toBe(0);
    expect(await setMeasurementArchived(own, id, true)).toBe(false);
    expect(await attachMeasurement(own, await scenario(own), id)).toBe(false);
    expect(await attachMeasurement(own, await scenario(other), id)).toBe(false);
  });

  it("lie over a scenario until they are taken off", async () => {
    const actor = await lab();
    const [id, scenarioId] = [await imported(actor), await scenario(actor)];
    await attachMeasurement(actor, scenarioId, id);
    await attachMeasurement(actor, scenarioId, id);
    expect((await listOverlays(actor.labId, scenarioId)).map(({ name }) => name)).toEqual(["First"]);
    await detachMeasurement(actor, scenarioId, id);
    expect(await listOverlays(actor.labId, scenarioId)).toEqual([]);
  });
});

describe("share links", () => {
  const request = { revisionNumber: 1, measurementIds: [], exposed: null, days: 90, note: "" };

  it("open one fixed revision with 256 random bits, of which only the hash is kept", async () => {
    const actor = await lab();
    const scenarioId = await scenario(actor);
    const made = await createShare(actor, scenarioId, request);
    expect(Buffer.from(made!.token, "base64url")).toHaveLength(32);
    const found = await findShare(made!.token);
    expect(found).toMatchObject({ state: "open", share: { id: made!.id, revisionNumber: 1 } });
    expect(JSON.stringify(await listShares(actor.labId, scenarioId))).not.toContain(made!.token);
    expect(await findShare(`${made!.token.slice(0, -1)}_`)).toEqual({ state: "unknown" });
  });

  it("end at their time and when they are revoked, by their own lab only", async () => {
    const actor = await lab();
    const other = await lab();
    const scenarioId = await scenario(actor);
    const made = await createShare(actor, scenarioId, { ...request, days: 2 });
    const later = (days: number) => new Date(Date.now() + days * 86_400_000);
    expect((await findShare(made!.token, later(1.99))).state).toBe("open");
    expect((await findShare(made!.token, later(2.01))).state).toBe("expired");
    expect(await revokeShare(other, scenarioId, made!.id)).toBe(false);
    expect((await findShare(made!.token)).state).toBe("open");
    expect(await revokeShare(actor, scenarioId, made!.id)).toBe(true);
    expect((await findShare(made!.token)).state).toBe("revoked");
  });

  it("carry only measurements of their own lab, and are not made for a scenario of another", async () => {
    const actor = await lab();
    const other = await lab();
    const [own, foreign] = [await imported(actor), await imported(other)];
    const made = await createShare(actor, await scenario(actor), { ...request, measurementIds: [own, foreign] });
    expect(await findShare(made!.token)).toMatchObject({ share: { measurementIds: [own] } });
    expect(await createShare(actor, await scenario(other), request)).toBeUndefined();
  });
});
