/**
 * Real block-tridiagonal systems, many right-hand sides per factorisation.
 *
 * | symbol | meaning | shape |
 * |---|---|---|
 * | L_i, D_i, U_i | blocks of node i to nodes i−1, i, i+1 | m × m each, row-major |
 * | X_i | D_i'⁻¹ U_i with D_i' = D_i − L_i X_{i−1} | m × m |
 *
 * Block elimination (Golub & Van Loan, Matrix Computations, 4th ed. 2013, §4.5.1) with rows scaled to a largest entry
 * of 1 and partial pivoting inside the blocks.
 */
export class RealBlockTridiagonal {
  readonly nodes: number;
  readonly blockSize: number;
  readonly lower: Float64Array;
  readonly diagonal: Float64Array;
  readonly upper: Float64Array;
  private readonly rowScale: Float64Array;
  private readonly pivots: Int32Array;

  constructor(nodes: number, blockSize: number) {
    this.nodes = nodes;
    this.blockSize = blockSize;
    const size = nodes * blockSize * blockSize;
    this.lower = new Float64Array(size);
    this.diagonal = new Float64Array(size);
    this.upper = new Float64Array(size);
    this.rowScale = new Float64Array(nodes * blockSize);
    this.pivots = new Int32Array(nodes * blockSize);
  }

  clear(): void {
    this.lower.fill(0);
    this.diagonal.fill(0);
    this.upper.fill(0);
  }

  private scaleRows(): void {
    const { lower, diagonal, upper, blockSize: m, rowScale } = this;
    for (let row = 0; row < rowScale.length; row++) {
      const start = row * m;
      let largest = 0;
      for (let k = start; k < start + m; k++) {
        const here = Math.max(Math.abs(diagonal[k]), Math.abs(lower[k]), Math.abs(upper[k]));
        if (here > largest) largest = here;
      }
      const scale = largest > 0 ? 1 / largest : 1;
      rowScale[row] = scale;
      for (let k = start; k < start + m; k++) {
        lower[k] *= scale;
        diagonal[k] *= scale;
        upper[k] *= scale;
      }
    }
  }

  /** Factorise in place; the blocks are overwritten. @returns false where the matrix is singular or not finite */
  factor(): boolean {
    const { nodes, blockSize: m, lower, diagonal, upper, pivots } = this;
    const block = m * m;
    this.scaleRows();
    for (let i = 0; i < nodes; i++) {
      const d = i * block;
      if (i > 0) {
        const x = d - block;
        for (let r = 0; r < m; r++)
          for (let k = 0; k < m; k++) {
            const factor = lower[d + r * m + k];
            if (factor !== 0) for (let c = 0; c < m; c++) diagonal[d + r * m + c] -= factor * upper[x + k * m + c];
          }
      }
      for (let k = 0; k < m; k++) {
        let pivot = k;
        let largest = Math.abs(diagonal[d + k * m + k]);
        for (let r = k + 1; r < m; r++) {
          const size = Math.abs(diagonal[d + r * m + k]);
          if (size > largest) {
            largest = size;
            pivot = r;
          }
        }
        pivots[i * m + k] = pivot;
        if (!(largest > 0 && largest < Infinity)) return false;
        if (pivot !== k)
          for (let c = 0; c < m; c++) {
            const swap = diagonal[d + k * m + c];
            diagonal[d + k * m + c] = diagonal[d + pivot * m + c];
            diagonal[d + pivot * m + c] = swap;
          }
        const inverse = 1 / diagonal[d + k * m + k];
        for (let r = k + 1; r < m; r++) {
          const factor = diagonal[d + r * m + k] * inverse;
          diagonal[d + r * m + k] = factor;
          if (factor !== 0) for (let c = k + 1; c < m; c++) diagonal[d + r * m + c] -= factor * diagonal[d + k * m + c];
        }
      }
      for (let c = 0; c < m; c++) this.applyInverse(i, upper, d + c, m);
    }
    return true;
  }

  /** values ← D_i'⁻¹ values, m entries at `start` with a stride. */
  private applyInverse(i: number, values: Float64Array, start: number, stride: number): void {
    const { blockSize: m, diagonal, pivots } = this;
    const d = i * m * m;
    for (let k = 0; k < m; k++) {
      const pivot = pivots[i * m + k];
      if (pivot !== k) {
        const swap = values[start + k * stride];
        values[start + k * stride] = values[start + pivot * stride];
        values[start + pivot * stride] = swap;
      }
    }
    for (let k = 0; k < m; k++) {
      let sum = values[start + k * stride];
      for (let c = 0; c < k; c++) sum -= diagonal[d + k * m + c] * values[start + c * stride];
      values[start + k * stride] = sum;
    }
    for (let k = m - 1; k >= 0; k--) {
      let sum = values[start + k * stride];
      for (let c = k + 1; c < m; c++) sum -= diagonal[d + k * m + c] * values[start + c * stride];
      values[start + k * stride] = sum / diagonal[d + k * m + k];
    }
  }

  /** Solve with one right-hand side (nodes × m), in place. */
  solve(rightHandSide: Float64Array): void {
    const { nodes, blockSize: m, lower, upper, rowScale } = this;
    const block = m * m;
    for (let i = 0; i < nodes; i++) {
      const b = i * m;
      for (let r = 0; r < m; r++) {
        let sum = rightHandSide[b + r] * rowScale[b + r];
        if (i > 0) for (let k = 0; k < m; k++) sum -= lower[i * block + r * m + k] * rightHandSide[b - m + k];
        rightHandSide[b + r] = sum;
      }
      this.applyInverse(i, rightHandSide, b, 1);
    }
    for (let i = nodes - 2; i >= 0; i--) {
      const b = i * m;
      for (let r = 0; r < m; r++) {
        let sum = rightHandSide[b + r];
        for (let k = 0; k < m; k++) sum -= upper[i * block + r * m + k] * rightHandSide[b + m + k];
        rightHandSide[b + r] = sum;
      }
    }
  }
}
