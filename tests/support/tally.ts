/** A reporter that counts: it leaves what passed and failed in the file that tests/run.mjs asks for. */
import { writeFileSync } from "node:fs";
import type { Reporter, TestModule } from "vitest/node";

export default class Tally implements Reporter {
  onTestRunEnd(modules: readonly TestModule[], errors: readonly unknown[]) {
    let [passed, failed] = [0, errors.length];
    for (const module of modules) {
      const results = [...module.children.allTests()].map((test) => test.result().state);
      passed += results.filter((state) => state === "passed").length;
      const failures = results.filter((state) => state === "failed").length;
      // A file that broke outside its tests counts as one.
      failed += failures || (module.ok() ? 0 : 1);
    }
    if (process.env.TALLY_FILE) writeFileSync(process.env.TALLY_FILE, JSON.stringify({ passed, failed }));
  }
}
