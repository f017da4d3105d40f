/** Global set-up: builds the application unless the build is newer than everything it is made of. */
import { execFileSync } from "node:child_process";
import { readdirSync, statSync } from "node:fs";
import { join } from "node:path";

const sources = [
  "app",
  "drizzle",
  "public",
  "solver/src",
  "vite.config.ts",
  "react-router.config.ts",
  "package-lock.json",
];
const output = "build/server/index.js";

function newest(path: string): number {
  const entry = statSync(path);
  if (!entry.isDirectory()) return entry.mtimeMs;
  return Math.max(0, ...readdirSync(path).map((name) => newest(join(path, name))));
}

export default function buildOnce() {
  const built = statSync(output, { throwIfNoEntry: false })?.mtimeMs ?? 0;
  if (built > Math.max(...sources.map(newest))) return;
  try {
    execFileSync("npx", ["react-router", "build"], { stdio: "pipe", env: { ...process.env, NODE_ENV: "production" } });
  } catch (error) {
    const { stdout, stderr } = error as { stdout?: Buffer; stderr?: Buffer };
    throw new Error(`The application does not build:\n${stdout}\n${stderr}`);
  }
}
