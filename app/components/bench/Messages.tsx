import type { Fault, UnsolvedSpectrum } from "@demilune/solver";
import { formatNumber, thinSpace } from "~/lib/numberFormat";

/** Why the document cannot be solved as it stands: where, what, and what is allowed. */
export function Faults({ faults, stale }: { faults: readonly Fault[]; stale: boolean }) {
  return (
    <div role="alert" className="mt-3 border-bad border-l-2 pl-3">
      <p>
        <span className="font-semibold text-bad">× Not solved.</span>{" "}
        {stale
          ? "The curves are those of the last values that could be solved."
          : "The document cannot be solved as it stands."}
      </p>
      <ul>
        {faults.map(({ path, message, allowed }) => (
          <li key={`${path} ${message}`}>
            <span className="font-semibold">{path}</span> {message}; allowed: {allowed}
          </li>
        ))}
      </ul>
    </div>
  );
}

/** A spectrum that was not solved: the step, the operating point and the residual where it ended. */
export function NotSolved({ spectrum }: { spectrum: UnsolvedSpectrum }) {
  const { step, message, operatingPoint, residual, iterations } = spectrum.failure;
  const voltage =
    operatingPoint.voltageV === null ? "" : ` at ${formatNumber(operatingPoint.voltageV, 4)}${thinSpace}V`;
  return (
    <div role="alert" className="mt-6 min-h-96 border-bad border-l-2 pl-3">
      <p>
        <span className="font-semibold text-bad">× Not solved.</span> {message}
      </p>
      <p className="text-ink-soft">
        {step}
        {voltage}; residual {formatNumber(residual, 2)} after {iterations} iterations.
      </p>
    </div>
  );
}
