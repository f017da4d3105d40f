import { useEffect, useRef } from "react";

export interface FieldError {
  /** Id of the field, which is its name; absent where no field can be pointed at. */
  field?: string;
  message: string;
}

/** All errors of a form at its top, each linking to its field; takes the focus when it appears. */
export function ErrorSummary({
  errors,
  title = "Nothing was saved yet",
}: {
  errors: readonly FieldError[];
  title?: string;
}) {
  const box = useRef<HTMLDivElement>(null);
  const present = errors.length > 0;
  useEffect(() => {
    if (present) box.current?.focus();
  }, [present]);
  if (!present) return null;
  return (
    <div ref={box} role="alert" tabIndex={-1} className="border-l-2 border-bad pl-3">
      <h2 className="font-semibold text-bad">
        <span aria-hidden="true">▲ </span>
        {title}: {errors.length === 1 ? "one entry needs" : `${errors.length} entries need`} another look
      </h2>
      <ul className="mt-1 grid gap-1">
        {errors.map(({ field, message }) => (
          <li key={`${field} ${message}`}>
            {field ? (
              <a href={`#${field}`} className="text-tide underline">
                {message}
              </a>
            ) : (
              message
            )}
          </li>
        ))}
      </ul>
    </div>
  );
}
