/**
 * Elimination of a harmonic block-tridiagonal system for a batch of frequency pairs: (K + iωM + Σ c rᵀ/(d+iω)) x = b.
 *
 *   symbol     meaning                                                                  shape
 *   D, M       diagonal block, storage block of a node                                  m × m reals
 *   O, I       coupling of a node's equations to the next eliminated node, and back     m × m', m' × m reals
 *   S          inverse of the diagonal block after the nodes behind are gone            m × m numbers
 *   W, y       S O and S b, kept for the nodes that are wanted                          m × m', right-hand sides × m numbers
 *
 * Elimination: D' ← D' − I S O, b' ← b' − I S b; substitution: x = y − W x'. Nodes are the outer loop and frequency pairs the
 * inner one, so that the real data are read once per batch and neighbouring pairs fill each other's waiting times. Where both
 * nodes have the same 3, 4 or 5 unknowns and the couplings are arrows (first column and diagonal: all currents see the
 * potential, each carrier sees itself), the loops are unrolled and the zeros skipped.
 *
 * Record of a node (reals): D, M, lower (m × m of the node before), upper (m × m of the node after), b (right-hand sides × m).
 * Record of a relaxation (reals): decay, column (m), row (m).
 */
import { coefficient, imaginaryPart, minusProduct, NUMBER, plusProduct, put, REAL, realPart } from "./complexPair";
import { invert, invertAny } from "./inverse";

/** One row per node: record, unknowns, arrow to the node after, arrow to the node before, relaxations, their count (i32). */
export let table: usize = 0;
/** Records of nodes and relaxations. */
export let records: usize = 0;
/** ω of each pair (v128). */
export let frequencies: usize = 0;
/** Marks of each pair (v128): all ones where the answer needs row exchanges. */
export let marks: usize = 0;
/** Per right-hand side (i32, i32): first and last node with an entry. */
export let extents: usize = 0;
/** Solution: [wanted node][pair][right-hand side][unknown] numbers. */
export let solution: usize = 0;
/** Sum of the solutions of a refinement, all nodes, laid out like the solution. */
export let refined: usize = 0;

const ROW: usize = 24;
let residual: usize = 0;
let nodeCount: i32 = 0;
let sides: usize = 0;
let pairs: usize = 0;
/** Bytes of one block, of one pair's right-hand sides, of all pairs' right-hand sides. */
let blockBytes: usize = 0;
let sideBytes: usize = 0;
let fieldBytes: usize = 0;
let largest: usize = 0;
let blocks: usize = 0;
let spareBlocks: usize = 0;
let meetingBlocks: usize = 0;
let values: usize = 0;
let spareValues: usize = 0;
let meetingValues: usize = 0;
let factors: usize = 0;
let steps: usize = 0;
let scratch: usize = 0;
let before: usize = 0;
let fromResidual: bool = false;
/** Direction of the sweep: +1 from the first node, −1 from the last. */
let direction: i32 = 1;

/** Lays the memory out for a system and a batch; afterwards the exported addresses hold. */
export function arrange(
  nodes: usize,
  unknowns: usize,
  rightHandSides: usize,
  pairsPerBatch: usize,
  recordBytes: usize,
  wantedNodes: usize,
  refinedNodes: usize,
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
  end += nodes * ROW;
  extents = end;
  end += sides * 8;
  end = (end + 63) & ~63;
  frequencies = end;
  end += pairs * 16;
  marks = end;
  end += pairs * 16;
  before = end;
  end += largest * 16;
  scratch = end;
  end += blockBytes;
  blocks = end;
  end += pairs * blockBytes;
  spareBlocks = end;
  end += pairs * blockBytes;
  meetingBlocks = end;
  end += pairs * blockBytes;
  values = end;
  end += fieldBytes;
  spareValues = end;
  end += fieldBytes;
  meetingValues = end;
  end += fieldBytes;
  records = end;
  end += recordBytes;
  end = (end + 63) & ~63;
  factors = end;
  end += wantedNodes * pairs * blockBytes;
  steps = end;
  end += wantedNodes * fieldBytes;
  solution = end;
  end += wantedNodes * fieldBytes;
  refined = end;
  end += refinedNodes * fieldBytes;
  residual = end;
  end += refinedNodes * fieldBytes;
  const pages = <i32>((end + 0xffff) >> 16);
  if (pages > memory.size()) memory.grow(pages - memory.size());
}

