/** The panes of the strip, in their order. A new pane is a component and a row here. */
import { Checks } from "./Checks";
import { DerivedNumbers } from "./DerivedNumbers";
import { OperatingPoint } from "./OperatingPoint";
import type { Pane } from "./pane";

export const panes: readonly Pane[] = [
  { id: "point", label: "Operating point", Content: OperatingPoint },
  {
    id: "derived",
    label: "Values used",
    available: ({ document }) => (document.model?.kind ?? "driftDiffusion") !== "driftDiffusion",
    Content: DerivedNumbers,
  },
  {
    id: "checks",
    label: "Checks of the input",
    addition: ({ result }) => {
      const count = result?.warnings.length ?? 0;
      return count === 0 ? undefined : count === 1 ? "1 warning" : `${count} warnings`;
    },
    Content: Checks,
  },
];
