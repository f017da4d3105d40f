/**
 * Elimination of nodes from the ends of a conservative system, for all pairs of a batch.
 *
 *   symbol   meaning                                                                  shape
 *   H, h     flux towards the nodes that remain = H x + h at the node reached so far   m × m, sides × m numbers
 *   P, E     flux through the edge = P Δ + E x' + j⁰ with Δ = x' − x                    arrows of reals
 *   S        (P + H)⁻¹                                                                m × m numbers
 *   W, u     Δ = W x' + u: W = S (H − E), u = S (h − j⁰)                                m × m, sides × m numbers
 *
 * At the next node the flux is (E + P W) x' + P S h + H S j⁰, and its balance adds G + iωM + Σ c rᵀ/(d+iω) to H and takes b
 * from h. Conductances are never subtracted from sums of conductances, so a small H survives beside a large P: the block form of
 * the series connection of conductances, and of the elimination of W. K. Grassmann, M. I. Taksar, D. P. Heyman, Oper. Res. 33,
 * 1107 (1985), which owes its accuracy to the same. Nodes are the outer loop and pairs the inner one, so that the real data are
 * read once per batch and neighbouring pairs fill each other's waiting times.
 */
import { coefficient, imaginaryPart, minusProduct, NUMBER, plusProduct, put, REAL, realPart } from "./complexPair";
import { invert } from "./inverse";
import {
  blockBytes,
  blocks,
  driven,
  edgeOf,
  factors,
  fieldBytes,
  frequencies,
  inverseBlock,
  largest,
  marks,
  nothing,
  pairs,
  recordOf,
  relaxationCount,
  relaxationsOf,
  scratch,
  scratchBlock,
  sideBytes,
  sides,
  sourceOf,
  steps,
  unknownsOf,
  values,
} from "./memory";

/** target = Σ row[c] b[c], the row of numbers given by its parts (x, y), b at distances of `stride`; m is a constant 3, 4 or 5. */
// @ts-ignore: decorator
@inline
function sumOfProducts(
  m: usize,
  x0: v128,
  y0: v128,
  x1: v128,
  y1: v128,
  x2: v128,
  y2: v128,
  x3: v128,
  y3: v128,
  x4: v128,
  y4: v128,
  b: usize,
  stride: usize,
  target: usize,
): void {
  let u = realPart(b);
  let v = imaginaryPart(b);
  let re = minusProduct(f64x2.mul(x0, u), y0, v);
  let im = plusProduct(f64x2.mul(x0, v), y0, u);
  u = realPart(b + stride);
  v = imaginaryPart(b + stride);
  re = minusProduct(plusProduct(re, x1, u), y1, v);
  im = plusProduct(plusProduct(im, x1, v), y1, u);
  u = realPart(b + 2 * stride);
  v = imaginaryPart(b + 2 * stride);
  re = minusProduct(plusProduct(re, x2, u), y2, v);
  im = plusProduct(plusProduct(im, x2, v), y2, u);
  if (m > 3) {
    u = realPart(b + 3 * stride);
    v = imaginaryPart(b + 3 * stride);
    re = minusProduct(plusProduct(re, x3, u), y3, v);
    im = plusProduct(plusProduct(im, x3, v), y3, u);
  }
  if (m > 4) {
    u = realPart(b + 4 * stride);
    v = imaginaryPart(b + 4 * stride);
    re = minusProduct(plusProduct(re, x4, u), y4, v);
    im = plusProduct(plusProduct(im, x4, v), y4, u);
  }
  put(target, re, im);
}

/** target = Σ row[c] b[c] for m = 3, 4 or 5. */
// @ts-ignore: decorator
@inline
export function dot(m: usize, row: usize, b: usize, target: usize): void {
  const x0 = realPart(row);
  const y0 = imaginaryPart(row);
  const x1 = realPart(row + NUMBER);
  const y1 = imaginaryPart(row + NUMBER);
  const x2 = realPart(row + 2 * NUMBER);
  const y2 = imaginaryPart(row + 2 * NUMBER);
  const x3 = m > 3 ? realPart(row + 3 * NUMBER) : x0;
  const y3 = m > 3 ? imaginaryPart(row + 3 * NUMBER) : x0;
  const x4 = m > 4 ? realPart(row + 4 * NUMBER) : x0;
  const y4 = m > 4 ? imaginaryPart(row + 4 * NUMBER) : x0;
  sumOfProducts(m, x0, y0, x1, y1, x2, y2, x3, y3, x4, y4, b, NUMBER, target);
}

/** re, im of the number at `at` grow by a real coefficient times the number at `source`. */
// @ts-ignore: decorator
@inline
function addMultiple(at: usize, factor: v128, source: usize): void {
  put(at, plusProduct(realPart(at), factor, realPart(source)), plusProduct(imaginaryPart(at), factor, imaginaryPart(source)));
}

