/**
 * The model `gaertner`: operating point of the depletion layer in its circuit, with or without surface transfer.
 *
 * The inner voltage V_i solves V = V_i − R_s J with J(V_i) = qΦ Q(0, V_i) − J_s(e^{V_i/V_T} − 1) − V_i/R_sh.
 */
import { type Cell, type Request, requestsOf, spectrumOf } from "../cell.ts";
import { elementaryCharge } from "../constants.ts";
import { multiply } from "../numerics/complex.ts";
import { rootBetween } from "../numerics/root.ts";
import type { SolvedSpectrum, Warning } from "../result.ts";
import { type Device, fluxToSI } from "../scenario/device.ts";
import { refuse } from "../scenario/errors.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { GaertnerOverrides } from "../scenario/schema.ts";
import type { SolvedSpectra } from "../solve.ts";
import {
  type Depletion,
  depletionAdmittance,
  depletionOf,
  depletionYield,
  diodeCurrent,
  saturationCurrent,
  steadyConductance,
  steadyYield,
} from "./depletion.ts";
import { type SurfaceTransfer, surfaceAdmittance, surfaceTransferOf, transferredFraction } from "./surfaceTransfer.ts";

interface Model {
  overrides: GaertnerOverrides;
  depletion: Depletion;
  surface: SurfaceTransfer | null;
}

/** Current of the cell with its shunt, A/m², at an inner voltage. */
function currentAt({ device, spectrum }: Request, { depletion, surface }: Model): (voltage: number) => number {
  const flux = elementaryCharge * fluxToSI(spectrum.fluxPerCm2S);
  const { shuntResistance } = device.circuit;
  const transferred = surface ? surface.transfer / (surface.transfer + surface.recombination) : 1;
  return (voltage) => {
    const photocurrent = flux * steadyYield(depletion, voltage) * transferred;
    const diode = surface ? 0 : diodeCurrent(depletion, voltage);
    return photocurrent - diode - voltage / shuntResistance;
  };
}

/** The voltage inside the series resistance. */
function innerVoltage(request: Request, { depletion }: Model, current: (voltage: number) => number): number {
  const { bias } = request.spectrum;
  const { seriesResistance } = request.device.circuit;
  const { builtIn, lowestVoltage } = depletion;
  const path = `${request.path}.bias`;
  const terminal = bias === "shortCircuit" ? 0 : typeof bias === "object" ? bias.voltageV : undefined;
  const tooHigh = () =>
    refuse(
      path,
      `puts the cell at or above its built-in voltage of ${builtIn.toPrecision(4)} V`,
      "an inner voltage below the built-in voltage",
    );
  const tooLow = () =>
    refuse(
      path,
      "depletes the absorber to its back",
      `an inner voltage above ${lowestVoltage.toPrecision(4)} V, or the bulk "thick"`,
    );
  if (terminal !== undefined && seriesResistance === 0) {
    if (terminal >= builtIn) tooHigh();
    if (terminal <= lowestVoltage) tooLow();
    return terminal;
  }
  const balance =
    terminal === undefined ? current : (inner: number) => terminal - inner + seriesResistance * current(inner);
  const lowest = Math.min(terminal ?? 0, 0);
  const low = lowestVoltage < lowest ? lowest : lowestVoltage + (builtIn - lowestVoltage) * 1e-12;
  if (low >= builtIn || balance(builtIn) >= 0) tooHigh();
  if (balance(low) < 0) tooLow();
  return rootBetween(balance, low, builtIn);
}

function refuseUnsolvable({ spectrum, path }: Request, { depletion, surface, overrides }: Model): void {
  const { technique } = spectrum;
  if (surface && technique !== "imps")
    refuse(`${path}.technique`, `is "${technique}" with surface transfer`, `"imps", or no override transferPerS`);
  if (surface && surface.transfer + surface.recombination === 0)
    refuse("model.overrides.transferPerS", "is 0 and so is surfaceRecombinationPerS", "one of the two rates above 0");
  const width = overrides.depletionWidthNm;
  if (depletion.bulk === "finite" && width !== undefined && width * 1e-9 >= depletion.thickness)
    refuse(
      "model.overrides.depletionWidthNm",
      `is ${width} nm, the whole absorber`,
      `below ${depletion.thickness * 1e9} nm with a finite bulk`,
    );
}

