/** Finds Chromium for the browser tests, or installs Debian's where that is allowed. */
import { execFileSync } from "node:child_process";
import { accessSync, constants } from "node:fs";
import { delimiter, join } from "node:path";

const names = ["chromium", "chromium-browser", "google-chrome", "google-chrome-stable"];

function isExecutable(file: string): boolean {
  try {
    accessSync(file, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

const onPath = (name: string) =>
  (process.env.PATH ?? "")
    .split(delimiter)
    .map((folder) => join(folder, name))
    .find(isExecutable);

function findChromium(): string | undefined {
  const chosen = process.env.CHROMIUM_PATH;
  if (chosen) {
    if (!isExecutable(chosen)) throw new Error(`CHROMIUM_PATH is ${chosen}, which is no program that can be run.`);
    return chosen;
  }
  return names.map(onPath).find((file) => file !== undefined);
}

/** The path of a Chromium that can be run. */
export function requireChromium(): string {
  const found = findChromium();
  if (found) return found;
  if (process.getuid?.() === 0 && onPath("apt-get")) {
    const environment = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
    const run = (...words: string[]) => execFileSync("apt-get", words, { stdio: "inherit", env: environment });
    run("update");
    run("install", "-y", "--no-install-recommends", "chromium");
    const installed = findChromium();
    if (installed) return installed;
  }
  throw new Error(
    "The browser tests need Chromium: install Debian's package `chromium`, or set CHROMIUM_PATH to a Chromium.",
  );
}
