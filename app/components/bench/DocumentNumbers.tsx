import { type Quantity, quantities } from "@demilune/solver";
import type { ReactNode } from "react";
import { NumberGroup } from "~/components/stack/NumberGroup";
import type { StackProps } from "~/components/stack/stackProps";
import { fieldAt } from "~/lib/documentNumbers";
import { isUsual } from "~/lib/stackFields";
import { DocumentNumber, type DocumentNumberProps } from "./DocumentNumber";

type Described = Omit<DocumentNumberProps, keyof StackProps>;

interface DocumentNumbersProps extends StackProps {
  title: string;
  tone?: "lamp";
  numbers: readonly Described[];
  /** Lines that always stand, above the numbers. */
  first?: ReactNode;
}

/** A headed list of numbers of the document; those at their defaults are folded. */
export function DocumentNumbers({ title, tone, numbers, first, ...props }: DocumentNumbersProps) {
  const rows = numbers.map((number) => {
    const row: Quantity = quantities[number.quantity];
    return {
      key: number.keys.join("."),
      usual: isUsual(fieldAt(props.document, number.keys), row),
      row: <DocumentNumber {...props} {...number} />,
    };
  });
  return <NumberGroup title={title} tone={tone} rows={first ? [{ key: "first", row: first }, ...rows] : rows} />;
}
