import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { readDocumentText } from "~/lib/documentText";
import { jsonFaultPlace } from "~/lib/jsonFault";
import { readStackForm } from "~/lib/stackForm.server";
import { starters } from "~/lib/starters";

const start = starters[0].document;
const form = (cells: Record<string, string>) => {
  const data = new FormData();
  for (const [name, text] of Object.entries(cells)) data.set(name, text);
  return data;
};

describe("the table of layers as a form", () => {
  it("takes over what differs, with units, and leaves the rest", () => {
    const { document, refused } = readStackForm(
      start,
      form({
        "stack.layers.1.thicknessNm": "0,4 µm",
        "stack.layers.1.gapEV": "1.6",
        "stack.layers.0.donorsPerCm3": "",
        "stack.layers.0.name": "hole conductor",
        "interfaces.0.holeVelocityCmPerS": "10 m/s",
      }),
    );
    expect(refused).toEqual({});
    expect(document.stack.layers[1].thicknessNm).toBe(400);
    expect(document.stack.layers[0].name).toBe("hole conductor");
    expect(document.stack.interfaces?.[0]).toEqual({
      afterLayer: 0,
      electronVelocityCmPerS: 200,
      holeVelocityCmPerS: 1000,
    });
    expect(document.stack.layers[2]).toBe(start.stack.layers[2]);
  });

  it("takes one lifetime for both where the other cell was left empty", () => {
    const cells = {
      "stack.layers.0.recombination.electronLifetimeNs": "5",
      "stack.layers.0.recombination.holeLifetimeNs": "",
    };
    expect(readStackForm(start, form(cells)).document.stack.layers[0].recombination).toEqual({
      electronLifetimeNs: 5,
      holeLifetimeNs: 5,
    });
  });

  it("gives back what cannot be read as it was typed, and takes the rest", () => {
    const { document, refused } = readStackForm(
      start,
      form({
        "stack.layers.1.thicknessNm": "1.234,5",
        "stack.layers.1.gapEV": "1,5",
        "stack.layers.9.gapEV": "1",
        "stack.layers.x.gapEV": "1",
      }),
    );
    expect(Object.keys(refused)).toEqual(["stack.layers.1.thicknessNm"]);
    expect(refused["stack.layers.1.thicknessNm"].text).toBe("1.234,5");
    expect(document.stack.layers[1].gapEV).toBe(1.5);
  });
});

describe("a document as text", () => {
  const faults = (text: string) => {
    const reading = readDocumentText(text);
    return reading.ok ? [] : reading.faults;
  };
  it("finds the first sign that cannot stand where it does", () => {
    expect(jsonFaultPlace('{"a": 1,}')).toEqual({ line: 1, column: 9 });
    expect(jsonFaultPlace('{"a": [1, 2}')).toEqual({ line: 1, column: 12 });
    expect(jsonFaultPlace('{"a": 1')).toEqual({ line: 1, column: 8 });
    expect(jsonFaultPlace('{"a": 01}')).toEqual({ line: 1, column: 8 });
    expect(jsonFaultPlace("{'a': 1}")).toEqual({ line: 1, column: 2 });
    fc.assert(
      fc.property(fc.json(), (text) => {
        // Of good JSON all is read, up to its end.
        const lines = text.split("\n");
        expect(jsonFaultPlace(text)).toEqual({ line: lines.length, column: lines[lines.length - 1].length + 1 });
      }),
    );
  });
  it("is taken with a byte order mark", () => {
    expect(readDocumentText(`\ufeff${JSON.stringify(start)}`)).toMatchObject({ ok: true });
  });
  it("says where JSON breaks off, and what a scenario does not allow with its path", () => {
    expect(faults('{\n "format": "demilune.scenario/1",\n "stack": }')[0].message).toContain(
      "from line 3, column 11 on",
    );
    expect(faults("")[0].message).toBe("is empty");
    const bad = structuredClone(start) as unknown as { stack: { layers: { thicknessNm: number; colour?: string }[] } };
    bad.stack.layers[1].thicknessNm = -1;
    bad.stack.layers[0].colour = "red";
    expect(
      faults(JSON.stringify(bad))
        .map(({ path }) => path)
        .sort(),
    ).toEqual(["stack.layers.0.colour", "stack.layers.1.thicknessNm"]);
  });
});
