import { type ScenarioDocument, scenarioSchema } from "@demilune/solver";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  addLayer,
  deleteLayer,
  drawnHeights,
  duplicateLayer,
  type Edit,
  interfaceAfter,
  moveLayer,
  newLayer,
  newScenario,
  setContactNumber,
  setInterfaceNumber,
  setLayerNumber,
} from "~/lib/stackEdits";
import { layerFields } from "~/lib/stackFields";

const stackOf = (...names: string[]): ScenarioDocument => ({
  ...newScenario("test"),
  stack: {
    layers: names.map(newLayer),
    interfaces: [
      { afterLayer: 0, electronVelocityCmPerS: 100, holeVelocityCmPerS: 10 },
      { afterLayer: 1, electronVelocityCmPerS: 200, holeVelocityCmPerS: 20 },
    ],
  },
  model: { kind: "driftDiffusion", absorber: 1 },
});
const names = (document: ScenarioDocument) => document.stack.layers.map((layer) => layer.name).join("");
const pairs = (document: ScenarioDocument) =>
  Object.fromEntries(
    (document.stack.interfaces ?? []).map((face) => [
      [document.stack.layers[face.afterLayer].name, document.stack.layers[face.afterLayer + 1].name].sort().join(""),
      face.electronVelocityCmPerS,
    ]),
  );
function done<Outcome extends object>(outcome: Outcome | { refused: string }): Outcome {
  if ("refused" in outcome) throw new Error(outcome.refused);
  return outcome;
}

describe("edits of the stack", () => {
  const start = stackOf("A", "B", "C");

  it("keep each interface with its pair of layers and the absorber with its layer", () => {
    const moved = moveLayer(start, 2, 0);
    expect(names(moved.document)).toBe("CAB");
    expect(pairs(moved.document)).toEqual({ AB: 100 });
    expect(moved.document.model?.absorber).toBe(2);
    expect(moved.notes).toEqual([expect.stringContaining("between B and C were dropped")]);

    const swapped = moveLayer(start, 0, 1);
    expect(names(swapped.document)).toBe("BAC");
    expect(pairs(swapped.document)).toEqual({ AB: 100 });
    expect(swapped.document.model?.absorber).toBe(0);
  });

  it("add a layer: what lies behind moves up, velocities stay at the front face", () => {
    const added = addLayer(start, 1, newLayer("N"));
    expect(names(added.document)).toBe("ANBC");
    expect(pairs(added.document)).toEqual({ AN: 100, BC: 200 });
    expect(added.document.model?.absorber).toBe(2);
    expect(addLayer(start, 0, newLayer("N")).document.model?.absorber).toBe(2);
    expect(pairs(addLayer(start, 3, newLayer("N")).document)).toEqual({ AB: 100, BC: 200 });
  });

  it("duplicate a layer: velocities behind it go behind the copy", () => {
    const { document, index } = duplicateLayer(start, 1);
    expect(names(document)).toBe("ABBC");
    expect(index).toBe(2);
    expect(document.stack.interfaces?.map((face) => face.afterLayer)).toEqual([0, 2]);
    expect(document.stack.layers[2]).not.toBe(document.stack.layers[1]);
  });

  it("delete a layer: its interfaces go, the absorber falls back to the default, and both are said", () => {
    const { document, notes, index } = done(deleteLayer(start, 1));
    expect(names(document)).toBe("AC");
    expect(document.stack.interfaces).toBeUndefined();
    expect(document.model).toEqual({ kind: "driftDiffusion" });
    expect(notes).toHaveLength(3);
    expect(index).toBe(1);
    expect(deleteLayer(newScenario("one"), 0)).toEqual({ refused: expect.stringContaining("at least one layer") });
  });

  it("never change the document they are given, and always give a valid one", () => {
    const frozen = JSON.stringify(start);
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.constantFrom("add", "duplicate", "delete", "move"), fc.nat(9), fc.nat(9)), {
          maxLength: 12,
        }),
        (steps) => {
          let document = start;
          for (const [kind, one, other] of steps) {
            const count = document.stack.layers.length;
            const edit: Edit | { refused: string } =
              kind === "add"
                ? addLayer(document, one % (count + 1), newLayer("N"))
                : kind === "duplicate"
                  ? duplicateLayer(document, one % count)
                  : kind === "delete"
                    ? deleteLayer(document, one % count)
                    : moveLayer(document, one % count, other % count);
            if ("refused" in edit) continue;
            document = edit.document;
            expect(scenarioSchema.safeParse(document).success).toBe(true);
            const places = (document.stack.interfaces ?? []).map((face) => face.afterLayer);
            expect(new Set(places).size).toBe(places.length);
            expect(places.every((place) => place < document.stack.layers.length - 1)).toBe(true);
            expect(document.model?.absorber ?? 0).toBeLessThan(document.stack.layers.length);
          }
        },
      ),
    );
    expect(JSON.stringify(start)).toBe(frozen);
  });

  it("moving a layer there and back restores order and absorber", () => {
    fc.assert(
      fc.property(fc.nat(2), fc.nat(2), (from, to) => {
        const back = moveLayer(moveLayer(start, from, to).document, to, from).document;
        expect(names(back)).toBe("ABC");
        expect(back.model?.absorber).toBe(1);
      }),
    );
  });
});

