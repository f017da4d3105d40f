/**
 * Depletion layer with diffusion from the neutral bulk behind it, light through the depletion side.
 * W. W. Gärtner, Phys. Rev. 116, 84 (1959) (from memory), with the complex diffusion length of the minority carrier;
 * finite bulk: H. J. Hovel, Semiconductors and Semimetals, vol. 11 (1975) (from memory). The terms of the moving edge
 * follow from the same equations by differentiation (tested: Y(0) = −dJ/dV).
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | w | depletion width √(2ε(V_bi − V)/(qN)) | m |
 * | κ | −dw/dV = w/(2(V_bi − V)) | m/V |
 * | H | bulk behind the depletion layer, t − w | m |
 * | F | flux into the bulk per unit density at the edge | m/s |
 * | n_0, n_e | minority density at the edge, in equilibrium and at V | m⁻³ |
 * | j_b | steady flux collected from the bulk | m⁻² s⁻¹ |
 */
import type { Cell, Request } from "../cell.ts";
import { elementaryCharge, thermalVoltage, vacuumPermittivity } from "../constants.ts";
import { builtInVoltage, logIntrinsicDensity, netDoping, opposite } from "../equilibrium.ts";
import { add, type Complex, complex, divide, one, scale, subtract } from "../numerics/complex.ts";
import type { Device } from "../scenario/device.ts";
import { currentFromSI, currentToSI, fluxToSI } from "../scenario/device.ts";
import { refuse } from "../scenario/errors.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { GaertnerOverrides } from "../scenario/schema.ts";
import { type Carrier, diffusionOf, lightAtAbsorber, minorityCarrier, recombinationRate } from "./absorber.ts";
import { meanDecay } from "./exponentialIntegrals.ts";
import { type Film, filmCollection, filmConductance, inverseDiffusionLength, steadyDeficit } from "./film.ts";

/** The parameters of the model in SI units, overrides applied. */
export interface Depletion {
  carrier: Carrier;
  thermal: number;
  permittivity: number;
  thickness: number;
  builtIn: number;
  width: (voltage: number) => number;
  /** Voltage at which the depletion layer reaches the back of a finite bulk. */
  lowestVoltage: number;
  bulk: "thick" | "finite";
  diffusion: number;
  rate: number;
  backVelocity: number;
  /** Given saturation current, A/m². */
  saturation: number | undefined;
  /** ln n_0; not used where the saturation current is given. */
  logMinority: number;
  transitTime: number;
  /** Absorption coefficient (1/m) and carriers per incident photon that reaches the absorber. */
  bias: { absorption: number; reaching: number };
  modulation: { absorption: number; reaching: number };
}

/**
 * The parameters of a scenario's absorber.
 *
 * @throws ScenarioError where the absorber has no depletion layer or the light comes from its other side.
 */