// @ts-ignore: decorator
@inline
function recordOf(node: i32): usize {
  return records + <usize>load<i32>(table + <usize>node * ROW);
}

// @ts-ignore: decorator
@inline
function unknownsOf(node: i32): usize {
  return node >= 0 && node < nodeCount ? <usize>load<i32>(table + <usize>node * ROW, 4) : 0;
}

/** Address of the block that couples the equations of `node` to the unknowns of its neighbour on the given side (−1, +1). */
// @ts-ignore: decorator
@inline
function couplingOf(node: i32, side: i32): usize {
  const m = unknownsOf(node);
  const diagonal = recordOf(node) + 2 * m * m * REAL;
  return side < 0 ? diagonal : diagonal + m * unknownsOf(node - 1) * REAL;
}

// @ts-ignore: decorator
@inline
function rightHandSideOf(node: i32): usize {
  const m = unknownsOf(node);
  return recordOf(node) + m * (2 * m + unknownsOf(node - 1) + unknownsOf(node + 1)) * REAL;
}

/** False while the right-hand side is zero at this node and at all eliminated before it. */
// @ts-ignore: decorator
@inline
function started(node: i32, side: usize): bool {
  return (
    fromResidual ||
    (direction > 0 ? node >= load<i32>(extents + side * 8) : node <= load<i32>(extents + side * 8, 4))
  );
}

/** Adds column·rowᵀ/(decay + iω) for each relaxation of a node to its block. */
function addRelaxations(node: i32, target: usize, omega: v128): void {
  const m = unknownsOf(node);
  const row = table + <usize>node * ROW;
  const count = <usize>load<i32>(row, 20);
  let relaxation = records + <usize>load<i32>(row, 16);
  for (let n: usize = 0; n < count; n++, relaxation += (1 + 2 * m) * REAL) {
    const decay = coefficient(relaxation);
    const size = f64x2.div(f64x2.splat(1), plusProduct(f64x2.mul(decay, decay), omega, omega));
    const re = f64x2.mul(decay, size);
    const im = f64x2.mul(omega, size);
    for (let a: usize = 0; a < m; a++)
      for (let c: usize = 0; c < m; c++) {
        const product = f64x2.mul(coefficient(relaxation + (1 + a) * REAL), coefficient(relaxation + (1 + m + c) * REAL));
        const at = target + (a * m + c) * NUMBER;
        put(at, plusProduct(realPart(at), product, re), minusProduct(imaginaryPart(at), product, im));
      }
  }
}

/** D + iωM of a node, its relaxations and b, for every pair. */
function fill(node: i32, block: usize, value: usize): void {
  const m = unknownsOf(node);
  const record = recordOf(node);
  const storage = record + m * m * REAL;
  const b = rightHandSideOf(node);
  const zero = f64x2.splat(0);
  for (let q: usize = 0; q < pairs; q++) {
    const omega = v128.load(frequencies + q * 16);
    const target = block + q * blockBytes;
    for (let k: usize = 0; k < m * m; k++)
      put(
        target + k * NUMBER,
        coefficient(record + k * REAL),
        f64x2.mul(omega, coefficient(storage + k * REAL)),
      );
    addRelaxations(node, target, omega);
    for (let k: usize = 0; k < sides; k++)
      for (let a: usize = 0; a < m; a++) {
        const at = value + q * sideBytes + (k * largest + a) * NUMBER;
        if (fromResidual) {
          const source = residual + <usize>node * fieldBytes + q * sideBytes + (k * largest + a) * NUMBER;
          put(at, realPart(source), imaginaryPart(source));
        } else put(at, coefficient(b + (k * m + a) * REAL), zero);
      }
  }
}

