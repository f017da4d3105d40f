import { useState } from "react";
import { data, href, redirect } from "react-router";
import { ErrorSummary } from "~/components/fields/ErrorSummary";
import { ChooseFile } from "~/components/measurements/ChooseFile";
import { ImportPreview } from "~/components/measurements/ImportPreview";
import { importFormValues, readImportForm } from "~/lib/importForm";
import { previewOf } from "~/lib/textImport/preview";
import { readMeasurementText } from "~/lib/textImport/readText";
import { dropHeldFile, findHeldFile, holdFile } from "~/models/incomingFiles.server";
import {
  findMeasurement,
  findRawFileOf,
  importMeasurements,
  pointLimit,
  replaceReading,
  type StoredSpectrum,
} from "~/models/measurements.server";
import { findSample, listSamples } from "~/models/samples.server";
import { type LabAccess, notFound, requireLab } from "~/services/authorisation.server";
import { countUpload, type Upload, uploadOf } from "~/services/uploads.server";
import type { Route } from "./+types/import";
import { nameSchema, storeSchema } from "./import.schema";

/** A file that waits to be looked at, or that of a measurement which is to be read again. */
async function sourceOf({ lab, user }: LabAccess, search: URLSearchParams) {
  const again = search.get("again");
  const held = search.get("held");
  if (again !== null) {
    const measurement = await findMeasurement(lab.id, again);
    const raw = measurement && (await findRawFileOf(lab.id, measurement));
    if (!measurement || !raw) throw notFound();
    return { measurement, upload: { name: raw.file.name, bytes: raw.bytes } };
  }
  if (held === null) return null;
  const upload = await findHeldFile({ labId: lab.id, userId: user.id }, held);
  if (!upload) throw data("The file that waited here is gone; choose it again.", { status: 404 });
  return { measurement: null, upload };
}

export async function loader(args: Route.LoaderArgs) {
  const access = await requireLab(args, "researcher");
  const search = new URL(args.request.url).searchParams;
  const [source, samples] = await Promise.all([sourceOf(access, search), listSamples(access.lab.id)]);
  const typed = readImportForm(search);
  const corrected = search.get("corrected") !== null;
  const settings = source?.measurement && !corrected ? source.measurement.importRecord.settings : typed.settings;
  return {
    faults: typed.faults,
    values: source?.measurement && !corrected ? importFormValues(settings) : Object.fromEntries(search),
    file: source && { name: source.upload.name, size: source.upload.bytes.length },
    again: source?.measurement
      ? { id: source.measurement.id, name: source.measurement.name, spectrum: source.measurement.importRecord.spectrum }
      : null,
    reading: source && previewOf(readMeasurementText(source.upload.bytes, source.upload.name, settings)),
    samples: samples.map(({ id, name, group }) => ({ id, name, group })),
  };
}

const refused = (faults: { field: string; message: string }[], status = 400) => data({ faults }, { status });

export async function action(args: Route.ActionArgs) {
  const access = await requireLab(args, "researcher");
  const { lab, user } = access;
  const owner = { labId: lab.id, userId: user.id };
  const search = new URL(args.request.url).searchParams;
  const form = await args.request.formData();
  const intent = form.get("intent");
  if (intent === "cancel") {
    await dropHeldFile(owner, search.get("held") ?? "");
    return redirect(href("/lab/:labId/measurements", { labId: lab.id }), 303);
  }
  if (intent !== "look" && intent !== "store")
    return refused([{ field: "", message: "This form is not one of ours." }]);
  const sent = await uploadOf(form);
  if (sent && "refused" in sent) return refused([{ field: "file", message: sent.refused }], 413);
  if (sent) await countUpload(user.id);
  if (intent === "look") {
    if (!sent) return refused([{ field: "file", message: "Choose a file or paste columns of numbers." }]);
    const held = await holdFile(owner, sent.name, sent.bytes);
    return redirect(`${href("/lab/:labId/measurements/import", { labId: lab.id })}?held=${held}`, 303);
  }
  const source = sent ? { measurement: null, upload: sent } : await sourceOf(access, search);
  if (!source) return refused([{ field: "file", message: "There is no file to store; choose it again." }]);
  return source.measurement
    ? storeAgain(access, source.measurement.id, source.upload, form)
    : store(access, source.upload, form, search.get("held"));
}

