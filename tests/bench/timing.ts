/** Medians of repeated calls, with what the machine adds. */

export interface Timing {
  medianMs: number;
  minimumMs: number;
  /** Distance of the quartiles over the median: what other work on the machine adds. */
  noise: number;
}

export interface TimingOptions {
  warmUps?: number;
  runs?: number;
}

/** Median, minimum and noise of wall-clock times in ms. */
export function timingOf(times: readonly number[]): Timing {
  const sorted = times.toSorted((a, b) => a - b);
  const at = (fraction: number) => sorted[Math.round(fraction * (sorted.length - 1))];
  return { medianMs: at(0.5), minimumMs: sorted[0], noise: (at(0.75) - at(0.25)) / at(0.5) };
}

/** Times a call after warm-ups (five unless told otherwise; at least seven runs). */
export function time(run: () => void, { warmUps = 5, runs = 15 }: TimingOptions = {}): Timing {
  for (let k = 0; k < warmUps; k++) run();
  return timingOf(
    Array.from({ length: Math.max(7, runs) }, () => {
      const start = performance.now();
      run();
      return performance.now() - start;
    }),
  );
}

/** "1.52 ms (minimum 1.43, noise 6 %)" */
export function words({ medianMs, minimumMs, noise }: Timing): string {
  return `${medianMs.toFixed(2)} ms (minimum ${minimumMs.toFixed(2)}, noise ${Math.round(100 * noise)} %)`;
}
