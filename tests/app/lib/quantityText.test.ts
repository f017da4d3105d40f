import { type Quantity, quantities } from "@demilune/solver";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { formatNumber } from "~/lib/numberFormat";
import { permittedRange, readQuantity, stepped, typedForm } from "~/lib/quantityText";

const read = (text: string, name: keyof typeof quantities) => {
  const reading = readQuantity(text, quantities[name]);
  if (!reading.ok) throw new Error(reading.error);
  return reading.value;
};
const refused = (text: string, name: keyof typeof quantities) => {
  const reading = readQuantity(text, quantities[name]);
  if (reading.ok) throw new Error(`read as ${reading.value}`);
  return reading.error;
};

describe("numbers as a scientist types them", () => {
  it.each([
    ["5e17", 5e17],
    ["5E17", 5e17],
    ["5·10^17", 5e17],
    ["5 ⋅ 10^17", 5e17],
    ["5×10¹⁷", 5e17],
    ["5 × 10¹⁷ cm⁻³", 5e17],
    ["5*10^17", 5e17],
    ["5*10**17", 5e17],
    ["5x10^17 cm-3", 5e17],
    ["10^17", 1e17],
    ["10¹⁷ cm^-3", 1e17],
    ["5e23 m-3", 5e17],
    ["5e23 m⁻³", 5e17],
    ["5e17/cm3", 5e17],
    ["5e17 1/cm³", 5e17],
    ["5,5e17", 5.5e17],
    ["100 000 000 000", 1e11],
    ["100\u00a0000\u202f000", 1e8],
  ])("reads density %s", (text, value) => expect(read(text, "donorsPerCm3")).toBe(value));

  it.each([
    ["500nm", 500],
    ["500 nm", 500],
    ["0,5 µm", 500],
    ["0.5 \u03bcm", 500],
    ["0.5 \u00b5m", 500],
    ["0.5um", 500],
    ["5e-5 cm", 500],
    ["5000 Å", 500],
    ["180 µm", 180000],
    ["0.18mm", 180000],
  ])("reads length %s", (text, value) => expect(read(text, "thicknessNm")).toBe(value));

  it.each([
    ["electronMobilityCm2PerVs", "2 cm2/Vs", 2],
    ["electronMobilityCm2PerVs", "2 cm²/(V s)", 2],
    ["electronMobilityCm2PerVs", "2 cm^2 V^-1 s^-1", 2],
    ["electronMobilityCm2PerVs", "2 cm²V⁻¹s⁻¹", 2],
    ["electronMobilityCm2PerVs", "2e-4 m2/Vs", 2],
    ["electronLifetimeNs", "30 µs", 30000],
    ["electronLifetimeNs", "1 ms", 1e6],
    ["electronLifetimeNs", "2 s", 2e9],
    ["electronLifetimeNs", "500 ps", 0.5],
    ["absorptionPerCm", "6e4 1/cm", 6e4],
    ["absorptionPerCm", "6 /µm", 6e4],
    ["absorptionPerCm", "6 µm-1", 6e4],
    ["absorptionPerCm", "6e6 m⁻¹", 6e4],
    ["gapEV", "1600 meV", 1.6],
    ["gapEV", "1,6 eV", 1.6],
    ["electronVelocityCmPerS", "1e5 m/s", 1e7],
    ["frequencyHz", "2.5 MHz", 2.5e6],
    ["frequencyHz", "2.5 mHz", 2.5e-3],
    ["seriesResistanceOhmCm2", "3 Ohm cm2", 3],
    ["seriesResistanceOhmCm2", "3 Ω·cm²", 3],
    ["seriesResistanceOhmCm2", "3 \u2126 cm²", 3],
    ["parallelCapacitanceFPerCm2", "20 nF/cm²", 2e-8],
    ["parallelCapacitanceFPerCm2", "1 F/m2", 1e-4],
    ["fluxPerCm2S", "1e17 photons cm-2 s-1", 1e17],
    ["fluxPerCm2S", "1e21 m⁻²s⁻¹", 1e17],
    ["radiativeCm3PerS", "5e-11 cm3/s", 5e-11],
    ["augerElectronCm6PerS", "2.8e-31 cm6 s-1", 2.8e-31],
    ["voltageV", "\u2212200 mV", -0.2],
    ["voltageV", "\u20130.2", -0.2],
    ["voltageV", "-.2", -0.2],
    ["modulationDepth", "5 %", 0.05],
    ["temperatureK", "27 °C", 300.15],
    ["transferPerS", "28 1/s", 28],
    ["saturationCurrentMAPerCm2", "1 µA/cm²", 1e-3],
  ] as const)("reads %s from %s", (name, text, value) => expect(read(text, name)).toBe(value));

  it("reads an ambiguous comma as a decimal mark and says so", () => {
    const reading = readQuantity("1,234", quantities.thicknessNm);
    expect(reading).toMatchObject({ ok: true, value: 1.234 });
    expect(reading.ok && reading.note).toContain("read as 1.234");
    expect(readQuantity("0,234", quantities.thicknessNm)).toMatchObject({ note: null });
    expect(readQuantity("1,23", quantities.thicknessNm)).toMatchObject({ note: null });
  });

  it("says what a converted value is in the unit of the field", () => {
    expect(readQuantity("0,5 µm", quantities.thicknessNm)).toMatchObject({ note: "= 500\u2009nm" });
  });

  it("refuses what cannot be read, with the reason and what is allowed", () => {
    expect(refused("1.234,5", "thicknessNm")).toContain("more than one decimal mark");
    expect(refused("1,234,567", "thicknessNm")).toContain("more than one decimal mark");
    expect(refused("abc", "thicknessNm")).toContain("does not begin with a number");
    expect(refused("500 V", "thicknessNm")).toMatch(/“V” does not fit here; this field takes nm, µm/);
    expect(refused("500 furlong", "thicknessNm")).toMatch(/“furlong” is not a unit known here; this field takes nm/);
    expect(refused("5 6", "thicknessNm")).toContain("more than one number");
    expect(refused("5..6", "thicknessNm")).toContain("decimal mark");
    expect(refused("0", "thicknessNm")).toBe("0\u2009nm is too small; permitted: 0.1 to 10⁷\u2009nm");
    expect(refused("-1e9", "donorsPerCm3")).toBe("−1×10⁹\u2009cm⁻³ is too small; permitted: 0 to 10²²\u2009cm⁻³");
    expect(refused("1e400", "donorsPerCm3")).toContain("too large");
    expect(refused("1e-400", "donorsPerCm3")).toContain("too small");
    expect(refused("10.5", "nodes")).toContain("not a whole number");
    expect(refused("0", "interfaceHoleVelocityCmPerS")).toContain("above 0 up to 10⁹\u2009cm/s");
    expect(refused("", "thicknessNm")).toContain("a value is needed");
    expect(refused("NaN", "thicknessNm")).toContain("does not begin with a number");
  });

  it("gives nothing the meaning the quantity has for it", () => {
    expect(read("", "shuntResistanceOhmCm2")).toBeNull();
    expect(read("none", "shuntResistanceOhmCm2")).toBeNull();
    expect(read("∞", "extractionVelocityCmPerS")).toBeNull();
    expect(read("", "temperatureK")).toBeUndefined();
    expect(readQuantity("", quantities.trapDepthEV, "half the gap")).toMatchObject({
      ok: true,
      value: undefined,
      note: "half the gap",
    });
  });
});

