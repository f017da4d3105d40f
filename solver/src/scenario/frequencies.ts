/** The frequencies of a scenario. */
import type { ResolvedScenario } from "./resolved.ts";

type Range = { fromHz: number; toHz: number; pointsPerDecade: number };

/** Number of equal steps of log f: at least one between two different end points. */
function steps({ fromHz, toHz, pointsPerDecade }: Range): number {
  if (fromHz === toHz) return 0;
  return Math.max(1, Math.round(pointsPerDecade * Math.log10(toHz / fromHz)));
}

/** How many frequencies a range holds, both end points counted. */
export const frequencyCount = (range: Range): number => steps(range) + 1;

/** Ascending frequencies in Hz; a range has its end points exactly. */
export function frequenciesOf(frequencies: ResolvedScenario["frequencies"]): number[] {
  if ("listHz" in frequencies) return frequencies.listHz;
  const { fromHz, toHz } = frequencies;
  const count = steps(frequencies);
  const ratio = Math.log10(toHz / fromHz);
  return Array.from({ length: count + 1 }, (_, k) => {
    if (k === 0) return fromHz;
    return k === count ? toHz : fromHz * 10 ** ((ratio * k) / count);
  });
}
