import { type KeyboardEvent, useRef, useState } from "react";
import { useTypedQuantity } from "~/components/fields/useTypedQuantity";
import { RichText } from "~/components/ui/RichText";
import { formatNumber, formatUnit } from "~/lib/numberFormat";
import { permittedRange } from "~/lib/quantityText";
import { symbolNotation } from "~/lib/richText";
import { interfaceAfter, layerName, replaceLayer, setInterfaceNumber, setLayerNumber } from "~/lib/stackEdits";
import {
  defaultOf,
  interfaceFields,
  layerFields,
  layerGroups,
  type NumberField,
  numberAt,
  quantityOf,
} from "~/lib/stackFields";
import type { StackProps } from "./stackProps";

interface StackTableProps extends StackProps {
  /** Typed text and its error by document path, as a failed save gave them back. */
  refused?: Readonly<Record<string, { text: string; error: string }>>;
}

/** Document path of a layer's number; also the name of its cell in the form. */
const cellName = (index: number, field: NumberField): string => `stack.layers.${index}.${field.path.join(".")}`;
/** Name of the cell of an interface's velocity. */
const interfaceCellName = (afterLayer: number, field: NumberField): string =>
  `interfaces.${afterLayer}.${field.path[0]}`;

/**
 * All numbers of all layers, one column a layer, for people who would rather type. Up and down go to the cell above
 * and below, Enter commits and goes down. The cells are fields of the form around the table, so that it works before
 * scripts load.
 */