describe("parse after format is the identity", () => {
  const anything: Quantity = { label: "", symbol: "", unit: "m", min: -1e300, max: 1e300 };
  const finite = fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e290, max: 1e290 });

  it("for every finite number in the form fields start from and in print form", () => {
    fc.assert(
      fc.property(finite, (value) => {
        fc.pre(Math.abs(value) > 1e-290 || value === 0);
        const expected = value + 0;
        expect(readQuantity(typedForm(value), anything)).toMatchObject({ ok: true, value: expected });
        expect(readQuantity(formatNumber(value), anything)).toMatchObject({ ok: true, value: expected });
      }),
    );
  });

  it("over 24 decades, every prefix, both decimal marks and every way to write the exponent", () => {
    const prefixes = {
      f: -15,
      p: -12,
      n: -9,
      u: -6,
      "\u00b5": -6,
      "\u03bc": -6,
      m: -3,
      c: -2,
      "": 0,
      k: 3,
      M: 6,
      G: 9,
    };
    const raise = (exponent: number) =>
      [...String(exponent)].map((sign) => (sign === "-" ? "⁻" : "⁰¹²³⁴⁵⁶⁷⁸⁹"[Number(sign)])).join("");
    const exponentForms = [
      (exponent: number) => `e${exponent}`,
      (exponent: number) => `E${exponent}`,
      (exponent: number) => `·10^${exponent}`,
      (exponent: number) => ` × 10^${exponent}`,
      (exponent: number) => `×10${raise(exponent)}`,
      (exponent: number) => `*10^(${exponent})`,
    ];
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 999_999 }),
        fc.integer({ min: 0, max: 5 }),
        fc.integer({ min: -12, max: 12 }),
        fc.constantFrom(...Object.keys(prefixes)),
        fc.constantFrom(".", ","),
        fc.constantFrom(...exponentForms),
        fc.constantFrom("", "-", "\u2212"),
        fc.constantFrom("", " ", "\u00a0", "\u2009"),
        (digits, places, exponent, prefix, mark, write, sign, space) => {
          const padded = String(digits).padStart(places + 1, "0");
          const mantissa = places === 0 ? padded : `${padded.slice(0, -places)}${mark}${padded.slice(-places)}`;
          const text = `${sign}${mantissa}${write(exponent)}${space}${prefix}m`;
          const power = exponent - places + prefixes[prefix as keyof typeof prefixes];
          expect(readQuantity(text, anything)).toMatchObject({
            ok: true,
            value: Number(`${sign === "" ? "" : "-"}${digits}e${power}`),
          });
        },
      ),
      { numRuns: 1000 },
    );
  });

  it("never throws and never gives a number that is not finite, whatever is typed", () => {
    fc.assert(
      fc.property(
        fc.string({ unit: "binary" }),
        fc.constantFrom(...Object.values<Quantity>(quantities)),
        (text, quantity) => {
          const reading = readQuantity(text, quantity);
          if (reading.ok && typeof reading.value === "number") expect(Number.isFinite(reading.value)).toBe(true);
          if (!reading.ok) expect(reading.error.length).toBeGreaterThan(10);
        },
      ),
    );
  });
});

