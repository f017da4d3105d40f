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
  system: HarmonicSystem;
  /** nodes × m: the unknowns of the original system are these times those of the scaled one. */
  columnScale: Float64Array;
}

const powerOfTwoReciprocal = (largest: number) => (largest > 0 ? 2 ** -Math.ceil(Math.log2(largest)) : 1);

/** Calls visit(row, column, index, k) for every entry of the block array `k` (0 lower, 1 diagonal, 2 upper, 3 storage). */
function forEachEntry(
  { nodes, blockSize: m }: HarmonicSystem,
  visit: (row: number, column: number, index: number, k: number) => void,
) {
  for (let i = 0; i < nodes; i++)
    for (let k = 0; k < 4; k++) {
      const j = k === 0 ? i - 1 : k === 2 ? i + 1 : i;
      if (j < 0 || j >= nodes) continue;
      for (let a = 0; a < m; a++) for (let c = 0; c < m; c++) visit(i * m + a, j * m + c, (i * m + a) * m + c, k);
    }
}

/** Scales so that the largest entry of each row and then of each column lies in (½, 1]. */
export function equilibrate(system: HarmonicSystem): EquilibratedSystem {
  const { nodes, blockSize: m } = system;
  const source = [system.lower, system.diagonal, system.upper, system.storage];
  const scales = (index: (row: number, column: number) => number, weight: (row: number) => number) => {
    const real = new Float64Array(nodes * m);
    const storage = new Float64Array(nodes * m);
    forEachEntry(system, (row, column, entry, k) => {
      const target = k === 3 ? storage : real;
      const size = Math.abs(source[k][entry]) * weight(row);
      if (size > target[index(row, column)]) target[index(row, column)] = size;
    });
    return real.map((size, r) => powerOfTwoReciprocal(size > 0 ? size : storage[r]));
  };
  const rowScale = scales(
    (row) => row,
    () => 1,
  );
  const columnScale = scales(
    (_, column) => column,
    (row) => rowScale[row],
  );
  const scaled = source.map((blocks) => new Float64Array(blocks.length));
  forEachEntry(system, (row, column, entry, k) => {
    scaled[k][entry] = source[k][entry] * rowScale[row] * columnScale[column];
  });
  return {
    columnScale,
    system: {
      nodes,
      blockSize: m,
      lower: scaled[0],
      diagonal: scaled[1],
      upper: scaled[2],
      storage: scaled[3],
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
