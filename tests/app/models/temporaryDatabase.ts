import { afterAll, beforeAll } from "vitest";
import { closeDatabase, prepareDatabase } from "~/models/database.server";

/** Gives the test file a migrated database in the folder that tests/support/environment.ts made for it. */
export function withTemporaryDatabase(): void {
  beforeAll(() => prepareDatabase());
  afterAll(closeDatabase);
}
