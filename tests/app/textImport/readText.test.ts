import { describe, expect, it } from "vitest";
import { readMeasurementText } from "~/lib/textImport/readText";
import type { ImportSettings } from "~/lib/textImport/settings";
import { bytes, degrees, latin, modulus, type Point, relaxation, rows, utf16 } from "./lookAlikes";

function read(content: string | Uint8Array, settings: ImportSettings = {}, name = "file.txt") {
  const reading = readMeasurementText(typeof content === "string" ? bytes(content) : content, name, settings);
  if (reading.status === "refused") throw new Error(reading.message);
  return reading;
}

function expectPoints(
  spectrum: { frequencyHz: number[]; re: number[]; im: number[] },
  points: readonly Point[],
  digits = 6,
) {
  expect(spectrum.frequencyHz.length).toBe(points.length);
  points.forEach((point, index) => {
    expect(spectrum.frequencyHz[index] / point.hz).toBeCloseTo(1, digits);
    expect(spectrum.re[index]).toBeCloseTo(point.re, digits);
    expect(spectrum.im[index]).toBeCloseTo(point.im, digits);
  });
}

const reason = (reading: ReturnType<typeof read>, key: string) =>
  reading.findings.find((finding) => finding.key === key);

describe("a file with modulus and phase, decimal comma and a talkative head", () => {
  const points = relaxation(2.9, 350);
  const text = [
    "# bench 2; sample K-17; open circuit; LED 520 nm",
    "# area 0,16 cm2; flux 9,0E+16; modulation 5 %",
    "f/Hz;|W|/Ohm cm2;phase/deg;monitor/V",
    ...rows(points.toReversed(), (point) => [point.hz, modulus(point), degrees(point), 0.0431], ";", ","),
    "",
  ].join("\n");
  const reading = read(text);

  it("gives the spectrum in Ω·cm², low to high", () => {
    expect(reading.problem).toBeNull();
    expect(reading.spectra).toHaveLength(1);
    expect(reading.spectra[0]).toMatchObject({
      technique: "imvs",
      bias: "openCircuit",
      unit: "Ω·cm²",
      fluxPerCm2S: 9e16,
    });
    expectPoints(reading.spectra[0], points);
  });

  it("says what it understood and why", () => {
    expect(reason(reading, "delimiter")?.value).toBe("semicolon");
    expect(reason(reading, "decimalMark")).toMatchObject({
      value: "comma",
      reason: "commas in 61 of 61 rows, points in none",
    });
    expect(reason(reading, "header")?.value).toBe("3 lines");
    expect(reason(reading, "order")?.value).toBe("high to low frequency");
    expect(reason(reading, "phaseUnit")?.value).toBe("degrees");
    expect(reason(reading, "imaginarySign")?.value).toBe("as written");
    expect(reason(reading, "areaCm2")).toMatchObject({ value: "0.16\u2009cm²", reason: "from line 2" });
    expect(reason(reading, "fluxPerCm2S")?.reason).toBe("from line 2");
    expect(reading.sampleName).toBe("K-17");
    expect(reading.columns.map(({ role }) => role)).toEqual(["frequency", "modulus", "phase", "notUsed"]);
  });

  it("reads a phase without a unit by the size of its values", () => {
    const bare = read(text.replace("phase/deg", "phase"));
    expect(reason(bare, "phaseUnit")?.reason).toMatch(/in radians they could not/);
    expectPoints(bare.spectra[0], points);
  });
});

describe("data files of the command line", () => {
  it("are understood to the letter, repeats kept in their order", () => {
    const text = [
      "# technique: impedance",
      "# bias: 0.8",
      "# fluxPerCm2S: 3e16",
      "frequencyHz,re,im,sigma,timeS",
      "100,5,-1,0.01,0",
      "10,9,-2,0.02,1",
      "100,5.1,-1.1,0.01,2",
      "1,10,-0.5,0.03,3",
      "1000,1,-0.6,0.01,4",
    ].join("\r\n");
    const reading = read(text);
    expect(reading.questions).toEqual([]);
    expect(reading.spectra).toHaveLength(1);
    expect(reading.spectra[0]).toMatchObject({
      technique: "impedance",
      bias: { voltageV: 0.8 },
      fluxPerCm2S: 3e16,
      frequencyHz: [1, 10, 100, 100, 1000],
      re: [10, 9, 5, 5.1, 1],
      im: [-0.5, -2, -1, -1.1, -0.6],
      sigma: [0.03, 0.02, 0.01, 0.01, 0.01],
      timeS: [3, 1, 0, 2, 4],
      repeats: 1,
    });
  });
});

