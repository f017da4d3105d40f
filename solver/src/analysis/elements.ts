/**
 * A spectrum as a sum of few elements, the fewest that the data ask for.
 *
 * f(iω) = R∞ + Σ A_k·shape_k(iωτ_k) [+ 1/(iωC) + iωL], amplitudes of both signs, each shape 1 at ω = 0 and 0 at ω → ∞:
 *
 * | shape | form | source |
 * |---|---|---|
 * | relaxation | 1/(1 + x) | P. Debye |
 * | depressed | 1/(1 + x^β) | K. S. Cole, R. H. Cole, J. Chem. Phys. 9, 341 (1941) |
 * | diffusion | tanh√x/√x | finite-length diffusion, uniform generation: L. Dloczik et al., J. Phys. Chem. B 101, 10281 (1997) |
 * | sheet | 1/cosh√x | the same film, light absorbed at the far face |
 * | transit | (1 − e^{−x})/x | uniform-field transit of a sheet of charge: G. Lucovsky et al., J. Appl. Phys. 35, 622 (1964), from memory |
 * | uniformTransit | 2[1/x − (1 − e^{−x})/x²] | the same with uniform generation, both carriers alike |
 * | resonance | 1/(1 + x/Q + x²) | damped oscillator |
 *
 * x = iωτ. Elements are added or widened one at a time, whichever lowers the Bayesian information criterion most
 * (G. Schwarz, Ann. Stat. 6, 461 (1978)), and all refined together; amplitudes are linear and eliminated
 * (variable projection, G. Golub, V. Pereyra, SIAM J. Numer. Anal. 10, 413 (1973), with the derivative of L. Kaufman,
 * BIT 15, 49 (1975)).
 */
import { minimise } from "../fit/levenbergMarquardt.ts";
import { add, type Complex, complex } from "../numerics/complex.ts";
import type { Samples } from "./aaa.ts";
import { type LeastSquares, leastSquares, projectOut } from "./leastSquares.ts";

export type Shape = "relaxation" | "depressed" | "diffusion" | "sheet" | "transit" | "uniformTransit" | "resonance";

export interface Element {
  shape: Shape;
  /** ln of the time constant, unit of 1/omega. */
  logTime: number;
  /** β of a depressed element, Q of a resonance; 1 otherwise. */
  form: number;
  amplitude: number;
}

export interface ElementFit {
  elements: Element[];
  offset: number;
  /** Coefficients of 1/(iω) and iω; 0 where not asked for. */
  inverseCapacitance: number;
  inductance: number;
  /** Root of the residual sum of squares over the degrees of freedom: standard deviation of Re and of Im. */
  deviation: number;
  criterion: number;
}

/** Sharpest resonance that a search may use where the caller does not say. */
const sharpest = 50;

const formBounds: Record<Shape, [number, number] | null> = {
  relaxation: null,
  diffusion: null,
  sheet: null,
  transit: null,
  uniformTransit: null,
  depressed: [0.25, 1],
  resonance: [0.5, sharpest],
};

/** ωτ at which |Im| of a shape is largest: checks for the diffusive ones are tanh√(iu)/√(iu) and 1/cosh√(iu). */
export const peakOmegaTau: Record<Shape, number> = {
  relaxation: 1,
  depressed: 1,
  diffusion: 2.540646888,
  sheet: 2.331564481,
  transit: 2.33112237,
  uniformTransit: 3.141592654,
  resonance: 1,
};

/**
 * What the search tries: shape, first form, and what the criterion must gain beyond the count of unknowns. Anything but a
 * relaxation has to earn its place, so that a weak arc in noise is not given a shape that the data do not show.
 */
const trials: { shape: Shape; form: number; handicap: number }[] = [
  { shape: "relaxation", form: 1, handicap: 0 },
  { shape: "depressed", form: 0.8, handicap: 0 },
  { shape: "diffusion", form: 1, handicap: 5 },
  { shape: "sheet", form: 1, handicap: 5 },
  { shape: "transit", form: 1, handicap: 5 },
  { shape: "uniformTransit", form: 1, handicap: 5 },
  { shape: "resonance", form: 1, handicap: 5 },
];
const handicap = (shape: Shape): number => trials.find((trial) => trial.shape === shape)?.handicap ?? 0;

