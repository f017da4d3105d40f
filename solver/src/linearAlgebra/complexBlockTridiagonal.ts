/**
 * A harmonic system factorised at one frequency, for right-hand sides that are complex or come one after another
 * (refinement, borders).
 *
 * | symbol | meaning | shape |
 * |---|---|---|
 * | D_i' | D_i + iωM_i + relaxations − L_i X_{i−1}, as triangular factors | m × m, complex |
 * | X_i | D_i'⁻¹ U_i | m × m, complex |
 *
 * Block elimination (Golub & Van Loan, Matrix Computations, 4th ed. 2013, §4.5.1), rows scaled to a largest entry of 1,
 * partial pivoting inside the blocks. See harmonicSystem.ts for the system.
 */
import type { HarmonicSystem } from "./harmonicSystem.ts";

export class ComplexBlockTridiagonal {
  private readonly system: HarmonicSystem;
  private readonly diagonalRe: Float64Array;
  private readonly diagonalIm: Float64Array;
  private readonly couplingRe: Float64Array;
  private readonly couplingIm: Float64Array;
  private readonly rowScale: Float64Array;
  private readonly pivots: Int32Array;

  constructor(system: HarmonicSystem) {
    this.system = system;
    const size = system.diagonal.length;
    this.diagonalRe = new Float64Array(size);
    this.diagonalIm = new Float64Array(size);
    this.couplingRe = new Float64Array(size);
    this.couplingIm = new Float64Array(size);
    this.rowScale = new Float64Array(system.nodes * system.blockSize);
    this.pivots = new Int32Array(system.nodes * system.blockSize);
  }

  /** @param omega angular frequency, rad/s @returns false where the matrix is singular or not finite */
  factor(omega: number): boolean {
    const { system, diagonalRe, diagonalIm, couplingRe, couplingIm, rowScale } = this;
    const { nodes, blockSize: m, diagonal, storage, lower, upper } = system;
    const block = m * m;
    diagonalRe.set(diagonal);
    for (let k = 0; k < storage.length; k++) diagonalIm[k] = omega * storage[k];
    for (const { node, decay, column, row } of system.relaxations ?? []) {
      const size = decay * decay + omega * omega;
      for (let a = 0; a < m; a++)
        for (let c = 0; c < m; c++) {
          diagonalRe[node * block + a * m + c] += (column[a] * row[c] * decay) / size;
          diagonalIm[node * block + a * m + c] -= (column[a] * row[c] * omega) / size;
        }
    }
    for (let row = 0; row < rowScale.length; row++) {
      let largest = 0;
      for (let k = row * m; k < row * m + m; k++)
        largest = Math.max(
          largest,
          Math.abs(diagonalRe[k]),
          Math.abs(diagonalIm[k]),
          Math.abs(lower[k]),
          Math.abs(upper[k]),
        );
      const scale = largest > 0 ? 1 / largest : 1;
      rowScale[row] = scale;
      for (let k = row * m; k < row * m + m; k++) {
        diagonalRe[k] *= scale;
        diagonalIm[k] *= scale;
        couplingRe[k] = upper[k] * scale;
        couplingIm[k] = 0;
      }
    }
    for (let i = 0; i < nodes; i++) {
      const d = i * block;
      if (i > 0)
        for (let r = 0; r < m; r++)
          for (let k = 0; k < m; k++) {
            const factor = lower[d + r * m + k] * rowScale[i * m + r];
            if (factor === 0) continue;
            for (let c = 0; c < m; c++) {
              diagonalRe[d + r * m + c] -= factor * couplingRe[d - block + k * m + c];
              diagonalIm[d + r * m + c] -= factor * couplingIm[d - block + k * m + c];
            }
          }
      if (!this.factorBlock(i)) return false;
      for (let c = 0; c < m; c++) this.applyInverse(i, couplingRe, couplingIm, d + c, m);
    }
    return true;
  }

