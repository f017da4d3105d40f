/**
 * A harmonic system as the kernel reads it: only unknowns that are coupled, each node's blocks together.
 *
 *   symbol    meaning                                                                     shape
 *   pattern   bit c set where a block's row has an entry in column c                      nodes × m
 *   active    unknowns of a node that are coupled to anything; the others are b/d         ≤ m
 *   hub       unknown that all equations of both neighbours may contain (the potential)   one per system
 *   arrow     block with entries in the hub's column and on its diagonal only
 */
import type { HarmonicSystem } from "./harmonicSystem.ts";

/** Entries of a node's row in the kernel's table. */
const TABLE_ENTRIES = 6;

export interface PackedSystem {
  /** Active unknowns of each node in the order of its record. */
  active: readonly (readonly number[])[];
  /** Most unknowns of a node. */
  largest: number;
  /** See kernel/index.ts for the layout of these three. */
  records: Float64Array;
  table: Int32Array;
  extents: Int32Array;
}

interface Patterns {
  lower: Uint8Array;
  diagonal: Uint8Array;
  upper: Uint8Array;
  storage: Uint8Array;
}

function pattern(blocks: Float64Array, m: number): Uint8Array {
  const masks = new Uint8Array(blocks.length / m);
  for (let row = 0; row < masks.length; row++) {
    let mask = 0;
    for (let c = 0; c < m; c++) if (blocks[row * m + c] !== 0) mask |= 1 << c;
    masks[row] = mask;
  }
  return masks;
}

/** Bit masks of the active unknowns of each node, at least one a node, so that no block is empty. */
function activeMasks(system: HarmonicSystem, { lower, diagonal, upper, storage }: Patterns): Uint8Array {
  const { nodes, blockSize: m, relaxations } = system;
  const active = new Uint8Array(nodes + 2); // one node more at either end, which nothing can be coupled to
  for (let i = 0; i < nodes; i++)
    for (let a = 0; a < m; a++) {
      const row = i * m + a;
      const self = 1 << a;
      const others = (diagonal[row] & ~self) | storage[row];
      active[i] |= lower[row];
      active[i + 1] |= others;
      active[i + 2] |= upper[row];
      if (others || lower[row] || upper[row] || !(diagonal[row] & self)) active[i + 1] |= self;
    }
  for (const { node, column, row } of relaxations ?? [])
    for (let a = 0; a < m; a++) if (column[a] !== 0 || row[a] !== 0) active[node + 1] |= 1 << a;
  return active.subarray(1, nodes + 1).map((mask) => mask || 1);
}

function isArrow(masks: Uint8Array, i: number, m: number, hub: number): boolean {
  for (let a = 0; a < m; a++) if (masks[i * m + a] & ~((1 << a) | (1 << hub))) return false;
  return true;
}

/**
 * Per node, bit 0: the kernel's unrolled loops may eliminate it into the node after, bit 1: into the node before. Both have the same
 * 3 to 5 unknowns with the hub among them, and arrows couple them.
 */
function arrowSteps(m: number, patterns: Patterns, active: Uint8Array, hub: number): Uint8Array {
  const nodes = active.length;
  const steps = new Uint8Array(nodes);
  const storage = active.map((_, i) => (isArrow(patterns.storage, i, m, hub) ? 1 : 0));
  for (let i = 0; i + 1 < nodes; i++) {
    const size = unknownsOf(active[i], hub).length;
    if (active[i] !== active[i + 1] || size < 3 || size > 5 || !(active[i] & (1 << hub))) continue;
    if (!isArrow(patterns.upper, i, m, hub) || !isArrow(patterns.lower, i + 1, m, hub)) continue;
    if (storage[i + 1]) steps[i] |= 1;
    if (storage[i]) steps[i + 1] |= 2;
  }
  return steps;
}

const lists = new Map<number, readonly number[]>();

