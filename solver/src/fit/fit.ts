/**
 * Fit a scenario to measured spectra: bounded Levenberg–Marquardt from one or several starts, then what the data determine.
 *
 * AICc = χ² + 2k + 2k(k+1)/(N−k−1) where the noise is known, N ln(RSS/N) in place of χ² otherwise (H. Akaike 1974;
 * C. Hurvich, C.-L. Tsai, Biometrika 76, 297 (1989), from memory), N real data, k parameters.
 */

import type { SolverMemory } from "../solve.ts";
import { solveSpectra } from "../solve.ts";
import { buildProblem, type Evaluator, type FitData, type FitProblem } from "./fitProblem.ts";
import { resolvable, type Uncertainty, type Unresolved, uncertaintyOf } from "./identifiability.ts";
import { finiteDifferences, type Minimum, minimise, type Problem } from "./levenbergMarquardt.ts";
import { type Bounds, coordinateOf, valueAt } from "./parameters.ts";

export interface FitRequest {
  /** One scenario document, or several that share the free parameters. */
  scenarios: readonly unknown[];
  data: readonly FitData[];
  /** Paths, tied ones joined by "+". */
  free: readonly string[];
  bounds?: Bounds;
  /** Most steps of one search; 60 where left out. */
  maximumIterations?: number;
  /** Most searches from other starting values where the first does not describe the data; 6 where left out. */
  maximumStarts?: number;
  evaluator?: Evaluator;
}

/** Where a fit stands; handed to `resume`, it goes on from there. */
export interface FitState {
  values: number[];
  /** Σ |Δ|²/σ², with the weights of the data. */
  sumOfSquares: number;
  iteration: number;
  /** Which search, from 0. */
  start: number;
}

export interface FitHooks {
  signal?: { readonly aborted: boolean };
  onProgress?: (state: FitState) => void;
  resume?: FitState;
}

export interface FittedParameter {
  path: string;
  value: number;
  standardError: number | null;
  interval95: [number, number] | null;
  identifiable: boolean;
}

type FitStatus = "converged" | "budgetExhausted" | "notSolved" | "aborted";

export interface FitResult {
  status: FitStatus;
  parameters: FittedParameter[];
  chiSquare: number | null;
  aicc: number | null;
  unresolved: Unresolved[];
}

export interface DetailedFit extends FitResult {
  /** Correlation of resolved parameters, null rows for open ones; null where the fit was not solved. */
  correlation: Uncertainty["correlation"] | null;
  singularValues: number[];
  /** Residuals divided by σ, Re and Im of every row of every file in turn. */
  residuals: number[];
  degreesOfFreedom: number;
  state: FitState;
}

const trialStep = 1e-4;
const finalStep = 1e-3;
/** Reduced χ² above which another start is tried, relative to the noise known or estimated from the data. */
const poorFit = 2;

/** The solver's own evaluator, with states carried from one call to the next. */
export function solverEvaluator(signal?: { readonly aborted: boolean }): Evaluator {
  const memory: SolverMemory = { points: null };
  return { spectra: (scenario) => solveSpectra(scenario, { memory, ...(signal && { signal }) }).spectra };
}

/** The minimiser's view: coordinates instead of values. */
function coordinatesOf(problem: FitProblem): Problem {
  const { parameters } = problem;
  const lower = Float64Array.from(parameters, (parameter) => coordinateOf(parameter, parameter.low));
  const upper = Float64Array.from(parameters, (parameter) => coordinateOf(parameter, parameter.high));
  const valuesOf = (coordinates: Float64Array) =>
    parameters.map((parameter, k) => clampedValue(parameter, coordinates[k]));
  const residuals = (coordinates: Float64Array) => problem.residuals(valuesOf(coordinates));
  return {
    residuals,
    jacobian: (coordinates, at) => {
      const values = valuesOf(coordinates);
      const analytic = problem.sensitivities(values);
      if (analytic === null) return finiteDifferences(residuals, coordinates, at, upper, trialStep);
      return analytic.map((column, j) => {
        const slope = parameters[j].logarithmic ? values[j] : parameters[j].size;
        return column.map((entry) => entry * slope);
      });
    },
    lower,
    upper,
  };
}

