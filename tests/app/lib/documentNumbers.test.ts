import { describe, expect, it } from "vitest";
import { countDifferences, fieldAt, withField } from "~/lib/documentNumbers";

const document = { light: { fluxPerCm2S: 1 }, layers: [{ ions: { cationsPerCm3: 2 } }, { name: "b" }] };

describe("fields of a document", () => {
  it("are set where nothing stood before, leaving the rest shared", () => {
    const next = withField(document, ["circuit", "seriesResistanceOhmCm2"], 3);
    expect(fieldAt(next, ["circuit", "seriesResistanceOhmCm2"])).toBe(3);
    expect(next.layers).toBe(document.layers);
    expect(document).not.toHaveProperty("circuit");
  });

  it("are taken out by undefined, with the object that is empty then", () => {
    const next = withField(document, ["layers", 0, "ions", "cationsPerCm3"], undefined);
    expect(next.layers).toEqual([{}, { name: "b" }]);
    expect(withField({ circuit: { a: 1 }, light: 2 }, ["circuit", "a"], undefined)).toEqual({ light: 2 });
  });

  it("keep null, which stands for none", () => {
    expect(
      fieldAt(withField(document, ["circuit", "shuntResistanceOhmCm2"], null), ["circuit", "shuntResistanceOhmCm2"]),
    ).toBeNull();
  });

  it("are counted where two documents differ", () => {
    expect(countDifferences(document, structuredClone(document))).toBe(0);
    const other = withField(withField(document, ["light", "fluxPerCm2S"], 2), ["light", "side"], "back");
    expect(countDifferences(document, other)).toBe(2);
  });
});
