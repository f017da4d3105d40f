/** Small stacks for tests of the full model. */
import {
  type LayerDocument,
  parseScenario,
  type ResolvedScenario,
  type ScenarioDocument,
  type SolvedSpectrum,
  solve,
  thermalVoltage,
} from "@demilune/solver";

export const vacuumPermittivityPerCm = 8.8541878128e-14;
export const charge = 1.602176634e-19;
export const voltage300 = thermalVoltage(300);

/** A layer without light, doping or recombination, gap wide enough that no carrier matters unless it is put there. */
export const layer = (changes: Partial<LayerDocument> = {}): LayerDocument => ({
  thicknessNm: 500,
  relativePermittivity: 11.7,
  affinityEV: 4,
  gapEV: 1.12,
  conductionStatesPerCm3: 1e19,
  valenceStatesPerCm3: 1e19,
  electronMobilityCm2PerVs: 1,
  holeMobilityCm2PerVs: 1,
  ...changes,
});

/** Gap that gives an intrinsic density (cm⁻³) at 300 K with equal densities of states. */
export const gapFor = (intrinsic: number, states = 1e19): number => 2 * voltage300 * Math.log(states / intrinsic);

export const document = (
  layers: LayerDocument[],
  changes: Omit<Partial<ScenarioDocument>, "stack"> & { stack?: Partial<ScenarioDocument["stack"]> } = {},
): ScenarioDocument => ({
  format: "demilune.scenario/1",
  ...changes,
  stack: { ...changes.stack, layers },
  light: changes.light ?? { fluxPerCm2S: 0 },
});

export const scenario = (...given: Parameters<typeof document>): ResolvedScenario => parseScenario(document(...given));

/** Solves a document with one spectrum. @throws Error where it is not solved */
export function spectrum(given: ScenarioDocument): SolvedSpectrum {
  const [first] = solve(given).spectra;
  if (first.status !== "solved") throw new Error(first.failure.message);
  return first;
}

/** Admittance S/cm² of an impedance in Ω·cm². */
export function admittance({ re, im }: { re: number[]; im: number[] }, k = 0): { re: number; im: number } {
  const size = re[k] ** 2 + im[k] ** 2;
  return { re: re[k] / size, im: -im[k] / size };
}

/** Largest distance of two spectra over the largest modulus of the second. */
export function distance(a: { re: number[]; im: number[] }, b: { re: number[]; im: number[] }): number {
  const largest = Math.max(...b.re.map((re, k) => Math.hypot(re, b.im[k])));
  return Math.max(...b.re.map((re, k) => Math.hypot(a.re[k] - re, a.im[k] - b.im[k]))) / largest;
}
