/** Harmonic systems against the same equations as one dense matrix, solved by the LU of ml-matrix. */
import { describe, expect, it } from "vitest";
import { harmonicSolver } from "../../solver/src/linearAlgebra/harmonicSolver.ts";
import {
  type HarmonicSolution,
  type HarmonicSystem,
  transposedHarmonicSystem,
} from "../../solver/src/linearAlgebra/harmonicSystem.ts";
import { denseSolution, type RandomSystemOptions, randomSystem } from "./harmonicSystems.ts";

const frequencies = [0, 1e-3, 0.3, 1, 40];

const known = new Map<HarmonicSystem, Map<number, Float64Array[]>>();

/** The dense solution, kept for the next question about the same system. */
function exactSolution(system: HarmonicSystem, omega: number): Float64Array[] {
  const ofSystem = known.get(system) ?? new Map<number, Float64Array[]>();
  known.set(system, ofSystem);
  const solution = ofSystem.get(omega) ?? denseSolution(system, omega);
  ofSystem.set(omega, solution);
  return solution;
}

/** Largest distance from the dense solution over the largest entry of each right-hand side, at the nodes of the solution. */
function distanceFromDense(system: HarmonicSystem, solution: HarmonicSolution, exactAt = exactSolution) {
  const { blockSize: m, nodes } = system;
  const wanted = (solution.lastNode - solution.firstNode + 1) * m;
  let worst = 0;
  frequencies.forEach((omega, f) => {
    exactAt(system, omega).forEach((exact, k) => {
      const scale = Math.max(...exact.map(Math.abs)) || 1;
      for (let r = 0; r < wanted; r++) {
        const at = (f * system.rightHandSides.length + k) * wanted + r;
        const re = exact[solution.firstNode * m + r];
        const im = exact[nodes * m + solution.firstNode * m + r];
        worst = Math.max(worst, Math.hypot(solution.real[at] - re, solution.imaginary[at] - im) / scale);
      }
    });
  });
  return worst;
}

const systems: [string, RandomSystemOptions][] = [
  ["three unknowns", { nodes: 13, blockSize: 3, seed: 1 }],
  ["four unknowns", { nodes: 12, blockSize: 4, seed: 2 }],
  ["five unknowns", { nodes: 9, blockSize: 5, seed: 3 }],
  ["six unknowns", { nodes: 8, blockSize: 6, seed: 4 }],
  ["one node", { nodes: 1, blockSize: 4, seed: 5 }],
  ["two nodes", { nodes: 2, blockSize: 3, seed: 6 }],
  ["one right-hand side", { nodes: 11, blockSize: 4, seed: 7, rightHandSides: 1 }],
  ["three right-hand sides", { nodes: 11, blockSize: 4, seed: 8, rightHandSides: 3 }],
  ["three unknowns coupled as in transport", { nodes: 13, blockSize: 3, seed: 21, arrow: true }],
  ["four unknowns coupled as in transport", { nodes: 13, blockSize: 4, seed: 22, arrow: true, rightHandSides: 3 }],
  ["five unknowns coupled as in transport", { nodes: 13, blockSize: 5, seed: 23, arrow: true, relaxations: 9 }],
  [
    "ions in some nodes, coupled as in transport",
    { nodes: 17, blockSize: 4, seed: 24, arrow: true, lastUnknownBetween: [5, 11], relaxations: 9 },
  ],
  ["relaxations", { nodes: 10, blockSize: 4, seed: 9, relaxations: 12 }],
  [
    "an unknown that lives in a few nodes",
    { nodes: 15, blockSize: 4, seed: 10, lastUnknownBetween: [5, 9], relaxations: 3 },
  ],
];

const create = harmonicSolver;

