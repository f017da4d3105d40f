/** The parts of the small signal on the yardstick's cell: 61 frequencies, light and voltage. */
import { respond } from "../../solver/src/driftDiffusion/smallSignal.ts";
import { pivotedConservativeSolver } from "../../solver/src/linearAlgebra/conservativeElimination.ts";
import { conservativeSolver } from "../../solver/src/linearAlgebra/conservativeSolver.ts";
import { time, words } from "./timing.ts";
import { linearisedYardstick } from "./yardstickCell.ts";
import { yardstickFolder } from "./yardstickFiles.ts";

export function run(say: (line: string) => void): object {
  const folder = yardstickFolder();
  if (!folder) {
    say("skipped: no yardstick beside the repository or in YARDSTICK_DIR");
    return {};
  }
  const { linearise, frequencies } = linearisedYardstick(folder);
  const linear = linearise();
  const edge = linear.state.cut;
  const omegas = frequencies.map((frequency) => 2 * Math.PI * frequency);
  const solver = conservativeSolver(linear.system);
  const timings = {
    linearise: time(linearise),
    prepare: time(() => conservativeSolver(linear.system)),
    everywhere: time(() => solver.read(omegas, { edge }), { runs: 41 }),
    atOneEdge: time(() => solver.read(omegas, { edge, everywhere: false }), { runs: 41 }),
    profilesOfOneFrequency: time(() => solver.profiles(omegas[0])),
    respond: time(() => respond(linear, frequencies), { runs: 41 }),
    withRowExchanges: time(() => pivotedConservativeSolver(linear.system).read(omegas, { edge }), {
      warmUps: 1,
      runs: 7,
    }),
  };
  for (const [name, timing] of Object.entries(timings)) say(`${name}: ${words(timing)}`);
  return timings;
}
