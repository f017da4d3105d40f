import { useMemo, useState } from "react";
import type { ArcOnPlot, ArcsOfSeries } from "~/components/charts/ArcMarks";
import type { SpectrumSeries } from "~/components/charts/spectrum";
import type { ArcsOfCurve } from "~/workers/solverMessages";
import { type Detail, useDetail } from "~/workers/useDetail";
import { predictionId } from "./spectrumSeries";

export interface Arcs {
  detail: Detail<"arcs">;
  /** The curve whose arcs these are. */
  series: SpectrumSeries | undefined;
  choose: (seriesId: string) => void;
  onPlots: ArcsOfSeries | undefined;
  /** Number of the arc that is pointed at in the table. */
  lit: number | null;
  light: (number: number | null) => void;
}

/** Arcs with the valleys to their sides. */
function between({ arcs, valleysHz }: ArcsOfCurve, frequencyHz: ArrayLike<number>): ArcOnPlot[] {
  const ends = [frequencyHz[0], ...valleysHz, frequencyHz[frequencyHz.length - 1]];
  return arcs.map(({ peakHz }, index) => ({ number: index + 1, peakHz, fromHz: ends[index], toHz: ends[index + 1] }));
}

/** The arcs of the prediction or of a measurement laid over it, found in a worker once the curve stands still. */
export function useArcs(all: readonly SpectrumSeries[]): Arcs {
  const [wanted, choose] = useState(predictionId);
  const [lit, light] = useState<number | null>(null);
  const series = all.find(({ id }) => id === wanted) ?? all.find(({ id }) => id === predictionId);
  const ask = useMemo(() => {
    if (!series) return null;
    const kept = Array.from({ length: series.frequencyHz.length }, (_, index) => index).filter(
      (index) => !series.masked?.[index],
    );
    const pick = (values: ArrayLike<number>) => kept.map((index) => values[index]);
    return { curve: { frequencyHz: pick(series.frequencyHz), re: pick(series.re), im: pick(series.im) } };
  }, [series]);
  const detail = useDetail("arcs", null, ask);
  const frequencyHz = series?.frequencyHz;
  const id = series?.id;
  const onPlots = useMemo<ArcsOfSeries | undefined>(
    () =>
      detail.value && frequencyHz && id !== undefined
        ? { seriesId: id, arcs: between(detail.value, frequencyHz), lit, stale: detail.busy }
        : undefined,
    [detail, frequencyHz, id, lit],
  );
  return useMemo(() => ({ detail, series, choose, onPlots, lit, light }), [detail, series, onPlots, lit]);
}
