import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll } from "vitest";
import { closeDatabase, prepareDatabase } from "~/models/database.server";

/** Gives the test file a database file of its own, migrated, and takes it away afterwards. */
export function withTemporaryDatabase(): void {
  const folder = mkdtempSync(join(tmpdir(), "demilune-test-"));
  process.env.DATA_DIR = folder;
  beforeAll(prepareDatabase);
  afterAll(async () => {
    await closeDatabase();
    rmSync(folder, { recursive: true, force: true });
  });
}
