/**
 * Pattern of a sparse symmetric matrix: its lower triangle by columns, n unknowns, z entries.
 * Every diagonal entry is present and comes first in its column; rows rise within a column.
 */
export interface SymmetricPattern {
  /** Number of unknowns. */
  readonly n: number;
  /** Int32Array(n + 1): column j holds entries start[j] ... start[j + 1] - 1. */
  readonly start: Int32Array;
  /** Int32Array(z): row of each entry, >= its column. */
  readonly row: Int32Array;
}

/**
 * y = A x for the symmetric matrix with the given lower triangle.
 * @param values  Float64Array(z): in the order of the pattern
 * @param x  Float64Array(n)
 * @param y  Float64Array(n), another array than x; overwritten and returned
 */
export function multiply(
  pattern: SymmetricPattern,
  values: Float64Array,
  x: Float64Array,
  y: Float64Array,
): Float64Array {
  const { n, start, row } = pattern;
  y.fill(0);
  for (let j = 0, p = 0; j < n; j++) {
    const end = start[j + 1];
    const xj = x[j];
    let sum = values[p++] * xj;
    for (; p < end; p++) {
      const i = row[p];
      const value = values[p];
      sum += value * x[i];
      y[i] += value * xj;
    }
    y[j] += sum;
  }
  return y;
}

/** x becomes the solution of L y = x, L the lower triangle with the given values. */
export function solveLower({ n, start, row }: SymmetricPattern, lower: Float64Array, x: Float64Array): void {
  for (let j = 0, p = 0; j < n; j++) {
    const end = start[j + 1];
    const value = x[j] / lower[p++];
    x[j] = value;
    for (; p < end; p++) x[row[p]] -= lower[p] * value;
  }
}

/** x becomes the solution of L^T y = x. */
export function solveUpper({ n, start, row }: SymmetricPattern, lower: Float64Array, x: Float64Array): void {
  for (let j = n - 1; j >= 0; j--) {
    const first = start[j];
    let sum = x[j];
    for (let p = start[j + 1] - 1; p > first; p--) sum -= lower[p] * x[row[p]];
    x[j] = sum / lower[first];
  }
}
