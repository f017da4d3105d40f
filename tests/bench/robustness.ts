/**
 * Random walk over valid stacks: how many operating points of the full model are solved, and a list of those that are
 * not or whose current is not the same at every depth. `randomScenario(seed)` gives each stack again.
 */
import { type SolvedSpectrum, solve } from "@demilune/solver";
import { randomScenario } from "./randomStacks.ts";

const stacks = 300;
/** Bound on the spread of the current over depth: 10⁻⁷ as a rule, 10⁻⁴ where part of the stack floats. */
const spreadRule = 1e-7;
const spreadLimit = 1e-4;

interface Report {
  stacks: number;
  spectra: number;
  solved: number;
  worstSpread: number;
  spreadAboveRule: number;
  meanMs: number;
  slowestMs: number;
  failures: { seed: number; technique: string; status: string; message: string }[];
}

export async function robustness(say: (line: string) => void = () => {}, first = 1, count = stacks): Promise<Report> {
  const report: Report = {
    stacks: count,
    spectra: 0,
    solved: 0,
    worstSpread: 0,
    spreadAboveRule: 0,
    meanMs: 0,
    slowestMs: 0,
    failures: [],
  };
  for (let seed = first; seed < first + count; seed++) {
    const start = performance.now();
    const { spectra } = solve(randomScenario(seed));
    const elapsed = performance.now() - start;
    report.meanMs += elapsed / count;
    report.slowestMs = Math.max(report.slowestMs, elapsed);
    for (const spectrum of spectra) {
      const { technique } = spectrum;
      report.spectra += 1;
      if (spectrum.status !== "solved") {
        const { message } = spectrum.failure;
        report.failures.push({ seed, technique, status: spectrum.status, message });
        say(`seed ${seed}, ${technique}: ${message}`);
        continue;
      }
      report.solved += 1;
      const spread = (spectrum as SolvedSpectrum).currentSpread ?? 0;
      report.worstSpread = Math.max(report.worstSpread, spread);
      if (spread > spreadRule) report.spreadAboveRule += 1;
      if (spread > spreadLimit) {
        const message = `the current varies by ${spread.toExponential(1)} over depth`;
        report.failures.push({ seed, technique, status: "spread", message });
        say(`seed ${seed}, ${technique}: ${message}`);
      }
    }
  }
  say(
    `${report.solved} of ${report.spectra} spectra of ${count} random stacks solved; worst spread ${report.worstSpread.toExponential(1)}`,
  );
  return report;
}

export const run = (say: (line: string) => void) => robustness(say);