// @ts-ignore: decorator
@inline
function addReal(at: usize, value: v128): void {
  v128.store(at, f64x2.add(realPart(at), value));
}

// @ts-ignore: decorator
@inline
function addImaginary(at: usize, value: v128): void {
  v128.store(at, f64x2.add(imaginaryPart(at), value), 16);
}

// @ts-ignore: decorator
@inline
function copyNumber(target: usize, source: usize): void {
  put(target, realPart(source), imaginaryPart(source));
}

// @ts-ignore: decorator
@inline
function copyRow(m: usize, target: usize, source: usize): void {
  copyNumber(target, source);
  copyNumber(target + NUMBER, source + NUMBER);
  copyNumber(target + 2 * NUMBER, source + 2 * NUMBER);
  if (m > 3) copyNumber(target + 3 * NUMBER, source + 3 * NUMBER);
  if (m > 4) copyNumber(target + 4 * NUMBER, source + 4 * NUMBER);
}

/** block += sign · arrow (real). */
// @ts-ignore: decorator
@inline
function addArrow(m: usize, block: usize, arrow: usize, sign: f64): void {
  const factor = f64x2.splat(sign);
  for (let a: usize = 0; a < m; a++) {
    const row = block + a * m * NUMBER;
    addReal(row, f64x2.mul(factor, coefficient(arrow + a * REAL)));
    if (a > 0) addReal(row + a * NUMBER, f64x2.mul(factor, coefficient(arrow + (m + a) * REAL)));
  }
}

/** Adds c rᵀ/(d + iω) for each relaxation of a node. */
function addRelaxations(node: i32, block: usize, omega: v128): void {
  const m = unknownsOf(node);
  const count = relaxationCount(node);
  let relaxation = relaxationsOf(node);
  for (let n: usize = 0; n < count; n++, relaxation += (1 + 2 * m) * REAL) {
    const decay = coefficient(relaxation);
    const size = f64x2.div(f64x2.splat(1), plusProduct(f64x2.mul(decay, decay), omega, omega));
    const re = f64x2.mul(decay, size);
    const im = f64x2.mul(omega, size);
    for (let a: usize = 0; a < m; a++)
      for (let c: usize = 0; c < m; c++) {
        const product = f64x2.mul(coefficient(relaxation + (1 + a) * REAL), coefficient(relaxation + (1 + m + c) * REAL));
        const at = block + (a * m + c) * NUMBER;
        put(at, plusProduct(realPart(at), product, re), minusProduct(imaginaryPart(at), product, im));
      }
  }
}

/** Adds the balance of a node to H and h of one pair. */
function addBalance(node: i32, q: usize, block: usize, value: usize): void {
  const m = unknownsOf(node);
  const record = recordOf(node);
  const storage = record + m * m * REAL;
  const b = storage + 2 * m * REAL;
  const omega = v128.load(frequencies + q * 16);
  for (let k: usize = 0; k < m * m; k++) addReal(block + k * NUMBER, coefficient(record + k * REAL));
  for (let a: usize = 0; a < m; a++) {
    const row = block + a * m * NUMBER;
    addImaginary(row, f64x2.mul(omega, coefficient(storage + a * REAL)));
    if (a > 0) addImaginary(row + a * NUMBER, f64x2.mul(omega, coefficient(storage + (m + a) * REAL)));
  }
  addRelaxations(node, block, omega);
  for (let k: usize = 0; k < sides; k++)
    for (let a: usize = 0; a < m; a++)
      addReal(value + (k * largest + a) * NUMBER, f64x2.neg(coefficient(b + (k * m + a) * REAL)));
}

/** H and h of every pair start as the balance of a node. */
export function start(node: i32, block: usize, value: usize): void {
  for (let q: usize = 0; q < pairs; q++) {
    memory.fill(block + q * blockBytes, 0, blockBytes);
    memory.fill(value + q * sideBytes, 0, sideBytes);
    addBalance(node, q, block + q * blockBytes, value + q * sideBytes);
  }
}

/** Brings a block of m unknowns to n, with zeros for those that are new. */
function resize(block: usize, m: usize, n: usize): void {
  memory.copy(scratchBlock, block, m * m * NUMBER);
  memory.fill(block, 0, n * n * NUMBER);
  const common = min(m, n) * NUMBER;
  for (let a: usize = 0; a < min(m, n); a++)
    memory.copy(block + a * n * NUMBER, scratchBlock + a * m * NUMBER, common);
}

