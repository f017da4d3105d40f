import { RichText } from "~/components/ui/RichText";
import { formatNumber } from "~/lib/numberFormat";
import { biasWords, techniqueNames } from "~/lib/spectrumNames";
import type { PaneContext } from "./pane";

/** Terminal voltage and current of every spectrum, as they were solved. */
export function OperatingPoint({ result, shown }: PaneContext) {
  if (!result) return <p className="text-ink-soft">Nothing is solved yet.</p>;
  const rows = result.spectra.map((spectrum, index) => ({ spectrum, index, id: `spectrum-${index}` }));
  return (
    <table className="table tabular-nums">
      <caption className="sr-only">Operating points of the spectra</caption>
      <thead>
        <tr>
          <th scope="col">spectrum</th>
          <th scope="col">at</th>
          <th scope="col" className="text-right!">
            <RichText text="*Φ* / cm⁻² s⁻¹" />
          </th>
          <th scope="col" className="text-right!">
            <RichText text="*V* / V" />
          </th>
          <th scope="col" className="text-right!">
            <RichText text="*J* / mA cm⁻², + = photocurrent" />
          </th>
        </tr>
      </thead>
      <tbody>
        {rows.map(({ spectrum, index, id }) => (
          <tr key={id} className={index === shown ? "bg-wash" : undefined}>
            <td>{techniqueNames[spectrum.technique]}</td>
            <td>{biasWords(spectrum.bias)}</td>
            <td className="text-right">
              <RichText text={formatNumber(spectrum.fluxPerCm2S, 3)} />
            </td>
            {spectrum.status === "solved" ? (
              <>
                <td className="text-right">
                  {spectrum.operatingPoint.voltageV === null
                    ? "not known to this model"
                    : formatNumber(spectrum.operatingPoint.voltageV, 4)}
                </td>
                <td className="text-right">
                  <RichText text={formatNumber(spectrum.operatingPoint.currentMAPerCm2, 4)} />
                </td>
              </>
            ) : (
              <td colSpan={2} className="text-bad">
                × {spectrum.failure.message}
              </td>
            )}
          </tr>
        ))}
      </tbody>
    </table>
  );
}
