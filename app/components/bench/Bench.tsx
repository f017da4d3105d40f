import type { ResultDocument, ScenarioDocument, SpectrumResult } from "@demilune/solver";
import { memo, type ReactNode, useMemo, useRef, useState } from "react";
import { useLinkedCursor } from "~/components/charts/useLinkedCursor";
import { CrossSection } from "~/components/stack/CrossSection";
import type { Picked } from "~/components/stack/stackProps";
import { Menu } from "~/components/ui/menu";
import { RichText } from "~/components/ui/RichText";
import { useMediaQuery } from "~/components/ui/useMediaQuery";
import { formatNumber, formatQuantity, thinSpace } from "~/lib/numberFormat";
import { spectrumFor, withMeasuredFrequencies } from "~/lib/overlay";
import { spectrumNames } from "~/lib/spectrumNames";
import { useSolver } from "~/workers/useSolver";
import { CircuitNumbers } from "./CircuitNumbers";
import { FrequencyNumbers } from "./FrequencyNumbers";
import { heldNumbers } from "./heldNumbers";
import { KeyboardHelp } from "./KeyboardHelp";
import { LightNumbers } from "./LightNumbers";
import { Faults, NotSolved } from "./Messages";
import { ModelChoice } from "./ModelChoice";
import { ModelNumbers } from "./ModelNumbers";
import { PhoneSheet } from "./PhoneSheet";
import { PickedNumbers } from "./PickedNumbers";
import { Readout } from "./Readout";
import { SpectraList } from "./SpectraList";
import { SpectraView } from "./SpectraView";
import { Strip } from "./Strip";
import { usualPaths } from "./sliders";
import { type HeldCurve, type Measurement, seriesOf } from "./spectrumSeries";
import { Tabs } from "./Tabs";
import { useAddressChoice } from "./useAddressChoice";
import { useArcs } from "./useArcs";
import type { BenchDocument } from "./useBenchDocument";

export interface BenchProps {
  name: string;
  /** The document and its edits, from `useBenchDocument`. */
  bench: BenchDocument;
  /** What the server computed, shown until the worker answers. */
  initialResult: ResultDocument | null;
  measurements?: readonly Measurement[];
  /** Behind the name: revision and draft, in words. */
  status?: ReactNode;
  /** Links and buttons at the right of the title line; in a menu where there is no room. */
  actions?: ReactNode;
  /** The one filled button of the page. */
  filledAction?: ReactNode;
  /** Layers cannot be added, moved or deleted, spectra not added; numbers still move. */
  fixedStructure?: boolean;
  /** Paths of the numbers that may be moved; absent: all. */
  exposed?: readonly string[];
  /** Buttons of the phone's sheet besides holding a curve; undo where absent. */
  sheetActions?: ReactNode;
  /** Below the number lists, such as measurements to lay over. */
  besideBelow?: ReactNode;
}

const none: readonly Measurement[] = [];

// While a value is dragged the page is drawn twice a frame: for the value, and for its curves. Neither draws the other's part.
const StillCrossSection = memo(CrossSection);

/** The layer one looks at first: that with mobile ions, else the one that absorbs. */
function firstPick({ stack: { layers } }: ScenarioDocument): Picked {
  const ions = layers.findIndex((layer) => (layer.ions?.cationsPerCm3 ?? 0) > 0);
  const absorbing = layers.findIndex((layer) => (layer.absorptionPerCm ?? 0) > 0);
  return { kind: "layer", index: Math.max(0, ions >= 0 ? ions : absorbing) };
}

/** Open-circuit voltage and short-circuit current where the spectra know them. */
function AtThisFlux({ spectra }: { spectra: readonly SpectrumResult[] }) {
  const solved = spectra.filter((spectrum) => spectrum.status === "solved");
  const voltage = solved.find(({ bias }) => bias === "openCircuit")?.operatingPoint.voltageV ?? null;
  const current = solved.find(({ bias }) => bias === "shortCircuit")?.operatingPoint.currentMAPerCm2;
  if (voltage === null && current === undefined) return null;
  return (
    <div className="mt-1 whitespace-nowrap">
      <p className="text-ink-soft">at this flux</p>
      {voltage !== null && (
        <p>
          <RichText text={`*V*_{oc} ${formatNumber(voltage, 4)}${thinSpace}V`} />
        </p>
      )}
      {current !== undefined && (
        <p>
          <RichText text={`*J*_{sc} ${formatQuantity(current, "mA/cm²", 4)}`} />
        </p>
      )}
    </div>
  );
}

