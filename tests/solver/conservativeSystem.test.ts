/** Conservative systems against the same equations as one dense matrix, solved by the LU of ml-matrix, and against circuits. */
import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { pivotedConservativeSolver } from "../../solver/src/linearAlgebra/conservativeElimination.ts";
import { kernelConservativeSolver } from "../../solver/src/linearAlgebra/conservativeKernel.ts";
import { conservativeSolver } from "../../solver/src/linearAlgebra/conservativeSolver.ts";
import type { ConservativeSystem } from "../../solver/src/linearAlgebra/conservativeSystem.ts";
import { kernelModule, kernelModulePath } from "../../solver/tools/buildKernel.ts";
import { denseSolution, type RandomSystemOptions, randomConservativeSystem } from "./conservativeSystems.ts";

const frequencies = [0, 1e-3, 0.3, 1, 40];

const systems: [string, RandomSystemOptions][] = [
  ["three unknowns", { nodes: 13, blockSize: 3, seed: 1 }],
  ["four unknowns", { nodes: 12, blockSize: 4, seed: 2 }],
  ["five unknowns", { nodes: 9, blockSize: 5, seed: 3 }],
  ["two nodes", { nodes: 2, blockSize: 3, seed: 4 }],
  ["relaxations", { nodes: 10, blockSize: 4, seed: 5, relaxations: 12 }],
  ["ions in the middle", { nodes: 15, blockSize: 4, seed: 6, lastUnknownBetween: [5, 9], relaxations: 6 }],
  ["ions up to the front", { nodes: 15, blockSize: 5, seed: 7, lastUnknownBetween: [0, 7] }],
  ["ions up to the back", { nodes: 15, blockSize: 4, seed: 8, lastUnknownBetween: [7, 14], relaxations: 6 }],
  ["six unknowns, which the kernel does not take", { nodes: 8, blockSize: 6, seed: 9 }],
  ["couplings other than arrows, which the kernel does not take", { nodes: 9, blockSize: 4, seed: 10, full: true }],
];

function readingOf(
  system: ConservativeSystem,
  fluxes: { real: Float64Array; imaginary: Float64Array },
  e: number,
  omega: number,
) {
  const { blockSize: m, reading } = system;
  let [re, im, part] = [0, 0, 0];
  for (let a = 0; a < m; a++) {
    const [x, y] = [fluxes.real[e * m + a], fluxes.imaginary[e * m + a]];
    re += reading.weight[a] * x - omega * reading.harmonicWeight[a] * y;
    im += reading.weight[a] * y + omega * reading.harmonicWeight[a] * x;
    part = Math.max(part, Math.abs(reading.weight[a]) * Math.hypot(x, y));
  }
  return { re, im, part };
}

const distance = (a: Float64Array, b: ArrayLike<number>) =>
  a.reduce((worst, value, k) => Math.max(worst, Math.abs(value - b[k])), 0);

