/**
 * The scenario with every default applied: bench units, nothing left out. What the hash is taken of and what the
 * solver converts to SI (`device.ts`). `null` is a value with a meaning ("none", "ideal", "infinite").
 */
import type {
  Bias,
  DiffusionOverrides,
  GaertnerOverrides,
  LayeredDiffusionOverrides,
  Side,
  Technique,
  TransitOverrides,
} from "./schema.ts";

export interface ResolvedContact {
  workFunctionEV: number | "ohmic";
  electronVelocityCmPerS: number;
  holeVelocityCmPerS: number;
}

export interface ResolvedLayer {
  name: string;
  thicknessNm: number;
  relativePermittivity: number;
  affinityEV: number;
  gapEV: number;
  conductionStatesPerCm3: number;
  valenceStatesPerCm3: number;
  electronMobilityCm2PerVs: number;
  holeMobilityCm2PerVs: number;
  donorsPerCm3: number;
  acceptorsPerCm3: number;
  absorptionPerCm: number;
  modulationAbsorptionPerCm: number;
  carrierYield: number;
  recombination: {
    electronLifetimeNs: number | null;
    holeLifetimeNs: number | null;
    trapDepthEV: number;
    radiativeCm3PerS: number;
    augerElectronCm6PerS: number;
    augerHoleCm6PerS: number;
  };
  ions: {
    cationsPerCm3: number;
    anionsPerCm3: number;
    cationMobilityCm2PerVs: number;
    anionMobilityCm2PerVs: number;
  };
  traps: { densityPerCm3: number; kind: "acceptor" | "donor" } | null;
}

export interface ResolvedInterface {
  afterLayer: number;
  electronVelocityCmPerS: number;
  holeVelocityCmPerS: number;
}

export interface ResolvedSpectrum {
  technique: Technique;
  bias: Bias;
  fluxPerCm2S: number;
}

export interface ResolvedCircuit {
  seriesResistanceOhmCm2: number;
  shuntResistanceOhmCm2: number | null;
  parallelCapacitanceFPerCm2: number;
  amplifierBandwidthHz: number | null;
  sourceBandwidthHz: number | null;
}

export type ResolvedModel = { absorber: number; nodes: number | null } & (
  | { kind: "transit"; overrides: TransitOverrides }
  | { kind: "gaertner"; overrides: GaertnerOverrides }
  | { kind: "diffusion"; overrides: DiffusionOverrides }
  | { kind: "diffusionLayers"; overrides: LayeredDiffusionOverrides }
  | { kind: "driftDiffusion"; overrides: Record<string, never> }
);

export interface ResolvedScenario {
  format: "demilune.scenario/1";
  name: string;
  stack: {
    temperatureK: number;
    electronContact: Side;
    front: ResolvedContact;
    back: ResolvedContact;
    layers: ResolvedLayer[];
    interfaces: ResolvedInterface[];
    ionsFrozenAt: { bias: Bias; fluxPerCm2S: number } | null;
  };
  light: {
    side: Side;
    fluxPerCm2S: number;
    modulationDepth: number;
    wavelengthNm: number | null;
    modulationWavelengthNm: number | null;
    frontReflectance: number;
    backMirrorReflectance: number;
  };
  circuit: ResolvedCircuit;
  model: ResolvedModel;
  spectra: ResolvedSpectrum[];
  frequencies: { fromHz: number; toHz: number; pointsPerDecade: number } | { listHz: number[] };
}
