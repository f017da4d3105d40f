/** The panes of the strip, in their order. A new pane is a component and a row here. */
import { Arcs } from "./Arcs";
import { Checks } from "./Checks";
import { CurrentVoltage } from "./CurrentVoltage";
import { DerivedNumbers } from "./DerivedNumbers";
import { HarmonicOverDepth } from "./HarmonicOverDepth";
import { ModelsCompared } from "./ModelsCompared";
import { OperatingPoint } from "./OperatingPoint";
import { ProfilesOverDepth } from "./ProfilesOverDepth";
import type { Pane, PaneContext } from "./pane";

const isFullModel = ({ document }: PaneContext) => (document.model?.kind ?? "driftDiffusion") === "driftDiffusion";

export const panes: readonly Pane[] = [
  { id: "arcs", label: "Arcs", Content: Arcs },
  { id: "point", label: "Operating point", Content: OperatingPoint },
  { id: "current", label: "Current and voltage", available: isFullModel, Content: CurrentVoltage },
  { id: "profiles", label: "Profiles", available: isFullModel, Content: ProfilesOverDepth },
  { id: "oscillation", label: "Oscillating profiles", available: isFullModel, Content: HarmonicOverDepth },
  { id: "derived", label: "Values used", available: (context) => !isFullModel(context), Content: DerivedNumbers },
  { id: "models", label: "Models compared", Content: ModelsCompared },
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
