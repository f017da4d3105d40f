/** The public surface of the solver. */
export { type Arc, type ArcAnalysis, arcsOf, type Curve } from "./analysis/arcs.ts";
export type { KramersKronig } from "./analysis/kramersKronig.ts";
export type { Measured } from "./analysis/measured.ts";
export {
  type ChoppedReading,
  choppedReading,
  pulseResponse,
  stepResponse,
  type TimeModel,
  timeModel,
} from "./analysis/timeResponse.ts";
export { type Drift, type Validation, validateMeasured } from "./analysis/validateMeasured.ts";
export type { Verdict } from "./analysis/verdict.ts";
export * from "./constants.ts";
export { type CurrentVoltageCurve, type CurveRequest, currentVoltageCurve } from "./driftDiffusion/currentVoltage.ts";
export { type ComplexProfile, type HarmonicProfiles, harmonicProfilesOf } from "./driftDiffusion/harmonicProfiles.ts";
export { type OperatingPoint, type OperatingPoints, operatingPointsOf } from "./driftDiffusion/operatingPoints.ts";
export { type Profiles, profilesOf } from "./driftDiffusion/profiles.ts";
export {
  type DetailedFit,
  type FitHooks,
  type FitRequest,
  type FitResult,
  type FitState,
  type FittedParameter,
  fitDocument,
  fitScenario,
} from "./fit/fit.ts";
export type { Evaluator, FitData } from "./fit/fitProblem.ts";
export type { Unresolved } from "./fit/identifiability.ts";
export { type Profile, profileLikelihood } from "./fit/profile.ts";
export * from "./result.ts";
export * from "./scenario/device.ts";
export * from "./scenario/errors.ts";
export * from "./scenario/frequencies.ts";
export * from "./scenario/hash.ts";
export * from "./scenario/paths.ts";
export * from "./scenario/quantities.ts";
export * from "./scenario/resolve.ts";
export type * from "./scenario/resolved.ts";
export type * from "./scenario/schema.ts";
export {
  biasSchema,
  formatName,
  limits,
  modelKinds,
  scenarioSchema,
  spectrumRequestSchema,
  techniques,
} from "./scenario/schema.ts";
export { warningsOf } from "./scenario/warnings.ts";
export { type SolvedSpectra, type SolveOptions, type SolverMemory, solve, solveSpectra } from "./solve.ts";
export * from "./version.ts";
