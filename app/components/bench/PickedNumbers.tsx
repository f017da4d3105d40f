import { memo } from "react";
import { ContactNumbers } from "~/components/stack/ContactNumbers";
import { InterfaceNumbers } from "~/components/stack/InterfaceNumbers";
import { LayerNumbers } from "~/components/stack/LayerNumbers";
import type { Picked, StackProps } from "~/components/stack/stackProps";

interface PickedNumbersProps extends StackProps {
  picked: Picked;
  held?: Readonly<Record<string, number>>;
}

/** The numbers of what is picked in the cross-section, beside it. */
export const PickedNumbers = memo(function PickedNumbers({ picked, held, ...props }: PickedNumbersProps) {
  switch (picked.kind) {
    case "layer":
      return picked.index < props.document.stack.layers.length ? (
        <LayerNumbers key={picked.index} {...props} index={picked.index} held={held} />
      ) : null;
    case "interface":
      return picked.afterLayer < props.document.stack.layers.length - 1 ? (
        <InterfaceNumbers {...props} afterLayer={picked.afterLayer} />
      ) : null;
    case "contact":
      return <ContactNumbers {...props} side={picked.side} />;
  }
});
