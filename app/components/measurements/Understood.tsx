import type { FormFault } from "~/lib/importForm";
import type { Finding, FindingKey } from "~/lib/textImport/reading";
import { choices, numberUnits } from "./importChoices";

interface UnderstoodProps {
  findings: readonly Finding[];
  values: Record<string, string>;
  faults: readonly FormFault[];
  /** Values without which the unit of the numbers cannot be converted. */
  needs: readonly FindingKey[];
}

const control =
  "rounded border border-transparent bg-transparent py-0.5 text-right text-tide hover:border-rule focus:border-rule cursor-pointer max-w-full [field-sizing:content]";

function Correction({
  finding,
  values,
  needed,
}: {
  finding: Finding;
  values: Record<string, string>;
  needed: boolean;
}) {
  const { key, label } = finding;
  const options = choices[key];
  if (options) {
    return (
      <span className="flex flex-wrap justify-end gap-1">
        <select
          name={key}
          id={key}
          defaultValue={values[key] ?? ""}
          aria-label={`${label}: change`}
          className={control}
        >
          <option value="">change</option>
          {options.map(([value, words]) => (
            <option key={value} value={value}>
              {words}
            </option>
          ))}
        </select>
        {key === "bias" && (
          <input
            name="biasVoltageV"
            id="biasVoltageV"
            defaultValue={values.biasVoltageV ?? ""}
            placeholder="V"
            aria-label="Terminal voltage, V"
            autoComplete="off"
            className="w-16 rounded border border-line bg-transparent px-1.5 py-0.5 text-right placeholder:text-ink-soft hover:border-rule"
          />
        )}
      </span>
    );
  }
  const unit = numberUnits[key];
  if (!unit) return null;
  return (
    <input
      name={key}
      id={key}
      defaultValue={values[key] ?? ""}
      placeholder={unit}
      aria-label={`${label}: change, ${unit}`}
      aria-invalid={needed || undefined}
      autoComplete="off"
      spellCheck={false}
      className="w-28 rounded border border-line bg-transparent px-1.5 py-0.5 text-right placeholder:text-ink-soft hover:border-rule aria-invalid:border-bad"
    />
  );
}

/** Each thing that was understood, why, and a way to say otherwise. */
export function Understood({ findings, values, faults, needs }: UnderstoodProps) {
  return (
    <section aria-labelledby="understood-heading">
      <h2 id="understood-heading" className="font-semibold">
        What was understood
      </h2>
      <div className="overflow-x-auto">
        <table className="w-full border-collapse text-small">
          <thead>
            <tr className="text-left text-ink-soft">
              <th scope="col" className="sr-only">
                What
              </th>
              <th scope="col" className="pb-1 font-normal">
                <span className="sr-only">Understood as</span>
              </th>
              <th scope="col" className="pb-1 font-normal">
                because
              </th>
              <th scope="col" className="pb-1 font-normal">
                <span className="sr-only">Change</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {findings.map((finding) => {
              const needed = needs.includes(finding.key) && finding.value === null;
              const fault = faults.find(({ field }) => field === finding.key);
              return (
                <tr key={finding.key} className="border-line border-t align-top">
                  <th scope="row" className="w-28 py-1 pr-3 text-left font-normal text-ink-soft">
                    {finding.label}
                  </th>
                  <td className="py-1 pr-3 font-semibold">{finding.value ?? "–"}</td>
                  <td className="py-1 pr-3">
                    {needed ? <span className="text-bad">▲ needed for the unit of the numbers</span> : finding.reason}
                    {fault && (
                      <span className="block text-bad">
                        <span aria-hidden="true">▲ </span>
                        {fault.message}
                      </span>
                    )}
                  </td>
                  <td className="w-32 py-0.5 text-right">
                    <Correction finding={finding} values={values} needed={needed} />
                  </td>
                </tr>
              );
            })}
          </tbody>
        </table>
      </div>
    </section>
  );
}
