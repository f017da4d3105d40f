/**
 * What is fitted to what: data of any techniques, light levels and scenarios in one vector of weighted residuals.
 *
 * | symbol | meaning | shape |
 * |---|---|---|
 * | values | free parameters, bench units | n |
 * | residuals | (model − data)/σ, Re and Im of every row of every file in turn | m |
 */
import type { Measured } from "../analysis/measured.ts";
import { noiseScale } from "../analysis/noiseScale.ts";
import type { SpectrumResult } from "../result.ts";
import { refuse, ScenarioError } from "../scenario/errors.ts";
import { parseScenario } from "../scenario/resolve.ts";
import type { ResolvedScenario } from "../scenario/resolved.ts";
import type { Bias, ScenarioDocument, Technique } from "../scenario/schema.ts";
import { limits } from "../scenario/schema.ts";
import { parseDocument } from "../scenario/validate.ts";
import { type Bounds, type Derived, type FreeParameter, freeParameters, withValues } from "./parameters.ts";

export interface FitData extends Measured {
  /** How messages name it. */
  name: string;
  technique: Technique;
  /** Absent: as in the scenario document where a spectrum leaves them out. */
  bias?: Bias;
  fluxPerCm2S?: number;
  /** Index of the scenario it belongs to, 0 where left out: light from both sides, for example. */
  scenario?: number;
}

/** Spectra of one scenario in its order; throws ScenarioError where the model refuses. */
export interface Evaluator {
  spectra(scenario: ResolvedScenario): readonly SpectrumResult[];
  /** ∂/∂value of (re, im) of every spectrum, one entry per parameter; finite differences where it is left out. */
  sensitivities?(
    scenario: ResolvedScenario,
    parameters: readonly FreeParameter[],
  ): { re: Float64Array; im: Float64Array }[][];
}

/** Files of one scenario with the same frequencies are solved together. */
interface Group {
  document: ScenarioDocument;
  frequencyHz: number[];
  /** Per spectrum: place in the residual vector, and which frequency each row has. */
  members: { data: FitData; offset: number; place: number[] }[];
}

export interface FitProblem {
  parameters: FreeParameter[];
  /** Whether σ is known, or only its shape. */
  knownNoise: boolean;
  /** Number of real data, twice the rows. */
  count: number;
  /** Residuals at values; null where a spectrum was not solved or the model refuses. */
  residuals(values: ArrayLike<number>): Float64Array | null;
  /** ∂residuals/∂value per parameter from the evaluator's sensitivities; null where it has none or they fail. */
  sensitivities(values: ArrayLike<number>): Float64Array[] | null;
}

/** Relative noise below which a file gets no more weight against the others. */
const leastNoise = 1e-6;

function groupsOf(documents: readonly ScenarioDocument[], data: readonly FitData[]): Group[] {
  const groups = new Map<string, Group>();
  let offset = 0;
  for (const file of data) {
    const index = file.scenario ?? 0;
    const frequencyHz = [...new Set(file.frequencyHz)].sort((a, b) => a - b);
    const key = `${index}:${frequencyHz.join(",")}`;
    if (frequencyHz.length > limits.frequencies)
      refuse(file.name, `has ${frequencyHz.length} frequencies`, `at most ${limits.frequencies}`);
    let group = groups.get(key);
    if (group === undefined || group.members.length >= limits.spectra) {
      group = { document: documents[index], frequencyHz, members: [] };
      groups.set(key, group);
    }
    const place = new Map(frequencyHz.map((frequency, k) => [frequency, k]));
    group.members.push({ data: file, offset, place: file.frequencyHz.map((frequency) => place.get(frequency)!) });
    offset += 2 * file.frequencyHz.length;
  }
  return [...groups.values()].map((group) => ({
    ...group,
    document: {
      ...group.document,
      frequencies: { listHz: group.frequencyHz },
      spectra: group.members.map(({ data: { technique, bias, fluxPerCm2S } }) => ({
        technique,
        ...(bias !== undefined && { bias }),
        ...(fluxPerCm2S !== undefined && { fluxPerCm2S }),
      })),
    },
  }));
}

/** Standard deviation per row, and whether it is known. */
function deviationsOf(file: FitData): { sigma: number[]; known: boolean } {
  const { scale, noise, known } = noiseScale(file);
  return { sigma: scale.map((value) => value * (known ? 1 : Math.max(noise, leastNoise)) || 1), known };
}

/**
 * Build a fit.
 * @param inputs scenario documents of any origin; the paths are free in all of them alike, start values are the first one's
 * @throws ScenarioError with what is wrong with document, paths, bounds or data
 */
export function buildProblem(
  inputs: readonly unknown[],
  data: readonly FitData[],
  free: readonly string[],
  bounds: Bounds,
  evaluator: Evaluator,
): FitProblem {
  const documents = inputs.map((input) => {
    parseScenario(input);
    return parseDocument(input);
  });
  if (data.length === 0) refuse("data", "are missing", "one or more files");
  if (free.length === 0) refuse("free", "names no parameter", "one or more paths");
  const groups = groupsOf(documents, data);
  const deviations = data.map(deviationsOf);
  const sigma = deviations.flatMap((entry) => entry.sigma);
  const count = 2 * sigma.length;

  const first = parseScenario(groups[0].document);
  const [solved] = free.some((path) => path.includes("model.overrides.")) ? evaluator.spectra(first) : [];
  const derived: Derived = solved?.status === "solved" ? (solved.derived ?? {}) : {};
  const parameters = freeParameters(first, free, bounds, derived);
  // what the model refuses at the start is a refused request; refused values on the way are only steps not taken
  const starts = parameters.map(({ start }) => start);
  for (const { document } of groups) evaluator.spectra(parseScenario(withValues(document, parameters, starts)));

  const place = (
    target: Float64Array,
    member: Group["members"][number],
    re: ArrayLike<number>,
    im: ArrayLike<number>,
    less: boolean,
  ) => {
    member.place.forEach((k, row) => {
      const at = member.offset + 2 * row;
      target[at] = (re[k] - (less ? member.data.re[row] : 0)) / sigma[at / 2];
      target[at + 1] = (im[k] - (less ? member.data.im[row] : 0)) / sigma[at / 2];
    });
  };

  return {
    parameters,
    knownNoise: deviations.every(({ known }) => known),
    count,
    residuals(values) {
      const residuals = new Float64Array(count);
      try {
        for (const { document, members } of groups) {
          const spectra = evaluator.spectra(parseScenario(withValues(document, parameters, values)));
          for (const [k, member] of members.entries()) {
            const spectrum = spectra[k];
            if (spectrum.status !== "solved") return null;
            place(residuals, member, spectrum.re, spectrum.im, true);
          }
        }
      } catch (error) {
        if (error instanceof ScenarioError) return null;
        throw error;
      }
      return residuals.every(Number.isFinite) ? residuals : null;
    },
    sensitivities(values) {
      if (!evaluator.sensitivities) return null;
      const columns = parameters.map(() => new Float64Array(count));
      for (const { document, members } of groups) {
        const scenario = parseScenario(withValues(document, parameters, values));
        const derivatives = evaluator.sensitivities(scenario, parameters);
        members.forEach((member, k) => {
          columns.forEach((column, j) => {
            place(column, member, derivatives[j][k].re, derivatives[j][k].im, false);
          });
        });
      }
      return columns;
    },
  };
}
