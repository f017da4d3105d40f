/**
 * Which sign of Im is the causal one. For a response H analytic in the lower half plane (time factor e^{+iωt}),
 * Kramers–Kronig gives H(0) − H(∞) = −(2/π) ∫ Im H d ln ω. Over a finite window the two sides keep their signs when
 * the window holds most of the relaxation, so their product tells a conjugated spectrum from a causal one.
 */

export interface Causality {
  /** asWritten: Im has the sign of a lagging response; reversed: it has the other one; unclear: the data do not say. */
  sign: "asWritten" | "reversed" | "unclear";
  /** −(2/π)∫Im d ln f over the change of Re; 1 for a relaxation that lies wholly inside the window. */
  ratio: number;
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((first, second) => first - second);
  return sorted[Math.floor(sorted.length / 2)];
}

/** @param frequencyHz ascending, with repeats; @param re, im same length. */
export function causalSign(frequencyHz: readonly number[], re: readonly number[], im: readonly number[]): Causality {
  const count = frequencyHz.length;
  if (count < 4) return { sign: "unclear", ratio: 0 };
  let integral = 0;
  let largest = 0;
  for (let index = 0; index < count; index++) {
    largest = Math.max(largest, Math.hypot(re[index], im[index]));
    if (index === 0) continue;
    integral += ((im[index] + im[index - 1]) / 2) * Math.log(frequencyHz[index] / frequencyHz[index - 1]);
  }
  const ends = Math.min(3, Math.floor(count / 2));
  const change = medianOf(re.slice(0, ends)) - medianOf(re.slice(count - ends));
  const expected = (-2 / Math.PI) * integral;
  const ratio = change === 0 ? 0 : expected / change;
  if (Math.abs(change) < 0.03 * largest || Math.abs(ratio) < 0.15) return { sign: "unclear", ratio };
  return { sign: ratio > 0 ? "asWritten" : "reversed", ratio };
}
