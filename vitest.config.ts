import { defineConfig } from "vitest/config";

const alias = { "~": new URL("./app", import.meta.url).pathname };

export default defineConfig({
  test: {
    reporters: ["default", "./tests/support/closingLine.ts"],
    projects: [
      { resolve: { alias }, test: { name: "solver", include: ["tests/solver/**/*.test.ts"], environment: "node" } },
      {
        resolve: { alias },
        test: {
          name: "app",
          include: ["tests/app/**/*.test.{ts,tsx}"],
          environment: "node",
          testTimeout: 30_000,
          hookTimeout: 60_000,
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
          testTimeout: 60_000,
          hookTimeout: 120_000,
          globalSetup: "tests/browser/setup.ts",
        },
      },
    ],
  },
});
