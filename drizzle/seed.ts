/** The demo's content: an invented lab and a second one beside it. Running it again changes nothing. */
import { starters } from "~/lib/starters";
import { demoLabName, findScenarioByName } from "~/models/demo.server";
import { createLab, findLabByName, findMemberWithRole, type Role } from "~/models/labs.server";
import { findRevision } from "~/models/scenarios.server";
import { ensureUser } from "~/models/users.server";
import { computeAndKeep } from "~/services/predictions.server";
import { seedMeasurements } from "./seedMeasurements";
import { seedMaterials, seedScenarios } from "./seedScenarios";

const invented: { lab: string; people: { email: string; name: string; role: Role }[] }[] = [
  {
    lab: demoLabName,
    people: [
      { email: "astrid@halden.example", name: "Astrid Vollan", role: "owner" },
      { email: "milo@halden.example", name: "Milo Terrane", role: "researcher" },
      { email: "sunniva@halden.example", name: "Sunniva Brekk", role: "viewer" },
    ],
  },
  {
    lab: "Kestrel photoelectrode lab",
    people: [{ email: "orla@kestrel.example", name: "Orla Penhale", role: "owner" }],
  },
];

/** Makes what the demo lacks. */
export async function seedDemo(): Promise<void> {
  for (const { lab: name, people } of invented) {
    const members = await Promise.all(
      people.map(async ({ email, name, role }) => ({ userId: (await ensureUser(email, name)).id, role })),
    );
    const lab = (await findLabByName(name)) ?? (await createLab(name, members, { invented: true }));
    await seedScenarios(lab.id, members[0].userId);
    await seedMaterials(lab.id, members[0].userId);
    if (name === demoLabName) await seedMeasurements({ labId: lab.id, userId: members[0].userId });
  }
}

/** Computes and keeps the run of the scenario that a newcomer meets first, so that its curves come with the page. */
export async function keepFirstRun(signal: AbortSignal): Promise<void> {
  const lab = await findLabByName(demoLabName);
  const userId = lab && (await findMemberWithRole(lab.id, "owner"));
  const scenarioId = lab && (await findScenarioByName(lab.id, starters[0].document.name ?? ""));
  if (!lab || !userId || !scenarioId) return;
  const revision = await findRevision(lab.id, scenarioId);
  if (revision) await computeAndKeep({ labId: lab.id, userId }, revision.document, signal);
}