/** The bench: the device at the left, its spectra at the right, what they mean below. */
export function Bench(props: BenchProps) {
  const { bench, measurements = none, exposed, fixedStructure } = props;
  const { document, change } = bench;
  const [tab, chooseTab] = useAddressChoice("spectrum", "1");
  const requests = document.spectra ?? [];
  const shown = Math.min(Math.max(0, Number.parseInt(tab, 10) - 1 || 0), Math.max(0, requests.length - 1));
  const asked = useMemo(() => withMeasuredFrequencies(document, measurements), [document, measurements]);
  const solved = useSolver(asked, props.initialResult, shown);
  const linked = useLinkedCursor();
  const [picked, setPicked] = useState<Picked | null>(() => firstPick(document));
  const [held, setHeld] = useState<(HeldCurve & { document: ScenarioDocument }) | null>(null);
  const names = useMemo(
    () => spectrumNames(requests, document.light.fluxPerCm2S),
    [requests, document.light.fluxPerCm2S],
  );

  const spectrum = solved.spectra?.[shown];
  const over = useMemo(
    () => measurements.filter((measurement) => spectrumFor(document, measurement) === shown),
    [document, measurements, shown],
  );
  const series = useMemo(() => seriesOf(spectrum, held, over), [spectrum, held, over]);
  const arcs = useArcs(series);
  const heldValues = useMemo(() => (held ? heldNumbers(held.document, document) : undefined), [held, document]);
  const numbers = { document, onChange: change, readOnly: exposed !== undefined };
  const full = (document.model?.kind ?? "driftDiffusion") === "driftDiffusion";

  const readout = useMemo(
    () =>
      spectrum && (
        <Readout spectra={series} cursor={linked.cursor} technique={spectrum.technique} unit={spectrum.unit} />
      ),
    [series, linked.cursor, spectrum],
  );

  const holding = held ? (
    <button type="button" className="action" onClick={() => setHeld(null)}>
      Let the curve go
    </button>
  ) : (
    <button
      type="button"
      className="action"
      disabled={!solved.spectra}
      onClick={() => solved.spectra && setHeld({ label: "as it was", spectra: solved.spectra, document })}
    >
      Hold this curve
    </button>
  );

  const keys = useRef<HTMLDialogElement>(null);
  const wide = useMediaQuery("(min-width: 80rem)");
  const folded = (
    <>
      <button type="button" className="action" disabled={!bench.canUndo} onClick={bench.undo}>
        Undo
      </button>
      <button type="button" className="action" disabled={!bench.canRedo} onClick={bench.redo}>
        Redo
      </button>
      {holding}
      {props.actions}
      <button type="button" className="action" onClick={() => keys.current?.showModal()}>
        Keys
      </button>
    </>
  );

  return (
    <div className="bench" data-busy={solved.busy} data-milliseconds={solved.milliseconds ?? undefined}>
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <h1 className="font-semibold text-title" tabIndex={-1}>
          {props.name}
        </h1>
        <span className="text-ink-soft">{props.status}</span>
        <ModelChoice {...numbers} />
        <div className="not-printed ml-auto flex items-center gap-x-5">
          {wide ? folded : <Menu label="Actions">{folded}</Menu>}
          {props.filledAction}
        </div>
      </div>
      <p role="status" className="sr-only">
        {bench.notes.join(" ")}
      </p>

      <div className="grid gap-x-10 gap-y-6 pt-2 lg:grid-cols-[200px_minmax(0,1fr)] xl:grid-cols-[352px_minmax(0,1fr)]">
        <div className="min-w-0 lg:col-start-2 lg:row-start-1">
          <div className="flex flex-wrap items-end justify-between gap-x-6 border-line border-b">
            <Tabs
              name="spectra"
              tabs={names.map((label, index) => ({ id: String(index + 1), label }))}
              chosen={String(shown + 1)}
              onChoose={chooseTab}
            />
            {spectrum && <div className="py-1.5 max-md:order-last max-md:hidden">{readout}</div>}
          </div>
          <div role="tabpanel" id={`spectra-pane-${shown + 1}`} aria-labelledby={`spectra-tab-${shown + 1}`}>
            {solved.faults.length > 0 && <Faults faults={solved.faults} stale={spectrum !== undefined} />}
            {solved.defect && (
              <p role="alert" className="mt-3 border-bad border-l-2 pl-3">
                <span className="font-semibold text-bad">× The solver stopped.</span> {solved.defect}
              </p>
            )}
            {requests.length === 0 && (
              <p className="mt-6 text-ink-soft">No spectrum is asked for yet. Add one in the list of spectra.</p>
            )}
            {spectrum && spectrum.status !== "solved" && <NotSolved spectrum={spectrum} />}
            {spectrum?.status === "solved" && (
              <SpectraView
                spectrum={spectrum}
                series={series}
                arcs={arcs.onPlots}
                linked={linked}
                dragging={bench.dragging}
                readout={readout}
              />
            )}
            {!spectrum && requests.length > 0 && solved.faults.length === 0 && !solved.defect && (
              <p className="min-h-[27rem] pt-6 text-ink-soft">Solving …</p>
            )}
          </div>
          <Strip
            document={document}
            result={solved.result}
            spectrum={spectrum}
            shown={shown}
            names={names}
            series={series}
            arcs={arcs}
            linked={linked}
            waiting={bench.dragging || solved.busy}
          />
        </div>

        <aside aria-label="Device, light and model" className="min-w-0 lg:col-start-1 lg:row-start-1">
          <div className="grid gap-x-5 gap-y-4 md:max-lg:grid-cols-[128px_minmax(0,1fr)] xl:grid-cols-[128px_204px]">
            <div>
              <StillCrossSection
                document={document}
                onChange={change}
                readOnly={fixedStructure}
                picked={picked}
                onPick={setPicked}
              />
              {solved.spectra && <AtThisFlux spectra={solved.spectra} />}
            </div>
            <div className="min-w-0">{picked && <PickedNumbers {...numbers} picked={picked} held={heldValues} />}</div>
          </div>
          <div className="mt-4 grid gap-x-8 md:max-lg:grid-cols-2">
            <LightNumbers {...numbers} />
            <CircuitNumbers {...numbers} />
            {!full && <ModelNumbers {...numbers} spectrum={spectrum} />}
            <SpectraList {...numbers} readOnly={numbers.readOnly || fixedStructure} />
            <FrequencyNumbers {...numbers} />
            {props.besideBelow}
            {full && <ModelNumbers {...numbers} spectrum={undefined} />}
          </div>
        </aside>
      </div>
      <KeyboardHelp dialog={keys} />
      <PhoneSheet
        document={document}
        onChange={change}
        paths={exposed ?? usualPaths(document)}
        everywhere={exposed !== undefined}
      >
        {props.sheetActions ?? (
          <button type="button" className="action" disabled={!bench.canUndo} onClick={bench.undo}>
            Undo
          </button>
        )}
        {holding}
      </PhoneSheet>
    </div>
  );
}
