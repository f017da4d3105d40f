import { Form, Link } from "react-router";
import { ChoiceField } from "~/components/fields/ChoiceField";
import { ErrorSummary } from "~/components/fields/ErrorSummary";
import { FieldFrame, QuantityField } from "~/components/fields/QuantityField";
import { noSource, numberName, sourceName } from "~/lib/materialForm";
import { layerFields, layerGroups, quantityOf } from "~/lib/stackFields";

interface MaterialFormProps {
  /** Texts of the fields by name, as kept or as typed. */
  texts: Record<string, string>;
  errors: Record<string, string[] | null | undefined>;
  submit: string;
  backTo: string;
}

/** Every number of a layer with its source; works before scripts load. */
export function MaterialForm({ texts, errors, submit, backTo }: MaterialFormProps) {
  const list = Object.entries(errors).flatMap(([field, messages]) =>
    (messages ?? []).map((message) => ({ field, message })),
  );
  const errorsOf = (name: string) => errors[name] ?? [];
  return (
    <Form method="post" noValidate className="grid max-w-4xl gap-5">
      <ErrorSummary errors={list} />
      <FieldFrame id="name" label="Name" errors={errorsOf("name")}>
        <input
          id="name"
          name="name"
          maxLength={200}
          required
          defaultValue={texts.name}
          aria-invalid={errorsOf("name").length > 0}
          aria-describedby={errorsOf("name").length > 0 ? "name-error" : undefined}
          className="field"
        />
      </FieldFrame>
      <FieldFrame
        id="note"
        label="Note"
        help="What it is: preparation, temperature, wavelength the absorption belongs to."
        errors={errorsOf("note")}
      >
        <textarea
          id="note"
          name="note"
          rows={2}
          maxLength={2000}
          defaultValue={texts.note}
          aria-describedby="note-help"
          className="field"
        />
      </FieldFrame>
      {layerGroups.map((group) => (
        <fieldset key={group} className="grid gap-4">
          <legend className="mb-2 font-semibold text-large">{group}</legend>
          {layerFields
            .filter((field) => field.group === group)
            .map((field) => (
              <div key={field.path.join(".")} className="grid items-start gap-x-6 gap-y-2 md:grid-cols-2">
                <QuantityField
                  name={numberName(field)}
                  quantity={quantityOf(field)}
                  defaultText={texts[numberName(field)]}
                  emptyMeans={field.emptyMeans}
                  required={field.required}
                  errors={errorsOf(numberName(field))}
                />
                <FieldFrame
                  id={sourceName(field)}
                  label={`Source of the ${quantityOf(field).label}`}
                  errors={errorsOf(sourceName(field))}
                >
                  <input
                    id={sourceName(field)}
                    name={sourceName(field)}
                    maxLength={500}
                    placeholder={noSource}
                    defaultValue={texts[sourceName(field)]}
                    className="field min-h-9"
                  />
                </FieldFrame>
              </div>
            ))}
          {group === "Recombination and traps" && (
            <div className="md:w-1/2">
              <ChoiceField
                name="trapKind"
                label="Kind of the dynamic traps"
                choices={[
                  { value: "acceptor", label: "acceptor" },
                  { value: "donor", label: "donor" },
                ]}
                defaultValue={texts.trapKind === "donor" ? "donor" : "acceptor"}
                help="Counts only where their density is above 0."
              />
            </div>
          )}
        </fieldset>
      ))}
      <div className="flex items-center gap-5">
        <button type="submit" name="intent" value="save" className="button">
          {submit}
        </button>
        <Link to={backTo} className="action">
          Back without saving
        </Link>
      </div>
    </Form>
  );
}
