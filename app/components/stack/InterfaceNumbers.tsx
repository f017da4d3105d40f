import { QuantityLine } from "~/components/fields/QuantityLine";
import { interfaceAfter, layerName, setInterfaceNumber } from "~/lib/stackEdits";
import { interfaceFields, numberAt, quantityOf } from "~/lib/stackFields";
import { NumberGroup } from "./NumberGroup";
import type { StackProps } from "./stackProps";

interface InterfaceNumbersProps extends StackProps {
  afterLayer: number;
}

/** Recombination velocities at the interface between two layers; both or none. */
export function InterfaceNumbers({ document, afterLayer, onChange, readOnly }: InterfaceNumbersProps) {
  const { layers } = document.stack;
  const between = `${layerName(layers[afterLayer], afterLayer)} / ${layerName(layers[afterLayer + 1], afterLayer + 1)}`;
  const face = interfaceAfter(document, afterLayer);
  return (
    <NumberGroup title={`Interface ${between}`}>
      {interfaceFields.map((field) => (
        <QuantityLine
          key={field.quantity}
          quantity={quantityOf(field)}
          label={field.label}
          context={between}
          value={face && numberAt(face, field)}
          emptyMeans={field.emptyMeans}
          readOnly={readOnly}
          onChange={(value, step) =>
            onChange(setInterfaceNumber(document, afterLayer, field, value), {
              ...step,
              path: `stack.interfaces.${afterLayer}.${field.path[0]}`,
            })
          }
        />
      ))}
    </NumberGroup>
  );
}
