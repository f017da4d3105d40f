import { useMemo } from "react";
import type { Series } from "~/components/charts/series";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { XYPlot } from "~/components/charts/XYPlot";
import { RichText } from "~/components/ui/RichText";
import { formatNumber, formatQuantity } from "~/lib/numberFormat";
import { useDetail } from "~/workers/useDetail";
import { DetailState } from "./DetailState";
import type { PaneContext } from "./pane";

const whole = {};

/** Current–voltage curves under the scenario's light and in the dark, every point in the steady state. */
export function CurrentVoltage({ document, waiting }: PaneContext) {
  const detail = useDetail("currentVoltage", document, waiting ? null : whole);
  const linked = useLinkedCursor();
  const series = useMemo<Series[]>(() => {
    if (!detail.value) return [];
    const { light, dark } = detail.value;
    return [
      {
        id: "dark",
        label: "in the dark",
        kind: "prediction",
        colour: "ink",
        dash: "6 3",
        width: 1.6,
        x: dark.voltageV,
        y: dark.currentMAPerCm2,
      },
      { id: "light", label: "under this light", kind: "prediction", x: light.voltageV, y: light.currentMAPerCm2 },
    ];
  }, [detail.value]);
  return (
    <DetailState detail={detail}>
      {({ light }) => {
        const { openCircuitVoltageV, shortCircuitMAPerCm2, fillFactor, maximumPower, failures } = light;
        const facts = [
          ["*V*_{oc}", openCircuitVoltageV === null ? "–" : formatQuantity(openCircuitVoltageV, "V", 4)],
          ["*J*_{sc}", shortCircuitMAPerCm2 === null ? "–" : formatQuantity(shortCircuitMAPerCm2, "mA/cm²", 4)],
          ["fill factor", fillFactor === null ? "–" : formatNumber(fillFactor, 3)],
          [
            "maximum power",
            maximumPower
              ? `${formatQuantity(maximumPower.powerMWPerCm2, "mW/cm²", 4)} at ${formatQuantity(maximumPower.voltageV, "V", 3)}`
              : "–",
          ],
        ];
        const shortCircuit = Math.abs(shortCircuitMAPerCm2 ?? 0);
        return (
          <>
            <XYPlot
              title="Current–voltage curve under light and in the dark"
              xAxis={{ label: "*V*", unit: "V", scale: "linear" }}
              yAxis={{ label: "*J*, + = photocurrent", unit: "mA/cm²", scale: "linear" }}
              yRange={shortCircuit > 0 ? [-0.5 * shortCircuit, 1.7 * shortCircuit] : undefined}
              series={series}
              height={260}
              {...linked}
            />
            <dl className="mt-2 flex flex-wrap gap-x-6">
              {facts.map(([name, text]) => (
                <div key={name} className="flex gap-1.5">
                  <dt className="text-ink-soft">
                    <RichText text={name} />
                  </dt>
                  <dd>
                    <RichText text={text} />
                  </dd>
                </div>
              ))}
            </dl>
            <p className="mt-1 text-ink-soft">
              {document.stack.ionsFrozenAt
                ? "Ions are held where the scenario left them: the limit of a fast scan. A scan at a finite rate lies between this and the steady curve."
                : "Ions follow at every voltage: the limit of a slow scan. A scan at a finite rate lies between this and the curve with frozen ions."}
              {failures.length > 0 && ` ${failures.length} voltages were not reached and are left out.`}
            </p>
          </>
        );
      }}
    </DetailState>
  );
}
