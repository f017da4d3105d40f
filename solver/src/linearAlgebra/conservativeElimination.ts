/**
 * Conservative systems with row exchanges inside the blocks, one frequency at a time: the reference, and the way out where the kernel is
 * missing or meets a pivot out of proportion. The method is that of kernel/elimination.ts.
 *
 *   symbol   meaning                                                                   shape
 *   H, h     flux towards the nodes that remain = H x + h at the node reached so far    m × m, m × drives
 *   P, E     flux through the edge = P Δ + E x' + j⁰ with Δ = x' − x, P = C − E/2        m × m
 *   S        (P + H)⁻¹                                                                 m × m
 *   W, u     Δ = W x' + u: W = S (H − E), u = S (h − j⁰)                                 m × m, m × drives
 */
import {
  type ConservativeSolver,
  type ConservativeStatus,
  type ConservativeSystem,
  checkConservativeSystem,
  checkQuestion,
  type Profiles,
  type Readings,
  withHeldUnknowns,
} from "./conservativeSystem.ts";

/** Complex matrix, row-major, real and imaginary parts interleaved. */
class Block {
  readonly rows: number;
  readonly columns: number;
  readonly values: Float64Array;

  constructor(rows: number, columns: number, values = new Float64Array(2 * rows * columns)) {
    this.rows = rows;
    this.columns = columns;
    this.values = values;
  }

  copy(): Block {
    return new Block(this.rows, this.columns, this.values.slice());
  }

  /** Adds `factor` times a real block. */
  addReal(blocks: Float64Array, start: number, factor: number): this {
    for (let k = 0; k < this.rows * this.columns; k++) this.values[2 * k] += factor * blocks[start + k];
    return this;
  }

  add(other: Block, factor = 1): this {
    for (let k = 0; k < this.values.length; k++) this.values[k] += factor * other.values[k];
    return this;
  }

  times(other: Block): Block {
    const product = new Block(this.rows, other.columns);
    for (let a = 0; a < this.rows; a++)
      for (let e = 0; e < this.columns; e++) {
        const x = this.values[2 * (a * this.columns + e)];
        const y = this.values[2 * (a * this.columns + e) + 1];
        if (x === 0 && y === 0) continue;
        for (let c = 0; c < other.columns; c++) {
          const at = 2 * (a * other.columns + c);
          const u = other.values[2 * (e * other.columns + c)];
          const v = other.values[2 * (e * other.columns + c) + 1];
          product.values[at] += x * u - y * v;
          product.values[at + 1] += x * v + y * u;
        }
      }
    return product;
  }

  /** Inverse by Gauss–Jordan with scaled partial pivoting (Golub & Van Loan, Matrix Computations, 4th ed. 2013, §3.4); null when singular. */
  inverse(): Block | null {
    const m = this.rows;
    const width = 2 * m;
    const work = new Block(m, width);
    const size = new Float64Array(m);
    const modulus = (a: number, c: number) =>
      Math.max(Math.abs(work.values[2 * (a * width + c)]), Math.abs(work.values[2 * (a * width + c) + 1]));
    for (let a = 0; a < m; a++) {
      work.values.set(this.values.subarray(2 * a * m, 2 * (a + 1) * m), 2 * a * width);
      work.values[2 * (a * width + m + a)] = 1;
      for (let c = 0; c < m; c++) size[a] = Math.max(size[a], modulus(a, c));
    }
    for (let k = 0; k < m; k++) {
      let pivot = k;
      for (let a = k + 1; a < m; a++) if (modulus(a, k) * size[pivot] > modulus(pivot, k) * size[a]) pivot = a;
      const largest = modulus(pivot, k);
      if (!(largest > 0 && largest < Number.POSITIVE_INFINITY)) return null;
      if (pivot !== k) {
        const row = work.values.slice(2 * k * width, 2 * (k + 1) * width);
        work.values.copyWithin(2 * k * width, 2 * pivot * width, 2 * (pivot + 1) * width);
        work.values.set(row, 2 * pivot * width);
        size[pivot] = size[k];
      }
      const re = work.values[2 * (k * width + k)] / largest;
      const im = work.values[2 * (k * width + k) + 1] / largest;
      const square = re * re + im * im;
      work.multiplyRow(k, re / square / largest, -im / square / largest);
      for (let a = 0; a < m; a++) if (a !== k) work.subtractRow(a, k, k);
    }
    const inverse = new Block(m, m);
    for (let a = 0; a < m; a++)
      inverse.values.set(work.values.subarray(2 * (a * width + m), 2 * (a + 1) * width), 2 * a * m);
    return inverse;
  }

