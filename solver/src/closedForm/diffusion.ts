/**
 * Diffusion and recombination between a collecting contact and a far side: IMPS as the collected flux, IMVS and
 * impedance as the density at the contact without flow. The film may be one layer in closed form or many layers by
 * finite volumes: only two functions of it are needed.
 *
 * | symbol | meaning | unit |
 * |---|---|---|
 * | Q_∞ | carriers collected per incident photon by a perfect contact | 1 |
 * | K | flux into the film per unit density at the contact | m/s |
 * | k_ext | extraction velocity of the contact | m/s |
 * | n̄ | steady density at the contact without flow | m⁻³ |
 *
 * `Q_i = Q_∞ k/(k + K)`, `Y_i = (q n̄/(m V_T))/(1/k + 1/K)` at open circuit, 0 at short circuit; derived from the
 * boundary condition D n' = k_ext n. The photovoltage of a film without flow is that of
 * L. Dloczik et al., J. Phys. Chem. B 101, 10281 (1997) (from memory).
 */
import { type Cell, type Request, requestsOf, spectrumOf } from "../cell.ts";
import { hasParallelPath } from "../circuit.ts";
import { elementaryCharge, thermalVoltage } from "../constants.ts";
import { opposite } from "../equilibrium.ts";
import type { Wavelength } from "../light/generation.ts";
import { add, type Complex, complex, divide, scale } from "../numerics/complex.ts";
import { type Device, fluxToSI } from "../scenario/device.ts";
import { refuse } from "../scenario/errors.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { DiffusionOverrides, Side } from "../scenario/schema.ts";
import type { SolvedSpectra } from "../solve.ts";
import { type Carrier, diffusionOf, lightAtAbsorber, minorityCarrier, recombinationRate } from "./absorber.ts";
import { type Film, filmCollection, filmConductance } from "./film.ts";

/** What both models of this kind need to know of a film. */
export interface DiffusingFilm {
  /** Q_∞ of the modulated light. */
  collection: (omega: number) => Complex;
  /** Q_∞ of the bias light at zero frequency. */
  steadyCollection: number;
  conductance: (omega: number) => Complex;
  extractionVelocity: number;
  idealityFactor: number;
  derived: Cell["derived"];
}

/** The contact that collects a carrier. */
export const collectingSide = (device: Device, carrier: Carrier): Side =>
  carrier === "electron" ? device.electronContact : opposite(device.electronContact);

/** Extraction velocity in cm/s, null for infinite: the override, else that of the collecting contact. */
export function extractionVelocityOf(
  { stack }: ResolvedScenario,
  side: Side,
  carrier: Carrier,
  { extractionVelocityCmPerS: given }: Pick<DiffusionOverrides, "extractionVelocityCmPerS">,
): number | null {
  return given === undefined ? stack[side][`${carrier}VelocityCmPerS`] : given;
}

function cellOf(request: Request, film: DiffusingFilm): Cell {
  const { device, spectrum, path } = request;
  const { collection, conductance, extractionVelocity: k } = film;
  const { circuit } = device;
  const { technique, bias } = spectrum;
  if (typeof bias === "object")
    refuse(`${path}.bias`, `is a voltage, which the model does not know`, `"shortCircuit", "openCircuit"`);
  const flux = fluxToSI(spectrum.fluxPerCm2S);
  const collected = (omega: number, perfect: Complex) => {
    if (k === 0) return complex(0);
    return k === Infinity ? perfect : scale(divide(perfect, add(conductance(omega), complex(k))), k);
  };
  const photocurrent = (omega: number) => collected(omega, collection(omega));
  if (bias === "shortCircuit") {
    if (technique !== "imps" && !hasParallelPath(circuit))
      refuse(
        `${path}.technique`,
        `is "${technique}" at short circuit, where this cell has no admittance`,
        `"imps", or open circuit, or a shunt or parallel capacitance`,
      );
    const steady = collected(0, complex(film.steadyCollection)).re;
    const current = (elementaryCharge * flux * steady) / (1 + circuit.seriesResistance / circuit.shuntResistance);
    return {
      operatingPoint: { voltage: 0, current },
      photocurrent,
      admittance: () => complex(0),
      derived: film.derived,
    };
  }
  const drawn = conductance(0).re;
  if (drawn === 0)
    refuse(`${path}.bias`, "is open circuit of a film without recombination", "a lifetime, or short circuit");
  const density = (flux * film.steadyCollection) / drawn;
  if (technique !== "imps" && (density === 0 || k === 0) && !hasParallelPath(circuit))
    refuse(
      `${path}.technique`,
      `is "${technique}" where the cell has no admittance`,
      "bias light that is absorbed, and an extraction velocity above 0",
    );
  const factor = (elementaryCharge * density) / (film.idealityFactor * thermalVoltage(device.temperature));
  const admittance = (omega: number) => scale(collected(omega, conductance(omega)), factor);
  return { operatingPoint: { voltage: null, current: 0 }, photocurrent, admittance, derived: film.derived };
}

