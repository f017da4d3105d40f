import type { Bias } from "@demilune/solver";
import { Form } from "react-router";
import { Field } from "~/components/ui/field";
import { formatQuantity } from "~/lib/numberFormat";
import { typedForm } from "~/lib/quantityText";
import { biasWords } from "~/lib/spectrumNames";

interface ProvenanceFieldsProps {
  measurement: {
    name: string;
    sampleId: string | null;
    sampleName: string | null;
    bias: Bias;
    fluxPerCm2S: number | null;
    temperatureK: number | null;
    instrument: string;
    measuredAt: string;
    note: string;
    licence: string;
  };
  samples: readonly { id: string; name: string; group: string }[];
  /** What was typed in a form that was refused. */
  typed?: Record<string, string>;
  faults: readonly { field: string; message: string }[];
  readOnly: boolean;
}

const numberText = (value: number | null) => (value === null ? "" : typedForm(value));

/** What is known about a measurement besides its numbers: a form, or a list for those who only read. */
export function ProvenanceFields({ measurement, samples, typed, faults, readOnly }: ProvenanceFieldsProps) {
  if (readOnly) return <ProvenanceList measurement={measurement} />;
  const { bias } = measurement;
  const kept: Record<string, string> = {
    name: measurement.name,
    sampleId: measurement.sampleId ?? "",
    bias: typeof bias === "object" ? "voltage" : bias,
    biasVoltageV: typeof bias === "object" ? String(bias.voltageV) : "",
    fluxPerCm2S: numberText(measurement.fluxPerCm2S),
    temperatureK: numberText(measurement.temperatureK),
    instrument: measurement.instrument,
    measuredAt: measurement.measuredAt,
    note: measurement.note,
    licence: measurement.licence,
  };
  const values = { ...kept, ...typed };
  const field = (name: string) => ({
    name,
    defaultValue: values[name],
    autoComplete: "off",
    error: faults.find((fault) => fault.field === name)?.message,
  });
  return (
    <Form method="post" className="mt-2 grid gap-3 sm:grid-cols-2">
      <Field {...field("name")} label="Name" />
      <div>
        <label htmlFor="sampleId" className="font-semibold">
          Sample
        </label>
        <select id="sampleId" name="sampleId" defaultValue={values.sampleId} className="field mt-1">
          <option value="">none</option>
          {samples.map(({ id, name, group }) => (
            <option key={id} value={id}>
              {group ? `${group}: ${name}` : name}
            </option>
          ))}
          {measurement.sampleId && !samples.some(({ id }) => id === measurement.sampleId) && (
            <option value={measurement.sampleId}>{measurement.sampleName} (archive)</option>
          )}
        </select>
      </div>
      <div>
        <label htmlFor="bias" className="font-semibold">
          Operating point
        </label>
        <select id="bias" name="bias" defaultValue={values.bias} className="field mt-1">
          <option value="shortCircuit">short circuit</option>
          <option value="openCircuit">open circuit</option>
          <option value="voltage">a voltage</option>
        </select>
      </div>
      <Field {...field("biasVoltageV")} label="Voltage / V" />
      <Field {...field("fluxPerCm2S")} label="Flux / cm⁻² s⁻¹" />
      <Field {...field("temperatureK")} label="Temperature / K" />
      <Field {...field("instrument")} label="Instrument" />
      <Field {...field("measuredAt")} label="Measured on" />
      <Field {...field("licence")} label="Licence of the data" />
      <div className="sm:col-span-2">
        <label htmlFor="note" className="font-semibold">
          Note
        </label>
        <textarea id="note" name="note" rows={3} maxLength={4000} defaultValue={values.note} className="field mt-1" />
      </div>
      <div>
        <button type="submit" name="intent" value="change" className="button">
          Save
        </button>
      </div>
    </Form>
  );
}

function ProvenanceList({ measurement }: Pick<ProvenanceFieldsProps, "measurement">) {
  const rows: [string, string][] = [
    ["Sample", measurement.sampleName ?? ""],
    ["Operating point", biasWords(measurement.bias)],
    ["Flux", measurement.fluxPerCm2S === null ? "" : formatQuantity(measurement.fluxPerCm2S, "cm⁻² s⁻¹")],
    ["Temperature", measurement.temperatureK === null ? "" : formatQuantity(measurement.temperatureK, "K")],
    ["Instrument", measurement.instrument],
    ["Measured on", measurement.measuredAt],
    ["Licence", measurement.licence],
    ["Note", measurement.note],
  ];
  return (
    <dl className="mt-1 grid grid-cols-[auto_minmax(0,1fr)] gap-x-4 gap-y-1">
      {rows.map(([label, value]) => (
        <div key={label} className="contents">
          <dt className="text-ink-soft">{label}</dt>
          <dd className="whitespace-pre-line">{value || "–"}</dd>
        </div>
      ))}
    </dl>
  );
}
