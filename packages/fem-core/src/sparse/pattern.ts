/**
 * Pattern of a sparse symmetric matrix: its lower triangle by columns, n unknowns, z entries.
 * Every diagonal entry is present and comes first in its column; rows rise within a column.
 */
export interface SymmetricPattern {
  readonly n: number;
  /** Int32Array(n + 1): column j holds entries start[j] ... start[j + 1] - 1. */
  readonly start: Int32Array;
  /** Int32Array(z): row of each entry, >= its column. */
  readonly row: Int32Array;
}

/** y = A x for the symmetric matrix with the given lower-triangle values; writes into `y` and returns it. */
export function multiply(
  pattern: SymmetricPattern,
  values: Float64Array,
  x: Float64Array,
  y: Float64Array,
): Float64Array {
  const { n, start, row } = pattern;
  y.fill(0);
  for (let j = 0; j < n; j++) {
    const first = start[j];
    let sum = values[first] * x[j];
    for (let p = first + 1; p < start[j + 1]; p++) {
      sum += values[p] * x[row[p]];
      y[row[p]] += values[p] * x[j];
    }
    y[j] += sum;
  }
  return y;
}