/** All spectra of a film in the order of the scenario. */
export function solveFilm(scenario: ResolvedScenario, device: Device, film: DiffusingFilm): SolvedSpectra {
  return {
    spectra: requestsOf(scenario, device).map((request) => spectrumOf(request, cellOf(request, film))),
    warnings: [],
  };
}

/** The override names with the values used, bench units. */
function valuesOf(scenario: ResolvedScenario, device: Device, overrides: DiffusionOverrides) {
  const { absorber } = scenario.model;
  const layer = device.layers[absorber];
  const carrier = overrides.carrier ?? minorityCarrier(layer);
  const rate = recombinationRate(layer, carrier);
  return {
    carrier,
    diffusionCm2PerS: overrides.diffusionCm2PerS ?? diffusionOf(layer, carrier, device.temperature) * 1e4,
    lifetimeNs: overrides.lifetimeNs ?? (rate === 0 ? null : 1e9 / rate),
    absorptionPerCm: overrides.absorptionPerCm ?? scenario.stack.layers[absorber].absorptionPerCm,
    thicknessNm: overrides.thicknessNm ?? scenario.stack.layers[absorber].thicknessNm,
    extractionVelocityCmPerS: extractionVelocityOf(scenario, collectingSide(device, carrier), carrier, overrides),
    farVelocityCmPerS: overrides.farVelocityCmPerS ?? 0,
    idealityFactor: overrides.idealityFactor ?? 1,
  };
}

/** Diffusion–recombination in one layer, in closed form. */
export function solveDiffusion(scenario: ResolvedScenario, device: Device): SolvedSpectra {
  const { model } = scenario;
  const overrides = model.kind === "diffusion" ? model.overrides : {};
  const derived = valuesOf(scenario, device, overrides);
  const film: Film = {
    thickness: derived.thicknessNm * 1e-9,
    diffusion: derived.diffusionCm2PerS * 1e-4,
    rate: derived.lifetimeNs === null ? 0 : 1e9 / derived.lifetimeNs,
    farVelocity: derived.farVelocityCmPerS / 100,
  };
  const lit = device.lightSide === collectingSide(device, derived.carrier) ? "near" : "far";
  const perPhoton = (wavelength: Wavelength) => {
    const { absorption, reaching } = lightAtAbsorber(device, model.absorber, wavelength);
    const coefficient = overrides.absorptionPerCm === undefined ? absorption : overrides.absorptionPerCm * 100;
    const perEntering = filmCollection(film, coefficient, lit);
    return (omega: number) => scale(perEntering(omega), reaching);
  };
  return solveFilm(scenario, device, {
    collection: perPhoton("modulation"),
    steadyCollection: perPhoton("bias")(0).re,
    conductance: (omega) => filmConductance(film, omega),
    extractionVelocity: (derived.extractionVelocityCmPerS ?? Infinity) / 100,
    idealityFactor: derived.idealityFactor,
    derived,
  });
}
