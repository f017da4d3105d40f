/** The operating points of one cell: each solved once, later ones from their neighbours. */
import { thermalVoltage } from "../constants.ts";
import { type Device, deviceOf, fluxToSI } from "../scenario/device.ts";
import { refuse } from "../scenario/errors.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { Bias } from "../scenario/schema.ts";
import { ContactRefusal } from "./contacts.ts";
import { type SteadyOptions, type SteadyState, steadyState } from "./continuation.ts";
import { type HeldIons, holdIons } from "./ions.ts";
import { buildMesh } from "./mesh.ts";
import type { Operation } from "./newton.ts";
import { type Problem, prepareProblem } from "./problem.ts";
import { largestMesh, refinedMesh, stretchedMesh } from "./refinement.ts";
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

/** Refinements of the mesh to a state. */
const refinements = 2;

export class OperatingPoints {
  readonly device: Device;
  private readonly nodes: number | null;
  private readonly options: Omit<SteadyOptions, "start">;
  private readonly known = new Map<string, OperatingPoint>();
  private previous: OperatingPoints | null;
  private readonly first: Problem;
  private latest: OperatingPoint | null = null;
  private frozen: { problem: Problem; steady: SteadyState } | null = null;

  /**
   * @param nodes total number of mesh nodes, null for the default
   * @param previous those of a neighbouring cell (one value changed), to begin from
   * @throws ScenarioError where a carrier could neither leave nor recombine, or there are too few nodes for the layers
   */
  constructor(
    device: Device,
    nodes: number | null,
    options: Omit<SteadyOptions, "start"> = {},
    previous: OperatingPoints | null = null,
  ) {
    const fewest = 2 * device.layers.length + 1;
    if (nodes !== null && nodes < fewest)
      refuse("model.nodes", `is ${nodes} for ${device.layers.length} layers`, `${fewest} or more for this stack`);
    this.device = device;
    this.nodes = nodes;
    this.options = options;
    this.previous = previous?.nodes === nodes ? previous : null;
    try {
      this.first = prepareProblem(device, buildMesh(device.layers, thermalVoltage(device.temperature), nodes));
    } catch (error) {
      if (error instanceof ContactRefusal) refuse(error.path, error.message, error.allowed);
      throw error;
    }
  }

  /** Frozen ions on the mesh of a problem; null where ions follow; the failed steady state where their bias has none. */
  private ions(problem: Problem): { held: HeldIons; state: State } | SteadyState | null {
    const { ionsFrozenAt } = this.device;
    if (!ionsFrozenAt || problem.ions.length === 0) return null;
    if (this.frozen?.problem !== problem) {
      const start = this.frozen && transferState(this.frozen.problem, this.frozen.steady.state, problem);
      const drive = { flux: ionsFrozenAt.flux, heldIons: null };
      const options = { ...this.options, start: start ?? undefined };
      const steady = steadyState(problem, operationOf(ionsFrozenAt.bias), drive, options);
      this.frozen = { problem, steady };
    }
    const { steady } = this.frozen;
    if (steady.status !== "solved") return { ...steady, step: `ions before they were frozen: ${steady.step}` };
    return { held: holdIons(problem, steady.state), state: steady.state };
  }

  /** Let the neighbouring cell go: a chain of them would keep every state there ever was. */
  forgetPrevious(): void {
    this.previous = null;
  }

  /**
   * Where to begin: the same operating point of the neighbouring cell on its mesh, one of the same kind (its light or its
   * voltage may be what moved), or the last one of this cell.
   */
  private start(key: string, bias: Bias): { problem: Problem; state: State | undefined } {
    const neighbour =
      this.previous?.known.get(key) ??
      [...(this.previous?.known.values() ?? [])].findLast(
        (point) => typeof point.bias === typeof bias && (typeof bias === "object" || point.bias === bias),
      );
    const mesh = neighbour?.steady.status === "solved" && stretchedMesh(neighbour.problem, this.device);
    if (neighbour && mesh) {
      const problem = prepareProblem(this.device, mesh);
      return { problem, state: transferState(neighbour.problem, neighbour.steady.state, problem) ?? undefined };
    }
    const latest = this.latest && transferState(this.latest.problem, this.latest.steady.state, this.first);
    return { problem: this.first, state: latest ?? undefined };
  }

  /** The operating point at a bias and a photon flux (cm⁻² s⁻¹); its steady state says whether it was reached. */
  at(bias: Bias, fluxPerCm2S: number): OperatingPoint {
    const key = JSON.stringify([bias, fluxPerCm2S]);
    const known = this.known.get(key);
    if (known) return known;
    const operation = operationOf(bias);
    let { problem, state } = this.start(key, bias);
    let reached: { problem: Problem; steady: SteadyState } | null = null;
    let iterations = 0;
    for (let refinement = 0; refinement <= refinements; refinement++) {
      const ions = this.ions(problem);
      const steady: SteadyState =
        ions && "status" in ions
          ? ions
          : steadyState(
              problem,
              operation,
              { flux: fluxToSI(fluxPerCm2S), heldIons: ions?.held ?? null },
              { ...this.options, start: state },
            );
      iterations += steady.iterations;
      // A state that was reached on the first mesh stands where the finer mesh gives none.
      if (reached && steady.status !== "solved" && steady.status !== "aborted") break;
      reached = { problem, steady };
      if (steady.status !== "solved" || refinement === refinements) break;
      const states = ions && "held" in ions ? [steady.state, ions.state] : [steady.state];
      const mesh = refinedMesh(problem, states, this.nodes, largestMesh(this.first));
      if (!mesh) break;
      const finer = prepareProblem(this.device, mesh);
      state = transferState(problem, steady.state, finer) ?? undefined;
      problem = finer;
    }
    const { steady } = reached!;
    const { circuit } = this.device;
    const inside = steady.state.voltage * reached!.problem.thermalVoltage;
    const point: OperatingPoint = {
      problem: reached!.problem,
      bias,
      fluxPerCm2S,
      steady: { ...steady, iterations },
      voltage: operation.kind === "voltage" ? operation.voltage : inside,
      current: operation.kind === "openCircuit" ? 0 : steady.current - inside / circuit.shuntResistance,
    };
    if (steady.status === "solved") this.latest = point;
    // What was stopped may be asked for again.
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
  return new OperatingPoints(deviceOf(scenario), nodes, options, previous);
}