describe("steps", () => {
  it("move by a tenth of a decade, with Shift by a hundredth", () => {
    const quantity: Quantity = quantities.donorsPerCm3;
    expect(stepped(1e17, quantity, 1, false) / 1e17).toBeCloseTo(10 ** 0.1, 3);
    expect(stepped(1e17, quantity, -1, true) / 1e17).toBeCloseTo(10 ** -0.01, 3);
  });
  it("move linear quantities by a decimal step and keep to the range", () => {
    expect(stepped(1.6, quantities.gapEV, 1, false)).toBe(1.65);
    expect(stepped(1.6, quantities.gapEV, -1, true)).toBe(1.595);
    expect(stepped(300, quantities.temperatureK, 1, false)).toBe(310);
    expect(stepped(10, quantities.gapEV, 1, false)).toBe(10);
    expect(stepped(100, quantities.nodes, 1, true)).toBe(101);
    expect(stepped(0, quantities.donorsPerCm3, -1, false)).toBe(0);
    expect(stepped(0, quantities.donorsPerCm3, 1, false)).toBeGreaterThan(0);
  });
  it("words of a range use print form", () => {
    expect(permittedRange(quantities.shuntResistanceOhmCm2)).toBe("10⁻⁶ to 10¹⁵\u2009Ω\u2009cm², or empty (no shunt)");
  });
});
