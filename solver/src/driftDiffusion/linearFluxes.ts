/**
 * The linearised equations in conservative form: fluxes through edges, and what remains at nodes.
 *
 * | symbol | meaning | shape |
 * |---|---|---|
 * | y | solution as an unevaluated sum of two doubles, complex | nodes × m each |
 * | δJ_n, δJ_p | C Δδu + J [± mean δu ± mean δφ̃ + s Δδφ̃] (+ electrons, − holes), s = fieldSlope | edges |
 *
 * Assembled blocks lose what is smaller than one rounding of the largest conductance at a node; differences across edges do
 * not. Residuals in this form make iterative refinement converge to currents that are the same at every depth even where
 * a part of the stack floats between barriers. Refinement with the solution in two doubles: N. J. Higham, Accuracy and
 * Stability of Numerical Algorithms, 2nd ed. (2002), ch. 12.
 */
import type { HarmonicRelaxation, HarmonicSystem } from "../linearAlgebra/harmonicSystem.ts";
import type { SmallSignalParts } from "./assembly.ts";
import type { Problem } from "./problem.ts";

/** One complex solution, nodes × m, as a sum of two doubles; the low parts may be absent. */
export interface Field {
  re: Float64Array;
  im: Float64Array;
  lowRe: Float64Array | null;
  lowIm: Float64Array | null;
}

export interface LinearEquations {
  problem: Problem;
  system: HarmonicSystem;
  parts: SmallSignalParts;
  /** Edge that carries the e.m.f. */
  cut: number;
  /** D/h · c of the ion species followed in unknowns 3, 4, … per edge, and their charges. */
  ionConductance: Float64Array[];
  ionCharge: (1 | -1)[];
}

/** Fluxes through one edge: [displacement in charges, electrons J_n/q, holes J_p/q, ions …], real and imaginary. */
export interface EdgeFluxes {
  re: Float64Array;
  im: Float64Array;
}

/** Fills `target` with the fluxes through edge e; `emf` is δv. */
export function linearFluxes(
  equations: LinearEquations,
  field: Field,
  e: number,
  emf: number,
  target: EdgeFluxes,
): void {
  const { problem, system, parts, cut } = equations;
  const m = system.blockSize;
  const left = e * m;
  const right = left + m;
  const step = e === cut ? problem.sign * emf : 0;
  for (let part = 0; part < 2; part++) {
    const value = part === 0 ? field.re : field.im;
    const low = part === 0 ? field.lowRe : field.lowIm;
    const out = part === 0 ? target.re : target.im;
    const shift = part === 0 ? step : 0;
    const difference = (unknown: number) => {
      const high = value[right + unknown] - value[left + unknown];
      return low ? high + (low[right + unknown] - low[left + unknown]) : high;
    };
    const mean = (unknown: number) => 0.5 * (value[right + unknown] + value[left + unknown]);
    const potential = difference(0) + shift;
    out[0] = problem.permittivity[e] * potential;
    const slope = parts.fieldSlope[e] * potential;
    out[1] =
      parts.electronConductance[e] * (difference(1) - shift) + parts.electronFlux[e] * (mean(1) + mean(0) + slope);
    out[2] = parts.holeConductance[e] * (difference(2) - shift) + parts.holeFlux[e] * (slope - mean(2) - mean(0));
    for (let k = 3; k < m; k++) out[k] = equations.ionConductance[k - 3][e] * (difference(k) - shift);
  }
}

/** Signs with which an edge's fluxes enter the rows of the node in front of it. */
function rowSign(equations: LinearEquations, row: number): number {
  if (row < 2) return 1;
  return row === 2 || equations.ionCharge[row - 3] === 1 ? -1 : 1;
}

/** residual ← b − (K + iωM + …) y with the e.m.f. δv in place. */
export function linearResidual(
  equations: LinearEquations,
  field: Field,
  omega: number,
  rightHandSide: Float64Array | null,
  emf: number,
  residual: { re: Float64Array; im: Float64Array },
): void {
  const { system, parts } = equations;
  const { nodes, blockSize: m } = system;
  const { re, im } = residual;
  if (rightHandSide) re.set(rightHandSide);
  else re.fill(0);
  im.fill(0);
  const { storage } = parts;
  for (let i = 0; i < nodes; i++)
    for (let row = i === 0 || i === nodes - 1 ? 1 : 0; row < m; row++) {
      const at = i * m + row;
      for (let c = 0; c < m; c++) {
        const local = parts.local[at * m + c];
        const stored = omega * storage[at * m + c];
        const x = field.re[i * m + c];
        const y = field.im[i * m + c];
        re[at] -= local * x - stored * y;
        im[at] -= local * y + stored * x;
      }
    }
  for (const relaxation of system.relaxations ?? []) subtractRelaxation(relaxation, m, field, omega, residual);
  const fluxes: EdgeFluxes = { re: new Float64Array(m), im: new Float64Array(m) };
  for (let e = 0; e < nodes - 1; e++) {
    linearFluxes(equations, field, e, emf, fluxes);
    for (let row = 0; row < m; row++) {
      const sign = rowSign(equations, row);
      if (row > 0 || e > 0) {
        re[e * m + row] += sign * fluxes.re[row];
        im[e * m + row] += sign * fluxes.im[row];
      }
      if (row > 0 || e + 1 < nodes - 1) {
        re[(e + 1) * m + row] -= sign * fluxes.re[row];
        im[(e + 1) * m + row] -= sign * fluxes.im[row];
      }
    }
  }
  for (const contact of [0, (nodes - 1) * m]) {
    re[contact] = -field.re[contact];
    im[contact] = -field.im[contact];
  }
}

function subtractRelaxation(
  { node, decay, column, row }: HarmonicRelaxation,
  m: number,
  field: Field,
  omega: number,
  residual: { re: Float64Array; im: Float64Array },
): void {
  let x = 0;
  let y = 0;
  for (let c = 0; c < m; c++) {
    x += row[c] * field.re[node * m + c];
    y += row[c] * field.im[node * m + c];
  }
  const size = decay * decay + omega * omega;
  const re = (x * decay + y * omega) / size;
  const im = (y * decay - x * omega) / size;
  for (let a = 0; a < m; a++) {
    residual.re[node * m + a] -= column[a] * re;
    residual.im[node * m + a] -= column[a] * im;
  }
}

/** Adds a correction to a field kept in two doubles. */
export function addCorrection(field: Field, re: Float64Array, im: Float64Array): void {
  field.lowRe ??= new Float64Array(re.length);
  field.lowIm ??= new Float64Array(im.length);
  for (const [high, low, change] of [
    [field.re, field.lowRe, re],
    [field.im, field.lowIm, im],
  ])
    for (let k = 0; k < high.length; k++) {
      const added = low[k] + change[k];
      const sum = high[k] + added;
      const part = sum - high[k];
      low[k] = high[k] - (sum - part) + (added - part);
      high[k] = sum;
    }
}

/** Total current / q in the direction of x of an edge's fluxes at ω: conduction and displacement −iω δ(charges). */
export function totalCurrent(fluxes: EdgeFluxes, omega: number): { re: number; im: number } {
  let re = omega * fluxes.im[0];
  let im = -omega * fluxes.re[0];
  for (let k = 1; k < fluxes.re.length; k++) {
    re += fluxes.re[k];
    im += fluxes.im[k];
  }
  return { re, im };
}
