import { parseWithZod } from "@conform-to/zod/v4";
import { data, Form, href, Link, redirect } from "react-router";
import { MaterialForm } from "~/components/materials/MaterialForm";
import { Moment } from "~/components/ui/moment";
import { RichText } from "~/components/ui/RichText";
import { ScrollRegion } from "~/components/ui/scrollRegion";
import { countSourced, formTexts, noSource, valuesOf } from "~/lib/materialForm";
import { layerErrors, materialOf, materialSchema } from "~/lib/materialForm.server";
import { formatNumber, formatUnit } from "~/lib/numberFormat";
import { scenarioPath } from "~/lib/scenarioWords";
import { newScenario } from "~/lib/stackEdits";
import { quantityOf } from "~/lib/stackFields";
import { findMaterial, updateMaterial } from "~/models/materials.server";
import { createScenario } from "~/models/scenarios.server";
import { canActAs, notFound, requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/material";

export async function loader(args: Route.LoaderArgs) {
  const { lab, role } = await requireLab(args);
  const material = await findMaterial(lab.id, args.params.materialId);
  if (!material) throw notFound();
  const canEdit = canActAs(role, "researcher");
  return { material, canEdit, editing: canEdit && new URL(args.request.url).searchParams.has("edit") };
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const actor = { labId: lab.id, userId: user.id };
  const { materialId } = args.params;
  const material = await findMaterial(lab.id, materialId);
  if (!material) throw notFound();
  const form = await args.request.formData();
  if (form.get("intent") === "begin") {
    const start = newScenario(`${material.name} between ohmic contacts`);
    const document = { ...start, stack: { layers: [material.layer] } };
    const id = await createScenario(actor, document, { note: `From the shelf: ${material.name}` });
    return redirect(`${scenarioPath(lab.id, id)}/stack`, 303);
  }
  const submission = parseWithZod(form, { schema: materialSchema, disableAutoCoercion: true });
  const texts = Object.fromEntries([...form].map(([name, text]) => [name, String(text)]));
  if (submission.status !== "success") return data({ texts, errors: submission.error ?? {} }, { status: 400 });
  const changed = materialOf(submission.value);
  const errors = layerErrors(changed.layer);
  if (Object.keys(errors).length > 0) return data({ texts, errors }, { status: 400 });
  await updateMaterial(actor, materialId, changed);
  return redirect(href("/lab/:labId/materials/:materialId", { labId: lab.id, materialId }), 303);
}

export const meta: Route.MetaFunction = ({ loaderData }) => [
  { title: `${loaderData?.material.name ?? "Material"} · Demilune` },
];

export default function MaterialPage({ loaderData, actionData, params: { labId, materialId } }: Route.ComponentProps) {
  const { material, canEdit, editing } = loaderData;
  const here = href("/lab/:labId/materials/:materialId", { labId, materialId });
  if (editing || actionData)
    return (
      <>
        <h1 className="mb-3 font-semibold text-title">{material.name}</h1>
        <MaterialForm
          texts={actionData?.texts ?? formTexts(material)}
          errors={actionData?.errors ?? {}}
          submit="Save"
          backTo={here}
        />
      </>
    );
  const { sourced, all } = countSourced(material.sources);
  return (
    <div className="max-w-4xl">
      <div className="flex flex-wrap items-center gap-x-5 gap-y-1">
        <h1 className="font-semibold text-title">{material.name}</h1>
        <Link to={href("/lab/:labId/materials", { labId })} className="action ml-auto">
          Shelf
        </Link>
        {canEdit && (
          <>
            <Link to="?edit" className="action">
              Edit
            </Link>
            <Form method="post">
              <button type="submit" name="intent" value="begin" className="button">
                Begin a scenario with it
              </button>
            </Form>
          </>
        )}
      </div>
      {material.note && <p className="mt-1">{material.note}</p>}
      <p className="mt-1 text-ink-soft">
        {sourced} of {all} values name a source. Changed <Moment at={material.updatedAt} />
        {canEdit && ". In a stack, choose “Add from the shelf” under its cross-section."}
      </p>
      <ScrollRegion label="Values and sources" className="mt-3">
        <table className="table">
          <caption className="sr-only">Values and their sources</caption>
          <thead>
            <tr>
              <th scope="col">quantity</th>
              <th scope="col" className="text-right!">
                value
              </th>
              <th scope="col">unit</th>
              <th scope="col">source</th>
            </tr>
          </thead>
          <tbody>
            {valuesOf(material).map(({ field, value, source }) => (
              <tr key={field.path.join(".")}>
                <th scope="row" className="border-line border-t py-1.5! align-top! text-base! text-ink!">
                  {quantityOf(field).label}
                </th>
                <td className="text-right tabular-nums">
                  <RichText text={formatNumber(value)} />
                </td>
                <td className="text-ink-soft">
                  <RichText text={formatUnit(quantityOf(field).unit) || "1"} />
                </td>
                <td className={`max-w-md break-words ${source === noSource ? "text-ink-soft" : ""}`}>{source}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollRegion>
    </div>
  );
}
