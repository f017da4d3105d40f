/**
 * Bounded Levenberg–Marquardt with the damping of H. B. Nielsen (Damping parameter in Marquardt's method, IMM-REP-1999-05,
 * Technical University of Denmark): µ ← µ·max(1/3, 1 − (2ρ − 1)³) after a success, µ ← µ·ν, ν ← 2ν after a failure.
 * A parameter that lies on a bound and would leave it is held for the step; steps are cut at the bounds.
 *
 * | symbol | meaning | shape |
 * |---|---|---|
 * | parameters | free parameters, scaled by the caller so that a step of 1 is large | n |
 * | residuals | r(p), already divided by their standard deviations | m |
 * | jacobian | ∂r_i/∂p_j, one array per parameter | n × m |
 */
import { CholeskyDecomposition, Matrix } from "ml-matrix";

export interface Problem {
  residuals(parameters: Float64Array): Float64Array | null;
  /** `at` are the residuals at `parameters`. Null where it cannot be computed. */
  jacobian(parameters: Float64Array, at: Float64Array): Float64Array[] | null;
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

export interface MinimiserOptions {
  maximumIterations: number;
  /** Relative change of the sum of squares, and largest step, below which the search ends. */
  tolerance: number;
  stepTolerance: number;
  /** Start of the damping relative to the largest diagonal element. */
  damping: number;
  aborted?: () => boolean;
  progress?: (parameters: Float64Array, sumOfSquares: number, iteration: number) => void;
}

export interface Minimum {
  status: "converged" | "budgetExhausted" | "notSolved" | "aborted";
  parameters: Float64Array;
  residuals: Float64Array;
  sumOfSquares: number;
  iterations: number;
}

const sumOfSquaresOf = (values: Float64Array): number => {
  let sum = 0;
  for (const value of values) sum += value * value;
  return sum;
};

const clamp = (value: number, low: number, high: number): number => Math.min(high, Math.max(low, value));

/** Forward differences with a step that stays inside the bounds. */
export function finiteDifferences(
  residuals: (parameters: Float64Array) => Float64Array | null,
  parameters: Float64Array,
  at: Float64Array,
  upper: Float64Array,
  step: number,
): Float64Array[] | null {
  const columns: Float64Array[] = [];
  for (let j = 0; j < parameters.length; j++) {
    const moved = Float64Array.from(parameters);
    moved[j] += parameters[j] + step <= upper[j] ? step : -step;
    const change = moved[j] - parameters[j];
    const there = residuals(moved);
    if (there === null) return null;
    columns.push(there.map((value, k) => (value - at[k]) / change));
  }
  return columns;
}

/** Minimise Σ r² within the bounds, from `start`. */
export function minimise(problem: Problem, start: Float64Array, options: MinimiserOptions): Minimum {
  const { lower, upper } = problem;
  let parameters = start.map((value, j) => clamp(value, lower[j], upper[j]));
  const first = problem.residuals(parameters);
  if (first === null) {
    return { status: "notSolved", parameters, residuals: new Float64Array(0), sumOfSquares: Infinity, iterations: 0 };
  }
  let residuals: Float64Array = first;
  let sumOfSquares = sumOfSquaresOf(residuals);
  let damping = -1;
  let growth = 2;
  let jacobian: Float64Array[] | null = null;
  const finish = (status: Minimum["status"], iterations: number): Minimum => ({
    status,
    parameters,
    residuals,
    sumOfSquares,
    iterations,
  });

  for (let iteration = 0; iteration < options.maximumIterations; iteration++) {
    if (options.aborted?.()) return finish("aborted", iteration);
    jacobian ??= problem.jacobian(parameters, residuals);
    if (jacobian === null) return finish("notSolved", iteration);
    const columns = jacobian;
    const gradient = columns.map((column) => column.reduce((sum, value, k) => sum + value * residuals[k], 0));
    const free = columns.flatMap((_, j) => {
      const leaves = (parameters[j] <= lower[j] && gradient[j] > 0) || (parameters[j] >= upper[j] && gradient[j] < 0);
      return leaves || columns[j].every((value) => value === 0) ? [] : [j];
    });
    if (free.length === 0) return finish("converged", iteration);
    const normal = new Matrix(free.length, free.length);
    free.forEach((i, row) => {
      free.forEach((j, column) => {
        let sum = 0;
        for (let k = 0; k < residuals.length; k++) sum += columns[i][k] * columns[j][k];
        normal.set(row, column, sum);
      });
    });
    const diagonal = normal.diagonal();
    if (damping < 0) damping = options.damping * Math.max(...diagonal);

    const damped = normal.clone();
    for (let row = 0; row < free.length; row++) damped.set(row, row, diagonal[row] + damping);
    const factors = new CholeskyDecomposition(damped);
    let gain = -1;
    let trial = parameters;
    let largestStep = Infinity;
    if (factors.isPositiveDefinite()) {
      const step = factors.solve(Matrix.columnVector(free.map((j) => -gradient[j]))).to1DArray();
      trial = Float64Array.from(parameters);
      free.forEach((j, row) => {
        trial[j] = clamp(parameters[j] + step[row], lower[j], upper[j]);
      });
      largestStep = trial.reduce((largest, value, j) => Math.max(largest, Math.abs(value - parameters[j])), 0);
      const there = problem.residuals(trial);
      if (there !== null) {
        const square = sumOfSquaresOf(there);
        const predicted = free.reduce((sum, j, row) => {
          const change = trial[j] - parameters[j];
          return sum + change * (damping * step[row] - gradient[j]);
        }, 0);
        gain = (sumOfSquares - square) / Math.max(predicted, 1e-300);
        if (square < sumOfSquares) {
          const relative = (sumOfSquares - square) / sumOfSquares;
          parameters = trial;
          residuals = there;
          sumOfSquares = square;
          jacobian = null;
          options.progress?.(parameters, sumOfSquares, iteration + 1);
          damping *= Math.max(1 / 3, 1 - (2 * gain - 1) ** 3);
          growth = 2;
          if (relative < options.tolerance && largestStep < Math.sqrt(options.stepTolerance)) {
            return finish("converged", iteration + 1);
          }
          if (largestStep < options.stepTolerance) return finish("converged", iteration + 1);
          continue;
        }
      }
    }
    if (largestStep < options.stepTolerance) return finish("converged", iteration + 1);
    damping *= growth;
    growth *= 2;
    if (!Number.isFinite(damping)) return finish("converged", iteration + 1);
  }
  return finish("budgetExhausted", options.maximumIterations);
}
