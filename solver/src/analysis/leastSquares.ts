/**
 * Linear least squares by Gram–Schmidt with reorthogonalisation (Å. Björck, Numerical Methods for Least Squares Problems,
 * SIAM 1996, §2.4): columns are taken in order, so one factorisation gives the residual of every leading set of columns.
 */
export interface LeastSquares {
  /** Orthonormal columns; null where a column depends on those before it. */
  readonly basis: (Float64Array | null)[];
  /** Coefficient per column; 0 where it depends on those before it. */
  readonly coefficients: Float64Array;
  readonly residual: Float64Array;
  /** Sum of squared residuals after 0, 1, 2 … columns. */
  readonly squares: Float64Array;
}

const dot = (a: Float64Array, b: Float64Array): number => {
  let sum = 0;
  for (let k = 0; k < a.length; k++) sum += a[k] * b[k];
  return sum;
};

const subtractScaled = (target: Float64Array, factor: number, column: Float64Array): void => {
  for (let k = 0; k < target.length; k++) target[k] -= factor * column[k];
};

/**
 * Minimise ‖target − Σ c_j column_j‖; a column is left out whose part that is not in those before it is within
 * `dependence` of its length, or within `least`.
 */
export function leastSquares(
  columns: Float64Array[],
  target: Float64Array,
  dependence = 1e-13,
  least = 0,
): LeastSquares {
  const count = columns.length;
  const basis: (Float64Array | null)[] = [];
  const triangle = columns.map(() => new Float64Array(count));
  const projected = new Float64Array(count);
  const residual = Float64Array.from(target);
  const squares = new Float64Array(count + 1);
  squares[0] = dot(residual, residual);
  columns.forEach((column, j) => {
    const vector = Float64Array.from(column);
    const length = Math.sqrt(dot(column, column));
    for (let pass = 0; pass < 2; pass++) {
      for (let i = 0; i < j; i++) {
        const before = basis[i];
        if (before === null) continue;
        const overlap = dot(before, vector);
        triangle[i][j] += overlap;
        subtractScaled(vector, overlap, before);
      }
    }
    const rest = Math.sqrt(dot(vector, vector));
    if (!(rest > Math.max(dependence * length, least))) basis.push(null);
    else {
      triangle[j][j] = rest;
      for (let k = 0; k < vector.length; k++) vector[k] /= rest;
      basis.push(vector);
      projected[j] = dot(vector, residual);
      subtractScaled(residual, projected[j], vector);
    }
    squares[j + 1] = dot(residual, residual);
  });
  const coefficients = new Float64Array(count);
  for (let j = count - 1; j >= 0; j--) {
    if (basis[j] === null) continue;
    let value = projected[j];
    for (let i = j + 1; i < count; i++) value -= triangle[j][i] * coefficients[i];
    coefficients[j] = value / triangle[j][j];
  }
  return { basis, coefficients, residual, squares };
}

/** The part of a vector that is orthogonal to an orthonormal basis; the vector is changed in place. */
export function projectOut(basis: readonly (Float64Array | null)[], vector: Float64Array): Float64Array {
  for (const direction of basis) {
    if (direction !== null) subtractScaled(vector, dot(direction, vector), direction);
  }
  return vector;
}
