import type { Fault } from "@demilune/solver";

interface FaultListProps {
  faults: readonly Fault[];
  title: string;
  /** Address of the field a fault belongs to; absent where it has none on the page. */
  linkTo?: (path: string) => string | undefined;
}

/** What is wrong with a document: where, what, and what is allowed there. */
export function FaultList({ faults, title, linkTo }: FaultListProps) {
  if (faults.length === 0) return null;
  return (
    <div role="alert" className="border-bad border-l-2 pl-3">
      <h2 className="font-semibold text-bad">
        <span aria-hidden="true">▲ </span>
        {title}
      </h2>
      <ul className="mt-1 grid gap-1">
        {faults.map(({ path, message, allowed }) => {
          const target = linkTo?.(path);
          return (
            <li key={`${path} ${message}`} className="break-words">
              {target ? (
                <a href={target} className="link">
                  {path}
                </a>
              ) : (
                <span className="font-semibold">{path}</span>
              )}{" "}
              {message}
              <span className="block text-ink-soft text-small">allowed: {allowed}</span>
            </li>
          );
        })}
      </ul>
    </div>
  );
}
