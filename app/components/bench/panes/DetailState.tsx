import type { ReactNode } from "react";
import type { DetailName, Details } from "~/workers/solverMessages";
import type { Detail } from "~/workers/useDetail";

interface DetailStateProps<Name extends DetailName> {
  detail: Detail<Name>;
  children: (value: Details[Name]["answer"]) => ReactNode;
}

/** The answer to a slower question, or why there is none; an answer that is being renewed stays on screen. */
export function DetailState<Name extends DetailName>({ detail, children }: DetailStateProps<Name>) {
  const { value, busy, faults } = detail;
  return (
    <div aria-busy={busy}>
      {faults.map(({ path, message }) => (
        <p key={`${path} ${message}`} role="alert" className="mb-2 border-bad border-l-2 pl-3">
          <span className="font-semibold text-bad">× Not solved.</span> {path}: {message}
        </p>
      ))}
      {value ? children(value) : busy && <p className="min-h-64 text-ink-soft">Solving …</p>}
    </div>
  );
}
