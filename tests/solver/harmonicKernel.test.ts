/** The WebAssembly kernel: built from its source, in use, and handing over where it must. */
import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";
import { pivotedHarmonicSolver } from "../../solver/src/linearAlgebra/harmonicElimination.ts";
import { kernelHarmonicSolver } from "../../solver/src/linearAlgebra/harmonicKernel.ts";
import { kernelModule, kernelModulePath } from "../../solver/tools/buildKernel.ts";
import { randomSystem } from "./harmonicSystems.ts";

describe("the kernel", () => {
  it("is the committed build of its source", { timeout: 60_000 }, async () => {
    expect(await kernelModule()).toBe(readFileSync(kernelModulePath, "utf8"));
  });

  it("solves transport-like systems itself, the same as with row exchanges to the last digits", () => {
    const omegas = Float64Array.from({ length: 21 }, (_, k) => 10 ** (k / 4 - 3));
    const system = randomSystem({ nodes: 60, blockSize: 4, seed: 31, arrow: true, lastUnknownBetween: [20, 40] });
    const solution = kernelHarmonicSolver(system)!.solve(omegas);
    const reference = pivotedHarmonicSolver(system).solve(omegas);
    expect(solution.status).toEqual(Array.from(omegas, () => "solved"));
    const size = Math.max(...reference.real.map(Math.abs));
    for (let r = 0; r < solution.real.length; r++) {
      expect(Math.abs(solution.real[r] - reference.real[r])).toBeLessThan(1e-13 * size);
      expect(Math.abs(solution.imaginary[r] - reference.imaginary[r])).toBeLessThan(1e-13 * size);
    }
  });

  it("hands over only the frequencies at which a pivot is out of proportion", () => {
    const system = randomSystem({ nodes: 20, blockSize: 4, seed: 32, arrow: true });
    // 1e-9 + iω on the first diagonal entry: small against the rest of its row at ω = 0 only
    for (let c = 0; c < 4; c++) system.storage[c] = 0;
    system.diagonal[0] = 1e-9;
    system.storage[0] = 1;
    const solution = kernelHarmonicSolver(system)!.solve([0, 1, 2]);
    const reference = pivotedHarmonicSolver(system).solve([0, 1, 2]);
    expect(solution.status).toEqual(["pivoted", "solved", "solved"]);
    for (let r = 0; r < solution.real.length; r++) expect(solution.real[r]).toBeCloseTo(reference.real[r], 11);
  });

  it("keeps two solvers apart", () => {
    const first = randomSystem({ nodes: 20, blockSize: 4, seed: 33, arrow: true });
    const second = randomSystem({ nodes: 300, blockSize: 5, seed: 34 });
    const solver = kernelHarmonicSolver(first)!;
    const before = solver.solve([1, 2, 3]);
    kernelHarmonicSolver(second)!.solve([1, 2, 3], { refinements: 1 });
    expect(solver.solve([1, 2, 3])).toEqual(before);
  });
});