/** Inverts the blocks of one node for every pair. */
function invertBlocks(m: usize, block: usize): void {
  for (let q: usize = 0; q < pairs; q++) {
    const mark = invertAny(m, block + q * blockBytes, before);
    const at = marks + q * 16;
    v128.store(at, v128.or(v128.load(at), mark));
  }
}

/** target = Σ S[row, c] b[c] of one right-hand side. */
function product(m: usize, row: usize, b: usize, target: usize): void {
  let re = f64x2.splat(0);
  let im = f64x2.splat(0);
  for (let c: usize = 0; c < m; c++) {
    const x = realPart(row + c * NUMBER);
    const y = imaginaryPart(row + c * NUMBER);
    const u = realPart(b + c * NUMBER);
    const v = imaginaryPart(b + c * NUMBER);
    re = minusProduct(plusProduct(re, x, u), y, v);
    im = plusProduct(plusProduct(im, x, v), y, u);
  }
  put(target, re, im);
}

/** Takes an eliminated node (S in `block`) out of its neighbour, whatever their unknowns and couplings. `kept` < 0: W and y are not kept. */
function couple(node: i32, next: i32, block: usize, value: usize, nextBlock: usize, nextValue: usize, kept: i32): void {
  const m = unknownsOf(node);
  const n = unknownsOf(next);
  const out = couplingOf(node, direction);
  const back = couplingOf(next, -direction);
  for (let q: usize = 0; q < pairs; q++) {
    const s = block + q * blockBytes;
    const w = kept < 0 ? scratch : factors + (<usize>kept * pairs + q) * blockBytes;
    for (let a: usize = 0; a < m; a++)
      for (let c: usize = 0; c < n; c++) {
        let re = f64x2.splat(0);
        let im = f64x2.splat(0);
        for (let e: usize = 0; e < m; e++) {
          if (load<f64>(out + (e * n + c) * REAL) == 0) continue;
          const o = coefficient(out + (e * n + c) * REAL);
          re = plusProduct(re, realPart(s + (a * m + e) * NUMBER), o);
          im = plusProduct(im, imaginaryPart(s + (a * m + e) * NUMBER), o);
        }
        put(w + (a * n + c) * NUMBER, re, im);
      }
    const d = nextBlock + q * blockBytes;
    for (let a: usize = 0; a < n; a++)
      for (let e: usize = 0; e < m; e++) {
        if (load<f64>(back + (a * m + e) * REAL) == 0) continue;
        const l = coefficient(back + (a * m + e) * REAL);
        for (let c: usize = 0; c < n; c++) {
          const at = d + (a * n + c) * NUMBER;
          const source = w + (e * n + c) * NUMBER;
          put(at, minusProduct(realPart(at), l, realPart(source)), minusProduct(imaginaryPart(at), l, imaginaryPart(source)));
        }
      }
    for (let k: usize = 0; k < sides; k++) {
      const y = kept < 0 ? scratch : steps + <usize>kept * fieldBytes + q * sideBytes + k * largest * NUMBER;
      for (let a: usize = 0; a < m; a++)
        product(m, s + a * m * NUMBER, value + q * sideBytes + k * largest * NUMBER, y + a * NUMBER);
      for (let a: usize = 0; a < n; a++) {
        const at = nextValue + q * sideBytes + (k * largest + a) * NUMBER;
        let re = realPart(at);
        let im = imaginaryPart(at);
        for (let e: usize = 0; e < m; e++) {
          const l = coefficient(back + (a * m + e) * REAL);
          re = minusProduct(re, l, realPart(y + e * NUMBER));
          im = minusProduct(im, l, imaginaryPart(y + e * NUMBER));
        }
        put(at, re, im);
      }
    }
  }
}

/** One column of one row of the next node's block: D' − back₀ W₀ − back W, with W = S O; W is kept at `w`. */
// @ts-ignore: decorator
@inline
function arrowColumn(
  first: bool,
  re: v128,
  im: v128,
  d: usize,
  w: usize,
  w0: usize,
  back0: v128,
  back: v128,
  target: usize,
): void {
  put(w, re, im);
  let x = minusProduct(coefficient(d), back, re);
  let y = f64x2.neg(f64x2.mul(back, im));
  if (!first) {
    x = minusProduct(x, back0, realPart(w0));
    y = minusProduct(y, back0, imaginaryPart(w0));
  }
  put(target, x, y);
}

