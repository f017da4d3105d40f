import { useMemo } from "react";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { XYPlot } from "~/components/charts/XYPlot";
import { biasWords } from "~/lib/spectrumNames";
import { useDetail } from "~/workers/useDetail";
import { useAddressChoice } from "../useAddressChoice";
import { DetailState } from "./DetailState";
import { depthPlots, depthSeries } from "./depthSeries";
import { LayerEdges } from "./LayerEdges";
import { PaneChoice } from "./PaneChoice";
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
      <PaneChoice
        words={`over depth, at ${spectrum ? biasWords(spectrum.bias) : "–"}`}
        value={plot.id}
        options={depthPlots}
        onChoose={choose}
      />
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
