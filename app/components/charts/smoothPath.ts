import type { Pixels } from "./series";

/** Slope of one coordinate at each point: of the parabola through a point and its neighbours, one-sided at the ends. */
function slopes(values: readonly number[], at: readonly number[]): number[] {
  const last = values.length - 1;
  const chords = Array.from({ length: last }, (_, k) => (values[k + 1] - values[k]) / (at[k + 1] - at[k]));
  return values.map((_, k) => {
    if (k === 0 || k === last) return chords[k === 0 ? 0 : last - 1];
    const before = at[k] - at[k - 1];
    const after = at[k + 1] - at[k];
    return (chords[k - 1] * after + chords[k] * before) / (before + after);
  });
}

const hundredth = (value: number) => Math.round(value * 100) / 100;

/**
 * A smooth line through every point of a curve that may turn back: cubic Hermite pieces over the logarithm of what the points
 * run over (the frequency), so that points which lie close together in it make no kink.
 */
export function smoothPath(points: readonly Pixels[], places: ArrayLike<number>): string {
  const kept = points.filter(({ index }, k) => k === 0 || places[index] > places[points[k - 1].index] * (1 + 1e-9));
  if (kept.length < 2) return "";
  const at = kept.map(({ index }) => (places[index] > 0 ? Math.log(places[index]) : index));
  const alongX = slopes(
    kept.map(({ x }) => x),
    at,
  );
  const alongY = slopes(
    kept.map(({ y }) => y),
    at,
  );
  let path = `M${hundredth(kept[0].x)},${hundredth(kept[0].y)}`;
  for (let k = 0; k + 1 < kept.length; k++) {
    const third = (at[k + 1] - at[k]) / 3;
    const [from, to] = [kept[k], kept[k + 1]];
    path += `C${[
      from.x + alongX[k] * third,
      from.y + alongY[k] * third,
      to.x - alongX[k + 1] * third,
      to.y - alongY[k + 1] * third,
      to.x,
      to.y,
    ].map(hundredth)}`;
  }
  return path;
}
