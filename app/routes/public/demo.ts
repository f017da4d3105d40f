import { href } from "react-router";
import { z } from "zod";
import { starters } from "~/lib/starters";
import { findDemoLab, findScenarioByName } from "~/models/demo.server";
import { findMemberWithRole } from "~/models/labs.server";
import { notFound } from "~/services/authorisation.server";
import { signInAndRedirect } from "~/services/session.server";
import { settings } from "~/services/settings.server";
import type { Route } from "./+types/demo";

const roleSchema = z.enum(["owner", "researcher", "viewer"]);

/** The demo's entrance: one click, no code, straight to the bench. Does not exist where the demo is off. */
export async function action({ request, context }: Route.ActionArgs) {
  const role = roleSchema.safeParse((await request.formData()).get("role"));
  const lab = settings().demo ? await findDemoLab() : undefined;
  const userId = lab && role.success ? await findMemberWithRole(lab.id, role.data) : undefined;
  if (!lab || !userId) throw notFound();
  const scenarioId = await findScenarioByName(lab.id, starters[0].document.name ?? "");
  const place = scenarioId
    ? href("/lab/:labId/scenarios/:scenarioId", { labId: lab.id, scenarioId })
    : href("/lab/:labId/scenarios", { labId: lab.id });
  return signInAndRedirect({ request, context }, userId, place);
}
