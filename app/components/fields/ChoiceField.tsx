import { useId } from "react";
import { describedBy, FieldFrame } from "./QuantityField";

interface Choice<Value extends string> {
  value: Value;
  label: string;
}

interface ChoiceFieldProps<Value extends string> {
  name: string;
  label: string;
  choices: readonly Choice<Value>[];
  defaultValue?: Value;
  help?: string;
  errors?: readonly string[];
}

/** One of several words in a form; label above. */
export function ChoiceField<Value extends string>({
  name,
  label,
  choices,
  defaultValue,
  help,
  errors = [],
}: ChoiceFieldProps<Value>) {
  return (
    <FieldFrame id={name} label={label} help={help} errors={errors}>
      <select
        id={name}
        name={name}
        defaultValue={defaultValue}
        aria-invalid={errors.length > 0}
        aria-describedby={describedBy(name, help !== undefined, errors.length > 0)}
        className="h-9 w-full rounded border border-rule bg-sheet px-3 aria-invalid:border-bad"
      >
        {choices.map((choice) => (
          <option key={choice.value} value={choice.value}>
            {choice.label}
          </option>
        ))}
      </select>
    </FieldFrame>
  );
}

interface LineSelectProps<Value extends string> {
  id?: string;
  /** Spoken name where no label is tied to it. */
  label?: string;
  choices: readonly Choice<Value>[];
  value: Value;
  onChange: (value: Value) => void;
  readOnly?: boolean;
}

/** One of several words, without a frame, on a line of a number list. */
export function LineSelect<Value extends string>(props: LineSelectProps<Value>) {
  const { id, label, choices, value, onChange, readOnly } = props;
  return (
    <select
      id={id}
      aria-label={label}
      value={value}
      disabled={readOnly}
      onChange={(event) => onChange(event.currentTarget.value as Value)}
      className="h-6 min-w-0 rounded-[2px] bg-transparent"
    >
      {choices.map((choice) => (
        <option key={choice.value} value={choice.value} className="bg-sheet text-ink">
          {choice.label}
        </option>
      ))}
    </select>
  );
}

interface ChoiceLineProps<Value extends string> extends Omit<LineSelectProps<Value>, "id"> {
  label: string;
  /** What the choice belongs to, for its spoken name. */
  context?: string;
}

/** One of several words with its name, on the 24 px line of a number list. */
export function ChoiceLine<Value extends string>({ label, context, ...select }: ChoiceLineProps<Value>) {
  const id = useId();
  return (
    <div className="flex h-6 items-center justify-between gap-2 border-b border-line">
      <label htmlFor={id} className="truncate text-ink-soft">
        {label}
      </label>
      <LineSelect {...select} id={id} label={context && `${label}, ${context}`} />
    </div>
  );
}
