import { data, redirect } from "react-router";
import { z } from "zod";
import { attachMeasurement, detachMeasurement } from "~/models/overlays.server";
import { findScenario } from "~/models/scenarios.server";
import { notFound, requireLab } from "~/services/authorisation.server";
import { safeRedirect } from "~/services/redirects.server";
import type { Route } from "./+types/overlays";

const change = z.object({
  intent: z.enum(["attach", "detach"]),
  measurementId: z.string().max(26),
  to: z.string().max(2000).default(""),
});

/** Lays a measurement over a scenario or takes it off. */
export async function action(args: Route.ActionArgs) {
  const { lab, user } = await requireLab(args, "researcher");
  const { scenarioId } = args.params;
  if (!(await findScenario(lab.id, scenarioId))) throw notFound();
  const parsed = change.safeParse(Object.fromEntries(await args.request.formData()));
  if (!parsed.success) return data({ error: "This form is not one of ours." }, { status: 400 });
  const { intent, measurementId, to } = parsed.data;
  const act = intent === "attach" ? attachMeasurement : detachMeasurement;
  if (!(await act({ labId: lab.id, userId: user.id }, scenarioId, measurementId))) throw notFound();
  return redirect(safeRedirect(to, `/lab/${lab.id}/scenarios/${scenarioId}`), 303);
}
