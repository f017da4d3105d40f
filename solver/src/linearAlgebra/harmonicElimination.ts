/**
 * Harmonic systems by block elimination with scaled partial pivoting inside the blocks, one frequency at a time. The reference, and the
 * way out where the fast kernel is missing or meets a small pivot.
 *
 *   symbol     meaning                                                       shape
 *   D_i        diagonal block after its neighbours towards the ends are gone m × m, complex
 *   X_i        D_i⁻¹ [C_i | b_i], C_i coupling to the node eliminated next    m × (m + right-hand sides), complex
 *
 * Scaled partial pivoting: Golub & Van Loan, Matrix Computations, 4th ed. (2013), §3.4 and §3.5. Refinement: §3.5.3.
 */
import { equilibrate } from "./harmonicEquilibration.ts";
import {
  checkHarmonicSystem,
  type HarmonicRequest,
  type HarmonicSolution,
  type HarmonicSolver,
  type HarmonicSystem,
  resolveHarmonicRequest,
} from "./harmonicSystem.ts";

/** Complex values of all nodes: [right-hand side][node][unknown]. */
interface ComplexField {
  real: Float64Array;
  imaginary: Float64Array;
}

/** Work space of one system: augmented blocks [D | coupling | right-hand sides] of every node. */
class Elimination {
  readonly m: number;
  readonly width: number;
  readonly real: Float64Array;
  readonly imaginary: Float64Array;
  readonly system: HarmonicSystem;

  constructor(system: HarmonicSystem) {
    this.system = system;
    this.m = system.blockSize;
    this.width = 2 * this.m + system.rightHandSides.length;
    this.real = new Float64Array(system.nodes * this.m * this.width);
    this.imaginary = new Float64Array(this.real.length);
  }

  /** Writes [D | coupling | b] of node i; coupling is `upper`, `lower` or absent. */
  private load(i: number, omega: number, b: ComplexField, coupling: Float64Array | undefined) {
    const { system, m, width, real, imaginary } = this;
    const start = i * m * width;
    for (let a = 0; a < m; a++) {
      const row = start + a * width;
      const source = (i * m + a) * m;
      for (let c = 0; c < m; c++) {
        real[row + c] = system.diagonal[source + c];
        imaginary[row + c] = omega * system.storage[source + c];
        real[row + m + c] = coupling ? coupling[source + c] : 0;
        imaginary[row + m + c] = 0;
      }
      for (let k = 0; k < system.rightHandSides.length; k++) {
        real[row + 2 * m + k] = b.real[(k * system.nodes + i) * m + a];
        imaginary[row + 2 * m + k] = b.imaginary[(k * system.nodes + i) * m + a];
      }
    }
    for (const { node, decay, column, row } of system.relaxations ?? []) {
      if (node !== i) continue;
      const size = decay * decay + omega * omega;
      for (let a = 0; a < m; a++)
        for (let c = 0; c < m; c++) {
          real[start + a * width + c] += (column[a] * row[c] * decay) / size;
          imaginary[start + a * width + c] -= (column[a] * row[c] * omega) / size;
        }
    }
  }

  /** [D | b] of node i minus the coupling block `blocks` times X of the eliminated neighbour j. */
  private subtract(i: number, blocks: Float64Array, j: number) {
    const { m, width, real, imaginary } = this;
    for (let a = 0; a < m; a++)
      for (let e = 0; e < m; e++) {
        const factor = blocks[(i * m + a) * m + e];
        if (factor === 0) continue;
        const target = (i * m + a) * width;
        const source = (j * m + e) * width;
        for (let c = 0; c < m; c++) {
          real[target + c] -= factor * real[source + m + c];
          imaginary[target + c] -= factor * imaginary[source + m + c];
        }
        for (let c = 2 * m; c < width; c++) {
          real[target + c] -= factor * real[source + c];
          imaginary[target + c] -= factor * imaginary[source + c];
        }
      }
  }

