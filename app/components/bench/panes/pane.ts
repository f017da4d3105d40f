/** What a pane of the strip under the spectra is given, and what it has to be. */
import type { ResultDocument, ScenarioDocument, SpectrumResult } from "@demilune/solver";
import type { ReactNode } from "react";
import type { SpectrumSeries } from "~/components/charts/spectrum";
import type { LinkedCursor } from "~/components/charts/useLinkedCursor";
import type { Arcs } from "../useArcs";

export interface PaneContext {
  document: ScenarioDocument;
  /** The latest whole result; null before the first. */
  result: ResultDocument | null;
  /** The spectrum on screen. */
  spectrum: SpectrumResult | undefined;
  /** Index of the spectrum on screen in the document's list. */
  shown: number;
  /** Names of the document's spectra. */
  names: readonly string[];
  /** What the plots draw of it. */
  series: readonly SpectrumSeries[];
  arcs: Arcs;
  linked: LinkedCursor;
  /** A value is being dragged or the spectra are being solved: slower questions wait. */
  waiting: boolean;
}

export interface Pane {
  id: string;
  label: string;
  /** Words behind the label, such as a count. */
  addition?: (context: PaneContext) => string | undefined;
  /** Whether the pane has anything to say about this document. */
  available?: (context: PaneContext) => boolean;
  Content: (props: PaneContext) => ReactNode;
}
