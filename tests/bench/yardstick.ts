/**
 * Speed of the full model on the yardstick's scenario beside the C program, in the same minute on the same core.
 *
 *   smallSignalMs     all 61 frequencies, light and voltage, from the linearised system to the answer at the cut
 *   coldFirstCallMs   the first such call of a fresh process, the kernel's compilation included
 */
import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { harmonicSolver } from "../../solver/src/linearAlgebra/harmonicSolver.ts";
import { time, words } from "./timing.ts";
import { buildYardstick, yardstickFolder, yardstickSystem } from "./yardstickFiles.ts";

export interface Yardstick {
  smallSignalMs: number | null;
  cScalarMs: number | null;
  cDenseMs: number | null;
  cPatternMs: number | null;
  coldFirstCallMs: number | null;
  steadyColdMs: number | null;
  steadyWarmMs: number | null;
}

/** The small-signal part as the product runs it. */
function smallSignal(folder: string): () => void {
  const { system, angularFrequencies } = yardstickSystem(folder);
  const voltage = system.rightHandSides[1];
  const cut = {
    firstNode: Math.floor(voltage.findIndex((value) => value !== 0) / system.blockSize),
    lastNode: Math.floor(voltage.findLastIndex((value) => value !== 0) / system.blockSize),
  };
  return () => harmonicSolver(system).solve(angularFrequencies, cut);
}

export function run(say: (line: string) => void): Yardstick {
  const result: Yardstick = {
    smallSignalMs: null,
    cScalarMs: null,
    cDenseMs: null,
    cPatternMs: null,
    coldFirstCallMs: null,
    steadyColdMs: null,
    steadyWarmMs: null,
  };
  const folder = yardstickFolder();
  if (!folder) {
    say("skipped: no yardstick beside the repository or in YARDSTICK_DIR");
    return result;
  }
  const program = buildYardstick(folder);
  const before = program?.run();
  const timing = time(smallSignal(folder), { runs: 41 });
  const after = program?.run();
  program?.remove();
  result.smallSignalMs = timing.medianMs;
  say(`small signal: ${words(timing)}`);
  result.coldFirstCallMs = Number(
    execFileSync(process.execPath, ["--import", "tsx", fileURLToPath(import.meta.url), "cold"], { encoding: "utf8" }),
  );
  say(`first call of a process: ${result.coldFirstCallMs.toFixed(1)} ms`);
  if (!before || !after) {
    say("skipped: the C program, there is no compiler");
    return result;
  }
  result.cScalarMs = Math.min(before.scalar, after.scalar);
  result.cDenseMs = Math.min(before.dense, after.dense);
  result.cPatternMs = Math.min(before.pattern, after.pattern);
  for (const [name, value] of [
    ["scalar", result.cScalarMs],
    ["dense", result.cDenseMs],
    ["pattern", result.cPatternMs],
  ] as const)
    say(`C ${name}: ${value.toFixed(2)} ms, ratio ${(timing.medianMs / value).toFixed(2)}`);
  return result;
}

if (process.argv[2] === "cold" && process.argv[1] === fileURLToPath(import.meta.url)) {
  const call = smallSignal(yardstickFolder()!);
  const start = performance.now();
  call();
  console.log(performance.now() - start);
}
