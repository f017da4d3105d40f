import type { ReactNode } from "react";

/** A headed list of 24 px lines. */
export function NumberGroup({ title, tone, children }: { title: string; tone?: "lamp"; children: ReactNode }) {
  return (
    <section className="mb-2">
      <h3 className={`border-b border-line pb-0.5 text-small font-semibold ${tone === "lamp" ? "text-lamp" : ""}`}>
        {title}
      </h3>
      {children}
    </section>
  );
}
