/**
 * A cell inside its circuit at one operating point, as a model hands it over, and the spectrum that its terminals show.
 */
import { atTerminals } from "./circuit.ts";
import type { Complex } from "./numerics/complex.ts";
import { type SolvedSpectrum, unitOf } from "./result.ts";
import { currentFromSI, type Device, resistanceFromSI } from "./scenario/device.ts";
import { refuse } from "./scenario/errors.ts";
import { frequenciesOf } from "./scenario/frequencies.ts";
import type { ResolvedScenario, ResolvedSpectrum } from "./scenario/resolved.ts";

/** A spectrum that is asked for, with what a model needs to answer or refuse it. */
export interface Request {
  scenario: ResolvedScenario;
  device: Device;
  spectrum: ResolvedSpectrum;
  /** "spectra.1": where refusals point to. */
  path: string;
}

export interface Cell {
  /** At the terminals: V (null where the model does not know it) and A/m². */
  operatingPoint: { voltage: number | null; current: number };
  /** Q_i and Y_i (S/m²) at an angular frequency in rad/s. */
  photocurrent: (omega: number) => Complex;
  admittance: (omega: number) => Complex;
  /** Override names with the values used, bench units. */
  derived: NonNullable<SolvedSpectrum["derived"]>;
}

/** The requests of a scenario, one per spectrum. */
export function requestsOf(scenario: ResolvedScenario, device: Device): Request[] {
  return scenario.spectra.map((spectrum, k) => ({ scenario, device, spectrum, path: `spectra.${k}` }));
}

/**
 * The spectrum of a cell at its terminals.
 *
 * @throws ScenarioError where a value leaves the range of double precision.
 */
export function spectrumOf({ scenario, device, spectrum, path }: Request, cell: Cell): SolvedSpectrum {
  const { technique, bias, fluxPerCm2S } = spectrum;
  const frequencyHz = frequenciesOf(scenario.frequencies);
  const unit = technique === "imps" ? 1 : resistanceFromSI(1);
  const re: number[] = [];
  const im: number[] = [];
  for (const frequency of frequencyHz) {
    const omega = 2 * Math.PI * frequency;
    const inside = { photocurrent: cell.photocurrent(omega), admittance: cell.admittance(omega) };
    const outside = atTerminals(technique, device.circuit, frequency, inside);
    re.push(outside.re * unit);
    im.push(outside.im * unit);
  }
  const { voltage, current } = cell.operatingPoint;
  const operatingPoint = { voltageV: voltage, currentMAPerCm2: currentFromSI(current) };
  if (![operatingPoint.currentMAPerCm2, ...re, ...im].every(Number.isFinite))
    refuse(`${path}.bias`, "leads to values beyond the range of numbers", "an operating point nearer to equilibrium");
  return {
    status: "solved",
    technique,
    bias,
    fluxPerCm2S,
    unit: unitOf(technique),
    operatingPoint,
    derived: cell.derived,
    frequencyHz,
    re,
    im,
  };
}
