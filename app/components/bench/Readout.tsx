import type { Technique } from "@demilune/solver";
import { type Cursor, nearestIndex } from "~/components/charts/series";
import type { SpectrumSeries } from "~/components/charts/spectrum";
import { RichText } from "~/components/ui/RichText";
import { formatFixed, formatNumber, formatUnit, thinSpace } from "~/lib/numberFormat";
import { techniqueSymbols } from "~/lib/spectrumNames";

interface ReadoutProps {
  spectra: readonly SpectrumSeries[];
  cursor: Cursor | null;
  technique: Technique;
  unit: string;
}

/** The one readout of all plots: frequency, time constant, Re, Im with its sign, modulus and phase at the cursor. */
export function Readout({ spectra, cursor, technique, unit }: ReadoutProps) {
  const read = spectra.find(({ id }) => id === cursor?.seriesId);
  const index = read && cursor ? nearestIndex(read.frequencyHz, cursor.at) : -1;
  if (!read || index < 0)
    return <p className="text-ink-soft">Point at a curve, or press an arrow key in a plot, to read it.</p>;
  const frequency = read.frequencyHz[index];
  const re = read.re[index];
  const im = read.im[index];
  const printedUnit = formatUnit(unit);
  const parts = [
    { name: "*f*", text: `${formatNumber(frequency, 3)}${thinSpace}Hz`, cursor: true },
    { name: "*τ*", text: `${formatNumber(1 / (2 * Math.PI * frequency), 3)}${thinSpace}s` },
    { name: "Re", text: formatNumber(re, 4) },
    { name: "Im", text: `${formatNumber(im, 4)}${printedUnit && thinSpace}${printedUnit}` },
    { name: `|${techniqueSymbols[technique]}|`, text: formatNumber(Math.hypot(re, im), 4) },
    { name: "phase", text: `${formatFixed((Math.atan2(im, re) * 180) / Math.PI, 1)}°` },
  ];
  return (
    <dl className="flex flex-wrap gap-x-4 whitespace-nowrap tabular-nums" data-readout="">
      {parts.map(({ name, text, cursor: isCursor }) => (
        <div
          key={name}
          className={`flex gap-1 ${name === "*τ*" || name === "phase" || name.startsWith("|") ? "max-md:hidden" : ""}`}
        >
          <dt className={isCursor ? "text-tide" : undefined}>
            {isCursor && <span className="max-md:hidden">{read.kind === "prediction" ? "cursor " : "measured "}</span>}
            <RichText text={name} />
          </dt>
          <dd>
            <RichText text={text} />
          </dd>
        </div>
      ))}
    </dl>
  );
}
