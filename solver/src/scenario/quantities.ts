/**
 * Every number of the scenario document in one table: bench unit, permitted range (inclusive), default, and the
 * words and symbol the trade uses. Schema, defaults, error messages, number fields on screen, sweeps, fits and
 * attribution all read it here.
 */
export interface Quantity {
  /** Words for people, as the trade says them. */
  readonly label: string;
  /** Symbol, plain text; "_x" begins a subscript that runs to the end. */
  readonly symbol: string;
  /** Bench unit; "1" for a pure number. */
  readonly unit: string;
  readonly min: number;
  readonly max: number;
  /** Start of an open range: the minimum itself is refused. */
  readonly aboveMin?: true;
  /** Zero is permitted though it lies below the range. */
  readonly orZero?: true;
  readonly integer?: true;
  /** null may stand for "none", "ideal" or "infinite"; the words say which. */
  readonly nullMeans?: string;
  readonly default?: number | null;
  /** Steps, sweeps and fits move it linearly; all others move by a factor. */
  readonly linear?: true;
}

const density = { unit: "cm⁻³", min: 0, max: 1e22, default: 0 } as const;
const states = { unit: "cm⁻³", min: 1e12, max: 1e23 } as const;
const mobility = { unit: "cm²/Vs", min: 1e-12, max: 1e6 } as const;
const ionMobility = { unit: "cm²/Vs", min: 1e-20, max: 1, orZero: true, default: 0 } as const;
const lifetime = { unit: "ns", min: 1e-6, max: 1e12 } as const;
const velocity = { unit: "cm/s", min: 0, max: 1e9 } as const;
const energy = { unit: "eV", min: 0, max: 10, linear: true } as const;
const flux = { unit: "cm⁻² s⁻¹", min: 0, max: 1e20 } as const;
const fraction = { unit: "1", min: 0, max: 1, default: 0, linear: true } as const;
const frequency = { unit: "Hz", min: 1e-9, max: 1e15 } as const;
const voltage = { unit: "V", min: -1000, max: 1000, linear: true } as const;
const absorption = { unit: "cm⁻¹", min: 0, max: 1e8 } as const;
const thickness = { unit: "nm", min: 0.1, max: 1e7 } as const;
const rate = { unit: "s⁻¹", min: 0, max: 1e15 } as const;

