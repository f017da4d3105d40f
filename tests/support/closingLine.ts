/** A reporter whose only word is the last line of the output: how many tests passed and failed. */
import { writeSync } from "node:fs";
import type { Reporter, TestModule } from "vitest/node";

export default class ClosingLine implements Reporter {
  private passed = 0;
  private failed = 0;

  constructor() {
    process.once("exit", (code) => {
      // A run that broke before or beside its tests has failed, whatever they say.
      if (code !== 0 && this.failed === 0) this.failed = 1;
      writeSync(1, `\n${this.passed} passed, ${this.failed} failed\n`);
    });
  }

  onTestRunEnd(modules: readonly TestModule[], errors: readonly unknown[]) {
    for (const module of modules) {
      const results = [...module.children.allTests()].map((test) => test.result().state);
      this.passed += results.filter((state) => state === "passed").length;
      const failures = results.filter((state) => state === "failed").length;
      this.failed += failures || (module.ok() ? 0 : 1);
    }
    this.failed += errors.length;
  }
}
