/**
 * Where everything lies in the kernel's memory for one system and one batch of frequency pairs.
 *
 *   symbol     meaning                                               shape
 *   m          unknowns of a node, 3 to 5                            per node
 *   arrow      hub column (m), then diagonal (m, the first unused)    2m reals
 *   table      per node (i32): node record, m, edge record to the node after, edge record to the node before, relaxations,
 *              their count, source record of the edge after, source record of the edge before (0: none)
 *   node       G (m × m), M (arrow), sources b (sides × m)            reals
 *   edge       P, E (arrows), for the node that is eliminated across  reals
 *   source     j⁰ (sides × m)                                         reals
 *   relaxation decay, column (m), row (m)                             reals
 */
import { NUMBER } from "./complexPair";

/** Bytes of a node's row in the table. */
export const ROW: usize = 32;

/** Start of the table. */
export let table: usize = 0;
/** Start of all records. */
export let records: usize = 0;
/** ω of each pair (v128). */
export let frequencies: usize = 0;
/** Marks of each pair (v128): all ones where the answer needs row exchanges. */
export let marks: usize = 0;
/** Reading of each flux: weight (largest) and weight of iω (largest), reals. */
export let weights: usize = 0;
/** First and last node of each side whose balance or edges have a source (i32, i32): h is zero before them. */
export let extents: usize = 0;
/** Per pair and side: total at the reading edge (number), largest |difference|² and |part|² over the edges (v128 each). */
export let readings: usize = 0;
/** Unknowns [node][pair][side][unknown] and fluxes [edge][pair][side][unknown], numbers; two nodes in turn where not all are kept. */
export let solution: usize = 0;
export let fluxes: usize = 0;

export let nodeCount: i32 = 0;
export let sides: usize = 0;
export let pairs: usize = 0;
/** Unknowns of the largest node, and bytes of its block, of one pair's vectors, of all pairs' vectors. */
export let largest: usize = 0;
export let blockBytes: usize = 0;
export let sideBytes: usize = 0;
export let fieldBytes: usize = 0;
/** H of each pair, and its second of the two sweeps; h likewise. */
export let blocks: usize = 0;
export let meetingBlocks: usize = 0;
export let values: usize = 0;
export let meetingValues: usize = 0;
/** W and u of the nodes kept. */
export let factors: usize = 0;
export let steps: usize = 0;
/** S, W where it is not kept, small vectors. */
export let inverseBlock: usize = 0;
export let scratchBlock: usize = 0;
export let scratch: usize = 0;
/** Zeros where a node's record would be, for neighbours of different size. */
export let nothing: usize = 0;

/** Lays the memory out; afterwards the addresses above hold. */
export function arrange(
  nodes: usize,
  unknowns: usize,
  rightHandSides: usize,
  pairsPerBatch: usize,
  recordBytes: usize,
  keptNodes: usize,
  keptFields: usize,
): void {
  nodeCount = <i32>nodes;
  largest = unknowns;
  sides = rightHandSides;
  pairs = pairsPerBatch;
  blockBytes = largest * largest * NUMBER;
  sideBytes = sides * largest * NUMBER;
  fieldBytes = pairs * sideBytes;
  let end: usize = 64;
  table = end;
  end = (end + nodes * ROW + 63) & ~63;
  frequencies = end;
  end += pairs * 16;
  marks = end;
  end += pairs * 16;
  weights = end;
  end += largest * 16;
  extents = end;
  end = (end + sides * 8 + 15) & ~15;
  readings = end;
  end += pairs * sides * 64;
  scratch = end;
  end += 5 * largest * NUMBER;
  inverseBlock = end;
  end += blockBytes;
  scratchBlock = end;
  end += blockBytes;
  nothing = end;
  end += blockBytes;
  blocks = end;
  end += pairs * blockBytes;
  meetingBlocks = end;
  end += pairs * blockBytes;
  values = end;
  end += fieldBytes;
  meetingValues = end;
  end += fieldBytes;
  records = end;
  end = (end + recordBytes + 63) & ~63;
  factors = end;
  end += keptNodes * pairs * blockBytes;
  steps = end;
  end += keptNodes * fieldBytes;
  solution = end;
  end += keptFields * fieldBytes;
  fluxes = end;
  end += keptFields * fieldBytes;
  const pages = <i32>((end + 0xffff) >> 16);
  if (pages > memory.size()) memory.grow(pages - memory.size());
  memory.fill(nothing, 0, blockBytes);
}

// @ts-ignore: decorator
@inline
function entry(node: i32, column: usize): usize {
  return <usize>load<i32>(table + <usize>node * ROW + column * 4);
}

// @ts-ignore: decorator
@inline
export function unknownsOf(node: i32): usize {
  return entry(node, 1);
}

// @ts-ignore: decorator
@inline
export function recordOf(node: i32): usize {
  return records + entry(node, 0);
}

/** Whether h of a side may be other than zero once a node is reached in a direction. */
// @ts-ignore: decorator
@inline
export function driven(side: usize, node: i32, direction: i32): bool {
  const at = extents + side * 8;
  return direction > 0 ? node >= load<i32>(at) : node <= load<i32>(at, 4);
}

/** Record of the edge a node is eliminated across in a direction (+1 to the node after, −1 to the node before). */
// @ts-ignore: decorator
@inline
export function edgeOf(node: i32, direction: i32): usize {
  return records + entry(node, direction > 0 ? 2 : 3);
}

// @ts-ignore: decorator
@inline
export function relaxationsOf(node: i32): usize {
  return records + entry(node, 4);
}

// @ts-ignore: decorator
@inline
export function relaxationCount(node: i32): usize {
  return entry(node, 5);
}

/** Record of the sources of that edge, 0 for none. */
// @ts-ignore: decorator
@inline
export function sourceOf(node: i32, direction: i32): usize {
  const offset = entry(node, direction > 0 ? 6 : 7);
  return offset == 0 ? 0 : records + offset;
}
