import { type ReactNode, useEffect, useRef } from "react";

/** What there is no room for, behind one word. Opens without scripts; with them Escape, a click elsewhere or a choice closes it. */
export function Menu({ label, className = "", children }: { label: string; className?: string; children: ReactNode }) {
  const details = useRef<HTMLDetailsElement>(null);
  useEffect(() => {
    const close = (event: Event) => {
      const menu = details.current;
      if (!menu?.open) return;
      if (event instanceof KeyboardEvent) {
        if (event.key !== "Escape") return;
        menu.querySelector("summary")?.focus();
      } else if (event.type === "pointerdown" && menu.contains(event.target as Node)) return;
      else if (event.type === "click" && !(event.target as Element).closest("a, button")) return;
      menu.open = false;
    };
    const menu = details.current;
    menu?.addEventListener("click", close);
    document.addEventListener("pointerdown", close);
    document.addEventListener("keydown", close);
    return () => {
      menu?.removeEventListener("click", close);
      document.removeEventListener("pointerdown", close);
      document.removeEventListener("keydown", close);
    };
  }, []);
  return (
    <details ref={details} className={`relative ${className}`}>
      <summary className="action list-none">{label}</summary>
      <div className="absolute right-0 z-30 mt-1 grid min-w-44 gap-y-1.5 rounded border border-rule bg-sheet px-4 py-3 whitespace-nowrap">
        {children}
      </div>
    </details>
  );
}
