/** The demo's content: an invented lab and a second one beside it. Running it again changes nothing. */
import { demoLabName } from "~/models/demo.server";
import { createLab, findLabByName } from "~/models/labs.server";
import { ensureUser } from "~/models/users.server";

/** Makes what the demo lacks. */
export async function seedDemo(): Promise<void> {
  if (await findLabByName(demoLabName)) return;
  const owner = await ensureUser("astrid@halden.example", "Astrid Vollan");
  const researcher = await ensureUser("milo@halden.example", "Milo Terrane");
  const viewer = await ensureUser("sunniva@halden.example", "Sunniva Brekk");
  await createLab(
    demoLabName,
    [
      { userId: owner.id, role: "owner" },
      { userId: researcher.id, role: "researcher" },
      { userId: viewer.id, role: "viewer" },
    ],
    { invented: true },
  );
  const neighbour = await ensureUser("orla@kestrel.example", "Orla Penhale");
  await createLab("Kestrel photoelectrode lab", [{ userId: neighbour.id, role: "owner" }], { invented: true });
}
