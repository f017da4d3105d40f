/** The name under which a result is kept and found again. */
import { sha256 } from "@noble/hashes/sha2.js";
import { bytesToHex, utf8ToBytes } from "@noble/hashes/utils.js";
import { solverVersion } from "../version.ts";
import { canonicalJson } from "./canonical.ts";
import type { ResolvedScenario } from "./resolved.ts";

/** The scenario without what people call things: those words change no number. */
function withoutLabels({ name: _, stack, light, ...rest }: ResolvedScenario) {
  const { wavelengthNm: _bias, modulationWavelengthNm: _modulation, ...numbers } = light;
  const layers = stack.layers.map(({ name: _name, ...layer }) => layer);
  return { ...rest, stack: { ...stack, layers }, light: numbers };
}

/**
 * SHA-256 in hex (64 characters) of the resolved scenario in the form of RFC 8785, a line feed, and the version of
 * the solver.
 */
export function hashOf(scenario: ResolvedScenario, version: string = solverVersion): string {
  return bytesToHex(sha256(utf8ToBytes(`${canonicalJson(withoutLabels(scenario))}\n${version}`)));
}
