/**
 * The parts of the small signal on the yardstick's cell: 61 frequencies, light and voltage. Reported separately: how many of them a
 * rational interpolation needs for the others, and what finding it costs.
 */
import { evaluate, fitRational } from "../../solver/src/analysis/aaa.ts";
import { type Response, respond } from "../../solver/src/driftDiffusion/smallSignal.ts";
import { pivotedConservativeSolver } from "../../solver/src/linearAlgebra/conservativeElimination.ts";
import { conservativeSolver } from "../../solver/src/linearAlgebra/conservativeSolver.ts";
import { time, words } from "./timing.ts";
import { linearisedYardstick } from "./yardstickCell.ts";
import { yardstickFolder } from "./yardstickFiles.ts";

/** Largest relative error at the frequencies that were left out, when every step-th is solved, and the time of the interpolation. */
function interpolation({ frequencies }: Response, re: Float64Array, im: Float64Array, step: number) {
  const all = Array.from(frequencies, (_, k) => k);
  const solved = all.filter((k) => k % step === 0 || k === all.length - 1);
  const omega = frequencies.map((frequency) => 2 * Math.PI * frequency);
  const pick = (values: Float64Array) => solved.map((k) => values[k]);
  const samples = { omega: pick(omega), re: pick(re), im: pick(im) };
  const fit = fitRational(samples, 1e-10, 24);
  const errors = all.map((k) => {
    const value = evaluate(fit, { re: 0, im: omega[k] });
    return Math.hypot(value.re - re[k], value.im - im[k]) / Math.hypot(re[k], im[k]);
  });
  const timing = time(() => fitRational(samples, 1e-10, 24), { runs: 7 });
  return { solved: solved.length, error: Math.max(...errors), fitMs: timing.medianMs };
}

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
  const pivoted = pivotedConservativeSolver(linear.system);
  const timings = {
    linearise: time(linearise),
    prepare: time(() => conservativeSolver(linear.system)),
    everywhere: time(() => solver.read(omegas, { edge }), { runs: 41 }),
    atOneEdge: time(() => solver.read(omegas, { edge, everywhere: false }), { runs: 41 }),
    profilesOfOneFrequency: time(() => solver.profiles(omegas[0])),
    respond: time(() => respond(linear, frequencies), { runs: 41 }),
    oneFrequencyWithRowExchanges: time(() => pivoted.read(omegas.subarray(0, 1), { edge }), { runs: 7 }),
  };
  for (const [name, timing] of Object.entries(timings)) say(`${name}: ${words(timing)}`);
  const response = respond(linear, frequencies);
  const interpolations = [4, 3, 2].flatMap((step) =>
    [
      { of: "Q", ...interpolation(response, response.yieldReal, response.yieldImaginary, step) },
      { of: "Y", ...interpolation(response, response.admittanceReal, response.admittanceImaginary, step) },
    ].map((found) => {
      const saved = (timings.everywhere.medianMs * (frequencies.length - found.solved)) / frequencies.length;
      say(
        `${found.of} from ${found.solved} of ${frequencies.length}: ${found.error.toExponential(1)} off at worst, ` +
          `${found.fitMs.toFixed(2)} ms to find, ${saved.toFixed(2)} ms saved`,
      );
      return found;
    }),
  );
  return { ...timings, interpolations };
}
