import { beforeAll, describe, expect, it } from "vitest";
import { countSourced, noSource, valuesOf } from "~/lib/materialForm";
import { layerErrors } from "~/lib/materialForm.server";
import { newLayer } from "~/lib/stackEdits";
import { createLab } from "~/models/labs.server";
import {
  countMaterials,
  createMaterial,
  findMaterial,
  listMaterials,
  setMaterialArchived,
  updateMaterial,
} from "~/models/materials.server";
import type { Actor } from "~/models/scenarios.server";
import { ensureUser } from "~/models/users.server";
import { seedMaterials, starterShelf } from "../../../drizzle/seedScenarios";
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

const content = (name: string) => ({ name, layer: newLayer(name), sources: { thicknessNm: "measured" }, note: "" });

describe("the materials shelf", () => {
  it("keeps, changes, archives and lists by name", async () => {
    const id = await createMaterial(actor, content("zinc oxide"));
    await createMaterial(actor, content("Anatase"));
    expect((await listMaterials(actor.labId)).map(({ name }) => name)).toEqual(["Anatase", "zinc oxide"]);
    await updateMaterial(actor, id, {
      ...content("zinc oxide, doped"),
      layer: { ...newLayer("zinc oxide"), donorsPerCm3: 1e19 },
    });
    expect((await findMaterial(actor.labId, id))?.layer.donorsPerCm3).toBe(1e19);
    await setMaterialArchived(actor, id, true);
    expect((await listMaterials(actor.labId, { archived: true })).map(({ name }) => name)).toEqual([
      "zinc oxide, doped",
    ]);
    expect(await countMaterials(actor.labId)).toEqual({ kept: 1, archived: 1 });
    await setMaterialArchived(actor, id, false);
    expect((await listMaterials(actor.labId, { filter: "DOPED" })).length).toBe(1);
  });

  it("does not exist for another lab", async () => {
    const id = await createMaterial(actor, content("secret"));
    expect(await findMaterial(stranger.labId, id)).toBeUndefined();
    expect(await updateMaterial(stranger, id, content("taken"))).toBe(false);
    expect(await setMaterialArchived(stranger, id, true)).toBe(false);
    expect(await listMaterials(stranger.labId)).toEqual([]);
    expect((await findMaterial(actor.labId, id))?.name).toBe("secret");
  });
});

describe("the starter shelf", () => {
  it("holds five to ten valid layers, names a source or its absence for each value, and a source for at least half", () => {
    const shelf = starterShelf();
    expect(shelf.length).toBeGreaterThanOrEqual(5);
    expect(shelf.length).toBeLessThanOrEqual(10);
    let sourced = 0;
    let all = 0;
    for (const material of shelf) {
      expect(layerErrors(material.layer)).toEqual({});
      const values = valuesOf(material);
      expect(Object.keys(material.sources).sort()).toEqual(values.map(({ field }) => field.path.join(".")).sort());
      const counted = countSourced(material.sources);
      sourced += counted.sourced;
      all += counted.all;
      expect(Object.values(material.sources).every((source) => source === noSource || source.length > 20)).toBe(true);
    }
    expect(sourced / all).toBeGreaterThanOrEqual(0.5);
  });

  it("gives silicon's absorption as 4πk/λ of the published k (M. A. Green, Sol. Energy Mater. Sol. Cells 92, 1305 (2008))", () => {
    const silicon = (wavelength: string) =>
      starterShelf().find(({ name }) => name.includes(`${wavelength} nm`))!.layer.absorptionPerCm!;
    // k at 800 nm and 500 nm, 300 K, from the tabulation of that paper.
    expect(silicon("800") / ((4 * Math.PI * 5.4113e-3) / 800e-7)).toBeCloseTo(1, 3);
    expect(silicon("500") / ((4 * Math.PI * 4.4165e-2) / 500e-7)).toBeCloseTo(1, 3);
  });

  it("is filled in once", async () => {
    await seedMaterials(stranger.labId, stranger.userId);
    await seedMaterials(stranger.labId, stranger.userId);
    expect((await countMaterials(stranger.labId)).kept).toBe(starterShelf().length);
  });
});
