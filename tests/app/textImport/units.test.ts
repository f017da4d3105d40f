import { describe, expect, it } from "vitest";
import { readNumber } from "~/lib/textImport/numbers";
import { readMeasurementText } from "~/lib/textImport/readText";
import type { ImportSettings } from "~/lib/textImport/settings";
import { parseUnit } from "~/lib/textImport/units";
import { bytes, relaxation, rows } from "./lookAlikes";

const q = 1.602176634e-19;

describe("units", () => {
  it.each([
    ["mA/cm2", 10, [1, 0, -2, 0]],
    ["mA cm^-2", 10, [1, 0, -2, 0]],
    ["µA·cm⁻²", 1e-2, [1, 0, -2, 0]],
    ["uA/cm²", 1e-2, [1, 0, -2, 0]],
    ["Ohm cm2", 1e-4, [-1, 1, 2, 0]],
    ["kΩ·cm²", 1e-1, [-1, 1, 2, 0]],
    ["Ohm.cm2", 1e-4, [-1, 1, 2, 0]],
    ["V cm2 s", 1e-4, [0, 1, 2, 1]],
    ["A/W", 1, [0, -1, 0, 0]],
    ["V/(mW/cm2)", 0.1, [-1, 0, 2, 0]],
    ["A per photons/s", 1, [1, 0, 0, -1]],
    ["MHz", 1e6, [0, 0, 0, -1]],
    ["mHz", 1e-3, [0, 0, 0, -1]],
    ["kiloohm", 1e3, [-1, 1, 0, 0]],
    ["millivolts", 1e-3, [0, 1, 0, 0]],
    ["%", 0.01, [0, 0, 0, 0]],
  ])("%s", (text, factor, dimensions) => {
    const unit = parseUnit(text);
    expect(unit?.factor).toBeCloseTo(factor, 12);
    expect(unit?.dimensions.map((exponent) => exponent + 0)).toEqual(dimensions);
  });

  it.each(["", "monitor", "Z", "foo/bar", "m/", "(", "cm2)", "A/(V"])("%j is no unit", (text) => {
    expect(parseUnit(text)).toBeNull();
  });
});

describe("numbers", () => {
  it.each([
    ["1.5", "point", 1.5],
    ["1,5", "comma", 1.5],
    ["−1,5E−3".replace("E−", "E-"), "comma", -1.5e-3],
    ["1.5D+03", "point", 1500],
    ["+.5", "point", 0.5],
    ["1,234.5", "point", 1234.5],
    ["1.234,5", "comma", 1234.5],
    ["5·10^17", "point", 5e17],
    ["10^3", "point", 1000],
  ] as const)("%s with a %s", (text, mark, value) => {
    expect(readNumber(text, mark)).toBeCloseTo(value, 12);
  });

  it.each(["nan", "-inf", "#N/A", "OVLD", "---", "9.91E+37", "1.#QNAN"])("%s is a missing value", (text) => {
    expect(readNumber(text, "point")).toBeNaN();
  });

  it.each(["", "1.2.3", "0x10", "1e", "12 V", "1,5", "e5", "9".repeat(100)])("%j is no number with a point", (text) => {
    expect(readNumber(text, "point")).toBeUndefined();
  });
});

/** Reads one relaxation of unit size and returns the factor that its values came out with. */
function factorOf(unit: string, technique: ImportSettings["technique"], settings: ImportSettings = {}) {
  const points = relaxation(1, 100);
  const text = [`f (Hz)\tRe (${unit})\tIm (${unit})`, ...rows(points, ({ hz, re, im }) => [hz, re, im], "\t")].join(
    "\n",
  );
  const reading = readMeasurementText(bytes(text), "x", { technique, ...settings });
  if (reading.status === "refused") throw new Error(reading.message);
  return {
    factor: reading.spectra[0]?.re[0] / points[0].re,
    needs: reading.needs,
    problem: reading.problem,
    unit: reading.spectra[0]?.unit,
  };
}

describe("conversion to electrons per photon and Ω·cm², from the definitions of IMPS and IMVS", () => {
  it("IMPS: percent, and current over q times flux times area", () => {
    expect(factorOf("%", "imps").factor).toBeCloseTo(0.01, 12);
    // 1 mA/cm² per 10¹⁶ photons cm⁻² s⁻¹: 10⁻³ / (q 10¹⁶).
    expect(factorOf("mA/cm2", "imps", { modulatedFluxPerCm2S: 1e16 }).factor).toBeCloseTo(1e-3 / (q * 1e16), 9);
    expect(factorOf("uA", "imps", { modulatedFluxPerCm2S: 1e15, areaCm2: 0.16 }).factor).toBeCloseTo(
      1e-6 / (q * 1e15 * 0.16),
      9,
    );
  });

  it("IMPS in A/W: 0.512162040022 A/W at 635 nm is one electron per photon (E = hc/qλ, exact SI constants)", () => {
    expect(0.512162040022 * factorOf("A/W", "imps", { wavelengthNm: 635 }).factor).toBeCloseTo(1, 9);
    expect(0.379080565055 * factorOf("mA/mW", "imps", { wavelengthNm: 470 }).factor).toBeCloseTo(1, 9);
  });

  it("IMVS: volts per photon flux over q; volts with the flux given; volts per irradiance", () => {
    expect(factorOf("V cm2 s", "imvs").factor * q).toBeCloseTo(1, 9);
    expect(factorOf("mV", "imvs", { modulatedFluxPerCm2S: 1e16 }).factor).toBeCloseTo(1e-3 / (q * 1e16), 9);
    // 1 V per mW/cm² at 635 nm: 1 V / (0.512162 mA/cm²) = 1952.507… Ω·cm².
    expect(factorOf("V/(mW/cm2)", "imvs", { wavelengthNm: 635 }).factor).toBeCloseTo(1000 / 0.512162040022, 5);
  });

  it("impedance: ohm times area, and conductance inverted", () => {
    expect(factorOf("kOhm", "impedance", { areaCm2: 0.25 }).factor).toBeCloseTo(250, 9);
    const points = relaxation(1, 100);
    const text = [
      "f/Hz\tRe/mS\tIm/mS",
      ...rows(points, ({ hz, re, im }) => [hz, re / (re * re + im * im), -im / (re * re + im * im)], "\t"),
    ].join("\n");
    const reading = readMeasurementText(bytes(text), "x", { technique: "impedance", areaCm2: 2 });
    if (reading.status === "refused") throw new Error(reading.message);
    expect(reading.spectra[0].re[0]).toBeCloseTo(2000 * points[0].re, 3);
    expect(reading.spectra[0].im[30]).toBeCloseTo(2000 * points[30].im, 3);
  });

  it("asks for what a unit needs, keeping the file's unit until it is given", () => {
    expect(factorOf("uA", "imps")).toMatchObject({ needs: ["areaCm2", "modulatedFluxPerCm2S"], unit: "uA" });
    expect(factorOf("uA", "imps").factor).toBeCloseTo(1, 9);
    expect(factorOf("A/W", "imps")).toMatchObject({ needs: ["wavelengthNm"], unit: "A/W" });
    expect(factorOf("Ohm", "impedance")).toMatchObject({ needs: ["areaCm2"], unit: "Ohm" });
  });

  it("says when a unit belongs to another technique", () => {
    expect(factorOf("mA/cm2", "impedance").problem).toMatch(/does not belong to impedance/);
  });
});
