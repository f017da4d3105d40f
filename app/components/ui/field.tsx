import type { InputHTMLAttributes } from "react";

interface FieldProperties extends InputHTMLAttributes<HTMLInputElement> {
  name: string;
  label: string;
  help?: string;
  error?: string;
}

/** A labelled text field with one line of help and its error, both tied to it for screen readers. */
export function Field({ label, help, error, ...input }: FieldProperties) {
  const id = `field-${input.name}`;
  const described = [help && `${id}-help`, error && `${id}-error`].filter(Boolean).join(" ");
  return (
    <div>
      <label htmlFor={id} className="font-semibold">
        {label}
      </label>
      {help && (
        <p id={`${id}-help`} className="text-ink-soft text-small">
          {help}
        </p>
      )}
      <input
        {...input}
        id={id}
        className="field mt-1"
        aria-invalid={error ? true : undefined}
        aria-describedby={described || undefined}
      />
      {error && (
        <p id={`${id}-error`} role="alert" className="mt-1 text-bad">
          {error}
        </p>
      )}
    </div>
  );
}