/** u = S (h − j⁰), and P S h + H S j⁰ in place of h, for an edge with sources. */
function crossSource(m: usize, source: usize, edge: usize, h: usize, value: usize, u: usize): void {
  const row = m * NUMBER;
  const drive = scratch;
  const s = scratch + row;
  const free = scratch + 2 * row;
  const part = scratch + 4 * row;
  for (let a: usize = 0; a < m; a++) {
    put(drive + a * NUMBER, coefficient(source + a * REAL), f64x2.splat(0));
    dot(m, inverseBlock + a * row, value, free + a * NUMBER);
  }
  for (let a: usize = 0; a < m; a++) dot(m, inverseBlock + a * row, drive, s + a * NUMBER);
  const minusOne = f64x2.splat(-1);
  for (let a: usize = 0; a < m; a++) {
    copyNumber(u + a * NUMBER, free + a * NUMBER);
    addMultiple(u + a * NUMBER, minusOne, s + a * NUMBER);
    dot(m, h + a * row, s, part);
    addMultiple(part, coefficient(edge + a * REAL), free);
    if (a > 0) addMultiple(part, coefficient(edge + (m + a) * REAL), free + a * NUMBER);
    copyNumber(value + a * NUMBER, part);
  }
}

/** One row of W: Σ S[row, e] T[e, column]. */
// @ts-ignore: decorator
@inline
function rowOfProduct(m: usize, row: usize, t: usize, target: usize): void {
  const x0 = realPart(row);
  const y0 = imaginaryPart(row);
  const x1 = realPart(row + NUMBER);
  const y1 = imaginaryPart(row + NUMBER);
  const x2 = realPart(row + 2 * NUMBER);
  const y2 = imaginaryPart(row + 2 * NUMBER);
  const x3 = m > 3 ? realPart(row + 3 * NUMBER) : x0;
  const y3 = m > 3 ? imaginaryPart(row + 3 * NUMBER) : x0;
  const x4 = m > 4 ? realPart(row + 4 * NUMBER) : x0;
  const y4 = m > 4 ? imaginaryPart(row + 4 * NUMBER) : x0;
  const stride = m * NUMBER;
  sumOfProducts(m, x0, y0, x1, y1, x2, y2, x3, y3, x4, y4, t, stride, target);
  sumOfProducts(m, x0, y0, x1, y1, x2, y2, x3, y3, x4, y4, t + NUMBER, stride, target + NUMBER);
  sumOfProducts(m, x0, y0, x1, y1, x2, y2, x3, y3, x4, y4, t + 2 * NUMBER, stride, target + 2 * NUMBER);
  if (m > 3) sumOfProducts(m, x0, y0, x1, y1, x2, y2, x3, y3, x4, y4, t + 3 * NUMBER, stride, target + 3 * NUMBER);
  if (m > 4) sumOfProducts(m, x0, y0, x1, y1, x2, y2, x3, y3, x4, y4, t + 4 * NUMBER, stride, target + 4 * NUMBER);
}

/** One entry of the next H: G + P₀ W[0, c] + P W[a, c]. */
// @ts-ignore: decorator
@inline
function entryOfNext(first: bool, g: usize, p0: v128, p: v128, w0: usize, w: usize, target: usize): void {
  let re = coefficient(g);
  let im: v128;
  if (first) {
    re = plusProduct(re, p0, realPart(w0));
    im = f64x2.mul(p0, imaginaryPart(w0));
  } else {
    re = plusProduct(plusProduct(re, p0, realPart(w0)), p, realPart(w));
    im = plusProduct(f64x2.mul(p0, imaginaryPart(w0)), p, imaginaryPart(w));
  }
  put(target, re, im);
}

// @ts-ignore: decorator
@inline
function rowOfNext(m: usize, first: bool, g: usize, p0: v128, p: v128, w0: usize, w: usize, target: usize): void {
  entryOfNext(first, g, p0, p, w0, w, target);
  entryOfNext(first, g + REAL, p0, p, w0 + NUMBER, w + NUMBER, target + NUMBER);
  entryOfNext(first, g + 2 * REAL, p0, p, w0 + 2 * NUMBER, w + 2 * NUMBER, target + 2 * NUMBER);
  if (m > 3) entryOfNext(first, g + 3 * REAL, p0, p, w0 + 3 * NUMBER, w + 3 * NUMBER, target + 3 * NUMBER);
  if (m > 4) entryOfNext(first, g + 4 * REAL, p0, p, w0 + 4 * NUMBER, w + 4 * NUMBER, target + 4 * NUMBER);
}

/**
 * Eliminates a node of m unknowns (a constant 3, 4 or 5) across an edge; H and h of the node after take its place. With
 * `balance` that node's balance is added, in the same pass where it has as many unknowns.
 */