export const quantities = {
  temperatureK: { label: "temperature", symbol: "T", unit: "K", min: 50, max: 1000, default: 300, linear: true },

  workFunctionEV: { label: "work function", symbol: "Φ_c", unit: "eV", min: 0, max: 12, linear: true },
  electronVelocityCmPerS: {
    label: "surface recombination velocity of electrons",
    symbol: "S_n",
    ...velocity,
    default: 1e7,
  },
  holeVelocityCmPerS: { label: "surface recombination velocity of holes", symbol: "S_p", ...velocity, default: 1e7 },

  thicknessNm: { label: "thickness", symbol: "t", ...thickness },
  relativePermittivity: { label: "relative permittivity", symbol: "ε_r", unit: "1", min: 1, max: 1e5 },
  affinityEV: { label: "electron affinity", symbol: "χ", ...energy },
  gapEV: { label: "band gap", symbol: "E_g", unit: "eV", min: 0.05, max: 10, linear: true },
  conductionStatesPerCm3: { label: "effective density of states, conduction band", symbol: "N_c", ...states },
  valenceStatesPerCm3: { label: "effective density of states, valence band", symbol: "N_v", ...states },
  electronMobilityCm2PerVs: { label: "electron mobility", symbol: "µ_n", ...mobility },
  holeMobilityCm2PerVs: { label: "hole mobility", symbol: "µ_p", ...mobility },
  donorsPerCm3: { label: "donors", symbol: "N_D", ...density },
  acceptorsPerCm3: { label: "acceptors", symbol: "N_A", ...density },
  absorptionPerCm: { label: "absorption coefficient", symbol: "α", ...absorption, default: 0 },
  modulationAbsorptionPerCm: {
    label: "absorption coefficient at the modulation wavelength",
    symbol: "α_mod",
    ...absorption,
  },
  carrierYield: {
    label: "free carriers per absorbed photon",
    symbol: "η",
    unit: "1",
    min: 0,
    max: 10,
    default: 1,
    linear: true,
  },

  electronLifetimeNs: {
    label: "electron lifetime",
    symbol: "τ_n",
    ...lifetime,
    nullMeans: "no SRH recombination",
    default: null,
  },
  holeLifetimeNs: {
    label: "hole lifetime",
    symbol: "τ_p",
    ...lifetime,
    nullMeans: "no SRH recombination",
    default: null,
  },
  trapDepthEV: { label: "trap depth below the conduction band", symbol: "E_c − E_t", ...energy },
  radiativeCm3PerS: { label: "band-to-band coefficient", symbol: "B", unit: "cm³/s", min: 0, max: 1e-4, default: 0 },
  augerElectronCm6PerS: {
    label: "Auger coefficient of electrons",
    symbol: "C_n",
    unit: "cm⁶/s",
    min: 0,
    max: 1e-20,
    default: 0,
  },
  augerHoleCm6PerS: {
    label: "Auger coefficient of holes",
    symbol: "C_p",
    unit: "cm⁶/s",
    min: 0,
    max: 1e-20,
    default: 0,
  },

  cationsPerCm3: { label: "mobile cations", symbol: "c", ...density },
  anionsPerCm3: { label: "mobile anions", symbol: "a", ...density },
  cationMobilityCm2PerVs: { label: "cation mobility", symbol: "µ_c", ...ionMobility },
  anionMobilityCm2PerVs: { label: "anion mobility", symbol: "µ_a", ...ionMobility },
  densityPerCm3: { label: "dynamic traps", symbol: "N_t", ...density },

  interfaceElectronVelocityCmPerS: {
    label: "interface recombination velocity of electrons",
    symbol: "S_n",
    ...velocity,
    aboveMin: true,
  },
  interfaceHoleVelocityCmPerS: {
    label: "interface recombination velocity of holes",
    symbol: "S_p",
    ...velocity,
    aboveMin: true,
  },

  afterLayer: {
    label: "layer in front of the interface",
    symbol: "k",
    unit: "1",
    min: 0,
    max: 98,
    integer: true,
    linear: true,
  },
  absorber: {
    label: "index of the absorber",
    symbol: "k_abs",
    unit: "1",
    min: 0,
    max: 99,
    integer: true,
    linear: true,
  },

  fluxPerCm2S: { label: "photon flux", symbol: "Φ", ...flux },
  modulationDepth: { label: "modulation depth", symbol: "δΦ/Φ", ...fraction, default: 0.05 },
  wavelengthNm: { label: "wavelength", symbol: "λ", unit: "nm", min: 1, max: 1e6, linear: true },
  modulationWavelengthNm: {
    label: "modulation wavelength",
    symbol: "λ_mod",
    unit: "nm",
    min: 1,
    max: 1e6,
    linear: true,
  },
  frontReflectance: { label: "reflectance of the lit face", symbol: "R", ...fraction },
  backMirrorReflectance: { label: "reflectance of the opposite face", symbol: "R_b", ...fraction },

  seriesResistanceOhmCm2: { label: "series resistance", symbol: "R_s", unit: "Ω·cm²", min: 0, max: 1e9, default: 0 },
  shuntResistanceOhmCm2: {
    label: "shunt resistance",
    symbol: "R_sh",
    unit: "Ω·cm²",
    min: 1e-6,
    max: 1e15,
    nullMeans: "no shunt",
    default: null,
  },
  parallelCapacitanceFPerCm2: {
    label: "parallel capacitance",
    symbol: "C_p",
    unit: "F/cm²",
    min: 0,
    max: 1,
    default: 0,
  },
  amplifierBandwidthHz: {
    label: "amplifier bandwidth",
    symbol: "f_amp",
    ...frequency,
    nullMeans: "ideal",
    default: null,
  },
  sourceBandwidthHz: { label: "source bandwidth", symbol: "f_src", ...frequency, nullMeans: "ideal", default: null },

  voltageV: { label: "terminal voltage", symbol: "V", ...voltage },
  fromHz: { label: "lowest frequency", symbol: "f_min", ...frequency, default: 0.1 },
  toHz: { label: "highest frequency", symbol: "f_max", ...frequency, default: 1e6 },
  pointsPerDecade: {
    label: "points per decade",
    symbol: "n",
    unit: "1",
    min: 1,
    max: 200,
    default: 10,
    linear: true,
  },
  frequencyHz: { label: "frequency", symbol: "f", ...frequency },
  nodes: { label: "mesh nodes", symbol: "N", unit: "1", min: 10, max: 10000, integer: true, linear: true },

  electronTransitTimeNs: { label: "electron transit time", symbol: "T_n", ...lifetime },
  holeTransitTimeNs: { label: "hole transit time", symbol: "T_p", ...lifetime },
  fieldVPerCm: { label: "field", symbol: "E", unit: "V/cm", min: 1e-3, max: 1e9 },
  depletionWidthNm: { label: "depletion width", symbol: "w", unit: "nm", min: 1e-3, max: 1e7 },
  diffusionCm2PerS: { label: "diffusion coefficient", symbol: "D", unit: "cm²/s", min: 1e-15, max: 1e5 },
  lifetimeNs: { label: "lifetime", symbol: "τ", ...lifetime },
  saturationCurrentMAPerCm2: { label: "saturation current", symbol: "J_s", unit: "mA/cm²", min: 1e-100, max: 1e6 },
  depletionTransitTimeNs: { label: "transit time of the depletion layer", symbol: "T_w", ...lifetime, min: 0 },
  backVelocityCmPerS: { label: "recombination velocity behind the bulk", symbol: "S", ...velocity },
  builtInVoltageV: { label: "built-in voltage", symbol: "V_bi", unit: "V", min: -12, max: 12, linear: true },
  transferPerS: { label: "rate of surface transfer", symbol: "k_tr", ...rate },
  surfaceRecombinationPerS: { label: "rate of surface recombination", symbol: "k_rec", ...rate },
  helmholtzCapacitanceFPerCm2: { label: "Helmholtz capacitance", symbol: "C_H", unit: "F/cm²", min: 1e-12, max: 1 },
  extractionVelocityCmPerS: { label: "extraction velocity", symbol: "k_ext", ...velocity, nullMeans: "infinite" },
  farVelocityCmPerS: { label: "recombination velocity at the far side", symbol: "S_far", ...velocity },
  idealityFactor: { label: "ideality factor", symbol: "m", unit: "1", min: 0.1, max: 100, linear: true },
} as const satisfies Record<string, Quantity>;

