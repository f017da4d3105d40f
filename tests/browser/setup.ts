/** Before all browser tests: builds the application once and starts it as a demo with fresh data. */
import type { TestProject } from "vitest/node";
import buildOnce from "../support/build";
import { requireChromium } from "../support/chromium";
import { startServer } from "../support/server";

declare module "vitest" {
  export interface ProvidedContext {
    origin: string;
    chromium: string;
  }
}

export default async function setup(project: TestProject) {
  const chromium = requireChromium();
  buildOnce();
  const server = await startServer();
  project.provide("origin", server.origin);
  project.provide("chromium", chromium);
  return async () => void (await server.stop());
}
