import { type FormEvent, useEffect, useMemo, useRef, useState } from "react";
import { Form, href, Link, useNavigation, useSubmit } from "react-router";
import { type FormFault, readImportForm } from "~/lib/importForm";
import { techniqueNames } from "~/lib/spectrumNames";
import type { PreviewReading } from "~/lib/textImport/preview";
import { useTextImport } from "~/workers/useTextImport";
import { FileTable } from "./FileTable";
import { MeasuredPlots } from "./MeasuredPlots";
import { SpectraToStore, StoreDetails } from "./StoreDetails";
import { Understood } from "./Understood";

interface ImportPreviewProps {
  labId: string;
  /** The file where the browser has it itself; null where it waits on the server. */
  local: File | null;
  file: { name: string; size: number };
  /** The server's reading of a file that waits there. */
  kept: PreviewReading | null;
  values: Record<string, string>;
  /** A stored measurement that is read again. */
  again: { id: string; name: string; spectrum: number } | null;
  samples: readonly { id: string; name: string; group: string }[];
  faults: readonly FormFault[];
  onOther: () => void;
}

const sizeWords = (size: number) => (size < 1e6 ? `${(size / 1e3).toFixed(1)} kB` : `${(size / 1e6).toFixed(1)} MB`);

/** A moment without typing before a file is read again, ms. */
const pause = 250;

/** What was read from a file and why, each thing correctable, before anything is stored. */
export function ImportPreview(props: ImportPreviewProps) {
  const { labId, local, file, kept, values, again, samples } = props;
  const form = useRef<HTMLFormElement>(null);
  const submit = useSubmit();
  const sending = useNavigation().state !== "idle";
  const [typed, setTyped] = useState(() => readImportForm(new URLSearchParams(values)));
  const [ready, setReady] = useState(false);
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined);
  const own = useTextImport(local, typed.settings);
  const reading = local ? own.reading : kept;

  useEffect(() => {
    setReady(true);
    return () => clearTimeout(timer.current);
  }, []);

  const correct = () => {
    if (!form.current) return;
    const fields = new FormData(form.current);
    if (local) return setTyped(readImportForm(fields));
    const address = new URLSearchParams(window.location.search);
    const params = new URLSearchParams({ corrected: "1" });
    for (const name of ["held", "again"]) {
      const value = address.get(name);
      if (value) params.set(name, value);
    }
    for (const [name, value] of fields) {
      if (typeof value === "string" && value !== "" && isCorrection(name)) params.set(name, value);
    }
    submit(params, { method: "get", replace: true, preventScrollReset: true });
  };

  const onChange = (event: FormEvent<HTMLFormElement>) => {
    const { target } = event;
    if (!(target instanceof HTMLSelectElement || target instanceof HTMLInputElement) || !isCorrection(target.name))
      return;
    clearTimeout(timer.current);
    if (target instanceof HTMLSelectElement) correct();
    else timer.current = setTimeout(correct, pause);
  };

  const onSubmit = (event: FormEvent<HTMLFormElement>) => {
    if (!local || !form.current) return;
    event.preventDefault();
    const fields = new FormData(form.current);
    fields.set("intent", "store");
    fields.set("file", local, local.name);
    submit(fields, { method: "post", encType: "multipart/form-data" });
  };

  const faults = useMemo(() => [...props.faults, ...typed.faults], [props.faults, typed.faults]);
  const read = reading?.status === "read" ? reading : null;
  const baseName = again?.name ?? file.name.replace(/\.[^.]{1,8}$/, "");
  const first = read?.spectra[0];
  const shown =
    read?.spectra.filter(({ technique, unit }) => technique === first?.technique && unit === first.unit) ?? [];
  const storable = read !== null && read.problem === null && read.needs.length === 0;

  return (
    <Form ref={form} method="post" encType="multipart/form-data" onChange={onChange} onSubmit={onSubmit}>
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-2">
        <h1 className="font-semibold text-title">{again ? "Import again, differently" : "Import preview"}</h1>
        <p className="text-ink-soft" role="status">
          {file.name}, {sizeWords(file.size)}, {again ? "nothing is changed yet" : "nothing is stored yet"}
          {own.busy && ", reading…"}
        </p>
        <div className="ml-auto flex flex-wrap items-center gap-5">
          {again ? (
            <Link
              to={href("/lab/:labId/measurements/:measurementId", { labId, measurementId: again.id })}
              className="action py-0.5"
            >
              Cancel
            </Link>
          ) : local ? (
            <>
              <Link to={href("/lab/:labId/measurements", { labId })} className="action py-0.5">
                Cancel
              </Link>
              <button type="button" className="action" onClick={props.onOther}>
                Choose another file
              </button>
            </>
          ) : (
            <button type="submit" name="intent" value="cancel" formNoValidate className="action">
              Cancel
            </button>
          )}
          <button
            type="submit"
            name="intent"
            value="store"
            className="button"
            disabled={ready && (!storable || sending)}
          >
            {again
              ? "Store this reading"
              : (read?.spectra.length ?? 0) > 1
                ? "Store measurements"
                : "Store measurement"}
          </button>
        </div>
      </div>
      {own.defect && (
        <p role="alert" className="mt-3 text-bad">
          {own.defect}
        </p>
      )}
      {reading?.status === "refused" && (
        <div role="alert" className="mt-4 max-w-2xl border-bad border-l-2 pl-3">
          <p className="font-semibold text-bad">▲ This file cannot be read.</p>
          <p>{reading.message}</p>
        </div>
      )}
      {read && (
        <div className="mt-3 grid grid-cols-[minmax(0,1fr)] gap-x-14 gap-y-6 lg:grid-cols-[minmax(0,720fr)_minmax(0,616fr)]">
          <div className="grid min-w-0 grid-cols-[minmax(0,1fr)] content-start gap-5">
            <FileTable reading={read} values={values} />
            <Understood findings={read.findings} values={values} faults={faults} needs={read.needs} />
            {!local && (
              <button
                type="submit"
                formMethod="get"
                formEncType="application/x-www-form-urlencoded"
                className="button-quiet w-fit"
              >
                Read again with these corrections
              </button>
            )}
            {!local && <KeptFields values={values} again={again} />}
            <Verdicts reading={read} />
          </div>
          <div className="grid min-w-0 grid-cols-[minmax(0,1fr)] content-start gap-5">
            {first && (
              <section aria-labelledby="look-heading">
                <h2 id="look-heading" className="font-semibold">
                  First look: {techniqueNames[first.technique]},{" "}
                  {shown.length === 1 ? `${first.pointCount} points` : `${shown.length} spectra`}
                </h2>
                <MeasuredPlots
                  technique={first.technique}
                  unit={first.unit}
                  spectra={shown.map((spectrum, index) => ({
                    ...spectrum,
                    id: String(index),
                    label: spectrum.label || "measured",
                  }))}
                />
              </section>
            )}
            {first && !again && (
              <section aria-labelledby="store-heading" className="grid gap-4">
                <h2 id="store-heading" className="font-semibold">
                  To be stored
                </h2>
                <SpectraToStore spectra={read.spectra} baseName={baseName} values={values} faults={faults} />
                <StoreDetails samples={samples} sampleName={read.sampleName} values={values} faults={faults} />
              </section>
            )}
            {first && again && (
              <div>
                <label htmlFor="spectrum" className="font-semibold">
                  Spectrum of the file
                </label>
                <select
                  id="spectrum"
                  name="spectrum"
                  defaultValue={values.spectrum ?? again.spectrum}
                  className="field mt-1"
                >
                  {read.spectra.map(({ label }, index) => (
                    // biome-ignore lint/suspicious/noArrayIndexKey: spectra are told apart by their place in the file
                    <option key={index} value={index}>
                      {label || `spectrum ${index + 1}`}
                    </option>
                  ))}
                </select>
              </div>
            )}
            <p className="text-ink-soft text-small">
              The raw file is kept and can be downloaded; the import can be done again differently.
            </p>
          </div>
        </div>
      )}
    </Form>
  );
}

