import type { SpectrumResult } from "@demilune/solver";
import { memo, type ReactNode, useMemo, useState } from "react";
import type { ArcsOfSeries } from "~/components/charts/ArcMarks";
import { ComplexPlane } from "~/components/charts/ComplexPlane";
import { OverFrequency } from "~/components/charts/OverFrequency";
import { residualsOf } from "~/components/charts/residuals";
import type { SpectrumSeries } from "~/components/charts/spectrum";
import type { LinkedCursor } from "~/components/charts/useLinkedCursor";
import { extent } from "~/components/charts/view";
import { XYPlot } from "~/components/charts/XYPlot";
import { useMediaQuery } from "~/components/ui/useMediaQuery";
import { withLimit } from "~/lib/overlay";
import { biasWords, techniqueNames, techniqueSymbols } from "~/lib/spectrumNames";
import { predictionId } from "./spectrumSeries";
import { useAddressChoice } from "./useAddressChoice";

interface SpectraViewProps {
  spectrum: SpectrumResult;
  series: readonly SpectrumSeries[];
  arcs: ArcsOfSeries | undefined;
  linked: LinkedCursor;
  dragging: boolean;
  /** On a phone the readout stands between the plots. */
  readout: ReactNode;
}

const parts = {
  polar: ["modulus", "phase"],
  cartesian: ["re", "im"],
} as const;
const partWords = { modulus: "modulus", phase: "phase", re: "real part", im: "imaginary part" } as const;

/** One spectrum: a large complex plane, two parts over frequency beside it, residuals where something is measured. */
export const SpectraView = memo(function SpectraView(props: SpectraViewProps) {
  const { spectrum, linked, dragging, readout } = props;
  const [direction, setDirection] = useAddressChoice("im", "down");
  const [view, setView] = useAddressChoice("parts", "polar");
  const { technique } = spectrum;
  const [normalised, setNormalised] = useAddressChoice("normalise", "no");
  const measured = props.series.some(({ kind }) => kind === "measured");
  const relative = measured && normalised === "yes";
  const symbol = relative
    ? `${techniqueSymbols[technique]}/${techniqueSymbols[technique]}(0)`
    : techniqueSymbols[technique];
  const series = useMemo(
    () => (relative ? props.series.map((one) => withLimit(one)) : props.series),
    [relative, props.series],
  );
  const name = `${techniqueNames[technique]} at ${biasWords(spectrum.bias)}`;
  const [upper, lower] = view === "cartesian" ? parts.cartesian : parts.polar;
  const unit = relative ? "1" : spectrum.unit;
  const shared = { spectra: series, symbol, unit, dragging, ...linked };
  const residuals = useMemo(() => {
    const prediction = series.find(({ id }) => id === predictionId);
    return prediction
      ? series.filter(({ kind }) => kind === "measured").flatMap((one) => residualsOf(prediction, one))
      : [];
  }, [series]);
  const imUp = direction === "up";
  const stacked = useMediaQuery("(min-width: 80rem)");
  const phone = useMediaQuery("(max-width: 47.99rem)");
  const [phonePart, setPhonePart] = useState<"upper" | "lower">("lower");
  const other = (
    <button
      type="button"
      className="plot-tool md:hidden"
      onClick={() => setPhonePart(phonePart === "upper" ? "lower" : "upper")}
    >
      {partWords[phonePart === "upper" ? lower : upper]}
    </button>
  );
  return (
    <div className="grid gap-x-12 gap-y-4 pt-3.5 xl:grid-cols-[minmax(0,632fr)_minmax(0,344fr)]">
      <ComplexPlane
        {...shared}
        key={`plane ${technique}`}
        title={`${name}, complex plane`}
        imUp={imUp}
        arcs={props.arcs}
        decades
        height={phone ? 250 : 414}
        initialWidth={632}
        tools={
          <>
            {measured && (
              <button
                type="button"
                className="plot-tool"
                aria-pressed={relative}
                onClick={() => setNormalised(relative ? "no" : "yes")}
              >
                Normalise
              </button>
            )}
            <button type="button" className="plot-tool" onClick={() => setDirection(imUp ? "down" : "up")}>
              {imUp ? "−Im up" : "Im up"}
            </button>
          </>
        }
      />
      <div className="-my-2 md:hidden">{readout}</div>
      <div className="grid gap-x-8 md:max-xl:grid-cols-2 xl:content-start">
        {(!phone || phonePart === "upper") && (
          <OverFrequency
            {...shared}
            key={`upper ${technique} ${upper}`}
            title={`${name}, ${partWords[upper]}`}
            part={upper}
            arcs={props.arcs}
            xLabelsHidden={stacked}
            height={phone ? 170 : stacked ? (residuals.length > 0 ? 132 : 184) : 220}
            initialWidth={344}
            tools={
              <>
                {other}
                <button
                  type="button"
                  className="plot-tool"
                  onClick={() => setView(view === "cartesian" ? "polar" : "cartesian")}
                >
                  {view === "cartesian" ? "Modulus, phase" : "Re, Im"}
                </button>
              </>
            }
          />
        )}
        {(!phone || phonePart === "lower") && (
          <OverFrequency
            {...shared}
            key={`lower ${technique} ${lower}`}
            title={`${name}, ${partWords[lower]}`}
            part={lower}
            arcs={props.arcs}
            height={phone ? 170 : stacked ? (residuals.length > 0 ? 152 : 230) : 220}
            initialWidth={344}
            tools={other}
          />
        )}
        {residuals.length > 0 && (
          <XYPlot
            title={`${name}, residuals: prediction − measured`}
            series={residuals}
            xAxis={{ label: "*f*", unit: "Hz", scale: "log" }}
            xRange={
              extent(
                series.map(({ frequencyHz }) => frequencyHz),
                "log",
              ) ?? undefined
            }
            yAxis={{ label: `residual, % of |${symbol}|`, unit: "1", scale: "linear" }}
            height={stacked ? 130 : 140}
            initialWidth={344}
            legend="none"
            dragging={dragging}
            {...linked}
          />
        )}
      </div>
    </div>
  );
});
