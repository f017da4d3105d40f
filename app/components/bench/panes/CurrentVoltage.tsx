import type { Bias, CurrentVoltageCurve, ScenarioDocument } from "@demilune/solver";
import { useMemo } from "react";
import type { Series } from "~/components/charts/series";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { XYPlot } from "~/components/charts/XYPlot";
import { RichText } from "~/components/ui/RichText";
import { ScrollRegion } from "~/components/ui/scrollRegion";
import { formatNumber } from "~/lib/numberFormat";
import { useDetail } from "~/workers/useDetail";
import { useAddressChoice } from "../useAddressChoice";
import { DetailState } from "./DetailState";
import { PaneChoice } from "./PaneChoice";
import type { PaneContext } from "./pane";

interface PreBias {
  id: string;
  label: string;
  bias: Bias;
  dark?: true;
}

/** Where a fast scan may start from. */
const preBiases: readonly PreBias[] = [
  { id: "dark", label: "short circuit in the dark", bias: "shortCircuit", dark: true },
  { id: "short", label: "short circuit under light", bias: "shortCircuit" },
  { id: "open", label: "open circuit under light", bias: "openCircuit" },
];

const hasIons = ({ stack }: ScenarioDocument) =>
  stack.layers.some(({ ions }) => (ions?.cationsPerCm3 ?? 0) > 0 || (ions?.anionsPerCm3 ?? 0) > 0);

const printed = (value: number | null | undefined, digits: number) =>
  value === null || value === undefined ? "–" : formatNumber(value, digits);

const heads = ["*V*_{oc} / V", "*J*_{sc} / mA cm⁻²", "fill factor", "largest power / mW cm⁻²", "at / V"];

function Figures({ name, curve }: { name: string; curve: CurrentVoltageCurve }) {
  const { openCircuitVoltageV, shortCircuitMAPerCm2, fillFactor, maximumPower } = curve;
  return (
    <tr>
      <th scope="row">{name}</th>
      <td>{printed(openCircuitVoltageV, 4)}</td>
      <td>{printed(shortCircuitMAPerCm2, 4)}</td>
      <td>{printed(fillFactor, 3)}</td>
      <td>{printed(maximumPower?.powerMWPerCm2, 4)}</td>
      <td>{printed(maximumPower?.voltageV, 3)}</td>
    </tr>
  );
}

/** Current–voltage curves: under the scenario's light with ions that follow and with ions held, and in the dark. */
export function CurrentVoltage({ document, waiting }: PaneContext) {
  const [wanted, choose] = useAddressChoice("ions", "dark");
  const start = preBiases.find(({ id }) => id === wanted) ?? preBiases[0];
  const ions = hasIons(document);
  const flux = start.dark ? 0 : document.light.fluxPerCm2S;
  const ask = useMemo(
    () => (waiting ? null : { heldAt: ions ? { bias: start.bias, fluxPerCm2S: flux } : null }),
    [waiting, ions, start, flux],
  );
  const detail = useDetail("currentVoltage", document, ask);
  const linked = useLinkedCursor();
  const series = useMemo<Series[]>(() => {
    if (!detail.value) return [];
    const { light, held, dark } = detail.value;
    const drawn = (curve: CurrentVoltageCurve, style: Omit<Series, "kind" | "x" | "y">): Series => ({
      kind: "prediction",
      x: curve.voltageV,
      y: curve.currentMAPerCm2,
      ...style,
    });
    return [
      drawn(dark, { id: "dark", label: "in the dark", colour: "ink", dash: "2 3", width: 1.6 }),
      ...(held ? [drawn(held, { id: "held", label: "light, ions held", colour: 2, dash: "6 3", width: 1.8 })] : []),
      drawn(light, { id: "light", label: held ? "light, ions follow" : "under this light" }),
    ];
  }, [detail.value]);
  return (
    <>
      {ions && <PaneChoice words="ions held as they stand at" value={start.id} options={preBiases} onChoose={choose} />}
      <DetailState detail={detail}>
        {({ light, held, dark }) => {
          const shortCircuit = Math.abs(light.shortCircuitMAPerCm2 ?? 0);
          const failures = light.failures.length + dark.failures.length + (held?.failures.length ?? 0);
          return (
            <>
              <XYPlot
                title="Current–voltage curves under light and in the dark"
                xAxis={{ label: "*V*", unit: "V", scale: "linear" }}
                yAxis={{ label: "*J*, + = photocurrent", unit: "mA/cm²", scale: "linear" }}
                yRange={shortCircuit > 0 ? [-0.5 * shortCircuit, 1.9 * shortCircuit] : undefined}
                series={series}
                height={280}
                {...linked}
              />
              <ScrollRegion label="Figures of the curves">
                <table className="table numbers">
                  <caption className="sr-only">Figures of the curves under light</caption>
                  <thead>
                    <tr>
                      <td className="border-t-0" />
                      {heads.map((head) => (
                        <th key={head} scope="col">
                          <RichText text={head} />
                        </th>
                      ))}
                    </tr>
                  </thead>
                  <tbody>
                    <Figures name={held ? "ions follow" : "under light"} curve={light} />
                    {held && <Figures name="ions held" curve={held} />}
                  </tbody>
                </table>
              </ScrollRegion>
              <p className="mt-2 text-ink-soft text-small">
                {held
                  ? "Ions that follow are the limit of a slow scan, ions held that of a fast one. A scan at a finite rate lies between."
                  : "Every point is a steady state."}
                {failures > 0 && ` ${failures} voltages were not reached and are left out.`}
              </p>
            </>
          );
        }}
      </DetailState>
    </>
  );
}
