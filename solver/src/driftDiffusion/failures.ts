/** Failures of the full model as values: which step, for which operating point, with what residual. */
import { type Failure, statusMessages } from "../result.ts";
import type { OperatingPoint } from "./operatingPoints.ts";

const biasInWords = ({ bias }: OperatingPoint): string => {
  if (typeof bias === "object") return `${bias.voltageV} V`;
  return bias === "openCircuit" ? "open circuit" : "short circuit";
};

/** @param step what failed after the steady state was reached; absent where the steady state itself failed */
export function failureOf(point: OperatingPoint, step?: string): Failure {
  const { steady, fluxPerCm2S } = point;
  const where = `${biasInWords(point)}, ${fluxPerCm2S} photons cm⁻² s⁻¹`;
  const inside = steady.state.voltage * point.problem.thermalVoltage;
  const what = step ? statusMessages.singular : statusMessages[steady.status];
  const reached = step ? "" : `; reached ${Number(inside.toPrecision(4))} V inside the series resistance`;
  return {
    step: step ?? steady.step,
    operatingPoint: {
      voltageV: typeof point.bias === "object" || point.bias === "shortCircuit" ? point.voltage : null,
      fluxPerCm2S,
    },
    residual: Number.isFinite(steady.residual) ? steady.residual : Number.MAX_VALUE,
    iterations: steady.iterations,
    message: `${what} at ${where} (step: ${step ?? steady.step}${reached})`,
  };
}
