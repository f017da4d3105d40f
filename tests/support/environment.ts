/** Before each test file: a data folder of its own and no log, because settings are read once, at the first import. */
import { mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll } from "vitest";

process.env.DATA_DIR = mkdtempSync(join(tmpdir(), "demilune-test-"));
process.env.LOG_LEVEL = "silent";
// Registered first, so it runs after every other clean-up of the file.
afterAll(() => rmSync(process.env.DATA_DIR!, { recursive: true, force: true }));
