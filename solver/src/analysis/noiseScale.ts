/** How the standard deviation of a measurement depends on frequency, and its size. */
import { type Measured, samplesOf, sweepsOf } from "./measured.ts";
import { localNoise, localVariances } from "./noise.ts";

/** A modulus below this share of the largest does not weigh more than this one. */
const leastModulus = 0.01;

const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;

/** Spread of ln(variance) over the windows: the smaller, the better a scale describes how the noise depends on frequency. */
function unevenness(variances: readonly number[]): number {
  const logs = variances.map((value) => Math.log(Math.max(value, 1e-300)));
  const centre = mean(logs);
  return Math.sqrt(mean(logs.map((value) => (value - centre) ** 2)));
}

/**
 * Standard deviation per row: what the file says, or its shape (the modulus, unless the local noise is plainly the same
 * at all frequencies) with the size estimated from local fits, sweep by sweep, so that drift between sweeps has no share.
 */
export function noiseScale(data: Measured): { scale: number[]; noise: number; known: boolean } {
  const sweeps = sweepsOf(data);
  const largest = Math.max(...data.re.map((value, row) => Math.hypot(value, data.im[row])));
  if (data.sigma) return { scale: data.sigma, noise: 1, known: true };
  const modulus = data.re.map((value, row) => Math.max(Math.hypot(value, data.im[row]), leastModulus * largest));
  const uniform = modulus.map(() => largest);
  const estimate = (scale: number[]) => {
    const parts = sweeps.filter((rows) => rows.length >= 6);
    const pick = (rows: number[]) => rows.map((row) => scale[row]);
    const square = parts.reduce(
      (sum, rows) => sum + localNoise(samplesOf(data, rows), pick(rows)) ** 2 * rows.length,
      0,
    );
    const points = parts.reduce((sum, rows) => sum + rows.length, 0);
    return {
      noise: points > 0 ? Math.sqrt(square / points) : 0,
      uneven: unevenness(parts.flatMap((rows) => localVariances(samplesOf(data, rows), pick(rows)))),
    };
  };
  const byModulus = estimate(modulus);
  const alike = estimate(uniform);
  return alike.uneven < 0.9 * byModulus.uneven
    ? { scale: uniform, noise: alike.noise, known: false }
    : { scale: modulus, noise: byModulus.noise, known: false };
}