describe("harmonic systems", () => {
  it.each(systems)("agree with a dense solution: %s", (_name, options) => {
    const system = randomSystem(options);
    expect(distanceFromDense(system, create(system).solve(frequencies))).toBeLessThan(1e-12);
    expect(distanceFromDense(system, create(system).solve(frequencies.toReversed()))).toBeGreaterThan(1e-3);
  });

  it.each(systems)("return the same at a few nodes as everywhere: %s", (_name, options) => {
    const system = randomSystem(options);
    const solver = create(system);
    for (let firstNode = 0; firstNode < options.nodes; firstNode++)
      for (const lastNode of [firstNode, Math.min(firstNode + 1, options.nodes - 1)])
        expect(distanceFromDense(system, solver.solve(frequencies, { firstNode, lastNode }))).toBeLessThan(1e-12);
  });

  it("solve rows and columns that differ by forty powers of ten", () => {
    const system = randomSystem({ nodes: 14, blockSize: 4, seed: 11 });
    const scaled = randomSystem({ nodes: 14, blockSize: 4, seed: 11, decades: 20 });
    const plain = create(system).solve(frequencies);
    const solution = create(scaled).solve(frequencies);
    // the same equations, so each unknown is the plain one over its column's scale, for every frequency and right-hand side
    for (let r = 0; r < 14 * 4; r++) {
      const scale = solution.real[r] / plain.real[r];
      for (let at = r; at < plain.real.length; at += 14 * 4) {
        expect(solution.real[at] / scale / plain.real[at]).toBeCloseTo(1, 9);
        expect(solution.imaginary[at] / scale).toBeCloseTo(plain.imaginary[at], 9);
      }
    }
  });

  it("start each right-hand side where it has its first entry", () => {
    const system = randomSystem({ nodes: 14, blockSize: 4, seed: 25, arrow: true, rightHandSides: 3 });
    system.rightHandSides[0].fill(0, 0, 6 * 4).fill(0, 8 * 4);
    system.rightHandSides[1].fill(0);
    system.rightHandSides[2].fill(0, 0, 13 * 4);
    const solver = create(system);
    const zero = solver.solve(frequencies);
    expect(zero.real.subarray(14 * 4, 2 * 14 * 4).every((value) => value === 0)).toBe(true);
    for (const [firstNode, lastNode] of [
      [0, 13],
      [6, 7],
      [2, 3],
      [10, 10],
    ])
      expect(distanceFromDense(system, solver.solve(frequencies, { firstNode, lastNode }))).toBeLessThan(1e-12);
  });

  it("solve the transposed system", () => {
    const system = randomSystem({ nodes: 12, blockSize: 4, seed: 12, relaxations: 5 });
    const solution = create(transposedHarmonicSystem(system, system.rightHandSides)).solve(frequencies);
    expect(distanceFromDense(system, solution, (...of) => denseSolution(...of, true))).toBeLessThan(1e-12);
  });

  it("exchange rows where the diagonal is zero, and say so", () => {
    const system = randomSystem({ nodes: 12, blockSize: 4, seed: 13, zeroDiagonal: true });
    const solution = create(system).solve(frequencies);
    expect(distanceFromDense(system, solution)).toBeLessThan(1e-11);
    expect(solution.status).toEqual(frequencies.map(() => "pivoted"));
  });

  it("refine to the same answer", () => {
    const system = randomSystem({ nodes: 12, blockSize: 4, seed: 14, relaxations: 3 });
    const solution = create(system).solve(frequencies, { firstNode: 4, lastNode: 5, refinements: 2 });
    expect(distanceFromDense(system, solution)).toBeLessThan(1e-14);
  });

  it("report a singular system instead of returning what is not a number", () => {
    const system = randomSystem({ nodes: 6, blockSize: 3, seed: 15 });
    for (const blocks of [system.lower, system.diagonal, system.upper, system.storage])
      blocks.fill(0, 2 * 9, 2 * 9 + 3);
    const solution = create(system).solve(frequencies);
    expect(solution.status).toEqual(frequencies.map(() => "singular"));
    expect([...solution.real, ...solution.imaginary].every((value) => value === 0)).toBe(true);
  });

  it("refuse arrays and requests that do not fit, naming them", () => {
    const system = randomSystem({ nodes: 6, blockSize: 3, seed: 16 });
    expect(() => create({ ...system, storage: new Float64Array(5) })).toThrow(/storage has 5 entries, expected 54/);
    expect(() => create(system).solve([1], { firstNode: 4, lastNode: 6 })).toThrow(
      /Nodes 4 to 6 asked for, expected a range inside 0 to 5/,
    );
    expect(() => create(system).solve([Number.NaN])).toThrow(/Angular frequency NaN/);
  });
});
