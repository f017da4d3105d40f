/** Spectra of a scenario by the full transport model: one steady state and one linearisation per operating point. */
import { atTerminals } from "../circuit.ts";
import { complex } from "../numerics/complex.ts";
import { type SpectrumResult, unitOf, type Warning } from "../result.ts";
import { currentFromSI, type Device, resistanceFromSI } from "../scenario/device.ts";
import { frequenciesOf } from "../scenario/frequencies.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { SolvedSpectra, SolveOptions } from "../solve.ts";
import { failureOf } from "./failures.ts";
import { type OperatingPoint, operatingPointsOf } from "./operatingPoints.ts";
import { linearise, type Response, respond } from "./smallSignal.ts";
import { stateWarnings } from "./warnings.ts";

function terminalSpectrum(point: OperatingPoint, technique: SpectrumResult["technique"], response: Response) {
  const unit = technique === "imps" ? 1 : resistanceFromSI(1);
  const re: number[] = [];
  const im: number[] = [];
  response.frequencies.forEach((frequency, f) => {
    const outside = atTerminals(technique, point.problem.device.circuit, frequency, {
      photocurrent: complex(response.yieldReal[f], response.yieldImaginary[f]),
      admittance: complex(response.admittanceReal[f], response.admittanceImaginary[f]),
    });
    re.push(outside.re * unit);
    im.push(outside.im * unit);
  });
  return { re, im };
}

/**
 * All spectra of a scenario.
 * @throws ScenarioError where a contact leaves a carrier no way out, or `model.nodes` is too small for the stack
 */
export function solveDriftDiffusion(
  scenario: ResolvedScenario,
  _device: Device,
  options: SolveOptions = {},
): SolvedSpectra {
  const { memory } = options;
  const points = operatingPointsOf(scenario, { signal: options.signal }, memory?.points ?? null);
  const frequencies = Float64Array.from(frequenciesOf(scenario.frequencies));
  const responses = new Map<OperatingPoint, Response>();
  const warnings: Warning[] = [];
  const spectra = scenario.spectra.map(({ technique, bias, fluxPerCm2S }, k): SpectrumResult => {
    const head = { technique, bias, fluxPerCm2S, unit: unitOf(technique) };
    const point = points.at(bias, fluxPerCm2S);
    const { steady } = point;
    if (steady.status !== "solved") return { ...head, status: steady.status, failure: failureOf(point) };
    let response = responses.get(point);
    if (!response) {
      response = respond(linearise(point.problem, steady.state, steady.drive), frequencies, options.signal);
      responses.set(point, response);
      for (const warning of stateWarnings(point))
        if (!warnings.some(({ path }) => path === warning.path)) warnings.push(warning);
    }
    options.onProgress?.((k + 1) / scenario.spectra.length);
    if (response.status !== "solved")
      return { ...head, status: response.status, failure: failureOf(point, "small signal") };
    const { re, im } = terminalSpectrum(point, technique, response);
    if (!re.every(Number.isFinite) || !im.every(Number.isFinite))
      return { ...head, status: "singular", failure: failureOf(point, "small signal: an infinite response") };
    const [light, voltage] = response.spread;
    return {
      status: "solved",
      ...head,
      operatingPoint: { voltageV: point.voltage, currentMAPerCm2: currentFromSI(point.current) },
      currentSpread: technique === "imps" ? light : technique === "impedance" ? voltage : Math.max(light, voltage),
      frequencyHz: Array.from(frequencies),
      re,
      im,
    };
  });
  points.forgetPrevious();
  if (memory) memory.points = points;
  return { spectra, warnings };
}
