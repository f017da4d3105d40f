/**
 * Linear conservation laws on a line at many frequencies: the small-signal problem of transport as fluxes and balances.
 *
 *   symbol          meaning                                                          shape
 *   x_i             unknowns of node i                                               m, complex
 *   j_e             flux of each kind through edge e, from node e to e + 1           m, complex
 *   C, E            flux by the step and by the mean of the unknowns                 edges × m × m
 *   G, M            what a node takes from the flux, and its storage                 nodes × m × m
 *   c rᵀ/(d+iω)     relaxations at nodes, e.g. dynamic traps                         m each
 *   b, j⁰           sources at nodes, sources in edges                               nodes × m, edges × m
 *   J               reading, Σ (weight + iω harmonicWeight) j                         per edge
 *
 *     j_e = C_e (x_{e+1} − x_e) + E_e (x_e + x_{e+1})/2 + j⁰_e
 *     j_i − j_{i−1} = (G_i + iωM_i + Σ c rᵀ/(d+iω)) x_i − b_i,     no flux beyond the ends
 *
 * Kept in this form, and never summed into matrix rows, the small exchange at a node survives beside large conductances, and the
 * reading is the same at every edge to nearly all digits where it should be.
 */

/** Adds column·rowᵀ/(decay + iω) to what a node takes. */
export interface Relaxation {
  node: number;
  /** Rate in 1/s, positive. */
  decay: number;
  /** m entries, by balance. */
  column: Float64Array;
  /** m entries, by unknown. */
  row: Float64Array;
}

interface Drive {
  /** b, nodes × m; none when left out. */
  atNodes?: Float64Array;
  /** j⁰, edges × m; none when left out. */
  inEdges?: Float64Array;
}

export interface ConservativeSystem {
  nodes: number;
  /** Unknowns, fluxes and balances per node or edge, m. */
  blockSize: number;
  /** C, (nodes − 1) × m × m, row-major. */
  byStep: Float64Array;
  /** E, (nodes − 1) × m × m. */
  byMean: Float64Array;
  /** G, nodes × m × m. */
  local: Float64Array;
  /** M, nodes × m × m. */
  storage: Float64Array;
  relaxations?: readonly Relaxation[];
  /** Unknowns held at zero instead of obeying a balance: nodes × m, non-zero where held. */
  held?: Uint8Array;
  drives: readonly Drive[];
  /** m each. */
  reading: { weight: Float64Array; harmonicWeight: Float64Array };
}

/** `solved`: without exchanging rows. `pivoted`: with rows exchanged inside the blocks. `singular`: no solution, zeros returned. */
export type ConservativeStatus = "solved" | "pivoted" | "singular";

/** J at one edge for every frequency and drive, [frequency][drive]. */
export interface Readings {
  real: Float64Array;
  imaginary: Float64Array;
  /** Largest |J − J at the edge| over all edges; over this edge alone (zero) where not compared. */
  difference: Float64Array;
  /** Largest |weight j| of a single flux over the edges looked at: what J is the sum of. */
  part: Float64Array;
  /** One per frequency. */
  status: ConservativeStatus[];
}

interface ReadingRequest {
  /** Edge at which J is read. */
  edge: number;
  /** Compare J with that of all other edges (default true; without it the solution takes two thirds of the time). */
  everywhere?: boolean;
}

/** Everything at one frequency. */
export interface Profiles {
  /** x, [drive][node][unknown]. */
  unknowns: { real: Float64Array; imaginary: Float64Array };
  /** j, [drive][edge][flux]. */
  fluxes: { real: Float64Array; imaginary: Float64Array };
  status: ConservativeStatus;
}

export interface ConservativeSolver {
  /**
   * J for every angular frequency (rad/s).
   * @throws RangeError for an edge outside the system or a frequency that is not finite
   */
  read(angularFrequencies: ArrayLike<number>, request: ReadingRequest): Readings;
  /** x and j everywhere at one angular frequency (rad/s). @throws RangeError for one that is not finite */
  profiles(angularFrequency: number): Profiles;
}

