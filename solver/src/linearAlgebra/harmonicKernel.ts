/**
 * Harmonic systems by the WebAssembly kernel: two frequencies in each vector register, no row exchanges, unknowns only where
 * they are coupled. Frequencies at which a pivot was out of proportion are solved again with row exchanges.
 */
import { pivotedHarmonicSolver } from "./harmonicElimination.ts";
import { type EquilibratedSystem, equilibrate } from "./harmonicEquilibration.ts";
import { type PackedSystem, pack } from "./harmonicPacking.ts";
import {
  checkHarmonicSystem,
  type HarmonicRequest,
  type HarmonicSolution,
  type HarmonicSolver,
  type HarmonicSystem,
  resolveHarmonicRequest,
} from "./harmonicSystem.ts";
import { kernelBytes } from "./kernelBytes.ts";

interface Kernel {
  memory: WebAssembly.Memory;
  arrange(
    nodes: number,
    unknowns: number,
    rightHandSides: number,
    pairsPerBatch: number,
    recordBytes: number,
    wantedNodes: number,
    refinedNodes: number,
  ): void;
  solve(first: number, last: number, refining: number): void;
  accumulate(start: number): void;
  table: WebAssembly.Global;
  records: WebAssembly.Global;
  frequencies: WebAssembly.Global;
  marks: WebAssembly.Global;
  extents: WebAssembly.Global;
  solution: WebAssembly.Global;
  refined: WebAssembly.Global;
}

let instance: Kernel | "unavailable" | undefined;

/** The kernel of this thread, made at the first call; undefined where WebAssembly or its vector instructions are missing. */
function kernelOfThread(): Kernel | undefined {
  if (instance === undefined) {
    try {
      const bytes = Uint8Array.from(atob(kernelBytes), (character) => character.charCodeAt(0));
      instance = new WebAssembly.Instance(new WebAssembly.Module(bytes)).exports as unknown as Kernel;
    } catch {
      instance = "unavailable";
    }
  }
  return instance === "unavailable" ? undefined : instance;
}

/** Frequency pairs in a batch: many fill the processor, few keep what substitution needs in its cache. */
const PAIRS_WITHOUT_SUBSTITUTION = 8;
const PAIRS_WITH_SUBSTITUTION = 2;

/** Copies what the kernel solved for frequencies from…from+count−1 into the solution; returns the frequencies that need row exchanges. */
function collect(
  kernel: Kernel,
  { system, columnScale }: EquilibratedSystem,
  { active, largest }: PackedSystem,
  solution: HarmonicSolution,
  from: number,
  count: number,
  pairs: number,
  source: number,
): number[] {
  const { blockSize: m, rightHandSides } = system;
  const sides = rightHandSides.length;
  const { firstNode, lastNode, real, imaginary } = solution;
  const wanted = lastNode - firstNode + 1;
  const values = new Float64Array(kernel.memory.buffer);
  const marks = new BigInt64Array(kernel.memory.buffer, kernel.marks.value, 2 * pairs);
  const failed: number[] = [];
  for (let lane = 0; lane < count; lane++) {
    const f = from + lane;
    let sum = 0;
    for (let k = 0; k < sides; k++)
      for (let n = 0; n < wanted; n++) {
        const own = active[firstNode + n];
        const at = source / 8 + ((n * pairs + (lane >> 1)) * sides + k) * largest * 4 + (lane & 1);
        const target = ((f * sides + k) * wanted + n) * m;
        for (let c = 0; c < own.length; c++) {
          const scale = columnScale[(firstNode + n) * m + own[c]];
          const re = values[at + 4 * c] * scale;
          const im = values[at + 4 * c + 2] * scale;
          real[target + own[c]] = re;
          imaginary[target + own[c]] = im;
          sum += re + im;
        }
      }
    if (marks[lane] !== 0n || !Number.isFinite(sum)) failed.push(f);
  }
  return failed;
}

/** Unknowns that stand alone: b/d at every frequency. */
function fillUncoupled(
  { system, columnScale }: EquilibratedSystem,
  { active }: PackedSystem,
  solution: HarmonicSolution,
) {
  const { blockSize: m, rightHandSides, diagonal } = system;
  const { firstNode, lastNode, real, status } = solution;
  const wanted = (lastNode - firstNode + 1) * m;
  for (let i = firstNode; i <= lastNode; i++)
    for (let a = 0; a < m; a++) {
      if (active[i].includes(a)) continue;
      rightHandSides.forEach((b, k) => {
        const value = (b[i * m + a] / diagonal[(i * m + a) * m + a]) * columnScale[i * m + a];
        if (value === 0) return;
        for (let f = 0; f < status.length; f++)
          real[(f * rightHandSides.length + k) * wanted + (i - firstNode) * m + a] = value;
      });
    }
}

