import { type ReactNode, useRef, useState } from "react";

interface NumberRow {
  key: string;
  /** The number stands at its default: the row is folded away until one asks for it. */
  usual?: boolean;
  row: ReactNode;
}

interface NumberGroupProps {
  title: string;
  tone?: "lamp";
  /** Lines of which those at their defaults fold; the heading says how many. */
  rows?: readonly NumberRow[];
  /** Lines that always stand, under the rows. */
  children?: ReactNode;
}

/** A headed list of 24 px lines. */
export function NumberGroup({ title, tone, rows = [], children }: NumberGroupProps) {
  const [open, setOpen] = useState(false);
  // A row that was seen once stays, or it would vanish under the hand that brings it back to its default.
  const seen = useRef(new Set<string>());
  for (const { key, usual } of rows) if (!usual) seen.current.add(key);
  const folded = rows.filter(({ key }) => !seen.current.has(key)).length;
  return (
    <section className="mb-2">
      <div className="flex items-baseline justify-between gap-2 border-line border-b">
        <h3 className={`pb-0.5 font-semibold text-small ${tone === "lamp" ? "text-lamp" : ""}`}>{title}</h3>
        {folded > 0 && (
          <button
            type="button"
            className="action min-h-6 shrink-0 text-small"
            title="Numbers at their defaults"
            aria-expanded={open}
            aria-label={open ? `Hide defaults of ${title}` : `Show ${folded} at their defaults, ${title}`}
            onClick={() => setOpen(!open)}
          >
            {open ? "fewer" : `${folded} more`}
          </button>
        )}
      </div>
      {rows.map(({ key, row }) => (open || seen.current.has(key)) && <div key={key}>{row}</div>)}
      {children}
    </section>
  );
}
