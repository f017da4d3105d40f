import { quantities, type ScenarioDocument, type Side } from "@demilune/solver";
import { ChoiceLine } from "~/components/fields/ChoiceField";
import { QuantityLine } from "~/components/fields/QuantityLine";
import { setContactNumber } from "~/lib/stackEdits";
import { contactFields, numberAt, quantityOf } from "~/lib/stackFields";
import { NumberGroup } from "./NumberGroup";
import type { StackProps } from "./stackProps";

interface ContactNumbersProps extends StackProps {
  side: Side;
}

/** Work function to begin with where a contact stops being ohmic: the middle of the gap of the layer at the contact. */
function middleOfGap({ stack }: ScenarioDocument, side: Side): number {
  const layer = stack.layers.at(side === "front" ? 0 : -1)!;
  return Number((layer.affinityEV + layer.gapEV / 2).toFixed(3));
}

/** Kind, work function and surface recombination velocities of a contact, and which contact takes the electrons. */
export function ContactNumbers({ document, side, onChange, readOnly }: ContactNumbersProps) {
  const contact = document.stack[side];
  const workFunction = contact?.workFunctionEV ?? "ohmic";
  const electronContact = document.stack.electronContact ?? "front";
  const path = (name: string) => `stack.${side}.${name}`;
  const workFunctionField = { path: ["workFunctionEV"] as const };
  return (
    <NumberGroup title={`${side === "front" ? "Front" : "Back"} contact`}>
      <ChoiceLine
        label="takes"
        context={`${side} contact`}
        readOnly={readOnly}
        choices={[
          { value: "electrons", label: "electrons, −" },
          { value: "holes", label: "holes, +" },
        ]}
        value={electronContact === side ? "electrons" : "holes"}
        onChange={(takes) => {
          const other: Side = side === "front" ? "back" : "front";
          const next = takes === "electrons" ? side : other;
          onChange(
            { ...document, stack: { ...document.stack, electronContact: next } },
            { path: "stack.electronContact", live: false },
          );
        }}
      />
      <ChoiceLine
        label="kind"
        context={`${side} contact`}
        readOnly={readOnly}
        choices={[
          { value: "ohmic", label: "ohmic" },
          { value: "workFunction", label: "work function" },
        ]}
        value={workFunction === "ohmic" ? "ohmic" : "workFunction"}
        onChange={(kind) =>
          onChange(
            setContactNumber(
              document,
              side,
              workFunctionField,
              kind === "ohmic" ? undefined : middleOfGap(document, side),
            ),
            { path: path("workFunctionEV"), live: false },
          )
        }
      />
      {workFunction !== "ohmic" && (
        <QuantityLine
          quantity={quantities.workFunctionEV}
          label="work function"
          context={`${side} contact`}
          value={workFunction}
          readOnly={readOnly}
          onChange={(value, step) =>
            onChange(setContactNumber(document, side, workFunctionField, value), {
              ...step,
              path: path("workFunctionEV"),
            })
          }
        />
      )}
      {contactFields.map((field) => (
        <QuantityLine
          key={field.quantity}
          quantity={quantityOf(field)}
          label={field.label}
          context={`${side} contact`}
          value={numberAt(contact, field)}
          fallback={quantityOf(field).default}
          readOnly={readOnly}
          onChange={(value, step) =>
            onChange(setContactNumber(document, side, field, value), { ...step, path: path(field.path[0]) })
          }
        />
      ))}
    </NumberGroup>
  );
}