describe.each([
  ["with row exchanges", pivotedConservativeSolver],
  ["as chosen for the machine", conservativeSolver],
])("conservative systems %s", (_, create) => {
  it.each(systems)("have the unknowns and fluxes of a dense solution: %s", (_name, options) => {
    const system = randomConservativeSystem(options);
    const solver = create(system);
    const n = system.nodes * system.blockSize;
    for (const omega of frequencies) {
      const exact = denseSolution(system, omega);
      const { unknowns, fluxes } = solver.profiles(omega);
      for (let k = 0; k < 3; k++) {
        for (const part of ["real", "imaginary"] as const) {
          expect(distance(unknowns[part].subarray(k * n, (k + 1) * n), exact.unknowns[k][part])).toBeLessThan(1e-12);
          const length = n - system.blockSize;
          expect(distance(fluxes[part].subarray(k * length, (k + 1) * length), exact.fluxes[k][part])).toBeLessThan(
            1e-12,
          );
        }
        expect(Math.max(...unknowns.real.subarray(k * n, (k + 1) * n).map(Math.abs))).toBeGreaterThan(1e-3);
      }
    }
  });

  it.each(systems)("read what the fluxes of a dense solution add up to, at any edge: %s", (_name, options) => {
    const system = randomConservativeSystem(options);
    const solver = create(system);
    const exact = frequencies.map((omega) => denseSolution(system, omega));
    for (let edge = 0; edge < system.nodes - 1; edge++) {
      const readings = solver.read(frequencies, { edge });
      const alone = solver.read(frequencies, { edge, everywhere: false });
      frequencies.forEach((omega, f) => {
        for (let k = 0; k < 3; k++) {
          const at = f * 3 + k;
          const all = Array.from({ length: system.nodes - 1 }, (_e, e) =>
            readingOf(system, exact[f].fluxes[k], e, omega),
          );
          const { re, im } = all[edge];
          const size = 1e-11 * (1 + omega);
          expect(Math.hypot(readings.real[at] - re, readings.imaginary[at] - im)).toBeLessThan(size);
          expect(Math.hypot(alone.real[at] - re, alone.imaginary[at] - im)).toBeLessThan(size);
          const difference = Math.max(...all.map((other) => Math.hypot(other.re - re, other.im - im)));
          expect(Math.abs(readings.difference[at] - difference)).toBeLessThan(size);
          expect(Math.abs(readings.part[at] - Math.max(...all.map(({ part }) => part)))).toBeLessThan(size);
          expect(alone.difference[at]).toBe(0);
        }
      });
    }
  });

  /** Conductors in a line between two held ends, leaks to ground at nodes, a unit source of voltage in one conductor; thrice over. */
  function line(conductances: number[], leaks: number[], sourceIn: number): ConservativeSystem {
    const nodes = conductances.length + 1;
    const blocks = (values: number[]) => {
      const filled = new Float64Array(values.length * 9);
      values.forEach((value, i) => {
        for (let a = 0; a < 3; a++) filled[i * 9 + 4 * a] = value;
      });
      return filled;
    };
    const inEdges = new Float64Array((nodes - 1) * 3).fill(conductances[sourceIn], sourceIn * 3, sourceIn * 3 + 3);
    return {
      nodes,
      blockSize: 3,
      byStep: blocks(conductances),
      byMean: new Float64Array((nodes - 1) * 9),
      local: blocks(leaks),
      storage: new Float64Array(nodes * 9),
      held: new Uint8Array(nodes * 3).fill(1, 0, 3).fill(1, (nodes - 1) * 3),
      drives: [{ inEdges }],
      reading: { weight: Float64Array.of(1, 0, 0), harmonicWeight: new Float64Array(3) },
    };
  }

  it("keep the current of conductors in series that differ by sixty powers of ten (Ohm's law)", () => {
    const conductances = [1e30, 1e12, 1e-30, 1e25, 3, 1e30];
    const readings = create(line(conductances, [0, 0, 0, 0, 0, 0, 0], 2)).read([1], { edge: 2 });
    const current = 1 / conductances.reduce((sum, value) => sum + 1 / value, 0);
    expect(readings.real[0] / current).toBeCloseTo(1, 12);
  });

  it("keep a leak of 1e-12 beside conductances of 1e10, which a sum of both would lose (Kirchhoff's current law)", () => {
    // an island of two nodes between conductances equal to its leak: it takes a third of the voltage, two thirds drive the current
    const { unknowns } = create(line([1e-12, 1e10, 1e-12], [0, 0, 1e-12, 0], 0)).profiles(1);
    expect(unknowns.real[3]).toBeCloseTo(-1 / 3, 12);
    const readings = create(line([1e-12, 1e10, 1e-12], [0, 0, 1e-12, 0], 0)).read([1], { edge: 0 });
    expect(readings.real[0] / 1e-12).toBeCloseTo(2 / 3, 12);
  });

  it("say that a system has no solution instead of returning what is not a number", () => {
    const system = randomConservativeSystem({ nodes: 6, blockSize: 3, seed: 20 });
    for (const blocks of [system.byStep, system.byMean, system.local, system.storage])
      for (let at = 0; at < blocks.length; at++) if (Math.floor(at / 3) % 3 === 1 || at % 3 === 1) blocks[at] = 0;
    const solver = create(system);
    const readings = solver.read(frequencies, { edge: 2 });
    expect(readings.status).toEqual(frequencies.map(() => "singular"));
    expect([...readings.real, ...readings.imaginary].every((value) => value === 0)).toBe(true);
    expect(solver.profiles(1).status).toBe("singular");
  });

  it("refuse arrays and questions that do not fit, naming them", () => {
    const system = randomConservativeSystem({ nodes: 6, blockSize: 3, seed: 21 });
    expect(() => create({ ...system, storage: new Float64Array(5) })).toThrow(/storage has 5 entries, expected 54/);
    expect(() => create(system).read([1], { edge: 5 })).toThrow(/Edge 5 asked for, expected 0 to 4/);
    expect(() => create(system).read([Number.NaN], { edge: 1 })).toThrow(/Angular frequency NaN/);
    expect(() => create(system).profiles(Number.POSITIVE_INFINITY)).toThrow(/Angular frequency Infinity/);
  });
});