// @ts-ignore: decorator
@inline
function advance(m: usize, node: i32, next: i32, kept: i32, balance: bool): void {
  const row = m * NUMBER;
  const direction = next - node;
  const edge = edgeOf(node, direction);
  const mean = edge + 2 * m * REAL;
  const source = sourceOf(node, direction);
  const alike = balance && unknownsOf(next) == m;
  const g = alike ? recordOf(next) : nothing;
  const storage = g + (alike ? m * m * REAL : 0);
  const b = storage + (alike ? 2 * m * REAL : 0);
  const relaxed = alike && relaxationCount(next) > 0;
  for (let q: usize = 0; q < pairs; q++) {
    const h = blocks + q * blockBytes;
    for (let a: usize = 0; a < m; a++) copyRow(m, inverseBlock + a * row, h + a * row);
    addArrow(m, inverseBlock, edge, 1);
    const mark = invert(m, inverseBlock, scratch);
    v128.store(marks + q * 16, v128.or(v128.load(marks + q * 16), mark));

    for (let k: usize = 0; k < sides; k++) {
      const value = values + q * sideBytes + k * largest * NUMBER;
      const u = kept < 0 ? scratch + row * 3 : steps + <usize>kept * fieldBytes + q * sideBytes + k * largest * NUMBER;
      if (source != 0) crossSource(m, source + k * m * REAL, edge, h, value, u);
      else if (!driven(k, node, direction)) {
        const zero = f64x2.splat(0);
        for (let a: usize = 0; a < m; a++) put(u + a * NUMBER, zero, zero);
      } else {
        for (let a: usize = 0; a < m; a++) dot(m, inverseBlock + a * row, value, u + a * NUMBER);
        const x = realPart(u);
        const y = imaginaryPart(u);
        for (let a: usize = 0; a < m; a++) {
          const p0 = coefficient(edge + a * REAL);
          const p = coefficient(edge + (m + a) * REAL);
          put(
            value + a * NUMBER,
            plusProduct(f64x2.mul(p0, x), p, realPart(u + a * NUMBER)),
            plusProduct(f64x2.mul(p0, y), p, imaginaryPart(u + a * NUMBER)),
          );
        }
      }
      for (let a: usize = 0; a < m; a++)
        addReal(value + a * NUMBER, f64x2.neg(coefficient(b + (alike ? (k * m + a) * REAL : 0))));
    }

    addArrow(m, h, mean, -1);
    const w = kept < 0 ? scratchBlock : factors + (<usize>kept * pairs + q) * blockBytes;
    for (let a: usize = 0; a < m; a++) rowOfProduct(m, inverseBlock + a * row, h, w + a * row);
    const omega = v128.load(frequencies + q * 16);
    const zero = f64x2.splat(0);
    rowOfNext(m, true, g, coefficient(edge), zero, w, w, h);
    for (let a: usize = 1; a < m; a++)
      rowOfNext(
        m,
        false,
        g + a * m * REAL,
        coefficient(edge + a * REAL),
        coefficient(edge + (m + a) * REAL),
        w,
        w + a * row,
        h + a * row,
      );
    for (let a: usize = 0; a < m; a++) {
      const target = h + a * row;
      addReal(target, coefficient(mean + a * REAL));
      addImaginary(target, f64x2.mul(omega, coefficient(storage + a * REAL)));
      if (a > 0) {
        addReal(target + a * NUMBER, coefficient(mean + (m + a) * REAL));
        addImaginary(target + a * NUMBER, f64x2.mul(omega, coefficient(storage + (m + a) * REAL)));
      }
    }
    if (relaxed) addRelaxations(next, h, omega);
    if (!alike) {
      resize(h, m, unknownsOf(next));
      for (let k: usize = 0; k < sides; k++)
        for (let a = m; a < unknownsOf(next); a++) put(values + q * sideBytes + (k * largest + a) * NUMBER, zero, zero);
      if (balance) addBalance(next, q, h, values + q * sideBytes);
    }
  }
}

function advance3(node: i32, next: i32, kept: i32, balance: bool): void {
  advance(3, node, next, kept, balance);
}

function advance4(node: i32, next: i32, kept: i32, balance: bool): void {
  advance(4, node, next, kept, balance);
}

function advance5(node: i32, next: i32, kept: i32, balance: bool): void {
  advance(5, node, next, kept, balance);
}

/**
 * Eliminates from one end up to the meeting node, whose balance is added or not. W and u of the nodes from `first` to `last` are kept, at
 * their place from `first` on.
 */
export function sweep(from: i32, meeting: i32, first: i32, last: i32, balance: bool): void {
  const direction = from < meeting ? 1 : -1;
  start(from, blocks, values);
  for (let node = from; node != meeting; node += direction) {
    const next = node + direction;
    const m = unknownsOf(node);
    const kept = node >= first && node <= last ? node - first : -1;
    const adds = balance || next != meeting;
    if (m == 3) advance3(node, next, kept, adds);
    else if (m == 4) advance4(node, next, kept, adds);
    else advance5(node, next, kept, adds);
  }
}
