import type { ScenarioDocument, Side } from "@demilune/solver";
import type { ChangeStep } from "~/components/fields/useTypedQuantity";

/** What of the stack is picked in the cross-section. */
export type Picked =
  | { kind: "layer"; index: number }
  | { kind: "interface"; afterLayer: number }
  | { kind: "contact"; side: Side };

export interface DocumentChange extends ChangeStep {
  /** Path of the number in the document, or the name of the edit; undo steps with equal path and `live` belong together. */
  path: string;
  /** What else moved with the edit, for people. */
  notes?: readonly string[];
}

export type ChangeDocument = (next: ScenarioDocument, change: DocumentChange) => void;

export interface StackProps {
  document: ScenarioDocument;
  onChange: ChangeDocument;
  readOnly?: boolean;
}

/** Whether two picks are the same place. */
export function samePick(one: Picked | null, other: Picked): boolean {
  return one !== null && JSON.stringify(one) === JSON.stringify(other);
}
