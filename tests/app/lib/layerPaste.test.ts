import { describe, expect, it } from "vitest";
import { readLayerTable } from "~/lib/layerPaste";
import { newLayer } from "~/lib/stackEdits";

const tsv = (...rows: string[][]) => rows.map((row) => row.join("\t")).join("\n");
const numbers = ["10", "4", "1,5", "", "", "", "1", "2e-1", "1e19", "1·10^19"];

describe("a table of layers pasted from a spreadsheet", () => {
  it("is read with heads in words, symbols, field names and with units in them", () => {
    const { rows, columns, notes } = readLayerTable(
      tsv(
        [
          "layer",
          "thickness (µm)",
          "ε_r",
          "affinityEV",
          "band gap / meV",
          "N_c",
          "N_v",
          "µ_n [m²/Vs]",
          "hole mobility",
          "colour",
        ],
        ["glue", "0,2", "3", "4", "1500", "1e19", "1e25 m-3", "1e-4", "2 cm2/Vs", "red"],
      ),
      [],
    );
    expect(rows[0].layer).toEqual({
      name: "glue",
      thicknessNm: 200,
      relativePermittivity: 3,
      affinityEV: 4,
      gapEV: 1.5,
      conductionStatesPerCm3: 1e19,
      valenceStatesPerCm3: 1e19,
      electronMobilityCm2PerVs: 1,
      holeMobilityCm2PerVs: 2,
    });
    expect(columns.at(-1)?.holds).toBeNull();
    expect(notes).toEqual(["Left out, not known here: “colour”."]);
  });

  it("is read without heads in the order of the table of layers", () => {
    const { rows, notes } = readLayerTable(tsv(["absorber", "500", ...numbers]), []);
    expect(notes[0]).toContain("No head row");
    expect(rows[0].layer).toMatchObject({ name: "absorber", thicknessNm: 500, gapEV: 1.5, holeMobilityCm2PerVs: 0.2 });
    const unnamed = readLayerTable(tsv(["500", ...numbers], ["50", ...numbers]), []);
    expect(unnamed.rows.map(({ layer }) => layer?.thicknessNm)).toEqual([500, 50]);
  });

  it("is turned over where rows are numbers and columns are layers", () => {
    const { rows, notes } = readLayerTable(tsv(["", "A", "B"], ["thickness", "10", "20"], ["gap", "1", "2"]), [
      newLayer("A"),
      newLayer("B"),
    ]);
    expect(notes[0]).toContain("turned over");
    expect(rows.map(({ layer }) => [layer?.name, layer?.thicknessNm, layer?.gapEV])).toEqual([
      ["A", 10, 1],
      ["B", 20, 2],
    ]);
    expect(rows[0].layer?.affinityEV).toBe(newLayer().affinityEV);
  });

  it("marks each wrong cell with the reason and what is allowed, and names missing values", () => {
    const { rows } = readLayerTable(tsv(["name", "thickness", "gap"], ["A", "0", "1.5"], ["new", "1.234,5", "2"]), [
      newLayer("A"),
    ]);
    expect(rows[0].layer).toBeNull();
    expect(rows[0].cells[1].error).toContain("too small; permitted: 0.1 to");
    expect(rows[1].cells[1].error).toContain("more than one decimal mark");
    expect(rows[1].missing).toContain("relative permittivity, electron affinity");
    expect(rows[0].missing).toBeNull();
  });

  it("takes groups inside a layer and says how a doubtful number was read", () => {
    const { rows } = readLayerTable(
      tsv(
        ["name", "τ_n", "τ_p", "cations", "µ of cations", "thickness"],
        ["A", "1 µs", "2000", "1e18", "1e-9", "1,234"],
      ),
      [newLayer("A")],
    );
    expect(rows[0].layer).toMatchObject({
      recombination: { electronLifetimeNs: 1000, holeLifetimeNs: 2000 },
      ions: { cationsPerCm3: 1e18, cationMobilityCm2PerVs: 1e-9 },
    });
    expect(rows[0].cells[5].note).toContain("read as 1.234");
  });

  it("of nothing gives nothing", () => {
    expect(readLayerTable(" \n\n", [])).toEqual({ columns: [], rows: [], notes: [] });
  });
});