describe("encodings and line ends", () => {
  const points = relaxation(0.8, 1000);
  const text = ["Frequenz (kHz)\tRe Q\tIm Q", ...rows(points, ({ hz, re, im }) => [hz / 1000, re, im], "\t", ",")];

  it.each([
    ["UTF-8 with a mark", bytes(`\ufeff${text.join("\r\n")}`), "utf-8"],
    ["UTF-16, low byte first", utf16(text.join("\n"), true), "utf-16le"],
    ["UTF-16, high byte first", utf16(text.join("\n"), false), "utf-16be"],
    ["windows-1252", latin(`Probe K-3 bei 25 °C, Fläche 0,5 cm²\n${text.join("\n")}`), "windows-1252"],
    ["CR CR LF", bytes(text.join("\r\r\n")), "utf-8"],
    ["lone CR", bytes(text.join("\r")), "utf-8"],
  ])("%s", (_, content, encoding) => {
    const reading = read(content);
    expect(reading.resolved.encoding).toBe(encoding);
    expectPoints(reading.spectra[0], points);
  });

  it("reads area and temperature from a windows-1252 head", () => {
    const reading = read(latin(`Fläche 0,5 cm², Temp. 25 °C\n${text.join("\n")}`));
    expect(reading.resolved.areaCm2).toBeCloseTo(0.5, 12);
    expect(reading.resolved.temperatureK).toBeCloseTo(298.15, 9);
  });
});

