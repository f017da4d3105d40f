import { data, Form, href, Link, redirect } from "react-router";
import { ErrorSummary } from "~/components/fields/ErrorSummary";
import { SampleFields } from "~/components/measurements/SampleFields";
import { typedForm } from "~/lib/quantityText";
import { techniqueNames } from "~/lib/spectrumNames";
import { findSample, listMeasurementsOfSample, setSampleArchived, updateSample } from "~/models/samples.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/sample";
import { faultsOf, sampleArchiveSchema, sampleSchema } from "./sample.schema";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const sample = await findSample(lab.id, args.params.sampleId);
  if (!sample) throw notFound();
  const measurements = await listMeasurementsOfSample(lab.id, sample.id);
  return { sample, measurements, mayWrite: canActAs(role, "researcher") };
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const actor = { labId: lab.id, userId: user.id };
  const { sampleId } = args.params;
  if (!(await findSample(lab.id, sampleId))) throw notFound();
  const fields = Object.fromEntries(await args.request.formData());
  const archive = sampleArchiveSchema.safeParse(fields);
  if (archive.success) await setSampleArchived(actor, sampleId, archive.data.intent === "archive");
  else {
    const sample = sampleSchema.safeParse(fields);
    if (!sample.success) {
      return data({ faults: faultsOf(sample.error), fields: fields as Record<string, string> }, { status: 400 });
    }
    await updateSample(actor, sampleId, sample.data);
  }
  return redirect(href("/lab/:labId/samples/:sampleId", { labId: lab.id, sampleId }), 303);
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.sample.name ?? "Sample"} · Demilune` },
];

export default function SamplePage({ loaderData, actionData, params: { labId } }: Route.ComponentProps) {
  const { sample, measurements, mayWrite } = loaderData;
  const areaText = (value: number | null) => (value === null ? "" : typedForm(value));
  const kept: Record<string, string> = {
    name: sample.name,
    group: sample.group,
    contactSequence: sample.contactSequence,
    activeAreaCm2: areaText(sample.activeAreaCm2),
    litAreaCm2: areaText(sample.litAreaCm2),
    maskedAreaCm2: areaText(sample.maskedAreaCm2),
    preconditioning: sample.preconditioning,
  };
  return (
    <div className="max-w-4xl">
      <ErrorSummary errors={actionData?.faults ?? []} />
      <div className="flex flex-wrap items-baseline gap-x-5 gap-y-2">
        <h1 className="font-semibold text-title">{sample.name}</h1>
        <p className="text-ink-soft">sample{sample.archivedAt && ", in the archive"}</p>
        {mayWrite && (
          <Form method="post" className="ml-auto">
            <button type="submit" name="intent" value={sample.archivedAt ? "restore" : "archive"} className="action">
              {sample.archivedAt ? "Take out of the archive" : "Put into the archive"}
            </button>
          </Form>
        )}
      </div>
      <Form method="post" className="mt-3" key={sample.updatedAt.getTime()}>
        <fieldset disabled={!mayWrite} className="grid gap-3">
          <legend className="sr-only">What is known about the sample</legend>
          <SampleFields values={actionData?.fields ?? kept} faults={actionData?.faults ?? []} />
          {mayWrite && (
            <button type="submit" className="button w-fit">
              Save
            </button>
          )}
        </fieldset>
      </Form>
      <h2 className="mt-6 font-semibold">Measurements</h2>
      {measurements.length === 0 ? (
        <p className="mt-1 text-ink-soft">None yet.</p>
      ) : (
        <ul className="mt-1">
          {measurements.map(({ id, name, technique, archivedAt }) => (
            <li key={id} className="flex gap-3 border-line border-t py-1.5">
              <Link
                to={href("/lab/:labId/measurements/:measurementId", { labId, measurementId: id })}
                className="font-semibold text-tide hover:underline"
              >
                {name}
              </Link>
              <span className="text-ink-soft">
                {techniqueNames[technique]}
                {archivedAt && ", in the archive"}
              </span>
            </li>
          ))}
        </ul>
      )}
    </div>
  );
}
