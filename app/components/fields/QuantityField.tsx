import type { Quantity } from "@demilune/solver";
import { type ReactNode, useId, useState } from "react";
import { RichText } from "~/components/ui/RichText";
import { formatUnit } from "~/lib/numberFormat";
import { permittedRange, readQuantity } from "~/lib/quantityText";

interface FieldFrameProps {
  id: string;
  label: string;
  help?: string;
  errors?: readonly string[];
  children: ReactNode;
}

/** Label above, help in one line, errors at the field. */
export function FieldFrame({ id, label, help, errors = [], children }: FieldFrameProps) {
  return (
    <div className="grid gap-1">
      <label htmlFor={id} className="font-semibold">
        <RichText text={label} />
      </label>
      {children}
      {help && (
        <p id={`${id}-help`} className="text-small text-ink-soft">
          <RichText text={help} />
        </p>
      )}
      {errors.length > 0 && (
        <p id={`${id}-error`} className="text-small text-bad">
          <span aria-hidden="true">▲ </span>
          {errors.join("; ")}
        </p>
      )}
    </div>
  );
}

/** `aria-describedby` of a field in a frame. */
export const describedBy = (id: string, help: boolean, error: boolean): string | undefined =>
  [help && `${id}-help`, error && `${id}-error`].filter(Boolean).join(" ") || undefined;

export interface QuantityFieldProps {
  /** Name in the form; also the id, so that an error summary can link here. */
  name: string;
  quantity: Quantity;
  /** Label in place of the quantity's own words. */
  label?: string;
  /** Text as it was typed or stored. */
  defaultText?: string;
  /** What an empty field means where that follows from other fields. */
  emptyMeans?: string;
  errors?: readonly string[];
  required?: boolean;
}

/**
 * A number in a form that also works before scripts load: label above, unit inside at the right, permitted range as
 * help. With scripts it says at once how the text is read. The server reads it again with `readQuantity`.
 */
export function QuantityField({
  name,
  quantity,
  label,
  defaultText = "",
  emptyMeans,
  errors = [],
  required,
}: QuantityFieldProps) {
  const id = useId();
  const [text, setText] = useState(defaultText);
  const [left, setLeft] = useState(false);
  const reading = text === "" ? null : readQuantity(text, quantity, emptyMeans);
  const edited = text !== defaultText;
  const own = reading && !reading.ok && left && edited ? [reading.error] : edited ? [] : errors;
  const note = reading?.ok ? reading.note : null;
  const unit = formatUnit(quantity.unit);
  const empty = required ? "" : emptyMeans ? `; empty: ${emptyMeans}` : "";
  const words = label ?? `${quantity.label[0].toUpperCase()}${quantity.label.slice(1)}`;
  return (
    <FieldFrame id={name || id} label={words} help={note ?? `${permittedRange(quantity)}${empty}`} errors={own}>
      <div className="relative">
        <input
          id={name || id}
          name={name}
          type="text"
          required={required}
          aria-required={required}
          aria-invalid={own.length > 0}
          aria-describedby={describedBy(name || id, true, own.length > 0)}
          autoComplete="off"
          autoCapitalize="off"
          spellCheck={false}
          defaultValue={defaultText}
          onChange={(event) => setText(event.currentTarget.value)}
          onBlur={() => setLeft(true)}
          className="h-9 w-full rounded border border-rule bg-sheet py-1 pr-20 pl-3 tabular-nums aria-invalid:border-bad"
        />
        <span
          aria-hidden="true"
          className="pointer-events-none absolute inset-y-0 right-3 flex items-center text-small text-ink-soft"
        >
          <span>
            <RichText text={unit} />
          </span>
        </span>
      </div>
    </FieldFrame>
  );
}