export function StackTable({ document, onChange, readOnly, refused = {} }: StackTableProps) {
  const { layers } = document.stack;
  const table = useRef<HTMLTableElement>(null);
  const [rule, setRule] = useState<{ name: string; text: string } | null>(null);

  function go(event: KeyboardEvent<HTMLInputElement>) {
    const direction = event.key === "ArrowUp" ? -1 : event.key === "ArrowDown" || event.key === "Enter" ? 1 : 0;
    if (direction === 0 || event.altKey || event.ctrlKey || event.metaKey) return;
    event.preventDefault();
    const column = event.currentTarget.dataset.column;
    const cells = [...(table.current?.querySelectorAll<HTMLInputElement>(`input[data-column="${column}"]`) ?? [])];
    const next = cells[cells.indexOf(event.currentTarget) + direction];
    // Leaving the cell commits what was typed in it.
    if (next) next.focus();
    else event.currentTarget.blur();
  }
  const columns = layers.map((layer, index) => ({ index, name: layerName(layer, index) }));
  const cell = (name: string) => ({
    name,
    refused: refused[name],
    rule: rule?.name === name ? rule.text : undefined,
    readOnly,
    onKeyDown: go,
  });

  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: a region that scrolls sideways must be reachable by keyboard
    <section className="overflow-x-auto" aria-label="Table of all numbers of all layers" tabIndex={0}>
      <table ref={table} className="border-collapse">
        <caption className="sr-only">Numbers of the layers, front first</caption>
        <thead>
          <tr>
            <th
              scope="col"
              className="sticky left-0 z-10 min-w-40 bg-paper pr-3 text-left align-bottom font-normal text-ink-soft text-small"
            >
              layer
            </th>
            {columns.map(({ index, name }) => (
              <th key={index} scope="col" className="min-w-36 px-1 pb-1 text-right align-bottom">
                {readOnly ? (
                  name
                ) : (
                  <input
                    name={`stack.layers.${index}.name`}
                    aria-label={`Name of layer ${index + 1}`}
                    value={layers[index].name ?? ""}
                    placeholder={name}
                    onChange={(event) =>
                      onChange(replaceLayer(document, index, { ...layers[index], name: event.currentTarget.value }), {
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
                    className="h-6 w-full rounded-[2px] bg-transparent px-1 text-right font-semibold focus:bg-sheet"
                  />
                )}
              </th>
            ))}
            <th scope="col" className="pl-2 text-left align-bottom font-normal text-ink-soft text-small">
              unit
            </th>
          </tr>
        </thead>
        {layerGroups.map((group) => (
          <tbody key={group}>
            <GroupHead title={group} span={columns.length + 2} />
            {layerFields
              .filter((field) => field.group === group)
              .map((field) => (
                <tr key={field.path.join(".")} className="border-line border-t">
                  <RowHead field={field} />
                  {columns.map(({ index, name }) => (
                    <Cell
                      key={index}
                      {...cell(cellName(index, field))}
                      column={index}
                      label={`${quantityOf(field).label} of ${name}`}
                      field={field}
                      value={numberAt(layers[index], field)}
                      fallback={defaultOf(layers[index], field)}
                      onChange={(value) => {
                        const name = cellName(index, field);
                        const edit = setLayerNumber(document, index, field, value);
                        if ("refused" in edit) return setRule({ name, text: edit.refused });
                        setRule(null);
                        onChange(edit.document, { path: name, live: false, notes: edit.notes });
                      }}
                    />
                  ))}
                  <UnitCell field={field} />
                </tr>
              ))}
          </tbody>
        ))}
        {layers.length > 1 && (
          <tbody>
            <GroupHead title="Interface behind the layer" span={columns.length + 2} />
            {interfaceFields.map((field) => (
              <tr key={field.quantity} className="border-line border-t">
                <RowHead field={field} />
                {columns.map(({ index, name }) =>
                  index === layers.length - 1 ? (
                    <td key={index} />
                  ) : (
                    <Cell
                      key={index}
                      {...cell(interfaceCellName(index, field))}
                      column={index}
                      label={`${quantityOf(field).label} behind ${name}`}
                      field={field}
                      value={interfaceAfter(document, index)?.[field.path[0] as "holeVelocityCmPerS"]}
                      fallback={undefined}
                      onChange={(value) =>
                        onChange(setInterfaceNumber(document, index, field, value), {
                          path: interfaceCellName(index, field),
                          live: false,
                        })
                      }
                    />
                  ),
                )}
                <UnitCell field={field} />
              </tr>
            ))}
          </tbody>
        )}
      </table>
    </section>
  );
}

function GroupHead({ title, span }: { title: string; span: number }) {
  return (
    <tr>
      <th scope="colgroup" colSpan={span} className="pt-3 pb-0.5 text-left text-small">
        <span className="sticky left-0">{title}</span>
      </th>
    </tr>
  );
}

function RowHead({ field }: { field: NumberField }) {
  const { label, symbol } = quantityOf(field);
  const words = field.label.includes("*") ? field.label : `${field.label} ${symbolNotation(symbol)}`;
  return (
    <th
      scope="row"
      title={label}
      className="sticky left-0 z-10 h-6 bg-paper pr-3 text-left font-normal whitespace-nowrap text-ink-soft"
    >
      <RichText text={words} />
      <span className="sr-only">, {label}</span>
    </th>
  );
}

function UnitCell({ field }: { field: NumberField }) {
  return (
    <td className="pl-2 whitespace-nowrap text-ink-soft text-small">
      <RichText text={formatUnit(quantityOf(field).unit) || "1"} />
    </td>
  );
}

interface CellProps {
  name: string;
  column: number;
  label: string;
  field: NumberField;
  value: number | null | undefined;
  fallback: number | null | undefined;
  refused?: { text: string; error: string };
  rule?: string;
  readOnly?: boolean;
  onKeyDown: (event: KeyboardEvent<HTMLInputElement>) => void;
  onChange: (value: number | null | undefined) => void;
}

/** One number of the table: shown as printed, edited as typed, its error below it. */
function Cell({
  name,
  column,
  label,
  field,
  value,
  fallback,
  refused,
  rule,
  readOnly,
  onKeyDown,
  onChange,
}: CellProps) {
  const quantity = quantityOf(field);
  const typed = useTypedQuantity({
    quantity,
    value,
    fallback,
    emptyMeans: field.emptyMeans,
    onChange,
    startText: refused?.text,
  });
  const error = typed.error ?? rule ?? (typed.pending && typed.shown === refused?.text ? refused.error : null);
  const number = typeof value === "number" ? value : value === null ? null : fallback;
  const words = typeof number === "number" ? formatNumber(number) : (quantity.nullMeans ?? field.emptyMeans ?? "");
  if (readOnly)
    return (
      <td
        className={`px-1 text-right tabular-nums whitespace-nowrap ${typeof value === "number" ? "" : "text-ink-soft text-small"}`}
      >
        <RichText text={words} />
      </td>
    );
  return (
    <td className="relative px-1 align-top">
      <div className="relative h-6">
        <input
          id={name}
          name={name}
          type="text"
          data-column={column}
          aria-label={`${label}, in ${quantity.unit}`}
          aria-invalid={error !== null}
          aria-describedby={error === null ? undefined : `${name}-error`}
          title={`permitted: ${permittedRange(quantity)}`}
          autoComplete="off"
          autoCapitalize="off"
          spellCheck={false}
          value={typed.shown}
          onChange={(event) => typed.setText(event.currentTarget.value)}
          onBlur={typed.commit}
          onFocus={(event) => event.currentTarget.select()}
          onKeyDown={(event) => {
            if (event.key === "Escape") typed.onKeyDown(event);
            else onKeyDown(event);
          }}
          className={`peer absolute inset-0 h-6 w-full rounded-[2px] bg-transparent px-1 text-right tabular-nums focus:bg-sheet focus:text-ink focus:outline-2 focus:outline-tide ${
            typed.pending ? "text-ink" : "text-transparent"
          } ${error ? "outline-2 outline-bad" : ""}`}
        />
        {!typed.pending && (
          <span
            aria-hidden="true"
            className={`pointer-events-none absolute inset-y-0 right-0 px-1 leading-6 tabular-nums whitespace-nowrap peer-focus:hidden ${
              typeof value === "number" ? "" : "text-ink-soft"
            } ${typeof number === "number" ? "" : "text-small"}`}
          >
            <RichText text={words} />
          </span>
        )}
      </div>
      {error !== null && (
        <p id={`${name}-error`} role="alert" className="max-w-44 py-0.5 text-bad text-small">
          <span aria-hidden="true">▲ </span>
          {error}
        </p>
      )}
      {error === null && typed.pending && typed.note && (
        <p role="status" className="max-w-44 py-0.5 text-ink-soft text-small">
          {typed.note}
        </p>
      )}
    </td>
  );
}
