/**
 * Row and column scaling of a harmonic system by powers of two, which changes no digit of any entry: (R A C) y = R b, x = C y.
 *
 *   symbol   meaning                                                    shape
 *   R, C     scale of each equation and of each unknown, powers of two  nodes × m
 *
 * Rows first, then columns, by their largest entry in K (in M where K has none): Golub & Van Loan, Matrix Computations,
 * 4th ed. (2013), §3.5.2.
 */
import type { HarmonicSystem } from "./harmonicSystem.ts";

export interface EquilibratedSystem {
  /** Scaled copy; the unused blocks at the ends are zero. */
  system: HarmonicSystem;
  /** nodes × m: the unknowns of the original system are these times those of the scaled one. */
  columnScale: Float64Array;
}

const double = new Float64Array(1);
const words = new Uint32Array(double.buffer);

/** 2⁻ᵉ with 2ᵉ ≤ size < 2ᵉ⁺¹; 1 for zero. The exponent is read from the number's bits (IEEE 754, little endian). */
function powerOfTwoReciprocal(size: number): number {
  if (size === 0) return 1;
  double[0] = size;
  const exponent = Math.max(1, Math.min(2045, (words[1] >>> 20) & 0x7ff));
  words[0] = 0;
  words[1] = (2046 - exponent) << 20;
  return double[0];
}

/** Largest |entry| of each equation, of `real` where it has any, else of `storage`. */
function rowScales({ nodes, blockSize: m, lower, diagonal, upper, storage }: HarmonicSystem): Float64Array {
  const scale = new Float64Array(nodes * m);
  for (let row = 0; row < scale.length; row++) {
    let real = 0;
    let stored = 0;
    for (let at = row * m; at < (row + 1) * m; at++) {
      real = Math.max(real, Math.abs(diagonal[at]));
      if (row >= m) real = Math.max(real, Math.abs(lower[at]));
      if (row < scale.length - m) real = Math.max(real, Math.abs(upper[at]));
      stored = Math.max(stored, Math.abs(storage[at]));
    }
    scale[row] = powerOfTwoReciprocal(real > 0 ? real : stored);
  }
  return scale;
}

/** Scales of the unknowns once the equations are scaled. */
function columnScales(system: HarmonicSystem, rowScale: Float64Array): Float64Array {
  const { nodes, blockSize: m, lower, diagonal, upper, storage } = system;
  const real = new Float64Array(nodes * m);
  const stored = new Float64Array(nodes * m);
  for (let row = 0; row < real.length; row++) {
    const weight = rowScale[row];
    const here = row - (row % m);
    for (let c = 0; c < m; c++) {
      const at = row * m + c;
      const column = here + c;
      real[column] = Math.max(real[column], Math.abs(diagonal[at]) * weight);
      stored[column] = Math.max(stored[column], Math.abs(storage[at]) * weight);
      if (row >= m) real[column - m] = Math.max(real[column - m], Math.abs(lower[at]) * weight);
      if (row < real.length - m) real[column + m] = Math.max(real[column + m], Math.abs(upper[at]) * weight);
    }
  }
  for (let column = 0; column < real.length; column++)
    real[column] = powerOfTwoReciprocal(real[column] > 0 ? real[column] : stored[column]);
  return real;
}

/** Scales so that the largest entry of each row and then of each column lies between 1 and 2. */
export function equilibrate(system: HarmonicSystem): EquilibratedSystem {
  const { nodes, blockSize: m } = system;
  const rowScale = rowScales(system);
  const columnScale = columnScales(system, rowScale);
  /** The block array whose columns belong to the node `shift` away. */
  const scaled = (blocks: Float64Array, shift: number) => {
    const target = new Float64Array(blocks.length);
    for (let row = Math.max(0, -shift * m); row < Math.min(nodes, nodes - shift) * m; row++) {
      const columns = row - (row % m) + shift * m;
      for (let c = 0; c < m; c++) target[row * m + c] = blocks[row * m + c] * rowScale[row] * columnScale[columns + c];
    }
    return target;
  };
  return {
    columnScale,
    system: {
      nodes,
      blockSize: m,
      lower: scaled(system.lower, -1),
      diagonal: scaled(system.diagonal, 0),
      upper: scaled(system.upper, 1),
      storage: scaled(system.storage, 0),
      relaxations: system.relaxations?.map(({ node, decay, column, row }) => ({
        node,
        decay,
        column: column.map((value, a) => value * rowScale[node * m + a]),
        row: row.map((value, c) => value * columnScale[node * m + c]),
      })),
      rightHandSides: system.rightHandSides.map((b) => b.map((value, r) => value * rowScale[r])),
    },
  };
}
