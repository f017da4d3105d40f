import type { Quantity } from "@demilune/solver";
import { useId } from "react";
import { RichText } from "~/components/ui/RichText";
import { formatNumber, formatQuantity, formatUnit } from "~/lib/numberFormat";
import { permittedRange } from "~/lib/quantityText";
import { plainText } from "~/lib/richText";
import { ariaNumbers } from "./ariaNumbers";
import { useSidewaysDrag } from "./useSidewaysDrag";
import { type ChangeStep, type FieldValue, useTypedQuantity } from "./useTypedQuantity";

/** Longest printed mantissa on a line; longer numbers are shown rounded and edited whole. */
const printedDigits = 4;

/** A number as a line shows it: whole where it is short, else rounded. */
function printed(value: number): string {
  const whole = formatNumber(value);
  return whole.split("×")[0].replace(/[−.]/g, "").length > printedDigits ? formatNumber(value, printedDigits) : whole;
}

export interface QuantityLineProps {
  quantity: Quantity;
  value: FieldValue;
  onChange: (value: FieldValue, step: ChangeStep) => void;
  /** Short name in the notation of `richText.ts`. */
  label: string;
  /** What the number belongs to, for its spoken name: "perovskite". */
  context?: string;
  /** What the solver uses where the value is undefined. */
  fallback?: FieldValue;
  /** What an empty field means where that follows from other fields. */
  emptyMeans?: string;
  /** The value of a held curve, shown in the row under this one. */
  held?: number;
  /** Refusal that came from elsewhere (a rule between fields, a failed save). */
  error?: string;
  readOnly?: boolean;
}

/**
 * Name, value and unit of one number on a 24 px line. Typed, stepped by arrow keys or buttons, or dragged sideways on
 * its name or value.
 */
export function QuantityLine(props: QuantityLineProps) {
  const { quantity, value, label, context, fallback, emptyMeans, held, readOnly } = props;
  const id = useId();
  const typed = useTypedQuantity({ ...props, fallback });
  const drag = useSidewaysDrag({
    quantity,
    value: readOnly ? null : typed.present,
    onMove: (next, live) => typed.change(next, live),
  });
  const error = typed.error ?? (typed.pending ? null : (props.error ?? null));
  const message = error ?? typed.note;
  const unit = formatUnit(quantity.unit) || "1";
  const number = value ?? (value === null ? null : fallback);
  const words = typeof number === "number" ? printed(number) : (quantity.nullMeans ?? emptyMeans ?? "");
  const spoken = [plainText(label), quantity.label, context].filter(Boolean).join(", ");

  return (
    <div className="group/line">
      <div className="grid h-6 grid-cols-[minmax(0,max-content)_minmax(3.75rem,1fr)_52px] border-b border-line leading-[22px]">
        <label
          htmlFor={id}
          className="truncate text-ink-soft select-none touch-pan-y data-[drag]:cursor-ew-resize"
          data-drag={readOnly ? undefined : ""}
          title={quantity.label}
          {...drag}
        >
          <RichText text={label} />
        </label>
        <div className="relative">
          {!readOnly && (
            <span className="absolute right-24 z-10 hidden bg-paper group-focus-within/line:group-hover/line:flex">
              <StepButton word="Lower" spoken={spoken} onPress={() => typed.step(-1, false)} sign="−" />
              <StepButton word="Raise" spoken={spoken} onPress={() => typed.step(1, false)} sign="+" />
            </span>
          )}
          <input
            id={id}
            type="text"
            role="spinbutton"
            aria-label={`${spoken}, in ${unit}`}
            aria-valuetext={typeof number === "number" ? formatQuantity(number, quantity.unit) : words || "empty"}
            {...ariaNumbers(typeof number === "number" ? number : undefined, quantity.min, quantity.max)}
            aria-invalid={error !== null}
            aria-describedby={message === null ? undefined : `${id}-message`}
            title={`${quantity.label}; permitted: ${permittedRange(quantity)}`}
            readOnly={readOnly}
            autoComplete="off"
            autoCapitalize="off"
            spellCheck={false}
            value={typed.shown}
            onChange={(event) => typed.setText(event.currentTarget.value)}
            onBlur={typed.commit}
            onKeyDown={readOnly ? undefined : typed.onKeyDown}
            onFocus={(event) => event.currentTarget.select()}
            className={`peer absolute right-0 h-6 w-full rounded-[2px] bg-transparent px-1 text-right tabular-nums focus:z-20 focus:w-24 focus:bg-sheet focus:text-ink focus:outline-2 focus:outline-tide ${
              typed.pending ? "text-ink" : "text-transparent touch-pan-y"
            } ${error ? "outline-2 outline-bad" : ""} ${readOnly ? "" : "not-focus:cursor-ew-resize"}`}
            {...drag}
            onMouseDown={(event) => {
              if (!readOnly && event.currentTarget !== document.activeElement) event.preventDefault();
            }}
            onClick={(event) => {
              drag.onClick(event);
              if (!event.defaultPrevented) event.currentTarget.focus();
            }}
          />
          {!typed.pending && (
            <span
              aria-hidden="true"
              className={`pointer-events-none absolute inset-y-0 right-0 px-1 whitespace-nowrap text-right peer-focus:hidden ${
                value === undefined || value === null ? "text-ink-soft" : ""
              } ${typeof number === "number" ? "tabular-nums" : "max-w-36 text-small leading-[22px]"}`}
            >
              <RichText text={words} />
            </span>
          )}
        </div>
        <span className="truncate pl-1.5 text-small leading-[22px] text-ink-soft">
          <RichText text={unit} />
        </span>
      </div>
      {message !== null && (
        <p
          id={`${id}-message`}
          role={error ? "alert" : "status"}
          className={`py-0.5 text-small ${error ? "text-bad" : "text-ink-soft"}`}
        >
          {error && <span aria-hidden="true">▲ </span>}
          <RichText text={message} />
        </p>
      )}
      {held !== undefined && (
        <div className="grid h-6 grid-cols-[minmax(0,max-content)_minmax(3.75rem,1fr)_52px] border-b border-line leading-[22px] text-ink-soft">
          <span>held at</span>
          <span className="px-1 text-right tabular-nums">
            <RichText text={printed(held)} />
          </span>
          <span className="pl-1.5 text-small leading-[22px]">
            <RichText text={unit} />
          </span>
        </div>
      )}
    </div>
  );
}

interface StepButtonProps {
  word: string;
  spoken: string;
  sign: string;
  onPress: () => void;
}

/** Out of the tab order: the arrow keys of the field do the same. */
function StepButton({ word, spoken, sign, onPress }: StepButtonProps) {
  return (
    <button
      type="button"
      tabIndex={-1}
      aria-label={`${word} ${spoken}`}
      onPointerDown={(event) => event.preventDefault()}
      onClick={onPress}
      className="size-6 text-tide"
    >
      {sign}
    </button>
  );
}
