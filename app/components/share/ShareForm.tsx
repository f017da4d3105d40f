import { Form } from "react-router";
import { Field } from "~/components/ui/field";

interface ShareFormProps {
  revisionNumber: number;
  measurements: readonly { id: string; name: string }[];
  /** Numbers that may be exposed one by one. */
  parameters: readonly { path: string; label: string }[];
  days: { usual: number; most: number };
}

const boxes = "flex min-h-6 items-center gap-2";

/** What a new link shows, to whom it says so, and how long. */
export function ShareForm({ revisionNumber, measurements, parameters, days }: ShareFormProps) {
  return (
    <Form method="post" className="mt-3 grid max-w-2xl gap-4 sm:grid-cols-2">
      <input type="hidden" name="revisionNumber" value={revisionNumber} />
      <Field name="note" label="Label" help="For your own list, such as whom it is for." maxLength={200} />
      <Field
        name="days"
        label="Days until it expires"
        help={`1 to ${days.most}`}
        defaultValue={String(days.usual)}
        inputMode="numeric"
        autoComplete="off"
      />
      {measurements.length > 0 && (
        <fieldset className="sm:col-span-2">
          <legend className="font-semibold">Measurements to send along</legend>
          {measurements.map(({ id, name }) => (
            <label key={id} className={boxes}>
              <input type="checkbox" name="measurementId" value={id} defaultChecked className="size-4 accent-tide" />
              {name}
            </label>
          ))}
        </fieldset>
      )}
      {parameters.length > 0 && (
        <details className="sm:col-span-2">
          <summary className="min-h-6 cursor-pointer text-tide">Numbers the guest may move: all of them</summary>
          <fieldset className="mt-1">
            <legend className="text-ink-soft text-small">
              Tick up to three to expose these as sliders and nothing else.
            </legend>
            <div className="grid max-h-64 gap-x-6 overflow-y-auto sm:grid-cols-2">
              {parameters.map(({ path, label }) => (
                <label key={path} className={boxes}>
                  <input type="checkbox" name="exposed" value={path} className="size-4 shrink-0 accent-tide" />
                  {label}
                </label>
              ))}
            </div>
          </fieldset>
        </details>
      )}
      <button type="submit" name="intent" value="create" className="button w-fit">
        Make the link
      </button>
    </Form>
  );
}
