/**
 * Speed of the full model on the yardstick's scenario beside the C program, in the same minute on the same core.
 *
 *   smallSignalMs     linearisation, and all 61 frequencies solved for light and voltage, with the spread over depth
 *   coldFirstCallMs   the first such call of a fresh process, the kernel's compilation included
 *   steadyColdMs      short circuit under light from nothing, mesh included
 *   steadyWarmMs      the same after the hole lifetime moved by a twentieth
 */
import { execFileSync } from "node:child_process";
import { fileURLToPath } from "node:url";
import { respond } from "../../solver/src/driftDiffusion/smallSignal.ts";
import { time, words } from "./timing.ts";
import { linearisedYardstick, solveSteadily, yardstickScenario } from "./yardstickCell.ts";
import { buildYardstick, yardstickFolder } from "./yardstickFiles.ts";

export interface Yardstick {
  smallSignalMs: number | null;
  cScalarMs: number | null;
  cDenseMs: number | null;
  cPatternMs: number | null;
  coldFirstCallMs: number | null;
  steadyColdMs: number | null;
  steadyWarmMs: number | null;
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
  const { linearise, frequencies } = linearisedYardstick(folder);
  const program = buildYardstick(folder);
  const before = program?.run();
  const timing = time(() => respond(linearise(), frequencies), { runs: 41 });
  const after = program?.run();
  program?.remove();
  result.smallSignalMs = timing.medianMs;
  say(`small signal: ${words(timing)}`);
  const scenario = yardstickScenario(folder);
  const cold = time(() => solveSteadily(scenario));
  const neighbours = [scenario, yardstickScenario(folder, 157.5)];
  let points = solveSteadily(scenario);
  let turn = 0;
  const warm = time(() => {
    turn = 1 - turn;
    points = solveSteadily(neighbours[turn], points);
  });
  result.steadyColdMs = cold.medianMs;
  result.steadyWarmMs = warm.medianMs;
  say(`steady state from nothing: ${words(cold)}`);
  say(`steady state from a neighbour: ${words(warm)}`);
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
  const { linearise, frequencies } = linearisedYardstick(yardstickFolder()!);
  const start = performance.now();
  respond(linearise(), frequencies);
  console.log(performance.now() - start);
}
