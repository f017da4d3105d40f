import { type ModelKind, modelKinds, type SpectrumResult } from "@demilune/solver";
import { useMemo } from "react";
import { ComplexPlane } from "~/components/charts/ComplexPlane";
import type { Series } from "~/components/charts/series";
import type { SpectrumSeries } from "~/components/charts/spectrum";
import { XYPlot } from "~/components/charts/XYPlot";
import { formatNumber, formatPrefixed } from "~/lib/numberFormat";
import { modelNames, techniqueSymbols } from "~/lib/spectrumNames";
import { useDetail } from "~/workers/useDetail";
import { useAddressChoice } from "../useAddressChoice";
import { DetailState } from "./DetailState";
import { PaneChoice } from "./PaneChoice";
import type { PaneContext } from "./pane";

/** Distance of two spectra at each frequency, in % of the largest modulus of the second. */
function distances(one: SpectrumResult, reference: SpectrumResult): { frequencyHz: number[]; percent: number[] } {
  if (one.status !== "solved" || reference.status !== "solved") return { frequencyHz: [], percent: [] };
  const largest = Math.max(...reference.re.map((re, index) => Math.hypot(re, reference.im[index])));
  return {
    frequencyHz: reference.frequencyHz,
    percent: reference.re.map(
      (re, index) => (100 * Math.hypot(one.re[index] - re, one.im[index] - reference.im[index])) / largest,
    ),
  };
}

/** The spectrum on screen beside that of another model of the same stack, with their distance over frequency. */
export function ModelsCompared({ document, spectrum, shown, linked, waiting }: PaneContext) {
  const kind = document.model?.kind ?? "driftDiffusion";
  const [wanted, choose] = useAddressChoice("against", kind === "driftDiffusion" ? "transit" : "driftDiffusion");
  const others = modelKinds.filter((other) => other !== kind);
  const other = others.find((one) => one === wanted) ?? others.at(-1)!;
  const ask = useMemo(() => (waiting ? null : { shown, model: { kind: other } }), [shown, other, waiting]);
  const detail = useDetail("otherModel", document, ask);
  const value = detail.value;
  const matches = spectrum && value && value.technique === spectrum.technique;
  const full = kind === "driftDiffusion";

  const spectra = useMemo<SpectrumSeries[]>(() => {
    const drawn = (result: SpectrumResult, id: string, model: ModelKind, style: Partial<SpectrumSeries>) =>
      result.status === "solved"
        ? [
            {
              id,
              label: modelNames[model],
              kind: "prediction" as const,
              frequencyHz: result.frequencyHz,
              re: result.re,
              im: result.im,
              ...style,
            },
          ]
        : [];
    if (!matches) return [];
    return [...drawn(value, "other", other, { colour: 2, dash: "6 3" }), ...drawn(spectrum, "prediction", kind, {})];
  }, [matches, value, spectrum, other, kind]);
  const distance = useMemo(
    () =>
      matches ? (full ? distances(value, spectrum) : distances(spectrum, value)) : { frequencyHz: [], percent: [] },
    [matches, full, value, spectrum],
  );
  const series: Series[] = [
    {
      id: "distance",
      label: "distance",
      kind: "prediction",
      colour: "ink",
      width: 1.6,
      x: distance.frequencyHz,
      y: distance.percent,
    },
  ];
  const worst = distance.percent.reduce((most, percent, index) => (percent > distance.percent[most] ? index : most), 0);
  return (
    <>
      <PaneChoice
        words={`${modelNames[kind]}, against`}
        value={other}
        options={others.map((one) => ({ id: one, label: modelNames[one] }))}
        onChoose={choose}
      />
      <DetailState detail={detail}>
        {(result) =>
          result.status !== "solved" ? (
            <p className="border-bad border-l-2 pl-3">
              <span className="font-semibold text-bad">× Not solved.</span> {result.failure.message}
            </p>
          ) : (
            <>
              {distance.percent.length > 0 && (
                <p className="mb-2">
                  Largest distance {formatNumber(distance.percent[worst], 3)} % of the largest modulus, at{" "}
                  {formatPrefixed(distance.frequencyHz[worst], "Hz")}.
                </p>
              )}
              <ComplexPlane
                title={`${modelNames[kind]} and ${modelNames[other]}, complex plane`}
                spectra={spectra}
                symbol={techniqueSymbols[result.technique]}
                unit={result.unit}
                imUp={false}
                height={280}
                {...linked}
              />
              <XYPlot
                title={`Distance of ${modelNames[kind]} from ${modelNames[other]}`}
                xAxis={{ label: "*f*", unit: "Hz", scale: "log" }}
                yAxis={{ label: "distance, % of the largest modulus", unit: "1", scale: "linear" }}
                series={series}
                height={150}
                legend="none"
                {...linked}
              />
            </>
          )
        }
      </DetailState>
    </>
  );
}