export function depletionOf(scenario: ResolvedScenario, device: Device, overrides: GaertnerOverrides): Depletion {
  const { absorber } = scenario.model;
  const layer = device.layers[absorber];
  const carrier = minorityCarrier(layer);
  const doping = Math.abs(netDoping(layer));
  const { depletionWidthNm, saturationCurrentMAPerCm2, transferPerS } = overrides;
  const dopingNeeded =
    depletionWidthNm === undefined || (saturationCurrentMAPerCm2 === undefined && transferPerS === undefined);
  if (doping === 0 && dopingNeeded)
    refuse(
      `stack.layers.${absorber}.acceptorsPerCm3`,
      "leaves the absorber without net doping and so without a depletion layer",
      "donors or acceptors in excess, or the overrides depletionWidthNm and saturationCurrentMAPerCm2",
    );
  const side = carrier === "electron" ? device.electronContact : opposite(device.electronContact);
  if (device.lightSide !== side)
    refuse("light.side", `is "${device.lightSide}", away from the depletion layer of the absorber`, `"${side}"`);
  const permittivity = layer.relativePermittivity * vacuumPermittivity;
  const builtIn = overrides.builtInVoltageV ?? builtInVoltage(device);
  const perVolt = (2 * permittivity) / (elementaryCharge * doping);
  const behind = device[opposite(side)];
  const back = carrier === "electron" ? behind.electronVelocity : behind.holeVelocity;
  const light = (wavelength: "bias" | "modulation") => {
    const { absorption, reaching } = lightAtAbsorber(device, absorber, wavelength);
    const { absorptionPerCm } = overrides;
    return { absorption: absorptionPerCm === undefined ? absorption : absorptionPerCm * 100, reaching };
  };
  return {
    carrier,
    thermal: thermalVoltage(device.temperature),
    permittivity,
    thickness: layer.thickness,
    builtIn,
    width:
      depletionWidthNm === undefined
        ? (voltage) => Math.sqrt(perVolt * (builtIn - voltage))
        : () => depletionWidthNm * 1e-9,
    lowestVoltage:
      depletionWidthNm === undefined && overrides.bulk === "finite"
        ? builtIn - layer.thickness ** 2 / perVolt
        : -Infinity,
    bulk: overrides.bulk ?? "thick",
    diffusion:
      overrides.diffusionCm2PerS === undefined
        ? diffusionOf(layer, carrier, device.temperature)
        : overrides.diffusionCm2PerS * 1e-4,
    rate: overrides.lifetimeNs === undefined ? recombinationRate(layer, carrier) : 1e9 / overrides.lifetimeNs,
    backVelocity: overrides.backVelocityCmPerS === undefined ? back : overrides.backVelocityCmPerS / 100,
    saturation: saturationCurrentMAPerCm2 === undefined ? undefined : currentToSI(saturationCurrentMAPerCm2),
    logMinority: 2 * logIntrinsicDensity(layer, device.temperature) - Math.log(doping),
    transitTime: (overrides.depletionTransitTimeNs ?? 0) * 1e-9,
    bias: light("bias"),
    modulation: light("modulation"),
  };
}

/** The neutral bulk behind the depletion layer: collection per photon that enters it, F, and 1/τ − F F(0)/D. */
interface Bulk {
  collection: (absorption: number) => (omega: number) => Complex;
  conductance: (omega: number) => Complex;
  deficit: (omega: number) => Complex;
}

function thickBulk({ diffusion, rate }: Depletion): Bulk {
  const gamma = (omega: number) => inverseDiffusionLength({ diffusion, rate }, omega);
  const steady = gamma(0).re;
  return {
    collection: (absorption) => (omega) =>
      absorption === 0 ? complex(0) : divide(complex(absorption), add(complex(absorption), gamma(omega))),
    conductance: (omega) => scale(gamma(omega), diffusion),
    // 1/τ − Dγγ_0 with γ² − γ_0² = iω/D.
    deficit: (omega) =>
      omega === 0 || steady === 0
        ? complex(0)
        : divide(complex(0, -omega * steady), add(complex(steady), gamma(omega))),
  };
}

function finiteBulk({ diffusion, rate, backVelocity, thickness }: Depletion, width: number): Bulk {
  const film: Film = { thickness: thickness - width, diffusion, rate, farVelocity: backVelocity };
  const conductance = (omega: number) => filmConductance(film, omega);
  const steady = conductance(0);
  const deficit = complex(steadyDeficit(film));
  return {
    collection: (absorption) => filmCollection(film, absorption, "near"),
    conductance,
    deficit: (omega) => subtract(deficit, scale(subtract(conductance(omega), steady), steady.re / diffusion)),
  };
}

/** Bulk behind a depletion layer of a given width (m). */
const bulkBehind = (depletion: Depletion, width: number): Bulk =>
  depletion.bulk === "thick" ? thickBulk(depletion) : finiteBulk(depletion, width);

/** Carriers per incident photon from depletion layer and bulk; T_w delays the depletion part alone. */
function collected(
  { absorption, reaching }: Depletion["bias"],
  width: number,
  transit: Complex,
  fromBulk: Complex,
): Complex {
  const behind = Math.exp(-absorption * width);
  return scale(add(scale(transit, -Math.expm1(-absorption * width)), scale(fromBulk, behind)), reaching);
}