export type QuantityName = keyof typeof quantities;

/** Whether a number is permitted by its row. */
export function isPermitted(quantity: Quantity, value: number): boolean {
  if (quantity.orZero && value === 0) return true;
  const inside = quantity.aboveMin ? value > quantity.min : value >= quantity.min;
  return inside && value <= quantity.max && (!quantity.integer || Number.isInteger(value));
}

/** A number as a person writes it: powers of ten where the zeros would not be counted. */
function written(value: number): string {
  const plain = value === 0 || (Math.abs(value) < 1e5 && Math.abs(value) >= 1e-3);
  return plain ? String(value) : value.toExponential().replace("e+", "e");
}

/** The permitted range in words, as error messages and fields show it. */
export function permitted(quantity: Quantity): string {
  const kind = quantity.integer ? "whole number " : "";
  const zero = quantity.orZero ? "0, or " : "";
  const unit = quantity.unit === "1" ? "" : ` ${quantity.unit}`;
  const [min, max] = [written(quantity.min), written(quantity.max)];
  const range = quantity.aboveMin ? `above ${min} up to ${max}${unit}` : `${min} to ${max}${unit}`;
  return `${zero}${kind}${range}${quantity.nullMeans ? `, or null (${quantity.nullMeans})` : ""}`;
}