  /** Gauss–Jordan on the augmented block of node i, so that its columns from m on become D⁻¹ times themselves. False when singular. */
  private reduce(i: number): boolean {
    const { m, width, real, imaginary } = this;
    const start = i * m * width;
    const size = new Float64Array(m);
    const modulus = (at: number) => Math.abs(real[at]) + Math.abs(imaginary[at]);
    for (let a = 0; a < m; a++) for (let c = 0; c < m; c++) size[a] = Math.max(size[a], modulus(start + a * width + c));
    for (let k = 0; k < m; k++) {
      let pivot = k;
      let best = -1;
      for (let a = k; a < m; a++) {
        const relative = size[a] > 0 ? modulus(start + a * width + k) / size[a] : 0;
        if (relative > best) [pivot, best] = [a, relative];
      }
      const row = start + k * width;
      if (pivot !== k) {
        const other = start + pivot * width;
        for (let c = k; c < width; c++) {
          [real[row + c], real[other + c]] = [real[other + c], real[row + c]];
          [imaginary[row + c], imaginary[other + c]] = [imaginary[other + c], imaginary[row + c]];
        }
        size[pivot] = size[k];
      }
      const re = real[row + k];
      const im = imaginary[row + k];
      const square = re * re + im * im;
      if (!(square > 0 && square < Number.POSITIVE_INFINITY)) return false;
      const inverseReal = re / square;
      const inverseImaginary = -im / square;
      for (let c = k + 1; c < width; c++) {
        const x = real[row + c];
        const y = imaginary[row + c];
        real[row + c] = x * inverseReal - y * inverseImaginary;
        imaginary[row + c] = x * inverseImaginary + y * inverseReal;
      }
      for (let a = 0; a < m; a++) {
        if (a === k) continue;
        const target = start + a * width;
        const x = real[target + k];
        const y = imaginary[target + k];
        if (x === 0 && y === 0) continue;
        for (let c = k + 1; c < width; c++) {
          real[target + c] -= x * real[row + c] - y * imaginary[row + c];
          imaginary[target + c] -= x * imaginary[row + c] + y * real[row + c];
        }
      }
    }
    return true;
  }

  /** x_i += [D⁻¹b]_i − X_i x_j for node i; without j, x_i += [D⁻¹b]_i. */
  private substitute(i: number, j: number | undefined, step: ComplexField) {
    const { system, m, width, real, imaginary } = this;
    for (let k = 0; k < system.rightHandSides.length; k++)
      for (let a = 0; a < m; a++) {
        const row = (i * m + a) * width;
        let x = real[row + 2 * m + k];
        let y = imaginary[row + 2 * m + k];
        for (let e = 0; j !== undefined && e < m; e++) {
          const neighbour = (k * system.nodes + j) * m + e;
          x -= real[row + m + e] * step.real[neighbour] - imaginary[row + m + e] * step.imaginary[neighbour];
          y -= real[row + m + e] * step.imaginary[neighbour] + imaginary[row + m + e] * step.real[neighbour];
        }
        step.real[(k * system.nodes + i) * m + a] = x;
        step.imaginary[(k * system.nodes + i) * m + a] = y;
      }
  }

  /** Solves for nodes first…last into `step`; false when a block is singular. */
  solve(omega: number, b: ComplexField, first: number, last: number, step: ComplexField): boolean {
    const { system } = this;
    const { nodes, lower, upper } = system;
    for (let i = 0; i < last; i++) {
      this.load(i, omega, b, upper);
      if (i > 0) this.subtract(i, lower, i - 1);
      if (!this.reduce(i)) return false;
    }
    for (let i = nodes - 1; i > last; i--) {
      this.load(i, omega, b, lower);
      if (i < nodes - 1) this.subtract(i, upper, i + 1);
      if (!this.reduce(i)) return false;
    }
    this.load(last, omega, b, undefined);
    if (last > 0) this.subtract(last, lower, last - 1);
    if (last < nodes - 1) this.subtract(last, upper, last + 1);
    if (!this.reduce(last)) return false;
    this.substitute(last, undefined, step);
    for (let i = last - 1; i >= first; i--) this.substitute(i, i + 1, step);
    return true;
  }
}