/** The unknowns of a mask, the hub first. */
function unknownsOf(mask: number, hub: number): readonly number[] {
  const key = mask * 8 + hub;
  const known = lists.get(key);
  if (known) return known;
  const all = [0, 1, 2, 3, 4, 5, 6, 7].filter((a) => mask & (1 << a));
  const list = all.includes(hub) ? [hub, ...all.filter((a) => a !== hub)] : all;
  lists.set(key, list);
  return list;
}

/** The hub that lets most nodes take the unrolled loops, and those nodes. */
function chooseHub(m: number, patterns: Patterns, active: Uint8Array): { hub: number; steps: Uint8Array } {
  let best = { hub: 0, steps: arrowSteps(m, patterns, active, 0) };
  const count = (steps: Uint8Array) => steps.reduce((sum, step) => sum + (step > 0 ? 1 : 0), 0);
  for (let hub = 1; hub < m && count(best.steps) < active.length / 2; hub++) {
    const steps = arrowSteps(m, patterns, active, hub);
    if (count(steps) > count(best.steps)) best = { hub, steps };
  }
  return best;
}

/** First and last node at which each right-hand side has an entry; nodes and −1 for none. */
function extentsOf({ nodes, blockSize: m, rightHandSides }: HarmonicSystem): Int32Array {
  return Int32Array.from(
    rightHandSides.flatMap((b) => {
      const first = b.findIndex((value) => value !== 0);
      const last = b.findLastIndex((value) => value !== 0);
      return first < 0 ? [nodes, -1] : [Math.floor(first / m), Math.floor(last / m)];
    }),
  );
}

/** Lays the active part of an equilibrated system out for the kernel. */
export function pack(system: HarmonicSystem): PackedSystem {
  const { nodes, blockSize: m, rightHandSides, relaxations = [] } = system;
  const patterns: Patterns = {
    lower: pattern(system.lower, m),
    diagonal: pattern(system.diagonal, m),
    upper: pattern(system.upper, m),
    storage: pattern(system.storage, m),
  };
  const masks = activeMasks(system, patterns);
  const { hub, steps } = chooseHub(m, patterns, masks);
  const active = Array.from(masks, (mask) => unknownsOf(mask, hub));
  const relaxationsOf = new Map<number, number[]>();
  relaxations.forEach(({ node }, k) => {
    relaxationsOf.set(node, [...(relaxationsOf.get(node) ?? []), k]);
  });

  let length = 0;
  for (let i = 0; i < nodes; i++) {
    const size = active[i].length;
    const neighbours = (i > 0 ? active[i - 1].length : 0) + (i < nodes - 1 ? active[i + 1].length : 0);
    length += size * (2 * size + neighbours + rightHandSides.length);
    length += (relaxationsOf.get(i)?.length ?? 0) * (1 + 2 * size);
  }
  const records = new Float64Array(length);
  const table = new Int32Array(nodes * TABLE_ENTRIES);
  let end = 0;
  const put = (blocks: Float64Array, i: number, columns: readonly number[]) => {
    for (const a of active[i]) for (const c of columns) records[end++] = blocks[(i * m + a) * m + c];
  };
  for (let i = 0; i < nodes; i++) {
    const own = active[i];
    const row = i * TABLE_ENTRIES;
    table[row] = end * 8;
    table[row + 1] = own.length;
    table[row + 2] = steps[i] & 1;
    table[row + 3] = steps[i] & 2;
    put(system.diagonal, i, own);
    put(system.storage, i, own);
    if (i > 0) put(system.lower, i, active[i - 1]);
    if (i < nodes - 1) put(system.upper, i, active[i + 1]);
    for (const b of rightHandSides) for (const a of own) records[end++] = b[i * m + a];
    table[row + 4] = end * 8;
    for (const k of relaxationsOf.get(i) ?? []) {
      const { decay, column, row: relaxationRow } = relaxations[k];
      table[row + 5]++;
      records[end++] = decay;
      for (const a of own) records[end++] = column[a];
      for (const c of own) records[end++] = relaxationRow[c];
    }
  }
  return {
    active,
    largest: Math.max(...active.map((list) => list.length)),
    records,
    table,
    extents: extentsOf(system),
  };
}
