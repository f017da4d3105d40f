import { parseScenario, type ScenarioDocument } from "@demilune/solver";
import { describe, expect, it } from "vitest";
import { differencesOf } from "~/lib/documentDifference";
import { addLayer, moveLayer, newLayer, setInterfaceNumber } from "~/lib/stackEdits";
import { starters } from "~/lib/starters";

const start = starters[0].document;
const between = (before: ScenarioDocument, after: ScenarioDocument) =>
  differencesOf(parseScenario(before), parseScenario(after));
const changed = (path: (document: ScenarioDocument) => void) => {
  const copy = structuredClone(start);
  path(copy);
  return copy;
};

describe("the difference of two revisions", () => {
  it("is empty for the same document, and for one that writes its defaults out", () => {
    expect(between(start, structuredClone(start))).toEqual([]);
    expect(between(start, parseScenario(start) as ScenarioDocument)).toEqual([]);
  });

  it("says numbers with their place, both values, and factor or step", () => {
    const after = changed(({ stack, light }) => {
      stack.layers[1].ions!.cationMobilityCm2PerVs = 1e-8;
      stack.layers[1].gapEV = 1.55;
      light.side = "back";
    });
    expect(between(start, after)).toEqual([
      { label: "side of the light", before: "front", after: "back", change: null },
      { label: "band gap (perovskite)", before: "1.6\u2009eV", after: "1.55\u2009eV", change: "− 0.05\u2009eV" },
      // The default of the trap level, half the gap, moves with the gap.
      {
        label: "trap depth below the conduction band (perovskite)",
        before: "0.8\u2009eV",
        after: "0.775\u2009eV",
        change: "− 0.025\u2009eV",
      },
      {
        label: "cation mobility (perovskite)",
        before: "1×10⁻⁹\u2009cm²/Vs",
        after: "1×10⁻⁸\u2009cm²/Vs",
        change: "× 10",
      },
    ]);
  });

  it("names what stands for nothing", () => {
    const [shunt] = between(start, { ...start, circuit: { ...start.circuit, shuntResistanceOhmCm2: 1000 } });
    expect(shunt).toMatchObject({ label: "shunt resistance", after: "1000\u2009Ω\u2009cm²", change: null });
  });

  it("reports an added layer as one line and compares the others with themselves", () => {
    const after = addLayer(start, 1, newLayer("interlayer")).document;
    const differences = between(start, after);
    expect(differences.filter(({ change }) => change === "added")).toEqual([
      { label: "layer", before: null, after: "interlayer, place 2", change: "added" },
    ]);
    expect(differences.filter(({ label }) => label.includes("(perovskite)"))).toEqual([]);
    expect(between(after, start).filter(({ change }) => change === "removed")).toHaveLength(1);
  });

  it("reports another order of layers as one line", () => {
    const after = moveLayer({ ...start, stack: { ...start.stack, interfaces: [] } }, 0, 1).document;
    const labels = between({ ...start, stack: { ...start.stack, interfaces: [] } }, after).map(({ label }) => label);
    expect(labels).toEqual(["order of layers"]);
  });

  it("reports interface velocities under the pair of layers", () => {
    const after = setInterfaceNumber(start, 0, { path: ["electronVelocityCmPerS"] }, 2000);
    expect(between(start, after)).toEqual([
      {
        label: "interface recombination velocity of electrons (hole transport layer / perovskite)",
        before: "200\u2009cm/s",
        after: "2000\u2009cm/s",
        change: "× 10",
      },
    ]);
  });
});
