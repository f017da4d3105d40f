import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { splitLines } from "~/lib/textImport/lines";
import { readMeasurementText } from "~/lib/textImport/readText";
import { type ImportSettings, importSettingsSchema } from "~/lib/textImport/settings";
import { bytes, degrees, modulus, relaxation, rows, utf16 } from "./lookAlikes";

/** Pieces that instrument files are made of, and that break naive readers. */
const piece = fc.oneof(
  fc.constantFrom(
    "\n",
    "\r\n",
    "\r\r\n",
    "\r",
    ";",
    ",",
    "\t",
    " ",
    '"',
    "#",
    "/",
    "(",
    ")",
    "NaN",
    "-",
    "−",
    "E+",
    "Hz",
    "Re",
    "Im",
    "deg",
    "Ω",
    "µA",
    "\ufeff",
    "0,",
    ".5",
    "1e308",
    "9.9E37",
    "area 0,1 cm2",
    "# bias: ",
  ),
  fc.double().map(String),
  fc.integer().map(String),
  fc.string({ maxLength: 8 }),
);
const text = fc.array(piece, { maxLength: 400 }).map((pieces) => pieces.join(""));

const settings: fc.Arbitrary<ImportSettings> = fc
  .record(
    {
      encoding: fc.constantFrom("utf-8", "utf-16le", "windows-1252"),
      delimiter: fc.constantFrom("tab", "comma", "semicolon", "spaces"),
      decimalMark: fc.constantFrom("point", "comma", "either"),
      columns: fc.dictionary(
        fc.integer({ min: 0, max: 5 }).map(String),
        fc.record(
          {
            role: fc.constantFrom("frequency", "real", "imaginary", "modulus", "phase", "sigma", "time"),
            unit: fc.constantFrom("Hz", "deg", "dB", "uA", "S", "log(Hz)"),
          },
          { requiredKeys: [] },
        ),
      ),
      technique: fc.constantFrom("imps", "imvs", "impedance"),
      restart: fc.constantFrom("newSpectrum", "repeat"),
      areaCm2: fc.constantFrom(0.1, 1e-6),
    },
    { requiredKeys: [] },
  )
  .map((value) => importSettingsSchema.parse(value));

function check(content: Uint8Array, chosen: ImportSettings) {
  const reading = readMeasurementText(content, "x.txt", chosen);
  if (reading.status === "refused") {
    expect(reading.message).toMatch(/^The file .*\.$|^Read in .*\.$/);
    return;
  }
  for (const spectrum of reading.spectra) {
    for (const values of [spectrum.frequencyHz, spectrum.re, spectrum.im])
      expect(values.every(Number.isFinite)).toBe(true);
    for (let index = 1; index < spectrum.frequencyHz.length; index++) {
      expect(spectrum.frequencyHz[index]).toBeGreaterThanOrEqual(spectrum.frequencyHz[index - 1]);
    }
  }
  expect(reading.spectra.length > 0 || reading.problem !== null).toBe(true);
}

describe("any bytes give a usable reading or one sentence", () => {
  it("random bytes", () => {
    fc.assert(fc.property(fc.uint8Array({ maxLength: 4000 }), settings, check), { numRuns: 300 });
  });

  it("text made of the pieces of instrument files", () => {
    fc.assert(fc.property(text.map(bytes), settings, check), { numRuns: 500 });
  });

  it("a good file with bytes overwritten, removed or cut off", () => {
    const good = bytes(
      [
        "# technique: imps",
        "f/Hz;|Q|/1;phase/deg",
        ...rows(relaxation(0.8, 100), (point) => [point.hz, modulus(point), degrees(point)], ";", ","),
      ].join("\r\n"),
    );
    const damage = fc.array(fc.tuple(fc.nat(good.length - 1), fc.nat(255)), { maxLength: 30 });
    fc.assert(
      fc.property(damage, fc.nat(good.length), (edits, length) => {
        const copy = good.slice(0, length);
        for (const [at, byte] of edits) if (at < length) copy[at] = byte;
        check(copy, {});
      }),
      { numRuns: 300 },
    );
  });

  it("long runs of one character do not hang", { timeout: 60_000 }, () => {
    for (const character of ["\r", " ", '"', "1", "1,", "-", "(", "# ", "area ", "10^", "/", "1e5 "]) {
      check(bytes(character.repeat(200_000)), {});
      check(bytes(`${character.repeat(50)}\n`.repeat(4000)), {});
    }
  });
});

describe("a spectrum comes back from any sane layout", () => {
  const layout = fc.record({
    delimiter: fc.constantFrom(";", "\t", "  ", " ; "),
    mark: fc.constantFrom("." as const, "," as const),
    lineEnd: fc.constantFrom("\n", "\r\n", "\r\r\n", "\r"),
    order: fc.shuffledSubarray([0, 1, 2], { minLength: 3 }),
    polar: fc.boolean(),
    minus: fc.boolean(),
    descending: fc.boolean(),
    wide: fc.boolean(),
    head: fc.array(fc.constantFrom("Invented bench", "# operator: nobody", "", "Date 2026-03-01 12:30"), {
      maxLength: 4,
    }),
    size: fc.double({ min: 0.01, max: 1000, noNaN: true }),
    corner: fc.double({ min: 1, max: 1e4, noNaN: true }),
  });

  it("whatever delimiter, decimal mark, line end, column order, form, direction or encoding", () => {
    fc.assert(
      fc.property(layout, (shape) => {
        const points = relaxation(shape.size, shape.corner, 0.1, 1e5, 31);
        const names = shape.polar
          ? ["f/Hz", "|Q|/1", "phase/deg"]
          : ["f/Hz", "Re(Q)/1", shape.minus ? "-Im(Q)/1" : "Im(Q)/1"];
        const body = rows(
          shape.descending ? points.toReversed() : points,
          (point) => {
            const cells = shape.polar
              ? [point.hz, modulus(point), degrees(point)]
              : [point.hz, point.re, shape.minus ? -point.im : point.im];
            return shape.order.map((index) => cells[index]);
          },
          shape.delimiter,
          shape.mark,
        );
        const lines = [...shape.head, shape.order.map((index) => names[index]).join(shape.delimiter), ...body];
        const content = lines.join(shape.lineEnd);
        const reading = readMeasurementText(shape.wide ? utf16(content, true) : bytes(content), "x", {});
        if (reading.status === "refused") throw new Error(reading.message);
        expect(reading.spectra).toHaveLength(1);
        const [spectrum] = reading.spectra;
        points.forEach((point, index) => {
          expect(Math.abs(spectrum.frequencyHz[index] / point.hz - 1)).toBeLessThan(1e-6);
          expect(Math.abs(spectrum.re[index] - point.re)).toBeLessThan(1e-6 * shape.size);
          expect(Math.abs(spectrum.im[index] - point.im)).toBeLessThan(1e-6 * shape.size);
        });
      }),
      { numRuns: 200 },
    );
  });

  it("lines come back from any mixture of line ends", () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.stringMatching(/^[a-z]{1,5}$/), fc.constantFrom("\n", "\r\n", "\r\r\n")), {
          maxLength: 50,
        }),
        (parts) => {
          expect(splitLines(parts.map((part) => part.join("")).join(""))).toEqual(parts.map(([word]) => word));
        },
      ),
    );
  });
});
