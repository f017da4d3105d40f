/** Random harmonic systems and their dense solution, for tests. */
import { Matrix, solve } from "ml-matrix";
import type { HarmonicRelaxation, HarmonicSystem } from "../../solver/src/linearAlgebra/harmonicSystem.ts";

/** Uniform numbers in [0, 1): Park and Miller's minimal standard generator, Commun. ACM 31 (1988) 1192. */
export function randomNumbers(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48271) % 2147483647;
    return state / 2147483647;
  };
}

export interface RandomSystemOptions {
  nodes: number;
  blockSize: number;
  seed: number;
  rightHandSides?: number;
  /** Rows are multiplied by powers of ten up to this, columns by their square roots. */
  decades?: number;
  relaxations?: number;
  /** Zero diagonals in the first unknown of each node, so that rows must be exchanged. */
  zeroDiagonal?: boolean;
  /** Couplings and storage only in the first column and on the diagonal, as in transport: all see the potential, each sees itself. */
  arrow?: boolean;
  /** Nodes outside this range have a decoupled last unknown (diagonal block only). */
  lastUnknownBetween?: [number, number];
}

/** A random, mostly diagonally dominant system. */
export function randomSystem(options: RandomSystemOptions): HarmonicSystem {
  const { nodes, blockSize: m, seed, rightHandSides = 2, decades = 0, lastUnknownBetween = [0, nodes - 1] } = options;
  const random = randomNumbers(seed);
  const symmetric = () => 2 * random() - 1;
  const blocks = () => Float64Array.from({ length: nodes * m * m }, symmetric);
  const [lower, diagonal, upper, storage] = [blocks(), blocks(), blocks(), blocks()];
  const active = (i: number, a: number) => a < m - 1 || (i >= lastUnknownBetween[0] && i <= lastUnknownBetween[1]);
  for (let i = 0; i < nodes; i++)
    for (let a = 0; a < m; a++)
      for (let c = 0; c < m; c++) {
        const at = (i * m + a) * m + c;
        if (i === 0 || !active(i, a) || !active(i - 1, c)) lower[at] = 0;
        if (i === nodes - 1 || !active(i, a) || !active(i + 1, c)) upper[at] = 0;
        if (options.arrow && c > 0 && c !== a) lower[at] = upper[at] = storage[at] = 0;
        if (!active(i, a) || !active(i, c)) {
          diagonal[at] = 0;
          storage[at] = 0;
        }
        if (a === c)
          diagonal[at] = active(i, a)
            ? options.zeroDiagonal && a === 0
              ? 0
              : diagonal[at] + Math.sign(diagonal[at]) * 2.5 * m
            : 3;
        if (options.zeroDiagonal && a === 0) storage[at] = 0;
      }
  const rowScale = Float64Array.from({ length: nodes * m }, () => 10 ** (decades * symmetric()));
  const columnScale = Float64Array.from({ length: nodes * m }, () => 10 ** ((decades * symmetric()) / 2));
  for (let i = 0; i < nodes; i++)
    for (let a = 0; a < m; a++)
      for (let c = 0; c < m; c++) {
        const at = (i * m + a) * m + c;
        const row = rowScale[i * m + a];
        lower[at] *= i > 0 ? row * columnScale[(i - 1) * m + c] : 0;
        upper[at] *= i < nodes - 1 ? row * columnScale[(i + 1) * m + c] : 0;
        diagonal[at] *= row * columnScale[i * m + c];
        storage[at] *= row * columnScale[i * m + c];
      }
  const relaxations: HarmonicRelaxation[] = Array.from({ length: options.relaxations ?? 0 }, () => {
    const node = Math.floor(random() * nodes);
    return {
      node,
      decay: 10 ** (2 * symmetric()),
      column: Float64Array.from({ length: m }, (_, a) => (active(node, a) ? symmetric() * rowScale[node * m + a] : 0)),
      row: Float64Array.from({ length: m }, (_, c) => (active(node, c) ? symmetric() * columnScale[node * m + c] : 0)),
    };
  });
  return {
    nodes,
    blockSize: m,
    lower,
    diagonal,
    upper,
    storage,
    relaxations,
    rightHandSides: Array.from({ length: rightHandSides }, () =>
      Float64Array.from({ length: nodes * m }, (_, r) => symmetric() * rowScale[r]),
    ),
  };
}

/**
 * The same problem as one dense real matrix [[Re, −Im], [Im, Re]] solved by ml-matrix's LU.
 * Returned per right-hand side: nodes·m real parts, then nodes·m imaginary parts.
 */
export function denseSolution(system: HarmonicSystem, omega: number, transposed = false): Float64Array[] {
  const { nodes, blockSize: m } = system;
  const n = nodes * m;
  const matrix = Matrix.zeros(2 * n, 2 * n);
  const add = (row: number, column: number, re: number, im: number) => {
    const [r, c] = transposed ? [column, row] : [row, column];
    matrix.set(r, c, matrix.get(r, c) + re);
    matrix.set(n + r, n + c, matrix.get(n + r, n + c) + re);
    matrix.set(r, n + c, matrix.get(r, n + c) - im);
    matrix.set(n + r, c, matrix.get(n + r, c) + im);
  };
  for (let i = 0; i < nodes; i++)
    for (let a = 0; a < m; a++)
      for (let c = 0; c < m; c++) {
        const at = (i * m + a) * m + c;
        add(i * m + a, i * m + c, system.diagonal[at], omega * system.storage[at]);
        if (i > 0) add(i * m + a, (i - 1) * m + c, system.lower[at], 0);
        if (i < nodes - 1) add(i * m + a, (i + 1) * m + c, system.upper[at], 0);
      }
  for (const { node, decay, column, row } of system.relaxations ?? [])
    for (let a = 0; a < m; a++)
      for (let c = 0; c < m; c++) {
        const size = (column[a] * row[c]) / (decay ** 2 + omega ** 2);
        add(node * m + a, node * m + c, size * decay, -size * omega);
      }
  return system.rightHandSides.map((b) =>
    Float64Array.from(solve(matrix, Matrix.columnVector([...b, ...new Float64Array(n)])).to1DArray()),
  );
}
