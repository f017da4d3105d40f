/** The yardstick: a C program and the linear problem it solves, looked for beside the repository or in YARDSTICK_DIR. */
import { execFileSync } from "node:child_process";
import { copyFileSync, existsSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import { join, resolve } from "node:path";
import { fileURLToPath } from "node:url";
import type { HarmonicSystem } from "../../solver/src/linearAlgebra/harmonicSystem.ts";

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

/** The dumped problem: 400 nodes, φ, E_Fn, E_Fp and an ion potential, light and voltage as right-hand sides, 61 frequencies. */
export function yardstickSystem(folder: string): { system: HarmonicSystem; angularFrequencies: Float64Array } {
  const file = readFileSync(join(folder, "system.bin"));
  const buffer = file.buffer.slice(file.byteOffset, file.byteOffset + file.byteLength) as ArrayBuffer;
  const [nodes, blockSize, sides, count] = new Int32Array(buffer, 0, 4);
  const values = new Float64Array(buffer, 16);
  const block = nodes * blockSize * blockSize;
  const blocks = (k: number) => values.slice(k * block, (k + 1) * block);
  const b = values.subarray(4 * block, 4 * block + nodes * blockSize * sides);
  return {
    system: {
      nodes,
      blockSize,
      lower: blocks(0),
      diagonal: blocks(1),
      upper: blocks(2),
      storage: blocks(3),
      rightHandSides: Array.from({ length: sides }, (_, side) =>
        Float64Array.from({ length: nodes * blockSize }, (_, row) => b[row * sides + side]),
      ),
    },
    angularFrequencies: values.slice(values.length - count),
  };
}
