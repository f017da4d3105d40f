import { Mark } from "~/components/ui/mark";
import { RichText } from "~/components/ui/RichText";
import { ScrollRegion } from "~/components/ui/scrollRegion";
import { formatFixed, formatNumber, formatUnit, thinSpace } from "~/lib/numberFormat";
import { plainText } from "~/lib/richText";
import { predictionId } from "../spectrumSeries";
import { DetailState } from "./DetailState";
import { PaneChoice } from "./PaneChoice";
import type { PaneContext } from "./pane";

/** The arcs of the spectrum on screen; a row that is pointed at or focused lights its arc in the plots. */
export function Arcs({ arcs, series, spectrum }: PaneContext) {
  const { detail, lit, light, choose } = arcs;
  const curves = series.filter(({ kind }) => kind !== "held").toReversed();
  const unit = formatUnit(spectrum?.unit ?? "1");
  return (
    <>
      {curves.length > 1 && (
        <PaneChoice
          words="arcs of"
          value={arcs.series?.id ?? predictionId}
          options={curves.map(({ id, label }) => ({ id, label: plainText(label) }))}
          onChoose={choose}
        />
      )}
      <DetailState detail={detail}>
        {({ arcs: found, noise }) =>
          found.length === 0 ? (
            <p className="text-ink-soft">No arc inside these frequencies stands out of the noise.</p>
          ) : (
            <>
              <ScrollRegion label="Table of arcs">
                <table className="table numbers" onMouseLeave={() => light(null)}>
                  <caption className="sr-only">Arcs, from low to high frequency</caption>
                  <thead>
                    <tr>
                      <th scope="col">arc</th>
                      <th scope="col">peak frequency / Hz</th>
                      <th scope="col">time constant / s</th>
                      <th scope="col">span{unit && ` / ${unit}`}</th>
                      <th scope="col">half plane</th>
                      <th scope="col">depression</th>
                    </tr>
                  </thead>
                  <tbody>
                    {found.map((arc, index) => {
                      const number = index + 1;
                      return (
                        <tr
                          key={arc.peakHz}
                          className={lit === number ? "bg-wash" : undefined}
                          onMouseEnter={() => light(number)}
                          onFocus={() => light(number)}
                          onBlur={() => light(null)}
                        >
                          <td>
                            <button
                              type="button"
                              className="flex min-h-6 min-w-11 items-center gap-1.5 font-semibold"
                              aria-label={`Light arc ${number}`}
                              onClick={() => light(number)}
                            >
                              <span className="[&_svg]:fill-ink">
                                <Mark width={14} />
                              </span>
                              {number}
                            </button>
                          </td>
                          <td>{formatNumber(arc.peakHz, 3)}</td>
                          <td>{formatNumber(arc.timeConstantS, 3)}</td>
                          <td>{formatNumber(arc.spanRe, 3)}</td>
                          <td>{arc.quadrant > 2 ? "Im < 0" : "Im > 0"}</td>
                          <td>{formatFixed(arc.depression, 2)}</td>
                        </tr>
                      );
                    })}
                  </tbody>
                </table>
              </ScrollRegion>
              <p className="mt-2 text-ink-soft text-small">
                <RichText
                  text={`Span: |ΔRe| of the arc alone. Depression: 1 − (4/π) atan(2·|Im|_{max}/span), 0 for a semicircle, negative where higher than one.`}
                />
                {arcs.series?.kind === "measured" &&
                  ` Noise of Re and of Im: ${formatNumber(noise, 2)}${unit && thinSpace + unit}.`}
              </p>
            </>
          )
        }
      </DetailState>
    </>
  );
}
