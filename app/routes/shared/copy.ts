import { ScenarioError } from "@demilune/solver";
import { data, href, redirect } from "react-router";
import { createLab, findMembership } from "~/models/labs.server";
import { createScenario } from "~/models/scenarios.server";
import { canActAs, notFound, requireUser } from "~/services/authorisation.server";
import { requireShare } from "~/services/shareAccess.server";
import type { Route } from "./+types/copy";
import { copySchema } from "./copy.schema";

/** A copy of what a guest has on the page, changes included, as a scenario in a lab of their own. */
export async function action(args: Route.ActionArgs) {
  const user = requireUser(args);
  const share = await requireShare(args.request, args.params.shareId);
  const parsed = copySchema.safeParse(Object.fromEntries(await args.request.formData()));
  if (!parsed.success) return data({ error: "This is no scenario document." }, { status: 400 });
  const { labId, document } = parsed.data;
  const membership = labId === "" ? undefined : await findMembership(labId, user.id);
  if (labId !== "" && (!membership || !canActAs(membership.role, "researcher"))) throw notFound();
  const lab = membership?.lab ?? (await createLab(`Lab of ${user.name}`, [{ userId: user.id, role: "owner" }]));
  try {
    const note = `Copied from a link of ${share.labName}, revision ${share.revisionNumber}`;
    const scenarioId = await createScenario({ labId: lab.id, userId: user.id }, document, { note, kind: "copied" });
    return redirect(href("/lab/:labId/scenarios/:scenarioId", { labId: lab.id, scenarioId }), 303);
  } catch (error) {
    if (!(error instanceof ScenarioError)) throw error;
    const [fault] = error.faults;
    return data({ error: `${fault.path} ${fault.message}; allowed: ${fault.allowed}` }, { status: 400 });
  }
}
