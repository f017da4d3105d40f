/** Spectra of a scenario by the full transport model: one steady state and one linearisation per operating point. */
import { atTerminals } from "../circuit.ts";
import { complex } from "../numerics/complex.ts";
import { type Failure, type SpectrumResult, type UnsolvedSpectrum, unitOf, type Warning } from "../result.ts";
import { currentFromSI, type Device, fluxToSI, resistanceFromSI } from "../scenario/device.ts";
import { refuse } from "../scenario/errors.ts";
import { frequenciesOf } from "../scenario/frequencies.ts";
import type { ResolvedScenario, ResolvedSpectrum } from "../scenario/resolved.ts";
import type { Bias } from "../scenario/schema.ts";
import type { SolvedSpectra, SolveOptions } from "../solve.ts";
import { ContactRefusal } from "./contacts.ts";
import { type SteadyState, steadyState } from "./continuation.ts";
import { type HeldIons, holdIons } from "./ions.ts";
import type { Operation } from "./newton.ts";
import { type Problem, prepareProblem } from "./problem.ts";
import { linearise, type Response, respond } from "./smallSignal.ts";
import type { State } from "./state.ts";
import { stackWarnings } from "./warnings.ts";

export interface TransportOptions extends SolveOptions {
  /** Newton iterations for each operating point. */
  iterations?: number;
}

/** A steady state at the terminals. */
export interface OperatingState {
  problem: Problem;
  steady: SteadyState;
  /** Terminal voltage, V, and delivered current, A m⁻². */
  voltage: number;
  current: number;
}

export const operationOf = (bias: Bias): Operation =>
  bias === "openCircuit"
    ? { kind: "openCircuit" }
    : { kind: "voltage", voltage: bias === "shortCircuit" ? 0 : bias.voltageV };

/** The problem of a device. @throws ScenarioError where the stack or its mesh cannot be solved */
export function problemOf(device: Device, nodes: number | null): Problem {
  const fewest = 2 * device.layers.length + 1;
  if (nodes !== null && nodes < fewest)
    refuse("model.nodes", `is ${nodes} for ${device.layers.length} layers`, `${fewest} or more for this stack`);
  try {
    return prepareProblem(device, nodes);
  } catch (error) {
    if (error instanceof ContactRefusal) refuse(error.path, error.message, error.allowed);
    throw error;
  }
}

/** The operating points of one problem, each solved once; later ones begin from their neighbours. */
export class OperatingPoints {
  readonly problem: Problem;
  private readonly options: TransportOptions;
  private held: HeldIons | SteadyState | null = null;
  private readonly solved = new Map<string, OperatingState>();
  private neighbour: State | null = null;

  constructor(problem: Problem, options: TransportOptions = {}, start: State | null = null) {
    this.problem = problem;
    this.options = options;
    this.neighbour = start;
  }

  /** Frozen ions, solved once; null where ions follow; the failed steady state where their bias has none. */
  private ions(): HeldIons | SteadyState | null {
    const { ionsFrozenAt } = this.problem.device;
    if (!ionsFrozenAt || this.problem.ions.length === 0) return null;
    if (!this.held) {
      const drive = { flux: ionsFrozenAt.flux, heldIons: null };
      const steady = steadyState(this.problem, operationOf(ionsFrozenAt.bias), drive, this.options);
      this.held =
        steady.status === "solved"
          ? holdIons(this.problem, steady.state)
          : { ...steady, step: `ions before they were frozen: ${steady.step}` };
    }
    return this.held;
  }

  /** @param flux photons m⁻² s⁻¹ */
  at(bias: Bias, flux: number): OperatingState {
    const key = JSON.stringify([bias, flux]);
    const known = this.solved.get(key);
    if (known) return known;
    const { problem } = this;
    const operation = operationOf(bias);
    const ions = this.ions();
    const steady =
      ions && "status" in ions
        ? ions
        : steadyState(
            problem,
            operation,
            { flux, heldIons: ions },
            { ...this.options, start: this.neighbour ?? undefined },
          );
    if (steady.status === "solved") this.neighbour = steady.state;
    const inside = steady.state.voltage * problem.thermalVoltage;
    const current = steady.current - inside / problem.device.circuit.shuntResistance;
    const state: OperatingState = {
      problem,
      steady,
      voltage: operation.kind === "voltage" ? operation.voltage : inside,
      current: operation.kind === "openCircuit" ? 0 : current,
    };
    this.solved.set(key, state);
    return state;
  }
}

function failureOf(point: OperatingState, spectrum: ResolvedSpectrum, step: string, message: string): Failure {
  const { steady } = point;
  return {
    step,
    operatingPoint: {
      voltageV: Number.isFinite(point.voltage) ? point.voltage : null,
      fluxPerCm2S: spectrum.fluxPerCm2S,
    },
    residual: Number.isFinite(steady.residual) ? steady.residual : Number.MAX_VALUE,
    iterations: steady.iterations,
    message,
  };
}

/**
 * All spectra of a scenario.
 * @throws ScenarioError where a contact leaves a carrier no way out, or `model.nodes` is too small for the stack
 */
export function solveDriftDiffusion(
  scenario: ResolvedScenario,
  device: Device,
  options: TransportOptions = {},
): SolvedSpectra {
  const points = new OperatingPoints(problemOf(device, scenario.model.nodes), options);
  const frequencies = Float64Array.from(frequenciesOf(scenario.frequencies));
  const responses = new Map<OperatingState, Response>();
  const warnings: Warning[] = [];
  const spectra = scenario.spectra.map((spectrum, k): SpectrumResult => {
    const { technique, bias, fluxPerCm2S } = spectrum;
    const head = { technique, bias, fluxPerCm2S, unit: unitOf(technique) };
    const point = points.at(bias, fluxToSI(fluxPerCm2S));
    const { steady } = point;
    const failed = (status: UnsolvedSpectrum["status"], step: string, message: string): UnsolvedSpectrum => ({
      ...head,
      status,
      failure: failureOf(point, spectrum, step, message),
    });
    if (steady.status !== "solved")
      return failed(steady.status, steady.step, `${steady.step}: the steady state was not reached`);
    let response = responses.get(point);
    if (!response) {
      response = respond(linearise(points.problem, steady.state, steady.drive), frequencies, options.signal);
      responses.set(point, response);
      for (const warning of stackWarnings(point))
        if (!warnings.some(({ path }) => path === warning.path)) warnings.push(warning);
    }
    if (response.status !== "solved")
      return failed(response.status, "small signal", "the linear response has no solution");
    options.onProgress?.((k + 1) / scenario.spectra.length);
    const unit = technique === "imps" ? 1 : resistanceFromSI(1);
    const re: number[] = [];
    const im: number[] = [];
    for (let f = 0; f < frequencies.length; f++) {
      const outside = atTerminals(technique, device.circuit, frequencies[f], {
        photocurrent: complex(response.yieldReal[f], response.yieldImaginary[f]),
        admittance: complex(response.admittanceReal[f], response.admittanceImaginary[f]),
      });
      re.push(outside.re * unit);
      im.push(outside.im * unit);
    }
    if (![...re, ...im].every(Number.isFinite))
      return failed("singular", "small signal", "the response is infinite at a frequency");
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
  return { spectra, warnings };
}
