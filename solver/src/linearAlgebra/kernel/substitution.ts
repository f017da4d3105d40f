/**
 * Unknowns and fluxes outward from the meeting node, once every other node is eliminated.
 *
 *   symbol   meaning                                                          shape
 *   Δ        step x' − x to the neighbour nearer the meeting node, W x' + u     sides × m numbers
 *   j        flux through the edge in the direction of x, ±(P Δ + E x' + j⁰)    sides × m numbers
 *   J        reading of an edge, Σ (weight + iω weightᵢω) j                    per pair and side
 */
import { coefficient, imaginaryPart, minusProduct, NUMBER, plusProduct, put, REAL, realPart } from "./complexPair";
import { dot } from "./elimination";
import { invertAny } from "./inverse";
import {
  blockBytes,
  blocks,
  edgeOf,
  factors,
  fieldBytes,
  fluxes,
  frequencies,
  largest,
  marks,
  meetingBlocks,
  meetingValues,
  nodeCount,
  pairs,
  readings,
  scratch,
  sideBytes,
  sides,
  solution,
  sourceOf,
  steps,
  unknownsOf,
  values,
  weights,
} from "./memory";

/** Where the unknowns of a node, or the fluxes of an edge, lie: all in order, or two places in turn. */
// @ts-ignore: decorator
@inline
function place(field: usize, index: i32, all: bool): usize {
  return field + (all ? <usize>index : <usize>(index & 1)) * fieldBytes;
}

