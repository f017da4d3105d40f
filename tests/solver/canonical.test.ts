/** Canonical JSON against the examples of RFC 8785 (rfc-editor.org/rfc/rfc8785), and the hash built on it. */
import { createHash } from "node:crypto";
import { hashOf, parseScenario, solverVersion } from "@demilune/solver";
import { expect, test } from "vitest";
import { canonicalJson } from "../../solver/src/scenario/canonical.ts";
import { scenario } from "./support/scenarios.ts";

test("section 3.2.2: numbers, strings and literals", () => {
  const input = JSON.parse(`{
    "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
    "string": "\\u20ac$\\u000F\\u000aA'\\u0042\\u0022\\u005c\\\\\\"\\/",
    "literals": [null, true, false]
  }`);
  expect(canonicalJson(input)).toBe(
    '{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}',
  );
});

test("section 3.2.3: keys sorted by UTF-16 code units", () => {
  const input = {
    "\u20ac": "Euro Sign",
    "\r": "Carriage Return",
    "\ufb33": "Hebrew Letter Dalet With Dagesh",
    "1": "One",
    "\ud83d\ude00": "Emoji: Grinning Face",
    "\u0080": "Control",
    "\u00f6": "Latin Small Letter O With Diaeresis",
  };
  const order = ["Carriage Return", "One", "Control", "Latin Small", "Euro Sign", "Emoji", "Hebrew"];
  const places = order.map((word) => canonicalJson(input).indexOf(word));
  expect(places).toEqual(places.toSorted((a, b) => a - b));
});

test.each([
  ["0000000000000000", "0"],
  ["8000000000000000", "0"],
  ["0000000000000001", "5e-324"],
  ["8000000000000001", "-5e-324"],
  ["7fefffffffffffff", "1.7976931348623157e+308"],
  ["4340000000000000", "9007199254740992"],
  ["4430000000000000", "295147905179352830000"],
  ["44b52d02c7e14af5", "9.999999999999997e+22"],
  ["44b52d02c7e14af6", "1e+23"],
  ["44b52d02c7e14af7", "1.0000000000000001e+23"],
  ["444b1ae4d6e2ef4e", "999999999999999700000"],
  ["444b1ae4d6e2ef50", "1e+21"],
  ["3eb0c6f7a0b5ed8c", "9.999999999999997e-7"],
  ["3eb0c6f7a0b5ed8d", "0.000001"],
  ["41b3de4355555554", "333333333.33333325"],
  ["becbf647612f3696", "-0.0000033333333333333333"],
  ["43143ff3c1cb0959", "1424953923781206.2"],
])("appendix B: IEEE 754 %s is %s", (bits, text) => {
  const view = new DataView(new ArrayBuffer(8));
  view.setBigUint64(0, BigInt(`0x${bits}`));
  expect(canonicalJson(view.getFloat64(0))).toBe(text);
});

test.each([Number.NaN, Number.POSITIVE_INFINITY, undefined, "\ud800"])("%s has no form", (value) => {
  expect(() => canonicalJson(value)).toThrow(TypeError);
});

test("the hash is SHA-256 of the canonical resolved document without labels, a line feed and the version", () => {
  const resolved = parseScenario(scenario());
  const { name: _, stack, light, ...rest } = resolved;
  const { wavelengthNm: _bias, modulationWavelengthNm: _modulation, ...numbers } = light;
  const layers = stack.layers.map(({ name: _name, ...layer }) => layer);
  const text = `${canonicalJson({ ...rest, stack: { ...stack, layers }, light: numbers })}\n${solverVersion}`;
  expect(hashOf(resolved)).toBe(createHash("sha256").update(text).digest("hex"));
});

test("names and wavelength labels leave the hash as it is; a default written out too; a number changes it", () => {
  const hash = (document: unknown) => hashOf(parseScenario(document));
  const base = hash(scenario());
  expect(hash(scenario({ name: "another name", layer: { name: "another" } }))).toBe(base);
  expect(hash(scenario({ light: { fluxPerCm2S: 1e16, wavelengthNm: 532, side: "front" } }))).toBe(base);
  expect(hash(scenario({ light: { fluxPerCm2S: 1.0001e16 } }))).not.toBe(base);
  expect(hashOf(parseScenario(scenario()), "another version")).not.toBe(base);
});
