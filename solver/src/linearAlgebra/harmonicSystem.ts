/**
 * Harmonic block-tridiagonal systems: the linearised transport problem at many frequencies.
 *
 *   symbol        meaning                                                        shape
 *   K             real part: lower, diagonal, upper blocks                       nodes × m × m each
 *   M             storage, the real coefficient of iω, block-diagonal            nodes × m × m
 *   c rᵀ/(d+iω)   relaxations, e.g. dynamic traps eliminated from the unknowns   m each
 *   b             real right-hand sides                                          nodes × m each
 *
 * Solved is (K + iωM + Σ c rᵀ/(d+iω)) x = b for every angular frequency ω (rad/s). Only a contiguous range of nodes is
 * returned: the blocks are eliminated from both ends towards its last node, so that a range of one edge costs one
 * elimination and no back-substitution. Block elimination: Golub & Van Loan, Matrix Computations, 4th ed. (2013), §4.5.1.
 */

/** Adds column·rowᵀ/(decay + iω) to the diagonal block of one node. */
export interface HarmonicRelaxation {
  node: number;
  /** Rate in 1/s, positive. */
  decay: number;
  /** m entries, by equation. */
  column: Float64Array;
  /** m entries, by unknown. */
  row: Float64Array;
}

export interface HarmonicSystem {
  nodes: number;
  /** Unknowns per node, m. */
  blockSize: number;
  /** nodes × m × m, row-major; block i couples the equations of node i to the unknowns of node i−1 (block 0 is unused). */
  lower: Float64Array;
  /** nodes × m × m, row-major. */
  diagonal: Float64Array;
  /** nodes × m × m, row-major; block i couples the equations of node i to the unknowns of node i+1 (the last is unused). */
  upper: Float64Array;
  /** nodes × m × m, row-major: coefficient of iω in the diagonal block. */
  storage: Float64Array;
  relaxations?: readonly HarmonicRelaxation[];
  /** Each nodes × m. */
  rightHandSides: readonly Float64Array[];
}

export interface HarmonicRequest {
  /** First node whose unknowns are wanted (default 0). */
  firstNode?: number;
  /** Last node whose unknowns are wanted (default the last of the system). */
  lastNode?: number;
  /** Steps of iterative refinement with the residual of the whole system (default 0). Worth it at millihertz. */
  refinements?: number;
}

/** `solved`: without exchanging rows. `pivoted`: rows were exchanged inside the blocks. `singular`: no solution, zeros returned. */
export type HarmonicStatus = "solved" | "pivoted" | "singular";

export interface HarmonicSolution {
  firstNode: number;
  lastNode: number;
  blockSize: number;
  /** [frequency][right-hand side][node − firstNode][unknown], one array each for the real and the imaginary part. */
  real: Float64Array;
  imaginary: Float64Array;
  /** One per frequency. */
  status: HarmonicStatus[];
}

export interface HarmonicSolver {
  /**
   * Solves at every angular frequency (rad/s, finite, ω ≥ 0).
   * @throws RangeError for a request outside the system or a frequency that is not finite
   */
  solve(angularFrequencies: ArrayLike<number>, request?: HarmonicRequest): HarmonicSolution;
}

/** @throws RangeError when an array of the system has the wrong length, naming it. */
export function checkHarmonicSystem(system: HarmonicSystem): void {
  const { nodes, blockSize } = system;
  const expect = (name: string, length: number, expected: number) => {
    if (length !== expected)
      throw new RangeError(`Harmonic system: ${name} has ${length} entries, expected ${expected}.`);
  };
  if (!(Number.isInteger(nodes) && nodes >= 1))
    throw new RangeError(`Harmonic system: ${nodes} nodes, expected at least 1.`);
  if (!(Number.isInteger(blockSize) && blockSize >= 1 && blockSize <= 8))
    throw new RangeError(`Harmonic system: block size ${blockSize}, expected 1 to 8.`);
  for (const name of ["lower", "diagonal", "upper", "storage"] as const)
    expect(name, system[name].length, nodes * blockSize * blockSize);
  system.rightHandSides.forEach((b, k) => {
    expect(`right-hand side ${k}`, b.length, nodes * blockSize);
  });
  for (const { node, decay, column, row } of system.relaxations ?? []) {
    if (!(Number.isInteger(node) && node >= 0 && node < nodes))
      throw new RangeError(`Harmonic system: relaxation at node ${node}, expected 0 to ${nodes - 1}.`);
    if (!(decay > 0 && Number.isFinite(decay)))
      throw new RangeError(`Harmonic system: relaxation with decay ${decay}, expected a positive rate.`);
    expect("a relaxation's column", column.length, blockSize);
    expect("a relaxation's row", row.length, blockSize);
  }
}

/** The range and refinement of a request with its defaults. @throws RangeError naming what is out of range. */
export function resolveHarmonicRequest(system: HarmonicSystem, request: HarmonicRequest): Required<HarmonicRequest> {
  const { firstNode = 0, lastNode = system.nodes - 1, refinements = 0 } = request;
  if (
    !(
      Number.isInteger(firstNode) &&
      Number.isInteger(lastNode) &&
      firstNode >= 0 &&
      firstNode <= lastNode &&
      lastNode < system.nodes
    )
  )
    throw new RangeError(
      `Nodes ${firstNode} to ${lastNode} asked for, expected a range inside 0 to ${system.nodes - 1}.`,
    );
  if (!(Number.isInteger(refinements) && refinements >= 0 && refinements <= 10))
    throw new RangeError(`${refinements} refinements asked for, expected 0 to 10.`);
  return { firstNode, lastNode, refinements };
}

/** The system of the transposed matrix (for adjoints) with the given right-hand sides, each nodes × m. */
export function transposedHarmonicSystem(
  system: HarmonicSystem,
  rightHandSides: readonly Float64Array[],
): HarmonicSystem {
  const { nodes, blockSize: m } = system;
  /** Block i of the result is the transpose of block i + shift of the source; blocks outside are zero. */
  const transposed = (source: Float64Array, shift: number) => {
    const target = new Float64Array(source.length);
    for (let i = Math.max(0, -shift); i < Math.min(nodes, nodes - shift); i++)
      for (let a = 0; a < m; a++)
        for (let c = 0; c < m; c++) target[(i * m + c) * m + a] = source[((i + shift) * m + a) * m + c];
    return target;
  };
  return {
    nodes,
    blockSize: m,
    lower: transposed(system.upper, -1),
    diagonal: transposed(system.diagonal, 0),
    upper: transposed(system.lower, 1),
    storage: transposed(system.storage, 0),
    relaxations: system.relaxations?.map(({ node, decay, column, row }) => ({ node, decay, column: row, row: column })),
    rightHandSides,
  };
}