describe("the kernel", () => {
  it("is the committed build of its source", { timeout: 60_000 }, async () => {
    expect(await kernelModule()).toBe(readFileSync(kernelModulePath, "utf8"));
  });

  it("solves transport-like systems itself, the same as with row exchanges to the last digits", () => {
    const omegas = Float64Array.from({ length: 21 }, (_, k) => 10 ** (k / 4 - 3));
    const system = randomConservativeSystem({ nodes: 60, blockSize: 4, seed: 31, lastUnknownBetween: [20, 40] });
    const readings = kernelConservativeSolver(system)!.read(omegas, { edge: 30 });
    const reference = pivotedConservativeSolver(system).read(omegas, { edge: 30 });
    expect(readings.status).toEqual(Array.from(omegas, () => "solved"));
    for (const name of ["real", "imaginary", "difference", "part"] as const)
      expect(distance(readings[name], reference[name])).toBeLessThan(1e-11);
  });

  it("hands over only the frequencies at which a pivot is out of proportion", () => {
    const system = randomConservativeSystem({ nodes: 20, blockSize: 4, seed: 32 });
    // at ω = 0 the first pivot of node 0 is 1e-9 beside couplings of 0.1, because the unknown exchanges −C + E/2 with the outside
    system.held = undefined;
    system.local[0] = -system.byStep[0] + system.byMean[0] / 2 + 1e-9;
    system.storage[0] = 1;
    const solver = kernelConservativeSolver(system)!;
    const readings = solver.read([0, 1, 2], { edge: 8 });
    const reference = pivotedConservativeSolver(system).read([0, 1, 2], { edge: 8 });
    expect(readings.status).toEqual(["pivoted", "solved", "solved"]);
    expect(distance(readings.real, reference.real)).toBeLessThan(1e-10);
    expect(
      distance(solver.profiles(0).unknowns.real, pivotedConservativeSolver(system).profiles(0).unknowns.real),
    ).toBeLessThan(1e-10);
  });

  it("keeps two solvers apart", () => {
    const solver = kernelConservativeSolver(randomConservativeSystem({ nodes: 20, blockSize: 4, seed: 33 }))!;
    const before = solver.read([1, 2, 3], { edge: 4 });
    kernelConservativeSolver(randomConservativeSystem({ nodes: 300, blockSize: 5, seed: 34 }))!.profiles(1);
    expect(solver.read([1, 2, 3], { edge: 4 })).toEqual(before);
  });
});