describe("columns, units and signs", () => {
  const points = relaxation(0.8, 1000);

  it("takes −Im from the heading, in any column order", () => {
    const reading = read(
      ["-Im(Q)  comment-number  Re(Q)  freq[Hz]", ...rows(points, ({ hz, re, im }) => [-im, 7, re, hz], "   ")].join(
        "\n",
      ),
    );
    expect(reading.columns.map(({ role }) => role)).toEqual(["minusImaginary", "notUsed", "real", "frequency"]);
    expectPoints(reading.spectra[0], points);
    expect(reading.spectra[0].technique).toBe("imps");
  });

  it("turns Im over where the file's sign would break causality, and asks", () => {
    const reading = read(
      ["f (Hz),Z' (Ohm cm2),Z'' (Ohm cm2)", ...rows(points, ({ hz, re, im }) => [hz, re, -im], ",")].join("\n"),
    );
    expect(reading.resolved.imaginarySign).toBe("reversed");
    expect(reading.questions.join(" ")).toMatch(/turned over/);
    expectPoints(reading.spectra[0], points);
    const kept = read(
      ["f (Hz),Z' (Ohm cm2),Z'' (Ohm cm2)", ...rows(points, ({ hz, re, im }) => [hz, re, -im], ",")].join("\n"),
      { imaginarySign: "asWritten" },
    );
    expect(kept.spectra[0].im[30]).toBeCloseTo(-points[30].im, 6);
  });

  it("leaves an inductive loop as it is", () => {
    // Re rises with frequency and Im is positive: Z = R − R1/(1 + i f/fc), causal as written.
    const loop = relaxation(3, 100).map(({ hz, re, im }) => ({ hz, re: 10 - re, im: -im }));
    const reading = read(
      [
        "f/Hz Z'/Ohm·cm² Z''/Ohm·cm²".replaceAll(" Z", "\tZ"),
        ...rows(loop, ({ hz, re, im }) => [hz, re, im], "\t"),
      ].join("\n"),
    );
    expect(reading.resolved.imaginarySign).toBe("asWritten");
    expectPoints(reading.spectra[0], loop);
  });

  it("counts a photocurrent written as negative positive, and asks", () => {
    const reading = read(
      ["frequency (Hz);Re Y;Im Y", ...rows(points, ({ hz, re, im }) => [hz, -re, -im], ";")].join("\n"),
    );
    expect(reading.resolved.polarity).toBe("reversed");
    expectPoints(reading.spectra[0], points);
  });

  it("reads angular frequency, decibels and radians", () => {
    const reading = read(
      [
        "omega [rad/s],gain [dB],phase [rad]",
        ...rows(
          points,
          (point) => [2 * Math.PI * point.hz, 20 * Math.log10(modulus(point)), (degrees(point) * Math.PI) / 180],
          ",",
        ),
      ].join("\n"),
    );
    expectPoints(reading.spectra[0], points);
    expect(reading.spectra[0].relative).toBe(true);
  });

  it("takes units from a second row", () => {
    const reading = read(
      ["freq\tZre\tZim", "kHz\tkOhm cm2\tkOhm cm2", ...rows(points, ({ hz, re, im }) => [hz / 1e3, re, im], "\t")].join(
        "\n",
      ),
    );
    expect(reading.spectra[0].technique).toBe("impedance");
    expectPoints(
      reading.spectra[0],
      points.map(({ hz, re, im }) => ({ hz, re: 1000 * re, im: 1000 * im })),
      3,
    );
  });

  it("needs no headings where the numbers speak", () => {
    const reading = read(rows(points, ({ hz, re, im }) => [hz, re, im], "  ").join("\n"));
    expectPoints(reading.spectra[0], points);
    const polar = read(rows(points, (point) => [point.hz, modulus(point), degrees(point)], " ; ").join("\n"));
    expectPoints(polar.spectra[0], points);
  });

  it("lets a person choose the columns, by number", () => {
    const text = ["a,b,c", ...rows(points, ({ hz, re, im }) => [re, hz, im], ",")].join("\n");
    expect(read(text).problem).toMatch(/no column is a frequency/);
    const columns = {
      "0": { role: "real" },
      "1": { role: "frequency", unit: "kHz" },
      "2": { role: "imaginary" },
    } as const;
    expectPoints(
      read(text, { columns }).spectra[0],
      points.map((point) => ({ ...point, hz: 1000 * point.hz })),
    );
  });
});

describe("several spectra in one file", () => {
  const dim = relaxation(5, 20);
  const bright = relaxation(2, 80);
  const cells = ({ hz, re, im }: Point) => [hz, re, im];

  it("one after the other with text between, each with its own flux", () => {
    const reading = read(
      [
        "IMVS",
        "# flux 1e15 photons/cm2/s",
        "f/Hz;Re/Ohm cm2;Im/Ohm cm2",
        ...rows(dim, cells, ";"),
        "",
        "# flux 1e16 photons/cm2/s",
        "f/Hz;Re/Ohm cm2;Im/Ohm cm2",
        ...rows(bright, cells, ";"),
      ].join("\n"),
    );
    expect(reading.spectra.map(({ fluxPerCm2S }) => fluxPerCm2S)).toEqual([1e15, 1e16]);
    expectPoints(reading.spectra[0], dim);
    expectPoints(reading.spectra[1], bright);
  });

  it("side by side, of different length, with an empty column between", () => {
    const short = bright.slice(0, 40);
    const lines = dim.map((point, index) => {
      const left = rows([point], cells, ",")[0];
      return index < short.length ? `${left},,${rows([short[index]], cells, ",")[0]}` : `${left},,,,`;
    });
    const reading = read(
      ["f (Hz),Re W (Ohm cm2),Im W (Ohm cm2),,f (Hz),Re W (Ohm cm2),Im W (Ohm cm2)", ...lines].join("\n"),
    );
    expect(reading.spectra).toHaveLength(2);
    expect(reading.warnings).toEqual([]);
    expectPoints(reading.spectra[0], dim);
    expectPoints(reading.spectra[1], short);
  });

  it("told apart by a further column where the frequency starts again", () => {
    const level = (value: number) => (point: Point) => [value, ...cells(point)];
    const reading = read(
      ["light_mA\tf_Hz\tRe_Z\tIm_Z", ...rows(dim, level(1), "\t"), ...rows(bright, level(10), "\t")].join("\n"),
    );
    expect(reading.spectra.map(({ label }) => label)).toEqual(["light 1 mA", "light 10 mA"]);
    expectPoints(reading.spectra[1], bright);
  });

  it("the same frequencies again are repeats, unless a person says otherwise", () => {
    const text = ["f/Hz\tRe Q\tIm Q", ...rows(dim, cells, "\t"), ...rows(dim, cells, "\t")].join("\n");
    const reading = read(text);
    expect(reading.spectra).toHaveLength(1);
    expect(reading.spectra[0].repeats).toBe(61);
    expect(read(text, { restart: "newSpectrum" }).spectra).toHaveLength(2);
  });

  it("up and down again is one spectrum", () => {
    const reading = read(
      ["f/Hz\tRe Q\tIm Q", ...rows(dim, cells, "\t"), ...rows(dim.toReversed(), cells, "\t")].join("\n"),
    );
    expect(reading.spectra).toHaveLength(1);
    expect(reading.spectra[0].repeats).toBe(61);
  });

  it("two responses that share one frequency column", () => {
    const lines = dim.map(
      (point, index) =>
        `${rows([point], cells, ";")[0]};${rows([bright[index]], cells, ";")[0].split(";").slice(1).join(";")}`,
    );
    const reading = read(["f/Hz;Re W 1;Im W 1;Re W 2;Im W 2", ...lines].join("\n"));
    expect(reading.spectra).toHaveLength(2);
    expectPoints(reading.spectra[1], bright);
  });
});