const families: Shape[][] = [
  ["relaxation", "depressed"],
  ["relaxation", "diffusion", "sheet"],
  ["relaxation", "depressed", "diffusion", "sheet"],
];
const allShapes = trials.map(({ shape }) => shape);
/** A step of the search must lower the criterion by this much. */
const leastGain = 4;

/** Steps of refinement for a first ranking of candidates, and for the best of them. */
const sketchIterations = 6;
const fullIterations = 50;

/** Write a shape at x = iωτ into target[at] (Re) and target[at + 1] (Im): 1 at zero, 0 at infinity. */
function writeShape(shape: Shape, omegaTau: number, form: number, target: Float64Array, at: number): void {
  const x = omegaTau;
  switch (shape) {
    case "relaxation": {
      const re = 1 / (1 + x * x);
      target[at] = re;
      target[at + 1] = -x * re;
      return;
    }
    case "depressed": {
      const size = x ** form;
      const re = 1 + size * Math.cos((Math.PI / 2) * form);
      const im = size * Math.sin((Math.PI / 2) * form);
      const square = re * re + im * im;
      target[at] = re / square;
      target[at + 1] = -im / square;
      return;
    }
    case "resonance": {
      const re = 1 - x * x;
      const im = x / form;
      const square = re * re + im * im;
      target[at] = re / square;
      target[at + 1] = -im / square;
      return;
    }
    case "transit":
      target[at] = x < 1e-4 ? 1 - (x * x) / 6 : Math.sin(x) / x;
      target[at + 1] = x < 1e-4 ? -x / 2 : (Math.cos(x) - 1) / x;
      return;
    case "uniformTransit":
      target[at] = x < 1e-2 ? 1 - (x * x) / 12 : (2 * (1 - Math.cos(x))) / (x * x);
      target[at + 1] = x < 1e-2 ? (x * x * x) / 60 - x / 3 : (2 * (Math.sin(x) - x)) / (x * x);
      return;
    case "sheet": {
      // cosh(r + ir) = cosh r cos r + i sinh r sin r, divided by e^r so that nothing overflows
      const root = Math.sqrt(x / 2);
      const decay = Math.exp(-2 * root);
      const re = ((1 + decay) / 2) * Math.cos(root);
      const im = ((1 - decay) / 2) * Math.sin(root);
      const factor = Math.exp(-root) / (re * re + im * im);
      target[at] = re * factor;
      target[at + 1] = -im * factor;
      return;
    }
    case "diffusion": {
      if (x < 1e-4) {
        target[at] = 1 - (2 / 15) * x * x;
        target[at + 1] = -x / 3;
        return;
      }
      // tanh(r + ir) = (sinh 2r + i sin 2r)/(cosh 2r + cos 2r), divided by r(1 + i)
      const root = Math.sqrt(x / 2);
      const decay = Math.exp(-2 * root);
      const below = 1 + decay * decay + 2 * decay * Math.cos(2 * root);
      const re = (1 - decay * decay) / below;
      const im = (2 * decay * Math.sin(2 * root)) / below;
      target[at] = (re + im) / (2 * root);
      target[at + 1] = (im - re) / (2 * root);
    }
  }
}

/** Contribution of an element at an angular frequency. */
export function elementAt({ shape, logTime, form, amplitude }: Element, omega: number): Complex {
  const value = new Float64Array(2);
  writeShape(shape, omega * Math.exp(logTime), form, value, 0);
  return complex(amplitude * value[0], amplitude * value[1]);
}

interface Background {
  capacitive: boolean;
  inductive: boolean;
}

export type Draft = Pick<Element, "shape" | "logTime" | "form">;

export class ElementModel {
  private readonly target: Float64Array;
  private readonly fixed: Float64Array[];
  private readonly samples: Samples;
  private readonly background: Background;
  private readonly sharpestResonance: number;
  private readonly trialColumns = new Map<Shape, { draft: Draft; column: Float64Array }[]>();

  /** @param sharpestResonance largest Q of a resonance: a sharp one could imitate a single point */
  constructor(samples: Samples, background: Background, sharpestResonance = sharpest) {
    this.samples = samples;
    this.sharpestResonance = sharpestResonance;
    this.background = background;
    const count = samples.omega.length;
    this.target = this.column((k) => complex(samples.re[k], samples.im[k]));
    this.fixed = [this.column(() => complex(1))];
    const { omega } = samples;
    if (background.capacitive) this.fixed.push(this.column((k) => complex(0, -omega[0] / omega[k])));
    if (background.inductive) this.fixed.push(this.column((k) => complex(0, omega[k] / omega[count - 1])));
  }

