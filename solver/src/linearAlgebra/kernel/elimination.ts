/**
 * Elimination of nodes from the ends of a conservative system, for all pairs of a batch.
 *
 *   symbol   meaning                                                                  shape
 *   H, h     flux towards the nodes that remain = H x + h at the node reached so far   m × m, sides × m numbers
 *   P, E     flux through the edge = P Δ + E x' + j⁰ with Δ = x' − x                    arrows of reals
 *   S        (P + H)⁻¹                                                                m × m numbers
 *   W, V, u  Δ = W x' + u and x = V x' − u: W = S (H − E), V = S (P + E), u = S (h − j⁰)  m × m, sides × m numbers
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
  carries,
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

/** target = Σ row[c] b[c]. */
// @ts-ignore: decorator
@inline
export function dot(m: usize, row: usize, b: usize, target: usize): void {
  let x = realPart(row);
  let y = imaginaryPart(row);
  let u = realPart(b);
  let v = imaginaryPart(b);
  let re = minusProduct(f64x2.mul(x, u), y, v);
  let im = plusProduct(f64x2.mul(x, v), y, u);
  for (let c: usize = 1; c < m; c++) {
    x = realPart(row + c * NUMBER);
    y = imaginaryPart(row + c * NUMBER);
    u = realPart(b + c * NUMBER);
    v = imaginaryPart(b + c * NUMBER);
    re = minusProduct(plusProduct(re, x, u), y, v);
    im = plusProduct(plusProduct(im, x, v), y, u);
  }
  put(target, re, im);
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

/** One entry of W: Σ S[row, e] T[e, column]. */
// @ts-ignore: decorator
@inline
function entryOfProduct(m: usize, s: usize, t: usize, target: usize): void {
  const row = m * NUMBER;
  let x = realPart(s);
  let y = imaginaryPart(s);
  let u = realPart(t);
  let v = imaginaryPart(t);
  let re = minusProduct(f64x2.mul(x, u), y, v);
  let im = plusProduct(f64x2.mul(x, v), y, u);
  x = realPart(s + NUMBER);
  y = imaginaryPart(s + NUMBER);
  u = realPart(t + row);
  v = imaginaryPart(t + row);
  re = minusProduct(plusProduct(re, x, u), y, v);
  im = plusProduct(plusProduct(im, x, v), y, u);
  x = realPart(s + 2 * NUMBER);
  y = imaginaryPart(s + 2 * NUMBER);
  u = realPart(t + 2 * row);
  v = imaginaryPart(t + 2 * row);
  re = minusProduct(plusProduct(re, x, u), y, v);
  im = plusProduct(plusProduct(im, x, v), y, u);
  if (m > 3) {
    x = realPart(s + 3 * NUMBER);
    y = imaginaryPart(s + 3 * NUMBER);
    u = realPart(t + 3 * row);
    v = imaginaryPart(t + 3 * row);
    re = minusProduct(plusProduct(re, x, u), y, v);
    im = plusProduct(plusProduct(im, x, v), y, u);
  }
  if (m > 4) {
    x = realPart(s + 4 * NUMBER);
    y = imaginaryPart(s + 4 * NUMBER);
    u = realPart(t + 4 * row);
    v = imaginaryPart(t + 4 * row);
    re = minusProduct(plusProduct(re, x, u), y, v);
    im = plusProduct(plusProduct(im, x, v), y, u);
  }
  put(target, re, im);
}

/** One row of V: S (P + E). */
// @ts-ignore: decorator
@inline
function rowOfCarry(m: usize, s: usize, edge: usize, mean: usize, target: usize): void {
  let re = f64x2.splat(0);
  let im = re;
  for (let c: usize = 0; c < m; c++) {
    const x = realPart(s + c * NUMBER);
    const y = imaginaryPart(s + c * NUMBER);
    const hub = f64x2.add(coefficient(edge + c * REAL), coefficient(mean + c * REAL));
    re = plusProduct(re, x, hub);
    im = plusProduct(im, y, hub);
    const own = f64x2.add(coefficient(edge + (m + c) * REAL), coefficient(mean + (m + c) * REAL));
    put(target + c * NUMBER, f64x2.mul(x, own), f64x2.mul(y, own));
  }
  put(target, re, im);
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
      else {
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
    for (let a: usize = 0; a < m; a++) {
      const s = inverseBlock + a * row;
      const target = w + a * row;
      entryOfProduct(m, s, h, target);
      entryOfProduct(m, s, h + NUMBER, target + NUMBER);
      entryOfProduct(m, s, h + 2 * NUMBER, target + 2 * NUMBER);
      if (m > 3) entryOfProduct(m, s, h + 3 * NUMBER, target + 3 * NUMBER);
      if (m > 4) entryOfProduct(m, s, h + 4 * NUMBER, target + 4 * NUMBER);
    }
    if (kept >= 0) {
      const v = carries + (<usize>kept * pairs + q) * blockBytes;
      for (let a: usize = 0; a < m; a++) rowOfCarry(m, inverseBlock + a * row, edge, mean, v + a * row);
    }
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
 * Eliminates from one end up to the meeting node, whose balance is added or not. W, V and u of the nodes from `first` to `last` are kept, at
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
