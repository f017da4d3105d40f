import { Field } from "~/components/ui/field";
import type { FormFault } from "~/lib/importForm";
import { formatNumber } from "~/lib/numberFormat";
import { biasWords, techniqueNames } from "~/lib/spectrumNames";
import type { PreviewSpectrum } from "~/lib/textImport/preview";

interface SpectraToStoreProps {
  spectra: readonly PreviewSpectrum[];
  baseName: string;
  values: Record<string, string>;
  faults: readonly FormFault[];
}

const faultAt = (faults: readonly FormFault[], field: string) => faults.find((fault) => fault.field === field)?.message;

/** Name of each spectrum, its light where there are several, and whether it is left out. */
export function SpectraToStore({ spectra, baseName, values, faults }: SpectraToStoreProps) {
  const several = spectra.length > 1;
  return (
    <div className="overflow-x-auto">
      <table className="table text-small">
        <thead>
          <tr>
            <th scope="col">Name</th>
            <th scope="col">Spectrum</th>
            {several && <th scope="col">Flux / cm⁻² s⁻¹</th>}
            {several && <th scope="col">Leave out</th>}
          </tr>
        </thead>
        <tbody>
          {spectra.map((spectrum, index) => {
            const name = spectrum.label === "" ? baseName : `${baseName}, ${spectrum.label}`;
            return (
              // biome-ignore lint/suspicious/noArrayIndexKey: spectra are told apart by their place in the file
              <tr key={index}>
                <td className="min-w-48">
                  <input
                    key={name}
                    id={`name-${index}`}
                    name={`name-${index}`}
                    defaultValue={values[`name-${index}`] ?? name}
                    aria-label={`Name of spectrum ${index + 1}`}
                    aria-invalid={faultAt(faults, `name-${index}`) ? true : undefined}
                    maxLength={160}
                    className="field"
                  />
                </td>
                <td>
                  {techniqueNames[spectrum.technique]}, {biasWords(spectrum.bias)}
                  <br />
                  <span className="text-ink-soft">
                    {spectrum.pointCount} points
                    {spectrum.repeats > 0 && `, ${spectrum.repeats} of them repeats`}
                    {spectrum.relative && ", shape only"}
                  </span>
                </td>
                {several && (
                  <td>
                    <input
                      id={`flux-${index}`}
                      name={`flux-${index}`}
                      defaultValue={values[`flux-${index}`] ?? ""}
                      placeholder={spectrum.fluxPerCm2S === null ? "" : formatNumber(spectrum.fluxPerCm2S)}
                      aria-label={`Flux of spectrum ${index + 1}, photons per square centimetre and second`}
                      className="field w-28"
                    />
                  </td>
                )}
                {several && (
                  <td>
                    <input
                      type="checkbox"
                      name={`left-out-${index}`}
                      defaultChecked={values[`left-out-${index}`] !== undefined}
                      aria-label={`Leave out spectrum ${index + 1}`}
                      className="size-6 accent-tide"
                    />
                  </td>
                )}
              </tr>
            );
          })}
        </tbody>
      </table>
    </div>
  );
}

interface StoreDetailsProps {
  samples: readonly { id: string; name: string; group: string }[];
  /** Name of the sample as the file says it. */
  sampleName: string | null;
  values: Record<string, string>;
  faults: readonly FormFault[];
}

/** Sample, instrument, date, note and licence: what the file rarely says. */
export function StoreDetails({ samples, sampleName, values, faults }: StoreDetailsProps) {
  const known = samples.find(({ name }) => name === sampleName);
  const field = (name: string) => ({ name, defaultValue: values[name] ?? "", error: faultAt(faults, name) });
  return (
    <div className="grid gap-4 sm:grid-cols-2">
      {samples.length > 0 && (
        <div>
          <label htmlFor="sampleId" className="font-semibold">
            Sample
          </label>
          <select
            id="sampleId"
            name="sampleId"
            defaultValue={values.sampleId ?? known?.id ?? ""}
            className="field mt-1"
          >
            <option value="">none, or a new one</option>
            {samples.map(({ id, name, group }) => (
              <option key={id} value={id}>
                {group ? `${group}: ${name}` : name}
              </option>
            ))}
          </select>
        </div>
      )}
      <Field
        {...field("sampleName")}
        label={samples.length > 0 ? "Name of a new sample" : "Sample"}
        defaultValue={values.sampleName ?? (known ? "" : (sampleName ?? ""))}
      />
      <Field {...field("instrument")} label="Instrument" />
      <Field {...field("measuredAt")} label="Measured on" />
      <Field {...field("licence")} label="Licence of the data" />
      <div className="sm:col-span-2">
        <label htmlFor="note" className="font-semibold">
          Note
        </label>
        <textarea
          id="note"
          name="note"
          rows={2}
          defaultValue={values.note ?? ""}
          maxLength={4000}
          className="field mt-1"
        />
      </div>
    </div>
  );
}