  private column(value: (k: number) => Complex): Float64Array {
    const count = this.samples.omega.length;
    const column = new Float64Array(2 * count);
    for (let k = 0; k < count; k++) {
      const z = value(k);
      column[2 * k] = z.re;
      column[2 * k + 1] = z.im;
    }
    return column;
  }

  private columnOf({ shape, logTime, form }: Draft): Float64Array {
    const { omega } = this.samples;
    const tau = Math.exp(logTime);
    const column = new Float64Array(2 * omega.length);
    for (let k = 0; k < omega.length; k++) writeShape(shape, omega[k] * tau, form, column, 2 * k);
    return column;
  }

  private solve(drafts: Draft[]) {
    return leastSquares([...this.fixed, ...drafts.map((draft) => this.columnOf(draft))], this.target, 1e-10);
  }

  /** Refine times and forms of all elements together. */
  refine(drafts: Draft[], maximumIterations: number): ElementFit {
    const { omega } = this.samples;
    const start: number[] = [];
    const lower: number[] = [];
    const upper: number[] = [];
    const owner: number[] = [];
    const edge = Math.log(10);
    drafts.forEach((draft, k) => {
      start.push(draft.logTime);
      lower.push(-Math.log(omega[omega.length - 1]) - edge);
      upper.push(-Math.log(omega[0]) + edge);
      owner.push(k);
      const bounds = formBounds[draft.shape];
      if (bounds === null) return;
      start.push(draft.form);
      lower.push(bounds[0]);
      upper.push(draft.shape === "resonance" ? this.sharpestResonance : bounds[1]);
      owner.push(k);
    });
    const unpack = (parameters: Float64Array): Draft[] => {
      let at = 0;
      return drafts.map((draft) => {
        const logTime = parameters[at++];
        const form = formBounds[draft.shape] === null ? 1 : parameters[at++];
        return { shape: draft.shape, logTime, form };
      });
    };
    let last: { parameters: Float64Array; solution: LeastSquares } | null = null;
    const solutionAt = (parameters: Float64Array) => {
      if (last?.parameters !== parameters) last = { parameters, solution: this.solve(unpack(parameters)) };
      return last.solution;
    };
    const minimum = minimise(
      {
        residuals: (parameters) => solutionAt(parameters).residual,
        jacobian: (parameters) => {
          const { basis, coefficients } = solutionAt(parameters);
          const present = unpack(parameters);
          return owner.map((k, j) => {
            const step = parameters[j] + 1e-6 <= upper[j] ? 1e-6 : -1e-6;
            const moved = Float64Array.from(parameters);
            moved[j] += step;
            const there = this.columnOf(unpack(moved)[k]);
            const here = this.columnOf(present[k]);
            const factor = -coefficients[this.fixed.length + k] / (moved[j] - parameters[j]);
            return projectOut(
              basis,
              there.map((value, row) => factor * (value - here[row])),
            );
          });
        },
        lower: Float64Array.from(lower),
        upper: Float64Array.from(upper),
      },
      Float64Array.from(start),
      { maximumIterations, tolerance: 1e-7, stepTolerance: 1e-9, damping: 1e-3 },
    );
    const refined = unpack(minimum.parameters);
    const { coefficients, residual } = this.solve(refined);
    const square = residual.reduce((sum, value) => sum + value * value, 0);
    const unknowns = coefficients.length + start.length;
    const data = this.target.length;
    const { capacitive, inductive } = this.background;
    return {
      elements: refined.map((draft, k) => ({ ...draft, amplitude: coefficients[this.fixed.length + k] })),
      offset: coefficients[0],
      inverseCapacitance: capacitive ? coefficients[1] * omega[0] : 0,
      inductance: inductive ? coefficients[capacitive ? 2 : 1] / omega[omega.length - 1] : 0,
      deviation: Math.sqrt(square / Math.max(1, data - unknowns)),
      criterion:
        data * Math.log(Math.max(square, 1e-280)) +
        unknowns * Math.log(data) +
        drafts.reduce((sum, draft) => sum + handicap(draft.shape), 0),
    };
  }