function cellOf(request: Request, model: Model): Cell {
  refuseUnsolvable(request, model);
  const { overrides, depletion, surface } = model;
  const current = currentAt(request, model);
  const inner = innerVoltage(request, model, current);
  if (!surface && depletion.saturation !== undefined && steadyConductance(depletion, inner) === 0)
    refuse(
      "model.overrides.saturationCurrentMAPerCm2",
      "is given for a bulk without recombination",
      "a lifetime, or no saturation current",
    );
  const { bias } = request.spectrum;
  const voltage = bias === "shortCircuit" ? 0 : bias === "openCircuit" ? inner : bias.voltageV;
  const width = depletion.width(inner);
  const arriving = depletionYield(depletion, inner);
  const capacitance = depletion.permittivity / width;
  const kinetics = surface && transferredFraction(surface, capacitance);
  return {
    operatingPoint: { voltage, current: bias === "openCircuit" ? 0 : current(inner) },
    photocurrent: kinetics ? (omega) => multiply(arriving(omega), kinetics(omega)) : arriving,
    admittance: surface
      ? surfaceAdmittance(surface, capacitance)
      : depletionAdmittance(depletion, request, inner, overrides.depletionWidthNm === undefined),
    derived: {
      depletionWidthNm: width * 1e9,
      diffusionCm2PerS: depletion.diffusion * 1e4,
      lifetimeNs: depletion.rate === 0 ? null : 1e9 / depletion.rate,
      absorptionPerCm: depletion.bias.absorption / 100,
      saturationCurrentMAPerCm2: surface ? null : saturationCurrent(depletion, inner),
      depletionTransitTimeNs: overrides.depletionTransitTimeNs ?? 0,
      bulk: depletion.bulk,
      backVelocityCmPerS: depletion.backVelocity * 100,
      builtInVoltageV: depletion.builtIn,
      transferPerS: surface?.transfer ?? null,
      surfaceRecombinationPerS: surface?.recombination ?? null,
      helmholtzCapacitanceFPerCm2: surface && surface.helmholtz < Infinity ? surface.helmholtz / 1e4 : null,
      ...overrides,
    },
  };
}

/** What the form takes for granted and these numbers do not give. */
function warningsOf({ overrides, depletion }: Model, spectra: readonly SolvedSpectrum[]): Warning[] {
  if (depletion.bulk === "finite") return [];
  const unused =
    overrides.backVelocityCmPerS === undefined
      ? []
      : [{ path: "model.overrides.backVelocityCmPerS", message: 'has no effect with the bulk "thick"' }];
  const wide = spectra.flatMap(({ derived }, k) =>
    Number(derived?.depletionWidthNm) > depletion.thickness * 1e9
      ? {
          path: `spectra.${k}.bias`,
          message: "makes the depletion layer wider than the absorber; the form with a thick bulk does not see that",
        }
      : [],
  );
  return [...unused, ...wide];
}

/** Depletion layer with diffusion (Gärtner form), with surface transfer where an override asks for it. */
export function solveGaertner(scenario: ResolvedScenario, device: Device): SolvedSpectra {
  const overrides = scenario.model.kind === "gaertner" ? scenario.model.overrides : {};
  const model = {
    overrides,
    depletion: depletionOf(scenario, device, overrides),
    surface: surfaceTransferOf(overrides),
  };
  const spectra = requestsOf(scenario, device).map((request) => spectrumOf(request, cellOf(request, model)));
  return { spectra, warnings: warningsOf(model, spectra) };
}