describe("damaged files", () => {
  const points = relaxation(0.8, 1000);
  const head = "frequency (Hz);Re Q;Im Q";
  const good = rows(points, ({ hz, re, im }) => [hz, re, im], ";", ",");

  it("cut off in the middle of a line", () => {
    const text = [head, ...good].join("\n");
    const reading = read(text.slice(0, text.length - 20));
    expectPoints(reading.spectra[0], points.slice(0, 60));
    expect(reading.spectra).toHaveLength(1);
  });

  it("decimal marks mixed: one rule for all, said aloud", () => {
    const mixed = good.map((line, index) => (index % 9 === 4 ? line.replaceAll(",", ".") : line));
    const reading = read([head, ...mixed].join("\n"));
    expect(reading.resolved.decimalMark).toBe("either");
    expect(reason(reading, "decimalMark")?.reason).toMatch(/mixed/);
    expectPoints(reading.spectra[0], points);
  });

  it("missing values and impossible frequencies are left out and named", () => {
    const broken = [...good];
    broken[10] = "1,0;NaN;0,1";
    broken[20] = "0;0,5;0,1";
    broken[30] = "12,0;9,91E+37;0,1";
    const reading = read([head, ...broken].join("\n"));
    expect(reading.spectra[0].frequencyHz).toHaveLength(58);
    expect(reading.warnings[0]).toBe(
      "3 rows with a missing value or a frequency that is not above zero left out: lines 12, 22 and 32.",
    );
  });

  it("a line of another shape or of text inside is passed over and the spectrum stays whole", () => {
    const broken = [...good.slice(0, 30), "1,0;2,0", ...good.slice(30, 40), "overload at range 3", ...good.slice(40)];
    const reading = read([head, ...broken].join("\n"));
    expect(reading.spectra).toHaveLength(1);
    expectPoints(reading.spectra[0], points);
    expect(reading.warnings.join(" ")).toMatch(/line 32/);
  });

  it.each([
    ["binary", Uint8Array.from({ length: 3000 }, (_, index) => (index * 37) % 256), /binary/],
    ["a workbook", Uint8Array.from([0x50, 0x4b, 3, 4, 1, 2, 3]), /spreadsheet/],
    ["JSON", bytes('{"frequency": [1, 2, 3]}'), /JSON/],
    ["empty", new Uint8Array(), /empty/],
    ["prose", bytes("Dear all,\nno numbers here.\n"), /at least three rows/],
    ["too long", new Uint8Array(25_000_001).fill(49), /25 MB/],
    ["line ends only", new Uint8Array(3_000_000).fill(10), /2000000 lines/],
  ])("%s is refused in one sentence", (_, content, sentence) => {
    const reading = readMeasurementText(content, "x", {});
    expect(reading).toEqual({ status: "refused", message: expect.stringMatching(sentence) });
  });

  it("a million lines are read whole", { timeout: 120_000 }, () => {
    const count = 1_000_000;
    const lines = ["f\tRe\tIm"];
    for (let index = 0; index < count; index++) lines.push(`${1 + index}\t0.5\t-0.25`);
    const reading = read(lines.join("\n"));
    expect(reading.spectra[0].frequencyHz.length).toBe(count);
    expect(reading.spectra[0].frequencyHz[count - 1]).toBe(count);
  });
});