/** Rounding must not carry a value beyond its bounds. */
const clampedValue = (parameter: FitProblem["parameters"][number], coordinate: number): number =>
  Math.min(parameter.high, Math.max(parameter.low, valueAt(parameter, coordinate)));

/** Radical inverse of a whole number: low-discrepancy starts, the same in every run (J. H. Halton 1960). */
function radicalInverse(index: number, base: number): number {
  let result = 0;
  let factor = 1 / base;
  for (let rest = index; rest > 0; rest = Math.floor(rest / base)) {
    result += (rest % base) * factor;
    factor /= base;
  }
  return result;
}

const primes = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37];

/** Another start: up to a factor of ten from the first, or a tenth of the range of a linear parameter. */
function otherStart(problem: FitProblem, { lower, upper }: Problem, index: number): Float64Array {
  return Float64Array.from(problem.parameters, (parameter, j) => {
    const centre = coordinateOf(parameter, parameter.start);
    const reach = parameter.logarithmic ? Math.LN10 : 0.1 * (upper[j] - lower[j]);
    const move = 2 * radicalInverse(index, primes[j % primes.length]) - 1;
    return Math.min(upper[j], Math.max(lower[j], centre + reach * move));
  });
}

/** ∂r/∂ln(value), central differences; null where a neighbour cannot be solved. */
function logJacobian(problem: FitProblem, coordinates: Problem, at: Float64Array): Float64Array[] | null {
  const columns: Float64Array[] = [];
  for (const [j, parameter] of problem.parameters.entries()) {
    const ends = [-1, 1].map((side) => {
      const moved = Float64Array.from(at);
      moved[j] = Math.min(coordinates.upper[j], Math.max(coordinates.lower[j], moved[j] + side * finalStep));
      return { coordinate: moved[j], residuals: coordinates.residuals(moved) };
    });
    const [below, above] = ends;
    if (below.residuals === null || above.residuals === null) return null;
    const slope = parameter.logarithmic ? 1 : (valueAt(parameter, at[j]) || parameter.size) / parameter.size;
    const lower = below.residuals;
    columns.push(
      above.residuals.map((value, k) => (slope * (value - lower[k])) / (above.coordinate - below.coordinate)),
    );
  }
  return columns;
}

interface Search {
  minimum: Minimum;
  start: number;
}

function search(problem: FitProblem, coordinates: Problem, request: FitRequest, hooks: FitHooks): Search {
  const options = (start: number) => ({
    maximumIterations: request.maximumIterations ?? 60,
    tolerance: 1e-8,
    stepTolerance: 1e-7,
    damping: 1e-3,
    aborted: () => hooks.signal?.aborted ?? false,
    progress: (at: Float64Array, sumOfSquares: number, iteration: number) =>
      hooks.onProgress?.({
        values: problem.parameters.map((parameter, k) => clampedValue(parameter, at[k])),
        sumOfSquares,
        iteration,
        start,
      }),
  });
  const from = problem.parameters.map((parameter, k) =>
    coordinateOf(parameter, hooks.resume?.values[k] ?? parameter.start),
  );
  const first = hooks.resume?.start ?? 0;
  let best: Search = { minimum: minimise(coordinates, Float64Array.from(from), options(first)), start: first };
  const enough = poorFit * Math.max(1, problem.count - problem.parameters.length);
  for (let start = first + 1; start < (request.maximumStarts ?? 6); start++) {
    if (best.minimum.status === "aborted" || best.minimum.sumOfSquares < enough) break;
    const minimum = minimise(coordinates, otherStart(problem, coordinates, start), options(start));
    const better = minimum.sumOfSquares < best.minimum.sumOfSquares * (1 - 1e-6);
    if (better || (minimum.status === "aborted" && best.minimum.status !== "notSolved")) {
      best = better ? { minimum, start } : { minimum: { ...best.minimum, status: "aborted" }, start: best.start };
    }
  }
  return best;
}

