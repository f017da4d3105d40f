import { Field } from "~/components/ui/field";

interface SampleFieldsProps {
  values: Record<string, string>;
  faults: readonly { field: string; message: string }[];
}

/** The fields of a sample; unit of each area in its label. */
export function SampleFields({ values, faults }: SampleFieldsProps) {
  const field = (name: string) => ({
    name,
    defaultValue: values[name] ?? "",
    autoComplete: "off",
    error: faults.find((fault) => fault.field === name)?.message,
  });
  return (
    <div className="grid gap-3 sm:grid-cols-3">
      <Field {...field("name")} label="Name" />
      <Field {...field("group")} label="Group" />
      <Field {...field("contactSequence")} label="Contact sequence" />
      <Field {...field("activeAreaCm2")} label="Active area / cm²" />
      <Field {...field("litAreaCm2")} label="Lit area / cm²" />
      <Field {...field("maskedAreaCm2")} label="Masked area / cm²" />
      <div className="sm:col-span-3">
        <label htmlFor="preconditioning" className="font-semibold">
          Preconditioning
        </label>
        <textarea
          id="preconditioning"
          name="preconditioning"
          rows={2}
          maxLength={2000}
          defaultValue={values.preconditioning ?? ""}
          className="field mt-1"
        />
      </div>
    </div>
  );
}