describe("traces and other tables are recognised as no spectrum", () => {
  const samples = Array.from({ length: 200 }, (_, index) => index);

  it("index with start and increment in the head", () => {
    const lines = samples.map(
      (index) => `${index},${Math.sin(index / 9).toFixed(4)},${Math.cos(index / 9).toFixed(4)},`,
    );
    const reading = read(["X,CH1,CH2,Start,Increment,", "Sequence,Volt,Volt,-3.5e-03,5.0e-06,", ...lines].join("\r\n"));
    expect(reading.trace).toEqual({ samples: 200, channels: ["CH1", "CH2"], startS: -3.5e-3, intervalS: 5e-6 });
    expect(reading.problem).toMatch(/trace over time.*200 samples every 0.000005 s in 2 channels/);
  });

  it("units in the names; units in a second row; blocks side by side with a time column each", () => {
    expect(
      read(["X,CH 1 (V),CH 2 (V)", ...samples.map((index) => `${(index * 1e-5).toFixed(8)},8.08,8.40`)].join("\n"))
        .trace?.intervalS,
    ).toBeCloseTo(1e-5, 12);
    expect(
      read(["X,CH1,", "Second,Volt,", ...samples.map((index) => `${(index * 2e-8).toExponential(4)},4.4,`)].join("\n"))
        .trace?.intervalS,
    ).toBeCloseTo(2e-8, 12);
    const blocks = [
      "Channel,CH6,,Channel,MATH1",
      "Record Length,10000,,Record Length,10000",
      ",,,,",
      "TIME,CH6_D0,,TIME,MATH1",
    ];
    const reading = read([...blocks, ...samples.map((index) => `${index * 1e-3},1,,${index * 1e-3},0.25`)].join("\n"));
    expect(reading.trace).toMatchObject({ samples: 200, channels: ["CH6_D0", "MATH1"] });
  });

  it("sampled columns without any head", () => {
    const reading = read(
      samples.map((index) => `${(0.27 + index * 6.25e-5).toFixed(7)}\t1.48\t3.99\t0.598`).join("\r\n"),
    );
    expect(reading.trace).toMatchObject({ samples: 200, channels: ["column 2", "column 3", "column 4"] });
  });

  it("a quantum-efficiency table with side notes, and its integral block ending earlier", () => {
    const lines = samples.map(
      (index) => `${300 + 5 * index}.0\t3.9\t0.009\t0.1\t${index === 1 ? "Voltage Bias\t0.00" : "\t"}`,
    );
    const reading = read(
      [
        "AM1.5G\t25.577\t \t \tMeasure Mode\tAC",
        "Lambda(nm)\tEQE (%)\tSR (A/W)\tJsc (mA/cm^2)\tAM 0\t31.07",
        ...lines,
      ].join("\r\n"),
    );
    expect(reading.rowCount).toBe(200);
    expect(reading.columns.map(({ name, unit }) => `${name} ${unit}`)).toEqual([
      "Lambda nm",
      "EQE %",
      "SR A/W",
      "Jsc mA/cm^2",
    ]);
    expect(reading.problem).toMatch(/no column is a frequency/);
  });
});
