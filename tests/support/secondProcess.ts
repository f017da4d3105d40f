/** A second process on the database of DATA_DIR: `migrate` prepares it, `write` adds forty users, `hold` keeps its write lock for a while. */
import { setTimeout as sleep } from "node:timers/promises";
import { createClient } from "@libsql/client";
import { prepareDatabase } from "~/models/database.server";
import { ensureUser } from "~/models/users.server";

const tasks: Record<string, () => Promise<void>> = {
  migrate: () => prepareDatabase(),
  async write() {
    for (let number = 0; number < 40; number++) await ensureUser(`theirs${number}@lab.example`, "Tor Lund");
  },
  async hold() {
    const client = createClient({ url: `file:${process.env.DATA_DIR}/demilune.db` });
    const transaction = await client.transaction("write");
    process.stdout.write("held\n");
    await sleep(400);
    await transaction.rollback();
  },
};

await tasks[process.argv[2]]();
