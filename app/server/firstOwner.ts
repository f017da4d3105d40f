/** Command: makes the first owner and their lab, for a start without the demo. */
import { normaliseEmail } from "~/lib/emailAddress";
import { closeDatabase, prepareDatabase } from "~/models/database.server";
import { createLab, findLabByName } from "~/models/labs.server";
import { ensureUser } from "~/models/users.server";
import { SettingsError, settings } from "~/services/settings.server";

const usage = "Usage: npm run first-owner -- EMAIL LAB [NAME]";

async function makeFirstOwner([typedEmail, labName, name]: string[]): Promise<string> {
  const email = normaliseEmail(typedEmail);
  if (!email || !labName?.trim())
    throw new SettingsError(
      `${email ? "The lab needs a name." : `“${typedEmail ?? ""}” is not an e-mail address.`}\n${usage}`,
    );
  settings();
  await prepareDatabase();
  if (await findLabByName(labName.trim()))
    throw new SettingsError(`There is a lab called “${labName.trim()}” already.`);
  const user = await ensureUser(email, name?.trim() || email.split("@", 1)[0]);
  await createLab(labName.trim(), [{ userId: user.id, role: "owner" }]);
  await closeDatabase();
  return `${email} owns the lab “${labName.trim()}” and can sign in at ${settings().origin}/sign-in`;
}

try {
  process.stdout.write(`${await makeFirstOwner(process.argv.slice(2))}\n`);
} catch (error) {
  if (!(error instanceof SettingsError)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exitCode = 2;
}