  private multiplyRow(a: number, re: number, im: number) {
    for (let at = 2 * a * this.columns; at < 2 * (a + 1) * this.columns; at += 2) {
      const x = this.values[at];
      const y = this.values[at + 1];
      this.values[at] = x * re - y * im;
      this.values[at + 1] = x * im + y * re;
    }
  }

  /** Row a minus its entry in column k times row `source`. */
  private subtractRow(a: number, source: number, k: number) {
    const re = this.values[2 * (a * this.columns + k)];
    const im = this.values[2 * (a * this.columns + k) + 1];
    if (re === 0 && im === 0) return;
    for (let c = 0; c < this.columns; c++) {
      const at = 2 * (a * this.columns + c);
      const x = this.values[2 * (source * this.columns + c)];
      const y = this.values[2 * (source * this.columns + c) + 1];
      this.values[at] -= re * x - im * y;
      this.values[at + 1] -= re * y + im * x;
    }
  }
}

/** x at every node and j at every edge, m × drives each; null when singular. */
function eliminate(
  system: ConservativeSystem,
  omega: number,
  meeting: number,
): { unknowns: Block[]; fluxes: Block[] } | null {
  const { nodes, blockSize: m, byStep, byMean, local, storage, relaxations = [], drives } = system;
  const sides = drives.length;
  const addBalance = (i: number, H: Block, h: Block) => {
    H.addReal(local, i * m * m, 1);
    for (let k = 0; k < m * m; k++) H.values[2 * k + 1] += omega * storage[i * m * m + k];
    for (const { node, decay, column, row } of relaxations) {
      if (node !== i) continue;
      const size = decay * decay + omega * omega;
      for (let a = 0; a < m; a++)
        for (let c = 0; c < m; c++) {
          H.values[2 * (a * m + c)] += (column[a] * row[c] * decay) / size;
          H.values[2 * (a * m + c) + 1] -= (column[a] * row[c] * omega) / size;
        }
    }
    drives.forEach(({ atNodes }, k) => {
      for (let a = 0; atNodes && a < m; a++) h.values[2 * (a * sides + k)] -= atNodes[i * m + a];
    });
  };
  /** Sources in an edge as a flux in the given direction. */
  const sourceIn = (e: number, direction: number) => {
    const source = new Block(m, sides);
    drives.forEach(({ inEdges }, k) => {
      for (let a = 0; inEdges && a < m; a++) source.values[2 * (a * sides + k)] = direction * inEdges[e * m + a];
    });
    return source;
  };
  const stepLaw = (e: number, direction: number) =>
    new Block(m, m).addReal(byStep, e * m * m, 1).addReal(byMean, e * m * m, -0.5 * direction);
  const [W, u]: Block[][] = [[], []];

  const sweep = (from: number, direction: number): { H: Block; h: Block } | null => {
    let H = new Block(m, m);
    let h = new Block(m, sides);
    for (let i = from; i !== meeting; i += direction) {
      addBalance(i, H, h);
      const e = direction > 0 ? i : i - 1;
      const P = stepLaw(e, direction);
      const S = P.copy().add(H).inverse();
      if (!S) return null;
      const source = sourceIn(e, direction);
      W[i] = S.times(H.copy().addReal(byMean, e * m * m, -direction));
      u[i] = S.times(h.copy().add(source, -1));
      h = P.times(S.times(h)).add(H.times(S.times(source)));
      H = P.times(W[i]).addReal(byMean, e * m * m, direction);
    }
    return { H, h };
  };
  const before = sweep(0, 1);
  const after = sweep(nodes - 1, -1);
  if (!before || !after) return null;
  const H = before.H.add(after.H);
  const h = before.h.add(after.h);
  addBalance(meeting, H, h);
  const inverse = H.inverse();
  if (!inverse) return null;
  const unknowns: Block[] = [];
  const fluxes: Block[] = [];
  unknowns[meeting] = new Block(m, sides).add(inverse.times(h), -1);
  for (const direction of [1, -1])
    for (let i = meeting - direction; i >= 0 && i < nodes; i -= direction) {
      const ahead = unknowns[i + direction];
      const e = direction > 0 ? i : i - 1;
      const step = W[i].times(ahead).add(u[i]);
      unknowns[i] = ahead.copy().add(step, -1);
      const mean = new Block(m, m).addReal(byMean, e * m * m, direction);
      const outward = stepLaw(e, direction).times(step).add(mean.times(ahead)).add(sourceIn(e, direction));
      fluxes[e] = new Block(m, sides).add(outward, direction);
    }
  return { unknowns, fluxes };
}

