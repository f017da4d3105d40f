import type { KeyboardEvent } from "react";
import { RichText } from "~/components/ui/RichText";

interface Tab {
  id: string;
  /** Notation of `richText.ts`. */
  label: string;
  /** Words behind the label, softer. */
  addition?: string;
}

interface TabsProps {
  /** What is chosen by these tabs. */
  name: string;
  tabs: readonly Tab[];
  chosen: string;
  /** A second tab whose pane stands beside the chosen one's on wide screens. */
  beside?: string;
  onChoose: (id: string) => void;
}

/** Tabs with one tab stop; arrow keys and Home, End move. The panes have the ids `name-pane-id`. */
export function Tabs({ name, tabs, chosen, beside, onChoose }: TabsProps) {
  const onKeyDown = (event: KeyboardEvent<HTMLDivElement>) => {
    const here = tabs.findIndex(({ id }) => id === chosen);
    const target = { ArrowRight: here + 1, ArrowLeft: here - 1 + tabs.length, Home: 0, End: tabs.length - 1 }[
      event.key
    ];
    if (target === undefined) return;
    event.preventDefault();
    const next = tabs[target % tabs.length];
    onChoose(next.id);
    document.getElementById(`${name}-tab-${next.id}`)?.focus();
  };
  return (
    <div role="tablist" aria-label={name} className="flex min-w-0 gap-x-6 overflow-x-auto" onKeyDown={onKeyDown}>
      {tabs.map(({ id, label, addition }) => (
        <button
          key={id}
          id={`${name}-tab-${id}`}
          type="button"
          role="tab"
          aria-selected={id === chosen}
          aria-controls={id === chosen ? `${name}-pane-${id}` : undefined}
          tabIndex={id === chosen ? 0 : -1}
          onClick={() => onChoose(id)}
          className={`h-8 shrink-0 cursor-pointer whitespace-nowrap border-b-2 ${
            id === chosen
              ? "border-tide font-semibold text-ink"
              : id === beside
                ? "border-transparent text-ink-soft hover:text-ink xl:border-tide xl:font-semibold xl:text-ink"
                : "border-transparent text-ink-soft hover:text-ink"
          }`}
        >
          <RichText text={label} />
          {addition && <span className="font-normal text-ink-soft"> {addition}</span>}
        </button>
      ))}
    </div>
  );
}