/** One row of the next node's block, in place of the same row of S. */
// @ts-ignore: decorator
@inline
function arrowRow(m: usize, first: bool, s: usize, out: usize, d: usize, w: usize, w0: usize, back0: v128, back: v128): void {
  let o = coefficient(out);
  let re = f64x2.mul(realPart(s), o);
  let im = f64x2.mul(imaginaryPart(s), o);
  const x1 = realPart(s + NUMBER);
  const y1 = imaginaryPart(s + NUMBER);
  o = coefficient(out + m * REAL);
  re = plusProduct(re, x1, o);
  im = plusProduct(im, y1, o);
  const x2 = realPart(s + 2 * NUMBER);
  const y2 = imaginaryPart(s + 2 * NUMBER);
  o = coefficient(out + 2 * m * REAL);
  re = plusProduct(re, x2, o);
  im = plusProduct(im, y2, o);
  if (m > 3) {
    const x3 = realPart(s + 3 * NUMBER);
    const y3 = imaginaryPart(s + 3 * NUMBER);
    o = coefficient(out + 3 * m * REAL);
    re = plusProduct(re, x3, o);
    im = plusProduct(im, y3, o);
    o = coefficient(out + 3 * (m + 1) * REAL);
    arrowColumn(first, f64x2.mul(x3, o), f64x2.mul(y3, o), d + 3 * REAL, w + 3 * NUMBER, w0 + 3 * NUMBER, back0, back, s + 3 * NUMBER);
  }
  if (m > 4) {
    const x4 = realPart(s + 4 * NUMBER);
    const y4 = imaginaryPart(s + 4 * NUMBER);
    o = coefficient(out + 4 * m * REAL);
    re = plusProduct(re, x4, o);
    im = plusProduct(im, y4, o);
    o = coefficient(out + 4 * (m + 1) * REAL);
    arrowColumn(first, f64x2.mul(x4, o), f64x2.mul(y4, o), d + 4 * REAL, w + 4 * NUMBER, w0 + 4 * NUMBER, back0, back, s + 4 * NUMBER);
  }
  arrowColumn(first, re, im, d, w, w0, back0, back, s);
  o = coefficient(out + (m + 1) * REAL);
  arrowColumn(first, f64x2.mul(x1, o), f64x2.mul(y1, o), d + REAL, w + NUMBER, w0 + NUMBER, back0, back, s + NUMBER);
  o = coefficient(out + 2 * (m + 1) * REAL);
  arrowColumn(first, f64x2.mul(x2, o), f64x2.mul(y2, o), d + 2 * REAL, w + 2 * NUMBER, w0 + 2 * NUMBER, back0, back, s + 2 * NUMBER);
}

/** The imaginary part of one entry grows by ω times the storage. */
// @ts-ignore: decorator
@inline
function addStorage(at: usize, omega: v128, storage: usize): void {
  v128.store(at, plusProduct(imaginaryPart(at), omega, coefficient(storage)), 16);
}

