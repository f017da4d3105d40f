import type { ReactNode } from "react";

interface PaneChoiceProps {
  /** What is chosen, in words before the list; they name it for screen readers too. */
  words: ReactNode;
  value: string;
  options: readonly { readonly id: string; readonly label: string }[];
  onChoose: (id: string) => void;
}

/** The line at the top of a pane that says what it shows and lets one show something else. */
export function PaneChoice({ words, value, options, onChoose }: PaneChoiceProps) {
  return (
    <label className="mb-2 flex flex-wrap items-baseline gap-x-2">
      <span className="text-ink-soft">{words}</span>
      <select
        className="min-w-0 rounded bg-transparent py-0.5 text-tide"
        value={value}
        onChange={(event) => onChoose(event.currentTarget.value)}
      >
        {options.map(({ id, label }) => (
          <option key={id} value={id} className="bg-sheet text-ink">
            {label}
          </option>
        ))}
      </select>
    </label>
  );
}
