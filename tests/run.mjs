// Runs the tests, and ends with one line that says how many passed and failed, however the run ended.
import { spawn } from "node:child_process";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const folder = mkdtempSync(join(tmpdir(), "demilune-tally-"));
const tallyFile = join(folder, "tally.json");

function tally() {
  try {
    return JSON.parse(readFileSync(tallyFile, "utf8"));
  } catch {
    return { passed: 0, failed: 0 };
  }
}

const vitest = fileURLToPath(new URL("../node_modules/vitest/vitest.mjs", import.meta.url));
const run = spawn(process.execPath, [vitest, "run", ...process.argv.slice(2)], {
  stdio: "inherit",
  env: { ...process.env, TALLY_FILE: tallyFile },
});
for (const signal of ["SIGINT", "SIGTERM"]) process.on(signal, () => run.kill(signal));
run.once("close", (code) => {
  const { passed, failed } = tally();
  rmSync(folder, { recursive: true });
  // A run that broke before or beside its tests has failed, whatever they say.
  const failures = code === 0 ? failed : Math.max(failed, 1);
  process.stdout.write(`\n${passed} passed, ${failures} failed\n`);
  process.exitCode = failures === 0 ? 0 : code || 1;
});
