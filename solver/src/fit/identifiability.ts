/**
 * What the data determine: standard errors, intervals, correlations, and the combinations that stay open.
 *
 * At the minimum the residuals are linear in θ = ln(parameter): r ≈ r₀ + Jθ. The singular values of J give the standard
 * error of every combination vᵀθ along a right singular vector, s/σ_k (P. C. Hansen, Rank-Deficient and Discrete
 * Ill-Posed Problems, SIAM 1998, from memory). Combinations above `resolvable` are set aside and named; the covariance of
 * the rest is that of ordinary least squares. The intervals use Student's t where the size of the noise comes from the
 * residuals.
 *
 * | symbol | meaning | shape |
 * |---|---|---|
 * | jacobian | ∂r/∂ln(parameter), one array per parameter, r divided by σ | n × m |
 * | scale | standard deviation of r: 1 where σ is known | 1 |
 */
import quantileT from "@stdlib/stats-base-dists-t-quantile";
import { Matrix, SingularValueDecomposition } from "ml-matrix";

export interface Unresolved {
  paths: string[];
  /** Powers of the product of the named parameters that the data leave open, the largest 1. */
  exponents: number[];
  text: string;
}

export interface Uncertainty {
  /** Standard error of ln(parameter) within what is resolved; null for a parameter with a part in an open combination. */
  logErrors: (number | null)[];
  /** Correlation of the resolved combinations; rows and columns of open parameters are null. */
  correlation: (number[] | null)[];
  unresolved: Unresolved[];
  singularValues: number[];
  /** Student's quantile (normal where the noise is known) for a two-sided 95 % interval. */
  quantile: number;
}

/** Standard error of ln(combination) above which it is not resolved. */
export const resolvable = 0.5;
/** Share of the largest component below which a parameter has no part in a combination. */
const leastPart = 0.1;
/** Singular values below this share of the largest are rounding. */
const rounding = 1e-7;

const short = (path: string): string =>
  path
    .split("+")
    .map((part) => part.split(".").slice(-1)[0])
    .join("+");

const powerText = (path: string, exponent: number): string => {
  const rounded = Number(exponent.toPrecision(2));
  return rounded === 1 ? short(path) : `${short(path)}^${rounded}`;
};

/** Products with one of the parameters that stay fixed along the open combination: a · pivot^(−e_a/e_pivot). */
function determined(paths: string[], exponents: number[]): string[] {
  const powersFor = (pivot: number) => exponents.map((exponent) => -exponent / exponents[pivot]);
  const roughness = (pivot: number) =>
    powersFor(pivot).reduce((sum, power) => sum + Math.abs(power - Math.round(power)), 0);
  const pivot = paths.map((_, k) => k).reduce((a, b) => (roughness(b) < roughness(a) - 1e-3 ? b : a));
  const powers = powersFor(pivot);
  return paths.flatMap((path, k) => (k === pivot ? [] : [`${short(path)} · ${powerText(paths[pivot], powers[k])}`]));
}

function describe(paths: string[], exponents: number[], error: number): string {
  const product = paths.map((path, k) => powerText(path, exponents[k])).join(" · ");
  const size =
    Number.isFinite(error) && error < 1e3 ? ` (its logarithm is uncertain by ${Number(error.toPrecision(2))})` : "";
  const open = `the data do not determine ${product}${size}`;
  return paths.length < 2 ? open : `${open}; of these only ${determined(paths, exponents).join(" and ")} is determined`;
}

/**
 * Uncertainties at a minimum.
 * @param degrees data less parameters; Infinity where the noise is known
 */
export function uncertaintyOf(
  paths: readonly string[],
  jacobian: readonly Float64Array[],
  scale: number,
  degrees: number,
): Uncertainty {
  const count = paths.length;
  const rows = Math.max(jacobian[0].length, count);
  const matrix = new Matrix(rows, count);
  jacobian.forEach((column, j) => {
    column.forEach((value, row) => {
      matrix.set(row, j, value);
    });
  });
  const { rightSingularVectors, diagonal } = new SingularValueDecomposition(matrix, {
    computeLeftSingularVectors: false,
    computeRightSingularVectors: true,
    autoTranspose: false,
  });
  const largest = Math.max(...diagonal);
  const covariance = new Matrix(count, count);
  const open = new Set<number>();
  const unresolved: Unresolved[] = [];
  diagonal.forEach((singular, k) => {
    const vector = paths.map((_, j) => rightSingularVectors.get(j, k));
    const error = singular > rounding * largest ? scale / singular : Infinity;
    if (!(error > resolvable)) {
      for (let i = 0; i < count; i++) {
        for (let j = 0; j < count; j++)
          covariance.set(i, j, covariance.get(i, j) + vector[i] * vector[j] * error * error);
      }
      return;
    }
    const top = vector.reduce((a, b) => (Math.abs(b) > Math.abs(a) ? b : a));
    const parts = vector.flatMap((value, j) => (Math.abs(value / top) >= leastPart ? [j] : []));
    for (const j of parts) open.add(j);
    const named = parts.map((j) => paths[j]);
    const exponents = parts.map((j) => vector[j] / top);
    unresolved.push({ paths: named, exponents, text: describe(named, exponents, error) });
  });
  const logErrors = paths.map((_, j) => (open.has(j) ? null : Math.sqrt(covariance.get(j, j))));
  return {
    logErrors,
    correlation: paths.map((_, i) =>
      open.has(i)
        ? null
        : paths.map((__, j) => {
            const size = Math.sqrt(covariance.get(i, i) * covariance.get(j, j));
            return size > 0 ? covariance.get(i, j) / size : 0;
          }),
    ),
    unresolved,
    singularValues: diagonal,
    quantile: Number.isFinite(degrees) ? quantileT(0.975, Math.max(degrees, 1)) : 1.959963984540054,
  };
}
