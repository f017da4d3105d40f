/**
 * The checks of a measured spectrum: Kramers–Kronig, noise, drift between repeats.
 *
 * Drift compares every repeat with the first sweep: the best real factor g between them (least squares, its standard error
 * from the noise) catches a gain that changed, χ² of the differences everything else.
 */
import quantileChiSquare from "@stdlib/stats-base-dists-chisquare-quantile";
import { type KramersKronig, kramersKronig } from "./kramersKronig.ts";
import { type Measured, samplesOf, sweepsOf } from "./measured.ts";
import { localNoise } from "./noise.ts";
import { noiseScale } from "./noiseScale.ts";
import type { Verdict } from "./verdict.ts";

export interface Drift {
  verdict: Verdict;
  /** Change of gain between the first sweep and the repeat that differs most, relative; null without repeats. */
  gainChange: number | null;
  /** The smallest change of gain that could have been seen, relative. */
  smallestDetectable: number | null;
  /** Root of the mean of |difference|², relative to the largest modulus. */
  rmsDifference: number | null;
  worstHz: number | null;
  /** Points that were measured again. */
  repeatedPoints: number;
  reason: string;
}

export interface Validation {
  kramersKronig: {
    verdict: Verdict;
    /** Root of the mean of |data − fit|² over the largest modulus. */
    rmsResidual: number | null;
    /** Frequency of the worst residual. */
    worstHz: number | null;
    reason: string;
    /** What would have been seen, relative to the largest modulus. */
    detectable: KramersKronig["detectable"] | null;
  };
  /** Standard deviation of Re and of Im over the largest modulus. */
  noise: { relative: number | null };
  drift: Drift;
}

/** Fewer points cannot be tested. */
const fewestPoints = 10;
/** Standard errors of a change of gain at which it is marginal, fails and counts as detectable. */
const marginalAt = 3;
const failsAt = 4;
/** Chance of a χ² as large as the differences': marginal, fails. */
const chance = { marginal: 1e-2, fails: 1e-4 };
const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

function driftOf(data: Measured, sweeps: number[][], deviation: (row: number) => number, largest: number): Drift {
  const repeats = sweeps.slice(1);
  const first = new Map(sweeps[0].map((row) => [data.frequencyHz[row], row]));
  let decisive = { score: -1, change: 0, error: 0 };
  let square = 0;
  let chiSquare = 0;
  let points = 0;
  let worst = { size: -1, frequency: 0 };
  for (const rows of repeats) {
    let overlap = 0;
    let weight = 0;
    for (const row of rows) {
      const before = first.get(data.frequencyHz[row])!;
      const variance = deviation(row) ** 2 + deviation(before) ** 2;
      const re = data.re[row] - data.re[before];
      const im = data.im[row] - data.im[before];
      overlap += (data.re[before] * re + data.im[before] * im) / variance;
      weight += (data.re[before] ** 2 + data.im[before] ** 2) / variance;
      square += re * re + im * im;
      const size = (re * re + im * im) / variance;
      chiSquare += size;
      points += 1;
      if (size > worst.size) worst = { size, frequency: data.frequencyHz[row] };
    }
    const change = overlap / weight;
    const error = 1 / Math.sqrt(weight);
    if (Math.abs(change) / error > decisive.score) decisive = { score: Math.abs(change) / error, change, error };
  }
  if (points === 0) {
    return {
      verdict: "notTested",
      gainChange: null,
      smallestDetectable: null,
      rmsDifference: null,
      worstHz: null,
      repeatedPoints: 0,
      reason: "no frequency was measured twice",
    };
  }
  const above = (probability: number) => chiSquare > quantileChiSquare(1 - probability, 2 * points);
  const fails = decisive.score > failsAt || above(chance.fails);
  const marginal = decisive.score > marginalAt || above(chance.marginal);
  const percent = (value: number) => `${Number((100 * value).toPrecision(2))} %`;
  return {
    verdict: fails ? "fails" : marginal ? "marginal" : "holds",
    gainChange: decisive.change,
    smallestDetectable: failsAt * decisive.error,
    rmsDifference: Math.sqrt(square / points) / largest,
    worstHz: worst.frequency,
    repeatedPoints: points,
    reason: `gain changed by ${percent(decisive.change)} ± ${percent(decisive.error)} between repeats; ${percent(failsAt * decisive.error)} would have been seen`,
  };
}

/** Check a measured spectrum (masked points left out by the caller). */
export function validateMeasured(data: Measured): Validation {
  const largest = Math.max(...data.re.map((value, row) => Math.hypot(value, data.im[row])));
  const sweeps = sweepsOf(data);
  const rowsInOrder = sweeps.flat().sort((a, b) => data.frequencyHz[a] - data.frequencyHz[b]);
  if (data.frequencyHz.length < fewestPoints || sweeps[0].length < fewestPoints || largest === 0) {
    const known = data.sigma;
    const drift = known
      ? driftOf(data, sweeps, (row) => known[row], largest)
      : {
          ...driftOf(data, sweeps.slice(0, 1), () => 1, largest),
          reason: "too few points for an estimate of the noise",
        };
    return {
      kramersKronig: {
        verdict: "notTested",
        rmsResidual: null,
        worstHz: null,
        reason: `fewer than ${fewestPoints} frequencies`,
        detectable: null,
      },
      noise: { relative: null },
      drift,
    };
  }
  const { scale, noise, known } = noiseScale(data);
  const drift = driftOf(data, sweeps, (row) => Math.max(scale[row] * noise, 1e-9 * largest), largest);
  // Sweeps that differ are not one spectrum: the first is tested alone.
  const rows = drift.verdict === "fails" ? sweeps[0] : rowsInOrder;
  const test = kramersKronig(
    samplesOf(data, rows),
    rows.map((row) => scale[row]),
    noise,
    known,
  );
  const typical = Math.sqrt(mean(rows.map((row) => scale[row] ** 2)));
  const local = known ? localNoise(samplesOf(data, sweeps[0])) : noise * typical;
  return {
    kramersKronig: {
      verdict: test.verdict,
      rmsResidual: test.rmsResidual,
      worstHz: data.frequencyHz[rows[test.worst]],
      reason: test.reason,
      detectable: test.detectable,
    },
    noise: { relative: Math.min(test.deviation, local) / largest },
    drift,
  };
}
