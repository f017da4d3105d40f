import type { PaneContext } from "./pane";

/** What the solver says about the input: warnings are not refusals. */
export function Checks({ result }: PaneContext) {
  const warnings = result?.warnings ?? [];
  if (warnings.length === 0)
    return (
      <p>
        <span className="text-good">✓ nothing to warn of.</span> The document is within its ranges.
      </p>
    );
  return (
    <ul className="grid gap-3">
      {warnings.map(({ path, message }) => (
        <li key={`${path} ${message}`} className="border-wary border-l-2 pl-3">
          <span className="font-semibold text-wary">! warning.</span> {message}{" "}
          <span className="text-ink-soft">({path})</span>
        </li>
      ))}
    </ul>
  );
}
