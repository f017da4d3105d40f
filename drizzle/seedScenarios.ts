/** The starter stacks as the first scenarios of a lab. */
import { starters } from "~/lib/starters";
import { countScenarios, createScenario } from "~/models/scenarios.server";

/** Gives a lab without scenarios every starter as a scenario of its own. */
export async function seedScenarios(labId: string, userId: string): Promise<void> {
  const { kept, archived } = await countScenarios(labId);
  if (kept + archived > 0) return;
  const now = Date.now();
  // A second apart, so that the list of latest scenarios begins with the first starter.
  for (const [place, { document }] of starters.entries())
    await createScenario({ labId, userId }, document, {
      note: "Starter stack: typical values",
      at: new Date(now - 1000 * place),
    });
}