/** b − A x of the whole system at one frequency, [right-hand side][node][unknown]. */
export function harmonicResidual(system: HarmonicSystem, omega: number, x: ComplexField): ComplexField {
  const { nodes, blockSize: m, rightHandSides } = system;
  const length = rightHandSides.length * nodes * m;
  const residual = { real: new Float64Array(length), imaginary: new Float64Array(length) };
  rightHandSides.forEach((b, k) => {
    residual.real.set(b, k * nodes * m);
    const offset = k * nodes * m;
    for (let i = 0; i < nodes; i++)
      for (let a = 0; a < m; a++) {
        const at = (i * m + a) * m;
        let re = residual.real[offset + i * m + a];
        let im = 0;
        for (let c = 0; c < m; c++) {
          const here = offset + i * m + c;
          const d = system.diagonal[at + c];
          const s = omega * system.storage[at + c];
          re -= d * x.real[here] - s * x.imaginary[here];
          im -= d * x.imaginary[here] + s * x.real[here];
          if (i > 0) {
            re -= system.lower[at + c] * x.real[here - m];
            im -= system.lower[at + c] * x.imaginary[here - m];
          }
          if (i < nodes - 1) {
            re -= system.upper[at + c] * x.real[here + m];
            im -= system.upper[at + c] * x.imaginary[here + m];
          }
        }
        residual.real[offset + i * m + a] = re;
        residual.imaginary[offset + i * m + a] = im;
      }
    for (const { node, decay, column, row } of system.relaxations ?? []) {
      const size = decay * decay + omega * omega;
      let re = 0;
      let im = 0;
      for (let c = 0; c < m; c++) {
        re += row[c] * x.real[offset + node * m + c];
        im += row[c] * x.imaginary[offset + node * m + c];
      }
      for (let a = 0; a < m; a++) {
        residual.real[offset + node * m + a] -= (column[a] * (re * decay + im * omega)) / size;
        residual.imaginary[offset + node * m + a] -= (column[a] * (im * decay - re * omega)) / size;
      }
    }
  });
  return residual;
}

/**
 * Solver with row exchanges inside the blocks; plain arithmetic, any block size.
 * @throws RangeError when an array of the system has the wrong length
 */
export function pivotedHarmonicSolver(original: HarmonicSystem): HarmonicSolver {
  checkHarmonicSystem(original);
  const { system, columnScale } = equilibrate(original);
  const { nodes, blockSize: m } = system;
  const count = system.rightHandSides.length;
  const elimination = new Elimination(system);
  const field = (): ComplexField => ({
    real: new Float64Array(count * nodes * m),
    imaginary: new Float64Array(count * nodes * m),
  });
  const [b, x, step] = [field(), field(), field()];

  return {
    solve(angularFrequencies: ArrayLike<number>, request: HarmonicRequest = {}): HarmonicSolution {
      const { firstNode, lastNode, refinements } = resolveHarmonicRequest(system, request);
      const [first, last] = refinements > 0 ? [0, nodes - 1] : [firstNode, lastNode];
      const wanted = (lastNode - firstNode + 1) * m;
      const solution: HarmonicSolution = {
        firstNode,
        lastNode,
        blockSize: m,
        real: new Float64Array(angularFrequencies.length * count * wanted),
        imaginary: new Float64Array(angularFrequencies.length * count * wanted),
        status: [],
      };
      for (let f = 0; f < angularFrequencies.length; f++) {
        const omega = angularFrequencies[f];
        if (!Number.isFinite(omega)) throw new RangeError(`Angular frequency ${omega}, expected a finite number.`);
        system.rightHandSides.forEach((values, k) => {
          b.real.set(values, k * nodes * m);
        });
        b.imaginary.fill(0);
        let solved = elimination.solve(omega, b, first, last, x);
        for (let n = 0; solved && n < refinements; n++) {
          solved = elimination.solve(omega, harmonicResidual(system, omega, x), first, last, step);
          for (let r = 0; r < step.real.length; r++) {
            x.real[r] += step.real[r];
            x.imaginary[r] += step.imaginary[r];
          }
        }
        solution.status.push(solved ? "pivoted" : "singular");
        for (let k = 0; solved && k < count; k++)
          for (let r = 0; r < wanted; r++) {
            const at = firstNode * m + r;
            solution.real[(f * count + k) * wanted + r] = x.real[k * nodes * m + at] * columnScale[at];
            solution.imaginary[(f * count + k) * wanted + r] = x.imaginary[k * nodes * m + at] * columnScale[at];
          }
      }
      return solution;
    },
  };
}