/** Eliminates a node of m unknowns (a constant 3, 4 or 5) and forms the next one in its place; arrow couplings. */
// @ts-ignore: decorator
@inline
function advance(m: usize, node: i32, next: i32, kept: i32): void {
  const row = m * NUMBER;
  const out = couplingOf(node, direction);
  const back = couplingOf(next, -direction);
  const d = recordOf(next);
  const storage = d + m * m * REAL;
  const b = rightHandSideOf(next);
  const relaxed = load<i32>(table + <usize>next * ROW, 20) > 0;
  const zero = f64x2.splat(0);
  for (let q: usize = 0; q < pairs; q++) {
    const s = blocks + q * blockBytes;
    const mark = invert(m, s, before);
    v128.store(marks + q * 16, v128.or(v128.load(marks + q * 16), mark));

    for (let k: usize = 0; k < sides; k++) {
      const value = values + q * sideBytes + k * largest * NUMBER;
      const source = fromResidual ? residual + <usize>next * fieldBytes + q * sideBytes + k * largest * NUMBER : 0;
      const y = kept < 0 ? scratch : steps + <usize>kept * fieldBytes + q * sideBytes + k * largest * NUMBER;
      const started_ = started(node, k);
      if (started_) {
        product(m, s, value, y);
        product(m, s + row, value, y + NUMBER);
        product(m, s + 2 * row, value, y + 2 * NUMBER);
        if (m > 3) product(m, s + 3 * row, value, y + 3 * NUMBER);
        if (m > 4) product(m, s + 4 * row, value, y + 4 * NUMBER);
      } else if (kept >= 0) for (let a: usize = 0; a < m; a++) put(y + a * NUMBER, zero, zero);
      for (let a: usize = 0; a < m; a++) {
        let re: v128;
        let im = zero;
        if (fromResidual) {
          re = realPart(source + a * NUMBER);
          im = imaginaryPart(source + a * NUMBER);
        } else re = coefficient(b + (k * m + a) * REAL);
        if (started_) {
          const l = coefficient(back + a * (m + 1) * REAL);
          re = minusProduct(re, l, realPart(y + a * NUMBER));
          im = minusProduct(im, l, imaginaryPart(y + a * NUMBER));
          if (a > 0) {
            const l0 = coefficient(back + a * m * REAL);
            re = minusProduct(re, l0, realPart(y));
            im = minusProduct(im, l0, imaginaryPart(y));
          }
        }
        put(value + a * NUMBER, re, im);
      }
    }

    const w = kept < 0 ? scratch : factors + (<usize>kept * pairs + q) * blockBytes;
    const omega = v128.load(frequencies + q * 16);
    arrowRow(m, true, s, out, d, w, w, zero, coefficient(back));
    addStorage(s, omega, storage);
    for (let a: usize = 1; a < m; a++) {
      const target = s + a * row;
      arrowRow(
        m,
        false,
        target,
        out,
        d + a * m * REAL,
        w + a * row,
        w,
        coefficient(back + a * m * REAL),
        coefficient(back + a * (m + 1) * REAL),
      );
      addStorage(target, omega, storage + a * m * REAL);
      addStorage(target + a * NUMBER, omega, storage + a * (m + 1) * REAL);
    }
    if (relaxed) addRelaxations(next, s, omega);
  }
}

function advance3(node: i32, next: i32, kept: i32): void {
  advance(3, node, next, kept);
}

function advance4(node: i32, next: i32, kept: i32): void {
  advance(4, node, next, kept);
}

function advance5(node: i32, next: i32, kept: i32): void {
  advance(5, node, next, kept);
}

/** Eliminates from one end up to the meeting node; W and y of nodes from `first` on are kept. */
function sweep(from: i32, meeting: i32, first: i32): void {
  if (from == meeting) return;
  fill(from, blocks, values);
  for (let node = from; node != meeting; node += direction) {
    const next = node + direction;
    const m = unknownsOf(node);
    const kept = direction > 0 && node >= first ? node - first : -1;
    const arrow = load<i32>(table + <usize>node * ROW + (direction > 0 ? 8 : 12)) != 0;
    if (next == meeting) {
      invertBlocks(m, blocks);
      couple(node, next, blocks, values, meetingBlocks, meetingValues, kept);
    } else if (arrow && m == 3) advance3(node, next, kept);
    else if (arrow && m == 4) advance4(node, next, kept);
    else if (arrow && m == 5) advance5(node, next, kept);
    else {
      fill(next, spareBlocks, spareValues);
      invertBlocks(m, blocks);
      couple(node, next, blocks, values, spareBlocks, spareValues, kept);
      const block = blocks;
      blocks = spareBlocks;
      spareBlocks = block;
      const value = values;
      values = spareValues;
      spareValues = value;
    }
  }
}

