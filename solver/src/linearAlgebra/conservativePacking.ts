/**
 * A conservative system as the kernel reads it (kernel/memory.ts has the layout).
 *
 *   symbol   meaning                                                                                      shape
 *   size     unknowns of a node up to the last that takes part in anything, at least 3                    per node
 *   arrow    block with entries only in its first column and on its diagonal; stored as those             2 m
 *   P, E     flux towards the node that remains = P Δ + E x' + j⁰; P = C ∓ E/2, E and j⁰ with the sign     arrows
 */
import type { ConservativeSystem } from "./conservativeSystem.ts";

/** Entries of a node's row in the kernel's table. */
const TABLE_ENTRIES = 8;

export interface PackedSystem {
  largest: number;
  records: Float64Array;
  table: Int32Array;
  /** First and last node of each drive with a source at it or in an edge of it. */
  extents: Int32Array;
  /** Weights of the reading, then those of iω. */
  weights: Float64Array;
}

function areArrows(blocks: Float64Array, m: number): boolean {
  for (let row = 0; row < blocks.length / m; row++)
    for (let c = 1; c < m; c++) if (c !== row % m && blocks[row * m + c] !== 0) return false;
  return true;
}

/** Whether unknown a of a block row or column takes part in anything but its own diagonal. */
function takesPart(blocks: Float64Array, i: number, m: number, a: number, withDiagonal: boolean): boolean {
  for (let c = 0; c < m; c++) {
    if (c === a && !withDiagonal) continue;
    if (blocks[(i * m + a) * m + c] !== 0 || blocks[(i * m + c) * m + a] !== 0) return true;
  }
  return false;
}

function sizesOf(system: ConservativeSystem): Uint8Array {
  const { nodes, blockSize: m, byStep, byMean, local, storage, relaxations = [], drives } = system;
  const sizes = new Uint8Array(nodes).fill(3);
  const atEdge = (e: number, a: number) =>
    e >= 0 &&
    e < nodes - 1 &&
    (takesPart(byStep, e, m, a, true) ||
      takesPart(byMean, e, m, a, true) ||
      drives.some(({ inEdges }) => inEdges && inEdges[e * m + a] !== 0));
  const alone = (i: number, a: number) =>
    local[(i * m + a) * m + a] !== 0 &&
    !takesPart(local, i, m, a, false) &&
    !takesPart(storage, i, m, a, true) &&
    !atEdge(i - 1, a) &&
    !atEdge(i, a) &&
    !drives.some(({ atNodes }) => atNodes && atNodes[i * m + a] !== 0);
  for (let i = 0; i < nodes; i++)
    for (let size = m; size > 3; size--)
      if (!alone(i, size - 1)) {
        sizes[i] = size;
        break;
      }
  for (const { node, column, row } of relaxations)
    for (let a = 3; a < m; a++) if (column[a] !== 0 || row[a] !== 0) sizes[node] = Math.max(sizes[node], a + 1);
  return sizes;
}

function extentsOf({ nodes, blockSize: m, drives }: ConservativeSystem): Int32Array {
  const extents = new Int32Array(2 * drives.length);
  const isSource = (value: number) => value !== 0;
  drives.forEach(({ atNodes, inEdges }, k) => {
    const [nodesFirst, edgesFirst] = [atNodes, inEdges].map((values) => values?.findIndex(isSource) ?? -1);
    const [nodesLast, edgesLast] = [atNodes, inEdges].map((values) => values?.findLastIndex(isSource) ?? -1);
    const first = [nodesFirst, edgesFirst].filter((at) => at >= 0).map((at) => Math.floor(at / m));
    extents[2 * k] = Math.min(nodes, ...first);
    // an edge with a source ends at the node after it
    extents[2 * k + 1] = Math.max(Math.floor(nodesLast / m), edgesLast < 0 ? -1 : Math.floor(edgesLast / m) + 1);
  });
  return extents;
}

/** The system laid out for the kernel, held unknowns already replaced; undefined for one whose shape the kernel does not know. */
export function pack(system: ConservativeSystem): PackedSystem | undefined {
  const { nodes, blockSize: m, byStep, byMean, local, storage, relaxations = [], drives, reading } = system;
  if (m < 3 || m > 5 || ![byStep, byMean, storage].every((blocks) => areArrows(blocks, m))) return undefined;
  const sizes = sizesOf(system);
  const relaxationsOf = new Map<number, number[]>();
  relaxations.forEach(({ node }, k) => {
    const list = relaxationsOf.get(node);
    if (list) list.push(k);
    else relaxationsOf.set(node, [k]);
  });
  const edgesWithSources = new Set<number>();
  for (const { inEdges } of drives)
    inEdges?.forEach((value, at) => {
      if (value !== 0) edgesWithSources.add(Math.floor(at / m));
    });

  let length = 1; // offset 0 stands for "none"
  for (let i = 0; i < nodes; i++)
    length += sizes[i] * (sizes[i] + 10 + 3 * drives.length) + (relaxationsOf.get(i)?.length ?? 0) * (1 + 2 * sizes[i]);
  const records = new Float64Array(length);
  const table = new Int32Array(nodes * TABLE_ENTRIES);
  let end = 1;
  const putArrow = (entry: (at: number) => number, i: number, size: number) => {
    for (let a = 0; a < size; a++) records[end++] = entry((i * m + a) * m);
    for (let a = 0; a < size; a++) records[end++] = a === 0 ? 0 : entry((i * m + a) * m + a);
  };
  const putEdge = (e: number, direction: number, size: number) => {
    putArrow((at) => byStep[at] - 0.5 * direction * byMean[at], e, size);
    putArrow((at) => direction * byMean[at], e, size);
  };
  const putSources = (e: number, direction: number, size: number) => {
    for (const { inEdges } of drives)
      for (let a = 0; a < size; a++) records[end++] = inEdges ? direction * inEdges[e * m + a] : 0;
  };
  for (let i = 0; i < nodes; i++) {
    const size = sizes[i];
    const row = i * TABLE_ENTRIES;
    table[row] = end * 8;
    table[row + 1] = size;
    for (let a = 0; a < size; a++) for (let c = 0; c < size; c++) records[end++] = local[(i * m + a) * m + c];
    putArrow((at) => storage[at], i, size);
    for (const { atNodes } of drives) for (let a = 0; a < size; a++) records[end++] = atNodes ? atNodes[i * m + a] : 0;
    for (const direction of [1, -1]) {
      const e = direction > 0 ? i : i - 1;
      if (e < 0 || e > nodes - 2) continue;
      table[row + (direction > 0 ? 2 : 3)] = end * 8;
      putEdge(e, direction, size);
      if (!edgesWithSources.has(e)) continue;
      table[row + (direction > 0 ? 6 : 7)] = end * 8;
      putSources(e, direction, size);
    }
    table[row + 4] = end * 8;
    for (const k of relaxationsOf.get(i) ?? []) {
      const { decay, column, row: unknownRow } = relaxations[k];
      table[row + 5]++;
      records[end++] = decay;
      for (let a = 0; a < size; a++) records[end++] = column[a];
      for (let c = 0; c < size; c++) records[end++] = unknownRow[c];
    }
  }
  const largest = Math.max(...sizes);
  const weights = new Float64Array(2 * largest);
  weights.set(reading.weight.subarray(0, largest));
  weights.set(reading.harmonicWeight.subarray(0, largest), largest);
  return { largest, records, table, extents: extentsOf(system), weights };
}