  private factorBlock(i: number): boolean {
    const { diagonalRe: re, diagonalIm: im, pivots } = this;
    const m = this.system.blockSize;
    const d = i * m * m;
    for (let k = 0; k < m; k++) {
      let pivot = k;
      let largest = 0;
      for (let r = k; r < m; r++) {
        const size = Math.hypot(re[d + r * m + k], im[d + r * m + k]);
        if (size > largest) {
          largest = size;
          pivot = r;
        }
      }
      pivots[i * m + k] = pivot;
      if (!(largest > 0 && largest < Infinity)) return false;
      if (pivot !== k)
        for (let c = 0; c < m; c++) {
          swap(re, d + k * m + c, d + pivot * m + c);
          swap(im, d + k * m + c, d + pivot * m + c);
        }
      const headRe = re[d + k * m + k] / (largest * largest);
      const headIm = -im[d + k * m + k] / (largest * largest);
      for (let r = k + 1; r < m; r++) {
        const at = d + r * m + k;
        const factorRe = re[at] * headRe - im[at] * headIm;
        const factorIm = re[at] * headIm + im[at] * headRe;
        re[at] = factorRe;
        im[at] = factorIm;
        for (let c = k + 1; c < m; c++) {
          const from = d + k * m + c;
          const to = d + r * m + c;
          re[to] -= factorRe * re[from] - factorIm * im[from];
          im[to] -= factorRe * im[from] + factorIm * re[from];
        }
      }
    }
    return true;
  }

  /** values ← D_i'⁻¹ values, m entries at `start` with a stride. */
  private applyInverse(i: number, valuesRe: Float64Array, valuesIm: Float64Array, start: number, stride: number): void {
    const { diagonalRe: re, diagonalIm: im, pivots } = this;
    const m = this.system.blockSize;
    const d = i * m * m;
    for (let k = 0; k < m; k++) {
      const pivot = pivots[i * m + k];
      if (pivot === k) continue;
      swap(valuesRe, start + k * stride, start + pivot * stride);
      swap(valuesIm, start + k * stride, start + pivot * stride);
    }
    for (let k = 1; k < m; k++) {
      const to = start + k * stride;
      for (let c = 0; c < k; c++) {
        const at = d + k * m + c;
        const from = start + c * stride;
        valuesRe[to] -= re[at] * valuesRe[from] - im[at] * valuesIm[from];
        valuesIm[to] -= re[at] * valuesIm[from] + im[at] * valuesRe[from];
      }
    }
    for (let k = m - 1; k >= 0; k--) {
      const to = start + k * stride;
      let sumRe = valuesRe[to];
      let sumIm = valuesIm[to];
      for (let c = k + 1; c < m; c++) {
        const at = d + k * m + c;
        const from = start + c * stride;
        sumRe -= re[at] * valuesRe[from] - im[at] * valuesIm[from];
        sumIm -= re[at] * valuesIm[from] + im[at] * valuesRe[from];
      }
      const headRe = re[d + k * m + k];
      const headIm = im[d + k * m + k];
      const size = headRe * headRe + headIm * headIm;
      valuesRe[to] = (sumRe * headRe + sumIm * headIm) / size;
      valuesIm[to] = (sumIm * headRe - sumRe * headIm) / size;
    }
  }

  /** Solve for one complex right-hand side (nodes × m), in place. */
  solve(re: Float64Array, im: Float64Array): void {
    const { system, couplingRe, couplingIm, rowScale } = this;
    const { nodes, blockSize: m, lower } = system;
    const block = m * m;
    for (let i = 0; i < nodes; i++) {
      const b = i * m;
      for (let r = 0; r < m; r++) {
        let sumRe = re[b + r];
        let sumIm = im[b + r];
        if (i > 0)
          for (let k = 0; k < m; k++) {
            const factor = lower[i * block + r * m + k];
            sumRe -= factor * re[b - m + k];
            sumIm -= factor * im[b - m + k];
          }
        re[b + r] = sumRe * rowScale[b + r];
        im[b + r] = sumIm * rowScale[b + r];
      }
      this.applyInverse(i, re, im, b, 1);
    }
    for (let i = nodes - 2; i >= 0; i--) {
      const b = i * m;
      for (let r = 0; r < m; r++)
        for (let k = 0; k < m; k++) {
          const at = i * block + r * m + k;
          const from = b + m + k;
          re[b + r] -= couplingRe[at] * re[from] - couplingIm[at] * im[from];
          im[b + r] -= couplingRe[at] * im[from] + couplingIm[at] * re[from];
        }
    }
  }
}

function swap(values: Float64Array, a: number, b: number): void {
  const value = values[a];
  values[a] = values[b];
  values[b] = value;
}
