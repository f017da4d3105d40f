/**
 * Current–voltage curves at the terminals, circuit in place, as a chain of steady states.
 *
 * With ions that follow, every point is in the steady state: the limit of an infinitely slow scan. With ions held at a
 * pre-bias the curve is the limit of an infinitely fast scan. A scan at a finite rate lies between the two.
 */
import type { Failure } from "../result.ts";
import { currentFromSI } from "../scenario/device.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { Bias } from "../scenario/schema.ts";
import type { SteadyOptions } from "./continuation.ts";
import { failureOf } from "./failures.ts";
import { type OperatingPoints, operatingPointsOf } from "./operatingPoints.ts";

export interface CurveRequest {
  /** Photons cm⁻² s⁻¹; the scenario's own where absent. */
  fluxPerCm2S?: number;
  /** Where the ions were left (fast-scan limit), or that they follow; the scenario's own statement where absent. */
  ions?: "follow" | { bias: Bias; fluxPerCm2S: number };
  /** Terminal voltages; absent: from −0.2 V to 0.1 V above V_oc (in the dark to 0.8 of the largest gap). */
  fromV?: number;
  toV?: number;
  /** Number of equal steps (default 40). */
  steps?: number;
}

export interface CurrentVoltageCurve {
  voltageV: Float64Array;
  currentMAPerCm2: Float64Array;
  /** Null in the dark, or where it was not reached. */
  openCircuitVoltageV: number | null;
  shortCircuitMAPerCm2: number | null;
  /** Between 0 and 1; null in the dark. */
  fillFactor: number | null;
  maximumPower: { voltageV: number; currentMAPerCm2: number; powerMWPerCm2: number } | null;
  /** Points that were not reached; they are left out of the arrays. */
  failures: Failure[];
}

/** A curve of a scenario. @throws ScenarioError as `operatingPointsOf` */
export function currentVoltageCurve(
  scenario: ResolvedScenario,
  request: CurveRequest = {},
  options: Omit<SteadyOptions, "start"> = {},
): CurrentVoltageCurve {
  const { ions } = request;
  const frozen = ions === undefined ? scenario.stack.ionsFrozenAt : ions === "follow" ? null : ions;
  const points = operatingPointsOf({ ...scenario, stack: { ...scenario.stack, ionsFrozenAt: frozen } }, options);
  const fluxPerCm2S = request.fluxPerCm2S ?? scenario.light.fluxPerCm2S;
  const failures: Failure[] = [];
  const at = (bias: Bias) => {
    const point = points.at(bias, fluxPerCm2S);
    if (point.steady.status === "solved") return point;
    failures.push(failureOf(point));
    return null;
  };
  const short = at("shortCircuit");
  const open = fluxPerCm2S > 0 ? at("openCircuit") : null;
  const largestGap = Math.max(...scenario.stack.layers.map(({ gapEV }) => gapEV));
  const from = request.fromV ?? Math.min(-0.2, (open?.voltage ?? 0) - 0.1);
  const to = request.toV ?? (open ? Math.max(open.voltage, 0) + 0.1 : 0.8 * largestGap);
  const steps = Math.max(1, request.steps ?? 40);
  const voltage: number[] = [];
  const current: number[] = [];
  for (let k = 0; k <= steps && !options.signal?.aborted; k++) {
    const point = at({ voltageV: from + ((to - from) * k) / steps });
    if (!point) continue;
    voltage.push(point.voltage);
    current.push(currentFromSI(point.current));
  }
  const maximumPower = open && open.voltage > 0 ? maximumPowerPoint(points, fluxPerCm2S, open.voltage) : null;
  const shortCircuit = short && currentFromSI(short.current);
  return {
    voltageV: Float64Array.from(voltage),
    currentMAPerCm2: Float64Array.from(current),
    openCircuitVoltageV: open?.voltage ?? null,
    shortCircuitMAPerCm2: shortCircuit,
    fillFactor: maximumPower && shortCircuit ? maximumPower.powerMWPerCm2 / (open!.voltage * shortCircuit) : null,
    maximumPower,
    failures,
  };
}

/** Golden-section search (J. Kiefer, Proc. Am. Math. Soc. 4, 502 (1953)) for the largest power between 0 and V_oc. */
function maximumPowerPoint(points: OperatingPoints, fluxPerCm2S: number, openCircuit: number) {
  const ratio = 0.5 * (Math.sqrt(5) - 1);
  const power = (voltageV: number) => {
    const point = points.at({ voltageV }, fluxPerCm2S);
    return point.steady.status === "solved" ? voltageV * currentFromSI(point.current) : Number.NEGATIVE_INFINITY;
  };
  let [low, high] = [0, openCircuit];
  let [a, b] = [high - ratio * high, ratio * high];
  let [powerA, powerB] = [power(a), power(b)];
  while (high - low > 1e-4 * openCircuit) {
    if (powerA > powerB) {
      [high, b, powerB] = [b, a, powerA];
      a = high - ratio * (high - low);
      powerA = power(a);
    } else {
      [low, a, powerA] = [a, b, powerB];
      b = low + ratio * (high - low);
      powerB = power(b);
    }
  }
  const [voltageV, powerMWPerCm2] = powerA > powerB ? [a, powerA] : [b, powerB];
  if (!(powerMWPerCm2 > 0)) return null;
  return { voltageV, currentMAPerCm2: powerMWPerCm2 / voltageV, powerMWPerCm2 };
}
