import { unitOf } from "@demilune/solver";
import { data, Form, href, Link, redirect } from "react-router";
import { ErrorSummary } from "~/components/fields/ErrorSummary";
import { MeasuredPlots } from "~/components/measurements/MeasuredPlots";
import { ProvenanceFields } from "~/components/measurements/ProvenanceFields";
import { Moment } from "~/components/ui/moment";
import { techniqueNames } from "~/lib/spectrumNames";
import {
  findMeasurement,
  findPoints,
  findRawFileOf,
  setMeasurementArchived,
  updateProvenance,
} from "~/models/measurements.server";
import { listScenariosUnder } from "~/models/overlays.server";
import { findSample, listSamples } from "~/models/samples.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/measurement";
import { archiveSchema, changeSchema } from "./measurement.schema";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const measurement = await findMeasurement(lab.id, args.params.measurementId);
  if (!measurement) throw notFound();
  const [points, samples, scenarios, raw] = await Promise.all([
    findPoints(lab.id, [measurement.id]),
    listSamples(lab.id),
    listScenariosUnder(lab.id, measurement.id),
    findRawFileOf(lab.id, measurement),
  ]);
  const own = points.get(measurement.id);
  if (!own) throw notFound();
  return {
    measurement,
    points: own,
    samples: samples.map(({ id, name, group }) => ({ id, name, group })),
    scenarios,
    file: raw?.file ?? null,
    mayWrite: canActAs(role, "researcher"),
  };
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const actor = { labId: lab.id, userId: user.id };
  const { measurementId } = args.params;
  if (!(await findMeasurement(lab.id, measurementId))) throw notFound();
  const fields = Object.fromEntries(await args.request.formData());
  const archive = archiveSchema.safeParse(fields);
  if (archive.success) {
    await setMeasurementArchived(actor, measurementId, archive.data.intent === "archive");
    return redirect(href("/lab/:labId/measurements/:measurementId", { labId: lab.id, measurementId }), 303);
  }
  const change = changeSchema.safeParse(fields);
  if (!change.success) {
    const faults = change.error.issues.map(({ path, message }) => ({ field: String(path[0] ?? ""), message }));
    return data({ faults, fields: fields as Record<string, string> }, { status: 400 });
  }
  const { intent: _, bias, biasVoltageV, sampleId, ...rest } = change.data;
  if (sampleId !== "" && !(await findSample(lab.id, sampleId))) throw notFound();
  await updateProvenance(actor, measurementId, {
    ...rest,
    sampleId: sampleId || null,
    bias: bias === "voltage" ? { voltageV: biasVoltageV ?? 0 } : bias,
  });
  return redirect(href("/lab/:labId/measurements/:measurementId", { labId: lab.id, measurementId }), 303);
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.measurement.name ?? "Measurement"} · Demilune` },
];

export default function MeasurementPage({ loaderData, actionData, params: { labId } }: Route.ComponentProps) {
  const { measurement, points, samples, scenarios, file, mayWrite } = loaderData;
  const { importRecord } = measurement;
  const faults = actionData?.faults ?? [];
  const technique = techniqueNames[measurement.technique];
  return (
    <>
      <ErrorSummary errors={faults} />
      <div className="flex flex-wrap items-baseline gap-x-4 gap-y-2">
        <h1 className="font-semibold text-title">{measurement.name}</h1>
        <p className="text-ink-soft">
          {technique}, {measurement.pointCount} points
          {measurement.archivedAt && ", in the archive"}
        </p>
        {mayWrite && (
          <div className="ml-auto flex flex-wrap items-center gap-5">
            <Form method="post">
              <button
                type="submit"
                name="intent"
                value={measurement.archivedAt ? "restore" : "archive"}
                className="action"
              >
                {measurement.archivedAt ? "Take out of the archive" : "Put into the archive"}
              </button>
            </Form>
            {file && (
              <Link
                to={`${href("/lab/:labId/measurements/import", { labId })}?again=${measurement.id}`}
                className="action py-0.5"
              >
                Import again, differently
              </Link>
            )}
          </div>
        )}
      </div>
      {measurement.invented && (
        <p className="mt-1 text-wary">
          ! Invented data: computed for the demo from another model, with noise and a drift. No sample was measured.
        </p>
      )}
      {importRecord.relative && (
        <p className="mt-1 text-ink-soft">The file gives no absolute scale: only the shape can be compared.</p>
      )}
      <div className="mt-3 grid grid-cols-[minmax(0,1fr)] gap-x-14 gap-y-6 lg:grid-cols-[minmax(0,720fr)_minmax(0,616fr)]">
        <section aria-label="Plots" className="min-w-0">
          <MeasuredPlots
            technique={measurement.technique}
            unit={importRecord.relative ? "1" : unitOf(measurement.technique)}
            spectra={[{ id: measurement.id, label: measurement.name, ...points }]}
            initialWidth={720}
          />
        </section>
        <div className="grid min-w-0 content-start gap-6">
          <section aria-labelledby="over-heading">
            <h2 id="over-heading" className="font-semibold">
              Laid over
            </h2>
            {scenarios.length === 0 ? (
              <p className="mt-1 text-ink-soft">
                No scenario yet. Open one on the bench and attach this measurement there.
              </p>
            ) : (
              <ul className="mt-1">
                {scenarios.map(({ id, name }) => (
                  <li key={id}>
                    <Link to={`/lab/${labId}/scenarios/${id}`} className="link inline-block min-h-6">
                      {name}
                    </Link>
                  </li>
                ))}
              </ul>
            )}
          </section>
          <section aria-labelledby="provenance-heading">
            <h2 id="provenance-heading" className="font-semibold">
              Provenance
            </h2>
            <ProvenanceFields
              key={measurement.updatedAt.getTime()}
              measurement={measurement}
              samples={samples}
              typed={actionData?.fields}
              faults={faults}
              readOnly={!mayWrite}
            />
          </section>
          <section aria-labelledby="raw-heading">
            <h2 id="raw-heading" className="font-semibold">
              Raw file
            </h2>
            {file ? (
              <dl className="mt-1 grid grid-cols-[auto_minmax(0,1fr)] gap-x-4 gap-y-1">
                <dt className="text-ink-soft">File</dt>
                <dd>
                  <a
                    href={href("/lab/:labId/measurements/:measurementId/raw", { labId, measurementId: measurement.id })}
                    className="link"
                  >
                    {file.name}
                  </a>
                  , {file.size} bytes
                </dd>
                <dt className="text-ink-soft">SHA-256</dt>
                <dd className="font-mono text-small [overflow-wrap:anywhere]">{file.sha256}</dd>
                <dt className="text-ink-soft">Imported</dt>
                <dd>
                  <Moment at={measurement.createdAt} />
                </dd>
              </dl>
            ) : (
              <p className="mt-1 text-ink-soft">None is kept.</p>
            )}
          </section>
        </div>
      </div>
    </>
  );
}