/** target = Σ row[c] b[c] for any m. */
function sum(m: usize, row: usize, b: usize, target: usize): void {
  let re = f64x2.splat(0);
  let im = re;
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

/** x at the meeting node from both sweeps: (H + H') x + h + h' = 0. */
export function meet(meeting: i32, all: bool): void {
  const m = unknownsOf(meeting);
  for (let q: usize = 0; q < pairs; q++) {
    const block = blocks + q * blockBytes;
    for (let at: usize = 0; at < m * m * NUMBER; at += 16)
      v128.store(block + at, f64x2.add(v128.load(block + at), v128.load(meetingBlocks + q * blockBytes + at)));
    const mark = invertAny(m, block, scratch);
    v128.store(marks + q * 16, v128.or(v128.load(marks + q * 16), mark));
    for (let k: usize = 0; k < sides; k++) {
      const offset = q * sideBytes + k * largest * NUMBER;
      for (let at: usize = 0; at < m * NUMBER; at += 16)
        v128.store(
          values + offset + at,
          f64x2.neg(f64x2.add(v128.load(values + offset + at), v128.load(meetingValues + offset + at))),
        );
      const x = place(solution, meeting, all) + offset;
      memory.fill(x, 0, largest * NUMBER);
      for (let a: usize = 0; a < m; a++) sum(m, block + a * m * NUMBER, values + offset, x + a * NUMBER);
    }
  }
}

/** The reading of the fluxes at `j`. */
// @ts-ignore: decorator
@inline
function read(m: usize, j: usize, omega: v128, target: usize): void {
  let re = f64x2.splat(0);
  let im = f64x2.splat(0);
  for (let a: usize = 0; a < m; a++) {
    const weight = coefficient(weights + a * REAL);
    const harmonic = f64x2.mul(omega, coefficient(weights + (largest + a) * REAL));
    const x = realPart(j + a * NUMBER);
    const y = imaginaryPart(j + a * NUMBER);
    re = minusProduct(plusProduct(re, weight, x), harmonic, y);
    im = plusProduct(plusProduct(im, weight, y), harmonic, x);
  }
  put(target, re, im);
}

/** Compares the reading of an edge with that of the reading edge: largest |difference|² and largest |J of its fluxes|². */
// @ts-ignore: decorator
@inline
function compare(m: usize, j: usize, omega: v128, reading: usize): void {
  read(m, j, omega, scratch);
  const x = f64x2.sub(realPart(scratch), realPart(reading));
  const y = f64x2.sub(imaginaryPart(scratch), imaginaryPart(reading));
  const difference = plusProduct(f64x2.mul(x, x), y, y);
  v128.store(reading + 32, f64x2.max(v128.load(reading + 32), difference));
  let part = v128.load(reading + 48);
  for (let a: usize = 0; a < m; a++) {
    const weight = coefficient(weights + a * REAL);
    const u = f64x2.mul(weight, realPart(j + a * NUMBER));
    const v = f64x2.mul(weight, imaginaryPart(j + a * NUMBER));
    part = f64x2.max(part, plusProduct(f64x2.mul(u, u), v, v));
  }
  v128.store(reading + 48, part);
}

/** Unknowns of an eliminated node of m unknowns and the fluxes to its neighbour `next`; the reading or the comparison with it. */
// @ts-ignore: decorator
@inline
function step(m: usize, node: i32, next: i32, first: i32, all: bool, isReading: bool): void {
  const row = m * NUMBER;
  const direction = next - node;
  const edge = edgeOf(node, direction);
  const mean = edge + 2 * m * REAL;
  const source = sourceOf(node, direction);
  const sign = f64x2.splat(<f64>direction);
  const kept = <usize>(node - first);
  for (let q: usize = 0; q < pairs; q++) {
    const omega = v128.load(frequencies + q * 16);
    const w = factors + (kept * pairs + q) * blockBytes;
    for (let k: usize = 0; k < sides; k++) {
      const offset = q * sideBytes + k * largest * NUMBER;
      const ahead = place(solution, next, all) + offset;
      const x = place(solution, node, all) + offset;
      const j = place(fluxes, direction > 0 ? node : next, all) + offset;
      const u = steps + kept * fieldBytes + offset;
      let re0 = f64x2.splat(0);
      let im0 = re0;
      const aheadRe = realPart(ahead);
      const aheadIm = imaginaryPart(ahead);
      for (let a: usize = 0; a < m; a++) {
        dot(m, w + a * row, ahead, scratch);
        const re = f64x2.add(realPart(scratch), realPart(u + a * NUMBER));
        const im = f64x2.add(imaginaryPart(scratch), imaginaryPart(u + a * NUMBER));
        const xRe = realPart(ahead + a * NUMBER);
        const xIm = imaginaryPart(ahead + a * NUMBER);
        put(x + a * NUMBER, f64x2.sub(xRe, re), f64x2.sub(xIm, im));
        if (a == 0) {
          re0 = re;
          im0 = im;
        }
        const p0 = coefficient(edge + a * REAL);
        const p = coefficient(edge + (m + a) * REAL);
        const e0 = coefficient(mean + a * REAL);
        const e = coefficient(mean + (m + a) * REAL);
        let fluxRe = plusProduct(f64x2.mul(p0, re0), p, re);
        let fluxIm = plusProduct(f64x2.mul(p0, im0), p, im);
        fluxRe = plusProduct(plusProduct(fluxRe, e0, aheadRe), e, xRe);
        fluxIm = plusProduct(plusProduct(fluxIm, e0, aheadIm), e, xIm);
        if (source != 0) fluxRe = f64x2.add(fluxRe, coefficient(source + (k * m + a) * REAL));
        put(j + a * NUMBER, f64x2.mul(sign, fluxRe), f64x2.mul(sign, fluxIm));
      }
      for (let a = m; a < largest; a++) {
        put(x + a * NUMBER, f64x2.splat(0), f64x2.splat(0));
        put(j + a * NUMBER, f64x2.splat(0), f64x2.splat(0));
      }
      const reading = readings + (q * sides + k) * 64;
      if (isReading) {
        read(m, j, omega, reading);
        v128.store(reading + 32, f64x2.splat(0));
        v128.store(reading + 48, f64x2.splat(0));
      }
      compare(m, j, omega, reading);
    }
  }
}

function step3(node: i32, next: i32, first: i32, all: bool, isReading: bool): void {
  step(3, node, next, first, all, isReading);
}

function step4(node: i32, next: i32, first: i32, all: bool, isReading: bool): void {
  step(4, node, next, first, all, isReading);
}

function step5(node: i32, next: i32, first: i32, all: bool, isReading: bool): void {
  step(5, node, next, first, all, isReading);
}

/** Outward from the meeting node to `end` (0 or the last node, or the meeting node's neighbour at the reading edge). */
export function substitute(meeting: i32, end: i32, first: i32, all: bool, reading: bool): void {
  if (end == meeting) return;
  const direction = end < meeting ? 1 : -1;
  if (!all) {
    const place_ = place(solution, meeting, false);
    // each direction begins at the meeting node, whose place the other direction may have used again
    if (!reading) memory.copy(place_, meetingValues, fieldBytes);
    else memory.copy(meetingValues, place_, fieldBytes);
  }
  for (let node = meeting - direction; direction > 0 ? node >= end : node <= end; node -= direction) {
    const m = unknownsOf(node);
    const isReading = reading && node + direction == meeting;
    if (m == 3) step3(node, node + direction, first, all, isReading);
    else if (m == 4) step4(node, node + direction, first, all, isReading);
    else step5(node, node + direction, first, all, isReading);
  }
}
