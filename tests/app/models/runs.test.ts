import { type ResultDocument, solve } from "@demilune/solver";
import { beforeAll, describe, expect, it } from "vitest";
import { starters } from "~/lib/starters";
import { createLab } from "~/models/labs.server";
import { findRun, keepRun } from "~/models/runs.server";
import { ensureUser } from "~/models/users.server";
import { packResult } from "~/queue/packedResult";
import { withTemporaryDatabase } from "./temporaryDatabase";

withTemporaryDatabase();

const document = starters.find(({ key }) => key === "dye-film")!.document;
let labId: string;
let userId: string;
let result: ResultDocument;
const timing = { startedAt: new Date(), milliseconds: 2 };

beforeAll(async () => {
  userId = (await ensureUser("runs@lab.example", "Runs")).id;
  labId = (await createLab("Lab of runs", [{ userId, role: "owner" }])).id;
  result = solve(document);
});

describe("a kept run", () => {
  it("is found by its hash and comes back bit for bit", async () => {
    await keepRun(labId, userId, document, packResult(result), timing);
    const run = await findRun(labId, result.hash);
    expect(run?.result).toEqual(result);
    expect(run?.outdated).toBe(false);
  });

  it("is kept once, also when two requests bring it together", async () => {
    const together = { ...result, hash: "together" };
    await Promise.all([1, 2].map(() => keepRun(labId, userId, document, packResult(together), timing)));
    expect((await findRun(labId, "together"))?.result).toEqual(together);
  });

  it("is not seen from another lab", async () => {
    const other = await createLab("Another lab", [{ userId, role: "owner" }]);
    expect(await findRun(other.id, result.hash)).toBeUndefined();
  });

  it("of an older solver stays readable and is marked", async () => {
    const older = { ...result, solver: "0.0.1", hash: "older" };
    await keepRun(labId, userId, document, packResult(older), timing);
    expect(await findRun(labId, "older")).toMatchObject({ outdated: true, result: older });
  });

  it("larger than one chunk comes back whole", async () => {
    const points = 60_000;
    const list = Array.from({ length: points }, (_, index) => Math.sin(index));
    const spectrum = result.spectra[0];
    if (spectrum.status !== "solved") throw new Error("The starter has a spectrum that is solved.");
    const large = { ...result, hash: "large", spectra: [{ ...spectrum, frequencyHz: list, re: list, im: list }] };
    await keepRun(labId, userId, document, packResult(large), timing);
    expect((await findRun(labId, "large"))?.result).toEqual(large);
  });
});