describe("numbers of the stack", () => {
  const field = (quantity: string) => layerFields.find((one) => one.quantity === quantity)!;
  const start = stackOf("A", "B", "C");

  it("set and leave out, with empty groups taken away", () => {
    const set = done(setLayerNumber(start, 0, field("cationsPerCm3"), 1e18)).document;
    expect(set.stack.layers[0].ions).toEqual({ cationsPerCm3: 1e18, cationMobilityCm2PerVs: 1e-10 });
    expect(set.stack.layers[1]).toBe(start.stack.layers[1]);
    const cleared = done(setLayerNumber(set, 0, field("cationsPerCm3"), undefined)).document;
    expect(
      done(setLayerNumber(cleared, 0, field("cationMobilityCm2PerVs"), undefined)).document.stack.layers[0].ions,
    ).toBeUndefined();
  });

  it("keep both lifetimes or neither", () => {
    const first = done(setLayerNumber(start, 0, field("electronLifetimeNs"), 30));
    expect(first.document.stack.layers[0].recombination).toEqual({ electronLifetimeNs: 30, holeLifetimeNs: 30 });
    expect(first.notes).toHaveLength(1);
    const second = done(setLayerNumber(first.document, 0, field("holeLifetimeNs"), 60));
    expect(second.document.stack.layers[0].recombination).toEqual({ electronLifetimeNs: 30, holeLifetimeNs: 60 });
    const trapped = done(setLayerNumber(second.document, 0, field("densityPerCm3"), 1e15)).document;
    expect(trapped.stack.layers[0].traps).toEqual({ densityPerCm3: 1e15, kind: "acceptor" });
    const none = done(setLayerNumber(trapped, 0, field("electronLifetimeNs"), null));
    expect(none.document.stack.layers[0].recombination).toBeUndefined();
    expect(none.document.stack.layers[0].traps).toBeUndefined();
    expect(none.notes).toHaveLength(2);
    expect(setLayerNumber(start, 0, field("densityPerCm3"), 1e15)).toEqual({
      refused: expect.stringContaining("both lifetimes"),
    });
  });

  it("set interface velocities in pairs and contacts by side", () => {
    const velocity = { path: ["holeVelocityCmPerS"] as const };
    const fresh = setInterfaceNumber(newScenario("x"), 0, velocity, 50);
    expect(interfaceAfter(fresh, 0)).toEqual({ afterLayer: 0, electronVelocityCmPerS: 50, holeVelocityCmPerS: 50 });
    expect(setInterfaceNumber(fresh, 0, velocity, undefined).stack.interfaces).toBeUndefined();
    const contact = setContactNumber(start, "back", { path: ["workFunctionEV"] }, 4.1);
    expect(contact.stack.back).toEqual({ workFunctionEV: 4.1 });
    expect(setContactNumber(contact, "back", { path: ["workFunctionEV"] }, undefined).stack.back).toBeUndefined();
  });
});

describe("drawn heights", () => {
  it("follow the cube root where there is room, and keep the least height where there is not", () => {
    expect(drawnHeights([1, 8, 27], 600, [24, 24, 24])).toEqual([100, 200, 300]);
    const heights = drawnHeights([5, 200_000], 346, [24, 24]);
    expect(heights).toEqual([24, 322]);
    expect(drawnHeights(Array(30).fill(10), 346, Array(30).fill(24))).toEqual(Array(30).fill(24));
  });
});
