import { useMemo } from "react";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { XYPlot } from "~/components/charts/XYPlot";
import { biasWords } from "~/lib/spectrumNames";
import { useDetail } from "~/workers/useDetail";
import { useAddressChoice } from "../useAddressChoice";
import { DetailState } from "./DetailState";
import { depthPlots, depthSeries } from "./depthSeries";
import { LayerEdges } from "./LayerEdges";
import type { PaneContext } from "./pane";

/** Profiles over depth in the steady state of the spectrum on screen. */
export function ProfilesOverDepth({ document, spectrum, waiting }: PaneContext) {
  const [wanted, choose] = useAddressChoice("profile", depthPlots[0].id);
  const plot = depthPlots.find(({ id }) => id === wanted) ?? depthPlots[0];
  const point = spectrum && JSON.stringify([spectrum.bias, spectrum.fluxPerCm2S]);
  const ask = useMemo(() => {
    if (!point || waiting) return null;
    const [bias, fluxPerCm2S] = JSON.parse(point);
    return { bias, fluxPerCm2S };
  }, [point, waiting]);
  const detail = useDetail("profiles", document, ask);
  const linked = useLinkedCursor();
  const series = useMemo(() => (detail.value ? depthSeries(detail.value, plot) : []), [detail.value, plot]);
  return (
    <>
      <label className="mb-2 flex items-baseline gap-2">
        <span className="text-ink-soft">over depth, at {spectrum ? biasWords(spectrum.bias) : "–"}</span>
        <select
          className="rounded bg-transparent py-0.5 text-tide"
          value={plot.id}
          onChange={(event) => choose(event.currentTarget.value)}
        >
          {depthPlots.map(({ id, label }) => (
            <option key={id} value={id} className="bg-sheet text-ink">
              {label}
            </option>
          ))}
        </select>
      </label>
      <DetailState detail={detail}>
        {() => (
          <XYPlot
            key={plot.id}
            title={`Over depth: ${plot.label}`}
            xAxis={{ label: "depth", unit: "nm", scale: "linear" }}
            yAxis={{ label: plot.yLabel, unit: plot.unit, scale: plot.scale }}
            series={series}
            height={300}
            below={(geometry) => <LayerEdges layers={document.stack.layers} geometry={geometry} />}
            {...linked}
          />
        )}
      </DetailState>
    </>
  );
}
