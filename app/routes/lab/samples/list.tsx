import { data, Form, href, Link, redirect } from "react-router";
import { ErrorSummary } from "~/components/fields/ErrorSummary";
import { SampleFields } from "~/components/measurements/SampleFields";
import { formatNumber } from "~/lib/numberFormat";
import { countArchivedSamples, createSample, listSamples } from "~/models/samples.server";
import { canActAs, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/list";
import { faultsOf, sampleSchema } from "./sample.schema";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const archived = new URL(args.request.url).searchParams.get("archive") === "1";
  const [samples, inArchive] = await Promise.all([listSamples(lab.id, archived), countArchivedSamples(lab.id)]);
  return { samples, archived, inArchive, mayWrite: canActAs(role, "researcher") };
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const fields = Object.fromEntries(await args.request.formData());
  const sample = sampleSchema.safeParse(fields);
  if (!sample.success) {
    return data({ faults: faultsOf(sample.error), fields: fields as Record<string, string> }, { status: 400 });
  }
  const sampleId = await createSample({ labId: lab.id, userId: user.id }, sample.data);
  return redirect(href("/lab/:labId/samples/:sampleId", { labId: lab.id, sampleId }), 303);
}

export const meta: Route.MetaFunction = () => [{ title: "Samples · Demilune" }];

export default function Samples({ loaderData, actionData, params: { labId } }: Route.ComponentProps) {
  const { samples, archived, inArchive, mayWrite } = loaderData;
  return (
    <>
      <ErrorSummary errors={actionData?.faults ?? []} />
      <div className="flex flex-wrap items-baseline gap-x-5 gap-y-2">
        <h1 className="font-semibold text-title">{archived ? "Samples in the archive" : "Samples"}</h1>
        <div className="ml-auto flex gap-5">
          <Link to={href("/lab/:labId/measurements", { labId })} className="action py-0.5">
            Measurements
          </Link>
          {(inArchive > 0 || archived) && (
            <Link to={archived ? "?" : "?archive=1"} className="action py-0.5">
              {archived ? "Back to the kept ones" : `Archive (${inArchive})`}
            </Link>
          )}
        </div>
      </div>
      {samples.length === 0 ? (
        <p className="mt-3 max-w-2xl">
          {archived
            ? "The archive is empty."
            : "No sample yet. A sample is the physical device that was measured; several measurements belong to one."}
        </p>
      ) : (
        <div className="mt-3 overflow-x-auto">
          <table className="table">
            <thead>
              <tr>
                <th scope="col">Group</th>
                <th scope="col">Name</th>
                <th scope="col">Contact sequence</th>
                <th scope="col" className="!text-right">
                  Active area / cm²
                </th>
                <th scope="col" className="!text-right">
                  Measurements
                </th>
              </tr>
            </thead>
            <tbody>
              {samples.map((sample) => (
                <tr key={sample.id}>
                  <td>{sample.group || "–"}</td>
                  <td className="font-semibold">
                    <Link
                      to={href("/lab/:labId/samples/:sampleId", { labId, sampleId: sample.id })}
                      className="text-tide hover:underline"
                    >
                      {sample.name}
                    </Link>
                  </td>
                  <td>{sample.contactSequence || "–"}</td>
                  <td className="!text-right">
                    {sample.activeAreaCm2 === null ? "–" : formatNumber(sample.activeAreaCm2)}
                  </td>
                  <td className="!text-right">{sample.measured}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
      {mayWrite && !archived && (
        <section aria-labelledby="new-heading" className="mt-8 max-w-4xl">
          <h2 id="new-heading" className="font-semibold">
            New sample
          </h2>
          <Form method="post" className="mt-2 grid gap-3">
            <SampleFields values={actionData?.fields ?? {}} faults={actionData?.faults ?? []} />
            <button type="submit" className="button w-fit">
              Add the sample
            </button>
          </Form>
        </section>
      )}
    </>
  );
}