/** Steady carriers per incident photon of bias light at an inner voltage. */
export function steadyYield(depletion: Depletion, voltage: number): number {
  const width = depletion.width(voltage);
  const fromBulk = bulkBehind(depletion, width).collection(depletion.bias.absorption)(0);
  return collected(depletion.bias, width, one, fromBulk).re;
}

/** n_0 (e^{V/V_T} − 1) and n_0 e^{V/V_T} without overflow of a factor. */
function edgeDensities(logMinority: number, voltage: number, thermal: number) {
  const density = Math.exp(logMinority + voltage / thermal);
  const excess =
    voltage > 0 ? -density * Math.expm1(-voltage / thermal) : Math.exp(logMinority) * Math.expm1(voltage / thermal);
  return { density, excess };
}

/** ln n_0, from the saturation current where that is given. */
function logMinorityAt({ saturation, logMinority }: Depletion, steadyConductance: number): number {
  return saturation === undefined ? logMinority : Math.log(saturation) - Math.log(elementaryCharge * steadyConductance);
}

/** F(0) in m/s at an inner voltage. */
export const steadyConductance = (depletion: Depletion, voltage: number): number =>
  bulkBehind(depletion, depletion.width(voltage)).conductance(0).re;

/** Diode current J_s (e^{V/V_T} − 1) in A/m² at an inner voltage. */
export function diodeCurrent(depletion: Depletion, voltage: number): number {
  const steady = steadyConductance(depletion, voltage);
  if (steady === 0) return 0;
  const { excess } = edgeDensities(logMinorityAt(depletion, steady), voltage, depletion.thermal);
  return elementaryCharge * steady * excess;
}

/** Saturation current in mA/cm² at an inner voltage. */
export function saturationCurrent(depletion: Depletion, voltage: number): number {
  const { saturation, logMinority } = depletion;
  if (saturation !== undefined) return currentFromSI(saturation);
  const steady = steadyConductance(depletion, voltage);
  return currentFromSI(elementaryCharge * steady * Math.exp(logMinority));
}

/** Q_i as a function of the angular frequency at an inner voltage. */
export function depletionYield(depletion: Depletion, voltage: number): Cell["photocurrent"] {
  const width = depletion.width(voltage);
  const fromBulk = bulkBehind(depletion, width).collection(depletion.modulation.absorption);
  return (omega) =>
    collected(depletion.modulation, width, meanDecay(complex(0, omega * depletion.transitTime)), fromBulk(omega));
}

/**
 * Y_i as a function of the angular frequency at an inner voltage.
 *
 * @param moving whether the voltage moves the edge of the depletion layer.
 */
export function depletionAdmittance(
  depletion: Depletion,
  { spectrum }: Request,
  voltage: number,
  moving: boolean,
): Cell["admittance"] {
  const { thermal, diffusion, bias, builtIn } = depletion;
  const width = depletion.width(voltage);
  const { conductance, deficit, collection } = bulkBehind(depletion, width);
  const steady = conductance(0).re;
  const logMinority = steady === 0 && depletion.saturation !== undefined ? -Infinity : logMinorityAt(depletion, steady);
  const { density, excess } = edgeDensities(logMinority, voltage, thermal);
  const edge = moving ? (elementaryCharge * width) / (2 * (builtIn - voltage)) : 0;
  const collectedFlux =
    fluxToSI(spectrum.fluxPerCm2S) *
    bias.reaching *
    Math.exp(-bias.absorption * width) *
    collection(bias.absorption)(0).re;
  const follows = depletion.saturation === undefined;
  return (omega) => {
    const flux = conductance(omega);
    const diode = scale(flux, (elementaryCharge * density) / thermal);
    const layer = complex(0, (omega * depletion.permittivity) / width);
    if (edge === 0) return add(diode, layer);
    const fromLight = scale(flux, collectedFlux / diffusion);
    const fromDiode = follows ? add(scale(deficit(omega), excess), complex(0, omega * density)) : complex(0);
    return add(add(diode, layer), scale(add(fromLight, fromDiode), edge));
  };
}