/**
 * Fit. What cannot be solved or does not converge is a status, with the best values found.
 * @throws ScenarioError for a document, path, bound or data file that is not valid
 */
export function fitScenario(request: FitRequest, hooks: FitHooks = {}): DetailedFit {
  const evaluator = request.evaluator ?? solverEvaluator(hooks.signal);
  const problem = buildProblem(request.scenarios, request.data, request.free, request.bounds ?? {}, evaluator);
  const coordinates = coordinatesOf(problem);
  const { minimum, start } = search(problem, coordinates, request, hooks);
  const { parameters, count } = problem;
  const values = parameters.map((parameter, k) => clampedValue(parameter, minimum.parameters[k]));
  const state: FitState = { values, sumOfSquares: minimum.sumOfSquares, iteration: minimum.iterations, start };
  const solved = minimum.residuals.length > 0;
  const jacobian = solved ? logJacobian(problem, coordinates, minimum.parameters) : null;
  const degrees = count - parameters.length;
  if (jacobian === null) {
    return {
      status: minimum.status === "aborted" ? "aborted" : "notSolved",
      parameters: parameters.map(({ path }, k) => ({
        path,
        value: values[k],
        standardError: null,
        interval95: null,
        identifiable: false,
      })),
      chiSquare: null,
      aicc: null,
      unresolved: [],
      correlation: null,
      singularValues: [],
      residuals: [...minimum.residuals],
      degreesOfFreedom: degrees,
      state,
    };
  }
  const known = problem.knownNoise;
  const variance = known ? 1 : minimum.sumOfSquares / Math.max(1, degrees);
  const uncertainty = uncertaintyOf(
    parameters.map(({ path }) => path),
    jacobian,
    Math.sqrt(variance),
    known ? Infinity : degrees,
  );
  return {
    status: minimum.status,
    parameters: parameters.map((parameter, k) => ({
      path: parameter.path,
      value: values[k],
      ...estimateOf(parameter, values[k], uncertainty.logErrors[k], uncertainty.quantile),
    })),
    chiSquare: variance > 0 ? minimum.sumOfSquares / variance : 0,
    aicc: informationCriterion(minimum.sumOfSquares, count, parameters.length, known),
    unresolved: uncertainty.unresolved,
    correlation: uncertainty.correlation,
    singularValues: uncertainty.singularValues,
    residuals: [...minimum.residuals],
    degreesOfFreedom: degrees,
    state,
  };
}

function estimateOf(
  parameter: FitProblem["parameters"][number],
  value: number,
  logError: number | null,
  quantile: number,
): Pick<FittedParameter, "standardError" | "interval95" | "identifiable"> {
  if (logError === null) return { standardError: null, interval95: null, identifiable: false };
  const size = Math.abs(value) || parameter.size;
  const standardError = size * logError;
  const reach = quantile * logError;
  const interval95: [number, number] = parameter.logarithmic
    ? [value * Math.exp(-reach), value * Math.exp(reach)]
    : [value - size * reach, value + size * reach];
  const cut = interval95[0] < parameter.low || interval95[1] > parameter.high;
  return { standardError, interval95, identifiable: logError < resolvable && !cut };
}

function informationCriterion(sumOfSquares: number, count: number, parameters: number, known: boolean): number | null {
  const spare = count - parameters - 1;
  if (spare <= 0 || (!known && sumOfSquares <= 0)) return null;
  const misfit = known ? sumOfSquares : count * Math.log(sumOfSquares / count);
  return misfit + 2 * parameters + (2 * parameters * (parameters + 1)) / spare;
}

/** The result as the command line prints it. */
export const fitDocument = ({ status, parameters, chiSquare, aicc, unresolved }: FitResult): FitResult => ({
  status,
  parameters,
  chiSquare,
  aicc,
  unresolved,
});
