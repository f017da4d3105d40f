import { parseWithZod } from "@conform-to/zod/v4";
import { data, href, redirect } from "react-router";
import { MaterialForm } from "~/components/materials/MaterialForm";
import { formTexts } from "~/lib/materialForm";
import { layerErrors, materialOf, materialSchema } from "~/lib/materialForm.server";
import { newLayer } from "~/lib/stackEdits";
import { createMaterial } from "~/models/materials.server";
import { requireLab } from "~/services/authorisation.server";
import type { Route } from "./+types/new";

export async function loader(args: Route.LoaderArgs) {
  await requireLab(args, "researcher");
  return null;
}

export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const form = await args.request.formData();
  const submission = parseWithZod(form, { schema: materialSchema, disableAutoCoercion: true });
  const texts = Object.fromEntries([...form].map(([name, text]) => [name, String(text)]));
  if (submission.status !== "success") return data({ texts, errors: submission.error ?? {} }, { status: 400 });
  const material = materialOf(submission.value);
  const errors = layerErrors(material.layer);
  if (Object.keys(errors).length > 0) return data({ texts, errors }, { status: 400 });
  const materialId = await createMaterial({ labId: lab.id, userId: user.id }, material);
  return redirect(href("/lab/:labId/materials/:materialId", { labId: lab.id, materialId }), 303);
}

export const meta: Route.MetaFunction = () => [{ title: "New material · Demilune" }];

const blank = formTexts({ name: "", note: "", layer: newLayer(""), sources: {} });

export default function NewMaterial({ actionData, params: { labId } }: Route.ComponentProps) {
  return (
    <>
      <h1 className="mb-3 font-semibold text-title">New material</h1>
      <MaterialForm
        texts={actionData?.texts ?? blank}
        errors={actionData?.errors ?? {}}
        submit="Put on the shelf"
        backTo={href("/lab/:labId/materials", { labId })}
      />
    </>
  );
}
