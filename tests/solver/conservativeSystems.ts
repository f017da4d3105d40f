/** Random conservative systems and their dense solution, for tests. */
import { Matrix, solve } from "ml-matrix";
import type { ConservativeSystem, Relaxation } from "../../solver/src/linearAlgebra/conservativeSystem.ts";

/** Uniform numbers in [0, 1): Park and Miller's minimal standard generator, Commun. ACM 31 (1988) 1192. */
function randomNumbers(seed: number): () => number {
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
  relaxations?: number;
  /** Couplings between any two unknowns instead of arrows only. */
  full?: boolean;
  /** Nodes outside this range have a last unknown that is coupled to nothing. */
  lastUnknownBetween?: [number, number];
}

/**
 * A random system: conductances and exchanges of one sign with smaller couplings; the first unknown held at both ends; three drives, at
 * nodes, in one edge, and both.
 */
export function randomConservativeSystem(options: RandomSystemOptions): ConservativeSystem {
  const { nodes, blockSize: m, seed, full = false, lastUnknownBetween = [0, nodes - 1] } = options;
  const random = randomNumbers(seed);
  const symmetric = () => 2 * random() - 1;
  const lives = (i: number, a: number) => a < m - 1 || (i >= lastUnknownBetween[0] && i <= lastUnknownBetween[1]);
  /** Blocks at nodes (span 0) or edges (span 1). */
  const blocks = (span: number, arrow: boolean, diagonal: number, coupling: number) => {
    const values = new Float64Array((nodes - span) * m * m);
    for (let i = 0; i < nodes - span; i++)
      for (let a = 0; a < m; a++)
        for (let c = 0; c < m; c++) {
          if (![a, c].every((k) => lives(i, k) && lives(i + span, k))) continue;
          if (arrow && c > 0 && c !== a) continue;
          values[(i * m + a) * m + c] = a === c ? diagonal * (0.5 + random()) : coupling * symmetric();
        }
    return values;
  };
  const local = blocks(0, false, 0.3, 0.1);
  for (let i = 0; i < nodes; i++) for (let a = 0; a < m; a++) if (!lives(i, a)) local[(i * m + a) * m + a] = 1;
  const relaxations: Relaxation[] = Array.from({ length: options.relaxations ?? 0 }, () => {
    const node = Math.floor(random() * nodes);
    const vector = () => Float64Array.from({ length: m }, (_, a) => (lives(node, a) ? 0.3 * symmetric() : 0));
    return { node, decay: 10 ** (2 * symmetric()), column: vector(), row: vector() };
  });
  const held = new Uint8Array(nodes * m);
  held[0] = held[(nodes - 1) * m] = 1;
  const atNodes = () =>
    Float64Array.from({ length: nodes * m }, (_, row) => (lives(Math.floor(row / m), row % m) ? symmetric() : 0));
  const inEdge = (e: number) => {
    const values = new Float64Array((nodes - 1) * m);
    for (let a = 0; a < m; a++) values[e * m + a] = lives(e, a) && lives(e + 1, a) ? symmetric() : 0;
    return values;
  };
  return {
    nodes,
    blockSize: m,
    byStep: blocks(1, !full, 2, 0.4),
    byMean: blocks(1, !full, 0.3, 0.3),
    local,
    storage: blocks(0, !full, 0.5, 0.2),
    relaxations,
    held,
    drives: [{ atNodes: atNodes() }, { inEdges: inEdge((nodes - 1) >> 1) }, { atNodes: atNodes(), inEdges: inEdge(0) }],
    reading: {
      weight: Float64Array.from({ length: m }, symmetric),
      harmonicWeight: Float64Array.from({ length: m }, symmetric),
    },
  };
}

/** Complex values, [drive][place][unknown]. */
export interface DenseSolution {
  unknowns: { real: Float64Array; imaginary: Float64Array }[];
  fluxes: { real: Float64Array; imaginary: Float64Array }[];
}

/** The balances as one dense real matrix [[Re, −Im], [Im, Re]] solved by ml-matrix's LU, and the fluxes by their definition. */
export function denseSolution(system: ConservativeSystem, omega: number): DenseSolution {
  const { nodes, blockSize: m, byStep, byMean, local, storage, relaxations = [], held, drives } = system;
  const n = nodes * m;
  const matrix = Matrix.zeros(2 * n, 2 * n);
  const add = (row: number, column: number, re: number, im: number) => {
    if (held?.[row]) return;
    matrix.set(row, column, matrix.get(row, column) + re);
    matrix.set(n + row, n + column, matrix.get(n + row, n + column) + re);
    matrix.set(row, n + column, matrix.get(row, n + column) - im);
    matrix.set(n + row, column, matrix.get(n + row, column) + im);
  };
  for (let e = 0; e < nodes - 1; e++)
    for (let a = 0; a < m; a++)
      for (let c = 0; c < m; c++) {
        const at = (e * m + a) * m + c;
        for (const [node, sign] of [
          [e, 1],
          [e + 1, -1],
        ]) {
          add(node * m + a, e * m + c, sign * (-byStep[at] + byMean[at] / 2), 0);
          add(node * m + a, (e + 1) * m + c, sign * (byStep[at] + byMean[at] / 2), 0);
        }
      }
  for (let i = 0; i < nodes; i++)
    for (let a = 0; a < m; a++)
      for (let c = 0; c < m; c++) {
        const at = (i * m + a) * m + c;
        add(i * m + a, i * m + c, -local[at], -omega * storage[at]);
      }
  for (const { node, decay, column, row } of relaxations)
    for (let a = 0; a < m; a++)
      for (let c = 0; c < m; c++) {
        const size = (column[a] * row[c]) / (decay ** 2 + omega ** 2);
        add(node * m + a, node * m + c, -size * decay, size * omega);
      }
  held?.forEach((value, row) => {
    if (!value) return;
    matrix.set(row, row, 1);
    matrix.set(n + row, n + row, 1);
  });
  const solutions = drives.map(({ atNodes, inEdges }) => {
    const right = new Float64Array(2 * n);
    atNodes?.forEach((value, row) => {
      right[row] -= value;
    });
    inEdges?.forEach((value, row) => {
      right[row] -= value;
      right[row + m] += value;
    });
    held?.forEach((value, row) => {
      if (value) right[row] = 0;
    });
    const x = solve(matrix, Matrix.columnVector([...right])).to1DArray();
    const flux = (part: number) =>
      Float64Array.from({ length: n - m }, (_, row) => {
        const e = Math.floor(row / m);
        let sum = part === 0 && inEdges ? inEdges[row] : 0;
        for (let c = 0; c < m; c++) {
          const [here, there] = [x[part * n + e * m + c], x[part * n + (e + 1) * m + c]];
          sum += byStep[row * m + c] * (there - here) + (byMean[row * m + c] * (there + here)) / 2;
        }
        return sum;
      });
    return {
      unknowns: { real: Float64Array.from(x.slice(0, n)), imaginary: Float64Array.from(x.slice(n)) },
      fluxes: { real: flux(0), imaginary: flux(1) },
    };
  });
  return { unknowns: solutions.map(({ unknowns }) => unknowns), fluxes: solutions.map(({ fluxes }) => fluxes) };
}
