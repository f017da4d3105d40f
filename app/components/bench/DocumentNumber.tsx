import { type Quantity, type QuantityName, quantities } from "@demilune/solver";
import { QuantityLine } from "~/components/fields/QuantityLine";
import type { FieldValue } from "~/components/fields/useTypedQuantity";
import type { StackProps } from "~/components/stack/stackProps";
import { fieldAt, type Keys, withField } from "~/lib/documentNumbers";
import { symbolNotation } from "~/lib/richText";

export interface DocumentNumberProps extends StackProps {
  keys: Keys;
  quantity: QuantityName;
  /** Short name, notation of `richText.ts`; else the quantity's words and symbol. */
  label?: string;
  context?: string;
  /** What the solver uses where the field is empty; the quantity's default where absent. */
  fallback?: FieldValue;
  emptyMeans?: string;
}

/** A number of the document on a line of the bench, typed, stepped or dragged. */
export function DocumentNumber({
  document,
  onChange,
  readOnly,
  keys,
  quantity,
  label,
  context,
  fallback,
  emptyMeans,
}: DocumentNumberProps) {
  const row: Quantity = quantities[quantity];
  return (
    <QuantityLine
      quantity={row}
      label={label ?? `${row.label} ${symbolNotation(row.symbol)}`}
      context={context}
      value={fieldAt(document, keys) as FieldValue}
      fallback={fallback === undefined ? row.default : fallback}
      emptyMeans={emptyMeans}
      readOnly={readOnly}
      onChange={(value, step) => onChange(withField(document, keys, value), { ...step, path: keys.join(".") })}
    />
  );
}