/** Reads the file with the form's corrections; the spectra that can be stored, or what keeps them from it. */
function readForStoring(upload: Upload, form: FormData) {
  const { settings, faults } = readImportForm(form);
  const reading = readMeasurementText(upload.bytes, upload.name, settings);
  if (reading.status === "refused") return { faults: [{ field: "file", message: reading.message }] };
  if (reading.problem) faults.push({ field: "columns", message: reading.problem });
  for (const need of reading.needs) faults.push({ field: need, message: `The unit of the numbers needs this value.` });
  return faults.length > 0 ? { faults } : { settings, spectra: reading.spectra };
}

async function store({ lab, user }: LabAccess, upload: Upload, form: FormData, held: string | null) {
  const labId = lab.id;
  const read = readForStoring(upload, form);
  const about = storeSchema.safeParse(Object.fromEntries([...form].filter(([, value]) => typeof value === "string")));
  const faults = [...(read.faults ?? [])];
  for (const issue of about.error?.issues ?? [])
    faults.push({ field: String(issue.path[0]), message: `${String(issue.path[0])}: ${issue.message}` });
  const stored: StoredSpectrum[] = [];
  for (const [index, spectrum] of (read.spectra ?? []).entries()) {
    if (form.get(`left-out-${index}`) !== null) continue;
    const name = nameSchema.safeParse(form.get(`name-${index}`));
    if (!name.success)
      faults.push({
        field: `name-${index}`,
        message: `Name of spectrum ${index + 1}: ${name.error.issues[0].message}`,
      });
    if (spectrum.frequencyHz.length > pointLimit) {
      faults.push({
        field: `name-${index}`,
        message: `Spectrum ${index + 1} has ${spectrum.frequencyHz.length} points; allowed: up to ${pointLimit}.`,
      });
    }
    stored.push({ index, name: name.data ?? "", spectrum });
  }
  if (read.spectra && stored.length === 0)
    faults.push({ field: "name-0", message: "All spectra are left out; nothing would be stored." });
  if (!about.success || !read.spectra || faults.length > 0) return refused(faults);
  const { sampleId, sampleName, ...provenance } = about.data;
  if (sampleId !== "" && !(await findSample(labId, sampleId))) throw notFound();
  const sample = sampleId !== "" ? { id: sampleId } : sampleName !== "" ? { name: sampleName } : null;
  const owner = { labId, userId: user.id };
  const ids = await importMeasurements(owner, upload, stored, { settings: read.settings, sample, ...provenance });
  if (held) await dropHeldFile(owner, held);
  return ids.length === 1
    ? redirect(href("/lab/:labId/measurements/:measurementId", { labId, measurementId: ids[0] }), 303)
    : redirect(href("/lab/:labId/measurements", { labId }), 303);
}

async function storeAgain({ lab, user }: LabAccess, measurementId: string, upload: Upload, form: FormData) {
  const read = readForStoring(upload, form);
  if (!read.spectra) return refused(read.faults);
  const index = Number(form.get("spectrum"));
  const spectrum = read.spectra[index];
  if (!spectrum)
    return refused([
      { field: "spectrum", message: `The file has ${read.spectra.length} spectra; choose one of them.` },
    ]);
  if (spectrum.frequencyHz.length > pointLimit) {
    return refused([
      {
        field: "spectrum",
        message: `This spectrum has ${spectrum.frequencyHz.length} points; allowed: up to ${pointLimit}.`,
      },
    ]);
  }
  await replaceReading({ labId: lab.id, userId: user.id }, measurementId, { index, spectrum }, read.settings);
  return redirect(href("/lab/:labId/measurements/:measurementId", { labId: lab.id, measurementId }), 303);
}

export const meta: Route.MetaFunction = () => [{ title: "Import a measurement · Demilune" }];

export default function Import({ loaderData, actionData, params }: Route.ComponentProps) {
  const [local, setLocal] = useState<File | null>(null);
  const { file, again, reading, values, samples } = loaderData;
  const faults = [...(actionData?.faults ?? []), ...loaderData.faults];
  const summary = <ErrorSummary title="Nothing was stored" errors={faults} />;
  if (!local && !file) {
    return (
      <>
        {summary}
        <ChooseFile labId={params.labId} onFile={setLocal} />
      </>
    );
  }
  return (
    <>
      {summary}
      <ImportPreview
        key={local ? `${local.name} ${local.size} ${local.lastModified}` : "held"}
        labId={params.labId}
        local={local}
        file={local ?? file!}
        kept={reading}
        values={local ? {} : values}
        again={local ? null : again}
        samples={samples}
        faults={faults}
        onOther={() => setLocal(null)}
      />
    </>
  );
}
