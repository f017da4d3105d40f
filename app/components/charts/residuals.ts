/** Prediction minus measurement, point by point. */
import type { Series } from "./series";
import type { SpectrumSeries } from "./spectrum";

/** A value of a list at a frequency, linear in log f between neighbours; null outside. Frequencies ascend. */
function interpolated(frequencies: ArrayLike<number>, values: ArrayLike<number>, at: number): number | null {
  const last = frequencies.length - 1;
  if (last < 1 || at < frequencies[0] * (1 - 1e-9) || at > frequencies[last] * (1 + 1e-9)) return null;
  let upper = 1;
  while (upper < last && frequencies[upper] < at) upper++;
  const lower = upper - 1;
  const weight = Math.log(at / frequencies[lower]) / Math.log(frequencies[upper] / frequencies[lower]);
  return values[lower] + (values[upper] - values[lower]) * weight;
}

/**
 * Residuals of a measurement in % of its modulus at each frequency inside the predicted range; masked points left out.
 *
 * @returns two series, real part (the measurement's mark) and imaginary part (its dashes)
 */
export function residualsOf(prediction: SpectrumSeries, measurement: SpectrumSeries): [Series, Series] {
  const x: number[] = [];
  const re: number[] = [];
  const im: number[] = [];
  for (let index = 0; index < measurement.frequencyHz.length; index++) {
    if (measurement.masked?.[index]) continue;
    const frequency = measurement.frequencyHz[index];
    const real = interpolated(prediction.frequencyHz, prediction.re, frequency);
    const imaginary = interpolated(prediction.frequencyHz, prediction.im, frequency);
    const modulus = Math.hypot(measurement.re[index], measurement.im[index]);
    if (real === null || imaginary === null || modulus === 0) continue;
    x.push(frequency);
    re.push((100 * (real - measurement.re[index])) / modulus);
    im.push((100 * (imaginary - measurement.im[index])) / modulus);
  }
  const style = { kind: "measured", colour: measurement.colour } as const;
  return [
    { ...style, id: `${measurement.id}:re`, label: `${measurement.label}, Re`, x, y: re, mark: measurement.mark },
    { ...style, id: `${measurement.id}:im`, label: `${measurement.label}, Im`, x, y: im, mark: "dash" },
  ];
}
