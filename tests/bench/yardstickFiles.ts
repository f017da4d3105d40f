/** The yardstick: a scenario, and a C program with the linear problem it solves, looked for beside the repository or in YARDSTICK_DIR. */
import { execFileSync } from "node:child_process";
import { copyFileSync, existsSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { fileURLToPath } from "node:url";

const root = fileURLToPath(new URL("../..", import.meta.url));

/** The folder of the yardstick, or undefined. */
export function yardstickFolder(): string | undefined {
  const folder = process.env.YARDSTICK_DIR ?? resolve(root, "../shared/yardstick");
  return existsSync(join(folder, "blocklu.c")) && existsSync(join(folder, "system.bin")) ? folder : undefined;
}

export interface YardstickProgram {
  /** Medians in ms of the C program's variants, of 41 runs in one call. */
  run(): Record<"scalar" | "dense" | "pattern", number>;
  remove(): void;
}

/** Builds the C program in a temporary folder; undefined where there is no compiler. */
export function buildYardstick(folder: string): YardstickProgram | undefined {
  const place = mkdtempSync(join(tmpdir(), "yardstick-"));
  const remove = () => rmSync(place, { recursive: true, force: true });
  for (const file of ["Makefile", "blocklu.c", "system.bin"]) copyFileSync(join(folder, file), join(place, file));
  try {
    execFileSync("make", { cwd: place, stdio: "ignore" });
  } catch {
    remove();
    return undefined;
  }
  return {
    remove,
    run() {
      const text = execFileSync("./blocklu", ["system.bin", "solution.bin", "41"], { cwd: place, encoding: "utf8" });
      const median = (variant: string) => Number(new RegExp(`${variant} median_ms ([\\d.]+)`).exec(text)?.[1]);
      return { scalar: median("scalar"), dense: median("dense"), pattern: median("pattern") };
    },
  };
}
