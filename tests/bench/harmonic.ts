/** The linear algebra alone, on the yardstick's dumped system: all 61 frequencies, both right-hand sides. */
import { pivotedHarmonicSolver } from "../../solver/src/linearAlgebra/harmonicElimination.ts";
import { harmonicSolver } from "../../solver/src/linearAlgebra/harmonicSolver.ts";
import { time, words } from "./timing.ts";
import { buildYardstick, yardstickFolder, yardstickSystem } from "./yardstickFiles.ts";

export function run(say: (line: string) => void): object {
  const folder = yardstickFolder();
  if (!folder) {
    say("skipped: no yardstick beside the repository or in YARDSTICK_DIR");
    return {};
  }
  const { system, angularFrequencies } = yardstickSystem(folder);
  const voltage = system.rightHandSides[1];
  const cut = {
    firstNode: Math.floor(voltage.findIndex((value) => value !== 0) / system.blockSize),
    lastNode: Math.floor(voltage.findLastIndex((value) => value !== 0) / system.blockSize),
  };
  const solver = harmonicSolver(system);
  const reference = pivotedHarmonicSolver(system);
  const program = buildYardstick(folder);
  const before = program?.run();
  const timings = {
    prepare: time(() => harmonicSolver(system)),
    atTheCut: time(() => solver.solve(angularFrequencies, cut), { runs: 41 }),
    everywhere: time(() => solver.solve(angularFrequencies), { runs: 41 }),
    everywhereRefined: time(() => solver.solve(angularFrequencies, { refinements: 1 })),
    withRowExchanges: time(() => reference.solve(angularFrequencies, cut), { runs: 7 }),
  };
  const after = program?.run();
  program?.remove();
  for (const [name, timing] of Object.entries(timings)) say(`${name}: ${words(timing)}`);
  if (!before || !after) {
    say("no C compiler: no comparison");
    return timings;
  }
  const c = (variant: keyof typeof before) => Math.min(before[variant], after[variant]);
  say(`C program: scalar ${c("scalar")}, dense ${c("dense")}, pattern ${c("pattern")} ms`);
  const ratio = timings.atTheCut.medianMs / c("scalar");
  say(`at the cut / scalar: ${ratio.toFixed(2)}`);
  return { ...timings, cScalarMs: c("scalar"), cDenseMs: c("dense"), cPatternMs: c("pattern"), ratioToScalar: ratio };
}