/** x = y − W x' of one node. */
function substitute(node: i32, first: i32): void {
  const m = unknownsOf(node);
  const n = unknownsOf(node + 1);
  for (let q: usize = 0; q < pairs; q++)
    for (let k: usize = 0; k < sides; k++) {
      const offset = <usize>(node - first) * fieldBytes + q * sideBytes + k * largest * NUMBER;
      const w = factors + (<usize>(node - first) * pairs + q) * blockBytes;
      const x = solution + offset + fieldBytes;
      for (let a: usize = 0; a < m; a++) {
        let re = realPart(steps + offset + a * NUMBER);
        let im = imaginaryPart(steps + offset + a * NUMBER);
        for (let c: usize = 0; c < n; c++) {
          const u = realPart(w + (a * n + c) * NUMBER);
          const v = imaginaryPart(w + (a * n + c) * NUMBER);
          const p = realPart(x + c * NUMBER);
          const r = imaginaryPart(x + c * NUMBER);
          re = plusProduct(minusProduct(re, u, p), v, r);
          im = minusProduct(minusProduct(im, u, r), v, p);
        }
        put(solution + offset + a * NUMBER, re, im);
      }
    }
}

/** Solves the batch for nodes first…last; b is real from the records, or complex from `residual`. */
export function solve(first: i32, last: i32, refining: bool): void {
  fromResidual = refining;
  for (let q: usize = 0; q < pairs; q++) v128.store(marks + q * 16, f64x2.splat(0));
  fill(last, meetingBlocks, meetingValues);
  direction = 1;
  sweep(0, last, first);
  direction = -1;
  sweep(nodeCount - 1, last, first);
  const m = unknownsOf(last);
  invertBlocks(m, meetingBlocks);
  for (let q: usize = 0; q < pairs; q++)
    for (let k: usize = 0; k < sides; k++)
      for (let a: usize = 0; a < m; a++)
        product(
          m,
          meetingBlocks + q * blockBytes + a * m * NUMBER,
          meetingValues + q * sideBytes + k * largest * NUMBER,
          solution + <usize>(last - first) * fieldBytes + q * sideBytes + (k * largest + a) * NUMBER,
        );
  for (let node = last - 1; node >= first; node--) substitute(node, first);
}

/** re, im −= (real coefficients of one row, in both parts) x, for the product of a real block row and a complex vector. */
function subtractCoupling(m: usize, coefficients: usize, x: usize, target: usize): void {
  let re = realPart(target);
  let im = imaginaryPart(target);
  for (let c: usize = 0; c < m; c++) {
    const l = coefficient(coefficients + c * REAL);
    re = minusProduct(re, l, realPart(x + c * NUMBER));
    im = minusProduct(im, l, imaginaryPart(x + c * NUMBER));
  }
  put(target, re, im);
}

/** Adds the latest solution (of all nodes) to the refined one, or starts it, and forms the residual b − A x. */
export function accumulate(start: bool): void {
  const bytes = <usize>nodeCount * fieldBytes;
  if (start) memory.copy(refined, solution, bytes);
  else
    for (let at: usize = 0; at < bytes; at += 16)
      v128.store(refined + at, f64x2.add(v128.load(refined + at), v128.load(solution + at)));
  fromResidual = false;
  for (let node = 0; node < nodeCount; node++) {
    const m = unknownsOf(node);
    const lower = couplingOf(node, -1);
    const upper = couplingOf(node, 1);
    fill(node, blocks, values);
    for (let q: usize = 0; q < pairs; q++)
      for (let k: usize = 0; k < sides; k++)
        for (let a: usize = 0; a < m; a++) {
          const offset = <usize>node * fieldBytes + q * sideBytes + k * largest * NUMBER;
          const target = residual + offset + a * NUMBER;
          const x = refined + offset;
          product(m, blocks + q * blockBytes + a * m * NUMBER, x, scratch);
          const b = values + q * sideBytes + (k * largest + a) * NUMBER;
          put(
            target,
            f64x2.sub(realPart(b), realPart(scratch)),
            f64x2.sub(imaginaryPart(b), imaginaryPart(scratch)),
          );
          const before = unknownsOf(node - 1);
          const after = unknownsOf(node + 1);
          subtractCoupling(before, lower + a * before * REAL, x - fieldBytes, target);
          subtractCoupling(after, upper + a * after * REAL, x + fieldBytes, target);
        }
  }
}
