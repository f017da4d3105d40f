/** The operating points of one cell: each solved once, later ones from their neighbours. */
import { type Device, deviceOf, fluxToSI } from "../scenario/device.ts";
import { refuse } from "../scenario/errors.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { Bias } from "../scenario/schema.ts";
import { ContactRefusal } from "./contacts.ts";
import { type SteadyOptions, type SteadyState, steadyState } from "./continuation.ts";
import { type HeldIons, holdIons } from "./ions.ts";
import type { Operation } from "./newton.ts";
import { type Problem, prepareProblem } from "./problem.ts";
import { type State, transferState } from "./state.ts";

/** A steady state as the terminals see it. */
export interface OperatingPoint {
  problem: Problem;
  bias: Bias;
  /** Photons cm⁻² s⁻¹. */
  fluxPerCm2S: number;
  steady: SteadyState;
  /** Terminal voltage, V. */
  voltage: number;
  /** Delivered at the terminals, A m⁻². */
  current: number;
}

const operationOf = (bias: Bias): Operation =>
  bias === "openCircuit"
    ? { kind: "openCircuit" }
    : { kind: "voltage", voltage: bias === "shortCircuit" ? 0 : bias.voltageV };

/** The problem of a device. @throws ScenarioError where the stack or its mesh cannot be solved */
function problemOf(device: Device, nodes: number | null): Problem {
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

export class OperatingPoints {
  readonly problem: Problem;
  private readonly options: Omit<SteadyOptions, "start">;
  private readonly known = new Map<string, OperatingPoint>();
  private previous: OperatingPoints | null;
  private held: HeldIons | SteadyState | null = null;
  private latest: State | null = null;

  /** @param previous those of a neighbouring cell (one value changed), to begin from */
  constructor(problem: Problem, options: Omit<SteadyOptions, "start"> = {}, previous: OperatingPoints | null = null) {
    this.problem = problem;
    this.options = options;
    this.previous = previous;
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

  /** Let the neighbouring cell go: a chain of them would keep every state there ever was. */
  forgetPrevious(): void {
    this.previous = null;
  }

  /**
   * The state to begin from: the same operating point of the neighbouring cell, one of the same kind (its light or its
   * voltage may be what moved), or the last one of this cell.
   */
  private start(key: string, bias: Bias): State | undefined {
    const neighbour =
      this.previous?.known.get(key) ??
      [...(this.previous?.known.values() ?? [])].findLast(
        (point) => typeof point.bias === typeof bias && (typeof bias === "object" || point.bias === bias),
      );
    if (neighbour?.steady.status === "solved") {
      const moved = transferState(neighbour.problem, neighbour.steady.state, this.problem);
      if (moved) return moved;
    }
    return this.latest ?? undefined;
  }

  /** The operating point at a bias and a photon flux (cm⁻² s⁻¹); its steady state says whether it was reached. */
  at(bias: Bias, fluxPerCm2S: number): OperatingPoint {
    const key = JSON.stringify([bias, fluxPerCm2S]);
    const known = this.known.get(key);
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
            { flux: fluxToSI(fluxPerCm2S), heldIons: ions },
            { ...this.options, start: this.start(key, bias) },
          );
    if (steady.status === "solved") this.latest = steady.state;
    const inside = steady.state.voltage * problem.thermalVoltage;
    const point: OperatingPoint = {
      problem,
      bias,
      fluxPerCm2S,
      steady,
      voltage: operation.kind === "voltage" ? operation.voltage : inside,
      current: operation.kind === "openCircuit" ? 0 : steady.current - inside / problem.device.circuit.shuntResistance,
    };
    // What was stopped or ran out of budget may be asked for again.
    if (steady.status !== "aborted") this.known.set(key, point);
    return point;
  }
}

/**
 * Operating points of a scenario, to be asked for profiles and curves.
 * @param previous those of a scenario that differs little
 * @throws ScenarioError where a contact leaves a carrier no way out, or `model.nodes` is too small for the stack
 */
export function operatingPointsOf(
  scenario: ResolvedScenario,
  options: Omit<SteadyOptions, "start"> = {},
  previous: OperatingPoints | null = null,
): OperatingPoints {
  const nodes = scenario.model.kind === "driftDiffusion" ? scenario.model.nodes : null;
  return new OperatingPoints(problemOf(deviceOf(scenario), nodes), options, previous);
}