  /** Columns of a shape over the time constants at which it is tried: six per decade, half a decade beyond the window. */
  private trialsOf(shape: Shape, form: number): { draft: Draft; column: Float64Array }[] {
    const known = this.trialColumns.get(shape);
    if (known) return known;
    const { omega } = this.samples;
    const from = -Math.log(omega[omega.length - 1]) - 1;
    const to = -Math.log(omega[0]) + 1;
    const steps = Math.ceil((to - from) / 0.4);
    const columns = Array.from({ length: steps + 1 }, (_, step) => {
      const draft = { shape, form, logTime: from + ((to - from) * step) / steps };
      return { draft, column: this.columnOf(draft) };
    });
    this.trialColumns.set(shape, columns);
    return columns;
  }

  /** The best place for one more element of a shape: where it explains most of what is left. */
  private place(drafts: Draft[], shape: Shape, form: number): Draft {
    const { basis, residual } = this.solve(drafts);
    let best: Draft = { shape, form, logTime: 0 };
    let bestGain = -1;
    for (const { draft, column } of this.trialsOf(shape, form)) {
      const rest = projectOut(basis, Float64Array.from(column));
      let along = 0;
      let size = 0;
      for (let k = 0; k < rest.length; k++) {
        along += rest[k] * residual[k];
        size += rest[k] * rest[k];
      }
      const gain = size > 1e-12 * rest.length ? (along * along) / size : 0;
      if (gain > bestGain) {
        best = draft;
        bestGain = gain;
      }
    }
    return best;
  }

  /**
   * The description with the lowest criterion over several families of shapes; a narrow family finds its way where the
   * greedy choice among all shapes starts with a wrong one.
   * @param maximum most elements
   * @param enough end at this deviation (spectrum's unit): no need to describe what is below it
   * @param adequate rarer shapes are only tried while the deviation is above this
   * @param seeds elements to start one of the searches from, for example what another method found
   */
  search(maximum: number, enough: number, adequate: number, seeds: Draft[] = []): ElementFit {
    const starts = families.map((family) => ({ family, limit: enough, from: [] as Draft[] }));
    if (seeds.length > 0) starts.push({ family: allShapes, limit: adequate, from: seeds });
    starts.push({ family: allShapes, limit: adequate, from: [] });
    let best = this.refine([], 1);
    for (const { family, limit, from } of starts) {
      if (best.deviation <= limit) continue;
      const found = this.searchFamily(family, maximum, enough, from);
      if (found.criterion < best.criterion) best = found;
    }
    return best;
  }

  /** Add, change or remove elements until the criterion no longer falls. */
  private searchFamily(family: Shape[], maximum: number, enough: number, seeds: Draft[]): ElementFit {
    const allowed = trials.filter(({ shape }) => family.includes(shape));
    let current = this.refine(seeds, fullIterations);
    while (current.deviation > enough) {
      const { elements } = current;
      const candidates: Draft[][] = [];
      if (elements.length < maximum) {
        for (const { shape, form } of allowed) candidates.push([...elements, this.place(elements, shape, form)]);
      }
      elements.forEach((element, at) => {
        candidates.push(elements.filter((_, k) => k !== at));
        for (const { shape, form } of allowed) {
          if (shape === element.shape) continue;
          const logTime = element.logTime + Math.log(peakOmegaTau[shape] / peakOmegaTau[element.shape]);
          candidates.push(elements.map((other, k) => (k === at ? { shape, form, logTime } : other)));
        }
      });
      const sketches = candidates.map((drafts) => this.refine(drafts, sketchIterations));
      sketches.sort((a, b) => a.criterion - b.criterion);
      const fits = sketches.slice(0, 3).map((sketch) => this.refine(sketch.elements, fullIterations));
      const best = fits.reduce((a, b) => (b.criterion < a.criterion ? b : a));
      if (!(best.criterion < current.criterion - leastGain)) break;
      current = best;
    }
    return current;
  }
}

/** Value of the whole description at an angular frequency. */
export function elementFitAt(fit: ElementFit, omega: number): Complex {
  const background = complex(fit.offset, fit.inductance * omega - fit.inverseCapacitance / omega);
  return fit.elements.reduce((sum, element) => add(sum, elementAt(element, omega)), background);
}
