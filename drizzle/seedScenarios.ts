/** The starter stacks as the first scenarios of a lab, and the starter shelf of materials. */
import { readFileSync } from "node:fs";
import { join } from "node:path";
import { starters } from "~/lib/starters";
import { countMaterials, createMaterial, type MaterialContent } from "~/models/materials.server";
import { countScenarios, createScenario } from "~/models/scenarios.server";
import { projectFolder } from "~/services/settings.server";

/** Materials with a source for each value; the file is checked by a test. */
export const starterShelf = (): MaterialContent[] =>
  JSON.parse(readFileSync(join(projectFolder, "drizzle/materials.json"), "utf8")) as MaterialContent[];

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

/** Gives a lab with an empty shelf the starter materials. */
export async function seedMaterials(labId: string, userId: string): Promise<void> {
  const { kept, archived } = await countMaterials(labId);
  if (kept + archived > 0) return;
  for (const material of starterShelf()) await createMaterial({ labId, userId }, material);
}