/** Whether a field corrects the reading, as against saying something about what is stored. */
const isCorrection = (name: string) =>
  /^(?:role|unit|flux)-\d+$/.test(name) ||
  [
    "encoding",
    "delimiter",
    "decimalMark",
    "imaginarySign",
    "polarity",
    "restart",
    "technique",
    "bias",
    "biasVoltageV",
    "fluxPerCm2S",
    "areaCm2",
    "modulatedFluxPerCm2S",
    "wavelengthNm",
    "temperatureK",
  ].includes(name);

/** Which file is meant, for the form that reads it again without scripts. */
function KeptFields({ values, again }: { values: Record<string, string>; again: { id: string } | null }) {
  return (
    <>
      <input type="hidden" name="corrected" value="1" />
      {again ? (
        <input type="hidden" name="again" value={again.id} />
      ) : (
        <input type="hidden" name="held" value={values.held ?? ""} />
      )}
    </>
  );
}

/** What is in the way, what should be confirmed, what was passed over. */
function Verdicts({ reading }: { reading: Extract<PreviewReading, { status: "read" }> }) {
  return (
    <div className="grid gap-3" aria-live="polite">
      {reading.problem && (
        <p className="border-bad border-l-2 pl-3">
          <span className="font-semibold text-bad">▲ Not a spectrum yet.</span> {reading.problem}
        </p>
      )}
      {reading.questions.map((question) => (
        <p key={question} className="border-wary border-l-2 pl-3">
          <span className="font-semibold text-wary">? To confirm.</span> {question}
        </p>
      ))}
      {reading.warnings.map((warning) => (
        <p key={warning} className="border-wary border-l-2 pl-3">
          <span className="font-semibold text-wary">! Passed over.</span> {warning}
        </p>
      ))}
    </div>
  );
}
