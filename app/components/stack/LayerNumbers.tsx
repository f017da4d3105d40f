import { useState } from "react";
import { ChoiceLine } from "~/components/fields/ChoiceField";
import { QuantityLine } from "~/components/fields/QuantityLine";
import { layerName, replaceLayer, setLayerNumber } from "~/lib/stackEdits";
import { defaultOf, isUsual, type LayerField, layerFields, layerGroups, numberAt, quantityOf } from "~/lib/stackFields";
import { NumberGroup } from "./NumberGroup";
import type { StackProps } from "./stackProps";

interface LayerNumbersProps extends StackProps {
  index: number;
  /** Values of a held curve by document path. */
  held?: Readonly<Record<string, number>>;
}

/** All numbers of one layer in groups, each typed, stepped or dragged. */
export function LayerNumbers({ document, index, onChange, readOnly, held }: LayerNumbersProps) {
  const layer = document.stack.layers[index];
  const name = layerName(layer, index);
  const [refusal, setRefusal] = useState<{ path: string; text: string } | null>(null);
  const pathOf = (field: LayerField) => `stack.layers.${index}.${field.path.join(".")}`;
  return (
    <div>
      <div className="mb-2 flex h-6 items-baseline border-b border-line">
        <label htmlFor={`layer-${index}-name`} className="sr-only">
          Name of the layer
        </label>
        <input
          id={`layer-${index}-name`}
          className="w-full rounded-[2px] bg-transparent font-semibold focus:bg-sheet"
          value={layer.name ?? ""}
          placeholder={name}
          readOnly={readOnly}
          onChange={(event) =>
            onChange(replaceLayer(document, index, { ...layer, name: event.currentTarget.value }), {
              path: `stack.layers.${index}.name`,
              live: true,
            })
          }
          onKeyDown={(event) => {
            if (event.key !== "Enter") return;
            event.preventDefault();
            event.currentTarget.blur();
          }}
          onBlur={() => onChange(document, { path: `stack.layers.${index}.name`, live: false })}
        />
      </div>
      {layerGroups.map((group) => (
        <NumberGroup
          key={group}
          title={group}
          rows={layerFields
            .filter((field) => field.group === group)
            .map((field) => ({
              key: field.path.join("."),
              usual: isUsual(numberAt(layer, field), quantityOf(field)) && !field.required,
              row: (
                <QuantityLine
                  quantity={quantityOf(field)}
                  label={field.label}
                  context={name}
                  value={numberAt(layer, field)}
                  fallback={defaultOf(layer, field)}
                  emptyMeans={field.emptyMeans}
                  held={held?.[pathOf(field)]}
                  error={refusal?.path === pathOf(field) ? refusal.text : undefined}
                  readOnly={readOnly}
                  onChange={(value, step) => {
                    const edit = setLayerNumber(document, index, field, value);
                    if ("refused" in edit) return setRefusal({ path: pathOf(field), text: edit.refused });
                    setRefusal(null);
                    onChange(edit.document, { ...step, path: pathOf(field), notes: edit.notes });
                  }}
                />
              ),
            }))}
        >
          {group === "Recombination and traps" && layer.traps && (
            <ChoiceLine
              label="kind of trap"
              readOnly={readOnly}
              context={name}
              choices={[
                { value: "acceptor", label: "acceptor" },
                { value: "donor", label: "donor" },
              ]}
              value={layer.traps.kind}
              onChange={(kind) =>
                onChange(replaceLayer(document, index, { ...layer, traps: { ...layer.traps!, kind } }), {
                  path: `stack.layers.${index}.traps.kind`,
                  live: false,
                })
              }
            />
          )}
        </NumberGroup>
      ))}
    </div>
  );
}
