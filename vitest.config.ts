import { defineConfig } from "vitest/config";

const alias = { "~": new URL("./app", import.meta.url).pathname };

// A limit only ends what hangs: a busy machine with two cores may be ten times slower than an idle one.
const limits = { testTimeout: 300_000, hookTimeout: 300_000 };

export default defineConfig({
  test: {
    reporters: ["default", "./tests/support/tally.ts"],
    projects: [
      {
        resolve: { alias },
        test: { name: "solver", include: ["tests/solver/**/*.test.ts"], environment: "node", ...limits },
      },
      {
        resolve: { alias },
        test: {
          name: "app",
          include: ["tests/app/**/*.test.{ts,tsx}"],
          environment: "node",
          ...limits,
          globalSetup: "tests/support/build.ts",
          setupFiles: "tests/support/environment.ts",
        },
      },
      {
        resolve: { alias },
        test: {
          name: "browser",
          include: ["tests/browser/**/*.test.ts"],
          environment: "node",
          fileParallelism: false,
          ...limits,
          globalSetup: "tests/browser/setup.ts",
        },
      },
    ],
  },
});