/** Solves the given frequencies with row exchanges and puts them in their places. */
function replace(
  solver: HarmonicSolver,
  omegas: ArrayLike<number>,
  failed: number[],
  request: HarmonicRequest,
  solution: HarmonicSolution,
) {
  const pivoted = solver.solve(
    failed.map((f) => omegas[f]),
    request,
  );
  const length = pivoted.real.length / failed.length;
  failed.forEach((f, k) => {
    solution.real.set(pivoted.real.subarray(k * length, (k + 1) * length), f * length);
    solution.imaginary.set(pivoted.imaginary.subarray(k * length, (k + 1) * length), f * length);
    solution.status[f] = pivoted.status[k];
  });
}

/**
 * Solver on the kernel of this thread; undefined where the kernel cannot run.
 * @throws RangeError when an array of the system has the wrong length
 */
export function kernelHarmonicSolver(original: HarmonicSystem): HarmonicSolver | undefined {
  checkHarmonicSystem(original);
  const kernel = kernelOfThread();
  if (!kernel) return undefined;
  const equilibrated = equilibrate(original);
  const { system } = equilibrated;
  const { nodes, blockSize: m, rightHandSides } = system;
  const packed = pack(system);
  let exchanging: HarmonicSolver | undefined;

  return {
    solve(omegas: ArrayLike<number>, request: HarmonicRequest = {}): HarmonicSolution {
      const { firstNode, lastNode, refinements } = resolveHarmonicRequest(system, request);
      for (let f = 0; f < omegas.length; f++)
        if (!Number.isFinite(omegas[f]))
          throw new RangeError(`Angular frequency ${omegas[f]}, expected a finite number.`);
      const length = omegas.length * rightHandSides.length * (lastNode - firstNode + 1) * m;
      const solution: HarmonicSolution = {
        firstNode,
        lastNode,
        blockSize: m,
        real: new Float64Array(length),
        imaginary: new Float64Array(length),
        status: Array.from(omegas, () => "solved" as const),
      };
      fillUncoupled(equilibrated, packed, solution);
      const [first, last] = refinements > 0 ? [0, nodes - 1] : [firstNode, lastNode];
      const pairs = Math.min(
        Math.ceil(omegas.length / 2),
        last - first > 1 ? PAIRS_WITH_SUBSTITUTION : PAIRS_WITHOUT_SUBSTITUTION,
      );
      kernel.arrange(
        nodes,
        packed.largest,
        rightHandSides.length,
        pairs,
        packed.records.byteLength,
        last - first + 1,
        refinements > 0 ? nodes : 0,
      );
      const { buffer } = kernel.memory;
      new Float64Array(buffer, kernel.records.value).set(packed.records);
      new Int32Array(buffer, kernel.table.value).set(packed.table);
      new Int32Array(buffer, kernel.extents.value).set(packed.extents);
      const frequencies = new Float64Array(buffer, kernel.frequencies.value, 2 * pairs);
      const failed: number[] = [];
      for (let from = 0; from < omegas.length; from += 2 * pairs) {
        const count = Math.min(2 * pairs, omegas.length - from);
        for (let lane = 0; lane < 2 * pairs; lane++) frequencies[lane] = omegas[from + Math.min(lane, count - 1)];
        kernel.solve(first, last, 0);
        for (let n = 0; n < refinements; n++) {
          kernel.accumulate(n === 0 ? 1 : 0);
          kernel.solve(first, last, 1);
        }
        let source = kernel.solution.value + (firstNode - first) * pairs * rightHandSides.length * packed.largest * 32;
        if (refinements > 0) {
          kernel.accumulate(0);
          source += kernel.refined.value - kernel.solution.value;
        }
        failed.push(...collect(kernel, equilibrated, packed, solution, from, count, pairs, source));
      }
      if (failed.length > 0) {
        exchanging ??= pivotedHarmonicSolver(original);
        replace(exchanging, omegas, failed, request, solution);
      }
      return solution;
    },
  };
}
