import fc from "fast-check";
import { describe, expect, it } from "vitest";
import {
  axisExponent,
  formatFixed,
  formatNumber,
  formatPrefixed,
  formatQuantity,
  formatTicks,
} from "~/lib/numberFormat";
import { plainText, symbolNotation, textRuns } from "~/lib/richText";

// Rules of SI typesetting (SI Brochure, 9th edition, 5.4.3 and 5.4.4): a space between number and unit, powers of ten
// with ×, a true minus (ISO 80000-1).
describe("printed numbers", () => {
  it("carry a true minus and a power of ten, never an e", () => {
    expect(formatNumber(-6.34e-6, 3)).toBe("−6.34×10⁻⁶");
    expect(formatNumber(1e17)).toBe("1×10¹⁷");
    expect(formatNumber(0)).toBe("0");
    expect(formatNumber(-0)).toBe("0");
    expect(formatNumber(99_999.7, 3)).toBe("1.00×10⁵");
  });

  it("keep the significant digits asked for, zeros included", () => {
    expect(formatNumber(1.7408, 4)).toBe("1.741");
    expect(formatNumber(0.3, 3)).toBe("0.300");
    expect(formatNumber(0.0099996, 3)).toBe("0.0100");
    expect(formatNumber(400)).toBe("400");
  });

  it("stand apart from their unit by a thin space", () => {
    expect(formatQuantity(7e4, "cm⁻¹")).toBe("7×10⁴\u2009cm⁻¹");
    expect(formatQuantity(2, "Ω·cm²")).toBe("2\u2009Ω\u2009cm²");
    expect(formatQuantity(22, "1")).toBe("22");
    expect(formatPrefixed(25_120, "Hz")).toBe("25.1\u2009kHz");
    expect(formatPrefixed(1e6, "Hz")).toBe("1\u2009MHz");
    expect(formatPrefixed(999.96, "Hz")).toBe("1\u2009kHz");
  });

  it("never show a negative zero or a NaN in a column", () => {
    expect(formatFixed(-0.001, 2)).toBe("0.00");
    expect(formatFixed(Number.NaN, 2)).toBe("–");
    expect(formatNumber(Number.POSITIVE_INFINITY)).toBe("–");
  });

  it("read back as the same number at full precision", () => {
    const back = (text: string) => {
      const [mantissa, power = ""] = text.replaceAll("−", "-").split("×10");
      const exponent = [...power].map((sign) => (sign === "⁻" ? "-" : "⁰¹²³⁴⁵⁶⁷⁸⁹".indexOf(sign))).join("");
      return Number(`${mantissa}e${exponent || 0}`);
    };
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e24, max: 1e24 }), (value) => {
        expect(back(formatNumber(value))).toBe(value === 0 ? 0 : value);
      }),
    );
  });

  it("give all ticks of an axis the same decimals and share its power of ten", () => {
    expect(formatTicks([-0.5, 0, 0.5, 1], 0)).toEqual(["−0.5", "0.0", "0.5", "1.0"]);
    expect(axisExponent(0, 3e-5)).toBe(-6);
    expect(formatTicks([0, 1e-5, 2e-5], -6)).toEqual(["0", "10", "20"]);
    expect(axisExponent(-0.2, 3)).toBe(0);
  });
});

describe("symbols and units", () => {
  it("are set italic, raised and lowered from one notation", () => {
    expect(textRuns("*µ*_{n} / cm⁻² s⁻¹").map(({ text, style }) => ({ text, style }))).toEqual([
      { text: "µ", style: "italic" },
      { text: "n", style: "subscript" },
      { text: " / cm", style: "plain" },
      { text: "−2", style: "superscript" },
      { text: " s", style: "plain" },
      { text: "−1", style: "superscript" },
    ]);
    expect(plainText("*τ*_{n} 10^{3}")).toBe("τn 103");
  });

  it("follow from the symbols of the quantity table", () => {
    expect(symbolNotation("µ_n")).toBe("*µ*_{n}");
    expect(symbolNotation("E_c − E_t")).toBe("*E*_{c} − *E*_{t}");
    expect(symbolNotation("δΦ/Φ")).toBe("δ*Φ*/*Φ*");
  });
});