/** @throws RangeError when an array of the system has the wrong length, naming it. */
export function checkConservativeSystem(system: ConservativeSystem): void {
  const { nodes, blockSize: m, reading } = system;
  const expect = (name: string, length: number, expected: number) => {
    if (length !== expected)
      throw new RangeError(`Conservative system: ${name} has ${length} entries, expected ${expected}.`);
  };
  if (!(Number.isInteger(nodes) && nodes >= 2))
    throw new RangeError(`Conservative system: ${nodes} nodes, expected at least 2.`);
  if (!(Number.isInteger(m) && m >= 1 && m <= 8))
    throw new RangeError(`Conservative system: ${m} unknowns a node, expected 1 to 8.`);
  expect("byStep", system.byStep.length, (nodes - 1) * m * m);
  expect("byMean", system.byMean.length, (nodes - 1) * m * m);
  expect("local", system.local.length, nodes * m * m);
  expect("storage", system.storage.length, nodes * m * m);
  if (system.held) expect("held", system.held.length, nodes * m);
  system.drives.forEach(({ atNodes, inEdges }, k) => {
    if (atNodes) expect(`drive ${k} at nodes`, atNodes.length, nodes * m);
    if (inEdges) expect(`drive ${k} in edges`, inEdges.length, (nodes - 1) * m);
  });
  expect("the reading's weight", reading.weight.length, m);
  expect("the reading's harmonic weight", reading.harmonicWeight.length, m);
  for (const { node, decay, column, row } of system.relaxations ?? []) {
    if (!(Number.isInteger(node) && node >= 0 && node < nodes))
      throw new RangeError(`Conservative system: relaxation at node ${node}, expected 0 to ${nodes - 1}.`);
    if (!(decay > 0 && Number.isFinite(decay)))
      throw new RangeError(`Conservative system: relaxation with decay ${decay}, expected a positive rate.`);
    expect("a relaxation's column", column.length, m);
    expect("a relaxation's row", row.length, m);
  }
}

/** @throws RangeError for an edge that is none of the system's, or a frequency that is not finite. */
export function checkQuestion(
  { nodes }: ConservativeSystem,
  edge: number,
  angularFrequencies: ArrayLike<number>,
): void {
  if (!(Number.isInteger(edge) && edge >= 0 && edge < nodes - 1))
    throw new RangeError(`Edge ${edge} asked for, expected 0 to ${nodes - 2}.`);
  for (let f = 0; f < angularFrequencies.length; f++)
    if (!Number.isFinite(angularFrequencies[f]))
      throw new RangeError(`Angular frequency ${angularFrequencies[f]}, expected a finite number.`);
}

/** A held unknown exchanges this times its largest conductance with the outside: no digit of a flux is left for it to move. */
const HOLDING = 2 ** 100;

/** The system with the balances of held unknowns replaced by an overwhelming exchange with zero. */
export function withHeldUnknowns(system: ConservativeSystem): ConservativeSystem {
  const { nodes, blockSize: m, held, byStep } = system;
  if (!held?.some((value) => value !== 0)) return system;
  const local = system.local.slice();
  const storage = system.storage.slice();
  const relaxations = system.relaxations?.map((relaxation) => ({ ...relaxation, column: relaxation.column.slice() }));
  const drives = system.drives.map(({ atNodes, inEdges }) => ({ atNodes: atNodes?.slice(), inEdges }));
  const largest = new Float64Array(m);
  for (let e = 0; e < nodes - 1; e++)
    for (let a = 0; a < m; a++) {
      const value = byStep[(e * m + a) * m + a];
      if (Math.abs(value) > Math.abs(largest[a])) largest[a] = value;
    }
  held.forEach((value, row) => {
    if (value === 0) return;
    const a = row % m;
    local.fill(0, row * m, (row + 1) * m);
    storage.fill(0, row * m, (row + 1) * m);
    local[row * m + a] = HOLDING * (largest[a] || 1);
    for (const { atNodes } of drives) if (atNodes) atNodes[row] = 0;
    for (const { node, column } of relaxations ?? []) if (node * m + a === row) column[a] = 0;
  });
  return { ...system, local, storage, relaxations, drives };
}