/**
 * Solver with row exchanges inside the blocks; plain arithmetic, any block size.
 * @throws RangeError when an array of the system has the wrong length
 */
export function pivotedConservativeSolver(original: ConservativeSystem): ConservativeSolver {
  checkConservativeSystem(original);
  const system = withHeldUnknowns(original);
  const { nodes, blockSize: m, drives, reading } = system;
  const sides = drives.length;

  const readingOf = (fluxes: Block, omega: number, k: number): [number, number, number] => {
    let [re, im, part] = [0, 0, 0];
    for (let a = 0; a < m; a++) {
      const x = fluxes.values[2 * (a * sides + k)];
      const y = fluxes.values[2 * (a * sides + k) + 1];
      const harmonic = omega * reading.harmonicWeight[a];
      re += reading.weight[a] * x - harmonic * y;
      im += reading.weight[a] * y + harmonic * x;
      part = Math.max(part, Math.abs(reading.weight[a]) * Math.hypot(x, y));
    }
    return [re, im, part];
  };

  return {
    read(omegas, { edge, everywhere = true }): Readings {
      checkQuestion(system, edge, omegas);
      const empty = () => new Float64Array(omegas.length * sides);
      const status: ConservativeStatus[] = [];
      const readings: Readings = { real: empty(), imaginary: empty(), difference: empty(), part: empty(), status };
      for (let f = 0; f < omegas.length; f++) {
        const solved = eliminate(system, omegas[f], edge + 1);
        status.push(solved ? "pivoted" : "singular");
        for (let k = 0; solved && k < sides; k++) {
          const at = f * sides + k;
          const [re, im] = readingOf(solved.fluxes[edge], omegas[f], k);
          readings.real[at] = re;
          readings.imaginary[at] = im;
          for (let e = everywhere ? 0 : edge; e < (everywhere ? nodes - 1 : edge + 1); e++) {
            const [x, y, part] = readingOf(solved.fluxes[e], omegas[f], k);
            readings.difference[at] = Math.max(readings.difference[at], Math.hypot(x - re, y - im));
            readings.part[at] = Math.max(readings.part[at], part);
          }
        }
      }
      return readings;
    },

    profiles(omega): Profiles {
      checkQuestion(system, 0, [omega]);
      const solved = eliminate(system, omega, nodes >> 1);
      const unfold = (blocks: Block[] | undefined, count: number) => {
        const [real, imaginary] = [new Float64Array(sides * count * m), new Float64Array(sides * count * m)];
        blocks?.forEach(({ values }, i) => {
          for (let a = 0; a < m; a++)
            for (let k = 0; k < sides; k++) {
              real[(k * count + i) * m + a] = values[2 * (a * sides + k)];
              imaginary[(k * count + i) * m + a] = values[2 * (a * sides + k) + 1];
            }
        });
        return { real, imaginary };
      };
      return {
        unknowns: unfold(solved?.unknowns, nodes),
        fluxes: unfold(solved?.fluxes, nodes - 1),
        status: solved ? "pivoted" : "singular",
      };
    },
  };
}
