/**
 * Profile likelihood of one parameter: the smallest χ² that the others allow at each of its values. The 95 % interval is
 * where it rises by less than 3.841 (A. Raue et al., Bioinformatics 25, 1923 (2009)); a side without an end says that the
 * data do not limit the parameter there.
 */
import quantileChiSquare from "@stdlib/stats-base-dists-chisquare-quantile";
import { refuse } from "../scenario/errors.ts";
import { parseDocument } from "../scenario/validate.ts";
import { type DetailedFit, type FitRequest, fitScenario, solverEvaluator } from "./fit.ts";
import { buildProblem } from "./fitProblem.ts";
import { withValues } from "./parameters.ts";

export interface Profile {
  path: string;
  values: number[];
  /** χ² less that of the fit, in units of the noise; null where nothing was solved. */
  rise: (number | null)[];
  /** Where the profile crosses the 95 % threshold; null on a side where it does not within the values given. */
  interval95: [number | null, number | null];
}

/** Rise of χ² that bounds 95 % for one parameter: 3.841. */
const threshold = quantileChiSquare(0.95, 1);

/**
 * Profile of one fitted parameter.
 * @param result what `fitScenario` gave for the same request
 * @param values where to look, ascending
 * @throws ScenarioError where the path is not free in the request
 */
export function profileLikelihood(
  request: FitRequest,
  result: DetailedFit,
  path: string,
  values: readonly number[],
): Profile {
  const at = request.free.indexOf(path);
  if (at < 0) refuse(path, "is not free in this fit", request.free.join(", "));
  const evaluator = request.evaluator ?? solverEvaluator();
  const fitted = result.parameters.map(({ value }) => value);
  const scenarios = request.scenarios.map(parseDocument);
  const others = request.free.filter((one) => one !== path);
  const bounds = Object.fromEntries(Object.entries(request.bounds ?? {}).filter(([one]) => one !== path));
  const problem = buildProblem(scenarios, request.data, request.free, request.bounds ?? {}, evaluator);
  const variance = problem.knownNoise ? 1 : result.state.sumOfSquares / Math.max(1, result.degreesOfFreedom);

  const squareAt = (value: number): number | null => {
    const moved = fitted.with(at, value);
    if (others.length === 0) return problem.residuals(moved)?.reduce((sum, entry) => sum + entry * entry, 0) ?? null;
    const documents = scenarios.map((document) => withValues(document, problem.parameters, moved));
    const fit = fitScenario({ ...request, scenarios: documents, free: others, bounds, maximumStarts: 1, evaluator });
    return fit.status === "notSolved" ? null : fit.state.sumOfSquares;
  };
  const rise = values.map((value) => {
    const square = squareAt(value);
    return square === null ? null : (square - result.state.sumOfSquares) / variance;
  });
  return {
    path,
    values: [...values],
    rise,
    interval95: [end(values, rise, fitted[at], -1), end(values, rise, fitted[at], 1)],
  };
}

/** First crossing of the threshold on one side of the fitted value, linear between neighbours. */
function end(values: readonly number[], rise: readonly (number | null)[], fitted: number, side: 1 | -1): number | null {
  let before = { value: fitted, rise: 0 };
  const order = values.map((_, k) => k).filter((k) => side * (values[k] - fitted) > 0);
  if (side < 0) order.reverse();
  for (const k of order) {
    const here = rise[k];
    if (here === null) return null;
    if (here > threshold) {
      return before.value + ((values[k] - before.value) * (threshold - before.rise)) / (here - before.rise);
    }
    before = { value: values[k], rise: here };
  }
  return null;
}
