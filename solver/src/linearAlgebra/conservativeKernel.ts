/**
 * Conservative systems by the WebAssembly kernel: two frequencies in each vector register, no row exchanges. Frequencies at which a pivot
 * was out of proportion are solved again with row exchanges.
 */
import { pivotedConservativeSolver } from "./conservativeElimination.ts";
import { type PackedSystem, pack } from "./conservativePacking.ts";
import {
  type ConservativeSolver,
  type ConservativeSystem,
  checkConservativeSystem,
  checkQuestion,
  type Profiles,
  type Readings,
  withHeldUnknowns,
} from "./conservativeSystem.ts";
import { kernelBytes } from "./kernelBytes.ts";

interface Kernel {
  memory: WebAssembly.Memory;
  arrange(
    nodes: number,
    unknowns: number,
    rightHandSides: number,
    pairsPerBatch: number,
    recordBytes: number,
    keptNodes: number,
    keptFields: number,
  ): void;
  solve(meeting: number, everywhere: number, all: number): void;
  table: WebAssembly.Global;
  extents: WebAssembly.Global;
  records: WebAssembly.Global;
  frequencies: WebAssembly.Global;
  marks: WebAssembly.Global;
  weights: WebAssembly.Global;
  readings: WebAssembly.Global;
  solution: WebAssembly.Global;
  fluxes: WebAssembly.Global;
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

/** Frequency pairs in a batch: many fill the processor, one keeps what substitution needs in its cache. */
const PAIRS_AT_AN_EDGE = 8;
const PAIRS_EVERYWHERE = 1;
/** Doubles of a number at two frequencies. */
const NUMBER = 4;

/** Copies a system into the kernel's memory, ready for batches of `pairs`. */
function loadSystem(
  kernel: Kernel,
  { largest, records, table, extents, weights }: PackedSystem,
  sides: number,
  pairs: number,
  keptNodes: number,
  keptFields: number,
) {
  kernel.arrange(table.length / 8, largest, sides, pairs, records.byteLength, keptNodes, keptFields);
  const { buffer } = kernel.memory;
  new Float64Array(buffer, kernel.records.value).set(records);
  new Int32Array(buffer, kernel.table.value).set(table);
  new Int32Array(buffer, kernel.extents.value).set(extents);
  new Float64Array(buffer, kernel.weights.value).set(weights);
}

/** Frequencies, one or two a pair, the last repeated. */
function setFrequencies(kernel: Kernel, omegas: ArrayLike<number>, from: number, count: number, pairs: number) {
  const frequencies = new Float64Array(kernel.memory.buffer, kernel.frequencies.value, 2 * pairs);
  for (let lane = 0; lane < 2 * pairs; lane++) frequencies[lane] = omegas[from + Math.min(lane, count - 1)];
}

/** Readings of frequencies from…from+count−1; returns those that need row exchanges. */
function collectReadings(
  kernel: Kernel,
  sides: number,
  from: number,
  count: number,
  pairs: number,
  target: Readings,
): number[] {
  const values = new Float64Array(kernel.memory.buffer, kernel.readings.value, pairs * sides * 8);
  const marks = new BigInt64Array(kernel.memory.buffer, kernel.marks.value, 2 * pairs);
  const failed: number[] = [];
  for (let lane = 0; lane < count; lane++) {
    let sum = 0;
    for (let k = 0; k < sides; k++) {
      const at = ((lane >> 1) * sides + k) * 8 + (lane & 1);
      const to = (from + lane) * sides + k;
      target.real[to] = values[at];
      target.imaginary[to] = values[at + 2];
      target.difference[to] = Math.sqrt(values[at + 4]);
      target.part[to] = Math.sqrt(values[at + 6]);
      sum += target.real[to] + target.imaginary[to] + target.difference[to] + target.part[to];
    }
    if (marks[lane] !== 0n || !Number.isFinite(sum)) failed.push(from + lane);
  }
  return failed;
}

/** Readings with row exchanges in the places of the frequencies that need them. */
function replaceReadings(readings: Readings, failed: number[], sides: number, pivoted: Readings) {
  failed.forEach((f, n) => {
    for (const name of ["real", "imaginary", "difference", "part"] as const)
      readings[name].set(pivoted[name].subarray(n * sides, (n + 1) * sides), f * sides);
    readings.status[f] = pivoted.status[n];
  });
}

/** One field of the kernel, [place][side][unknown] numbers of one pair, as [side][place][unknown]. */
function unfold(values: Float64Array, places: number, sides: number, largest: number, m: number) {
  const real = new Float64Array(sides * places * m);
  const imaginary = new Float64Array(sides * places * m);
  for (let i = 0; i < places; i++)
    for (let k = 0; k < sides; k++)
      for (let a = 0; a < largest; a++) {
        const at = ((i * sides + k) * largest + a) * NUMBER;
        real[(k * places + i) * m + a] = values[at];
        imaginary[(k * places + i) * m + a] = values[at + 2];
      }
  return { real, imaginary };
}

/**
 * Solver on the kernel of this thread; undefined where the kernel cannot run or does not know the system's shape.
 * @throws RangeError when an array of the system has the wrong length
 */
export function kernelConservativeSolver(original: ConservativeSystem): ConservativeSolver | undefined {
  checkConservativeSystem(original);
  const kernel = kernelOfThread();
  const packed = pack(withHeldUnknowns(original));
  if (!kernel || !packed) return undefined;
  const { nodes, blockSize: m, drives } = original;
  const sides = drives.length;
  let pivoted: ConservativeSolver | undefined;
  const exchanging = () => {
    pivoted ??= pivotedConservativeSolver(original);
    return pivoted;
  };

  return {
    read(omegas, request): Readings {
      const { edge, everywhere = true } = request;
      checkQuestion(original, edge, omegas);
      const empty = () => new Float64Array(omegas.length * sides);
      const readings: Readings = {
        real: empty(),
        imaginary: empty(),
        difference: empty(),
        part: empty(),
        status: Array.from(omegas, () => "solved" as const),
      };
      const pairs = Math.min(Math.ceil(omegas.length / 2), everywhere ? PAIRS_EVERYWHERE : PAIRS_AT_AN_EDGE);
      loadSystem(kernel, packed, sides, pairs, everywhere ? nodes : 2, 2);
      const failed: number[] = [];
      for (let from = 0; from < omegas.length; from += 2 * pairs) {
        const count = Math.min(2 * pairs, omegas.length - from);
        setFrequencies(kernel, omegas, from, count, pairs);
        kernel.solve(edge + 1, everywhere ? 1 : 0, 0);
        failed.push(...collectReadings(kernel, sides, from, count, pairs, readings));
      }
      if (failed.length > 0) {
        const again = failed.map((f) => omegas[f]);
        replaceReadings(readings, failed, sides, exchanging().read(again, request));
      }
      return readings;
    },

    profiles(omega): Profiles {
      checkQuestion(original, 0, [omega]);
      loadSystem(kernel, packed, sides, 1, nodes, nodes);
      setFrequencies(kernel, [omega], 0, 1, 1);
      kernel.solve(nodes >> 1, 1, 1);
      const field = (start: number, places: number) =>
        unfold(new Float64Array(kernel.memory.buffer, start), places, sides, packed.largest, m);
      const unknowns = field(kernel.solution.value, nodes);
      const fluxes = field(kernel.fluxes.value, nodes - 1);
      const marks = new BigInt64Array(kernel.memory.buffer, kernel.marks.value, 2);
      const sum = [unknowns.real, unknowns.imaginary, fluxes.real, fluxes.imaginary]
        .map((values) => values.reduce((total, value) => total + value, 0))
        .reduce((total, value) => total + value, 0);
      if (marks[0] !== 0n || !Number.isFinite(sum)) return exchanging().profiles(omega);
      return { unknowns, fluxes, status: "solved" };
    },
  };
}
