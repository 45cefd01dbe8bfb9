import type { Factor, SymmetricPattern } from '@gapwright/fem-core/sparse';
import { analyse, factor, multiply, solve } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import { Matrix } from 'ml-matrix';

/** A symmetric matrix: the pattern and the values of its lower triangle. */
export interface SparseMatrix {
  readonly pattern: SymmetricPattern;
  readonly values: Float64Array;
}

/** Pattern of the couplings (pairs of unknowns, either way round, repeats and pairs of one unknown allowed). */
export function patternFrom(n: number, couplings: readonly (readonly [number, number])[]): SymmetricPattern {
  const columns = Array.from({ length: n }, (_, j) => new Set([j]));
  for (const [i, j] of couplings) columns[Math.min(i, j)].add(Math.max(i, j));
  const start = new Int32Array(n + 1);
  columns.forEach((column, j) => {
    start[j + 1] = start[j] + column.size;
  });
  return { n, start, row: Int32Array.from(columns.flatMap((column) => [...column].sort((a, b) => a - b))) };
}

/**
 * Values -w off the diagonal and, on it, the sum of the column's |w| and `extra`: diagonally dominant, so positive
 * definite. `draw` gives the w, of either sign.
 */
export function dominant(pattern: SymmetricPattern, draw: (entry: number) => number, extra = 1): SparseMatrix {
  const { n, start, row } = pattern;
  const values = new Float64Array(row.length);
  for (let j = 0; j < n; j++) values[start[j]] = extra;
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      values[p] = -draw(p);
      values[start[j]] += Math.abs(values[p]);
      values[start[row[p]]] += Math.abs(values[p]);
    }
  }
  return { pattern, values };
}

/** Couplings of a grid of columns x rows points to their neighbours, numbered row by row. */
export function gridCouplings(columns: number, rows: number): [number, number][] {
  const couplings: [number, number][] = [];
  for (let j = 0; j < rows; j++) {
    for (let i = 0; i < columns; i++) {
      const at = j * columns + i;
      if (i + 1 < columns) couplings.push([at, at + 1]);
      if (j + 1 < rows) couplings.push([at, at + columns]);
    }
  }
  return couplings;
}

/** The five-point Laplacian of a grid held at 0 all round: 4 on the diagonal, -1 between neighbours. */
export function gridLaplacian(columns: number, rows: number): SparseMatrix {
  const pattern = patternFrom(columns * rows, gridCouplings(columns, rows));
  const values = new Float64Array(pattern.row.length).fill(-1);
  for (let j = 0; j < pattern.n; j++) values[pattern.start[j]] = 4;
  return { pattern, values };
}

/** Graphs of up to 40 unknowns, from no coupling at all to nearly all. */
export const patterns: fc.Arbitrary<SymmetricPattern> = fc.integer({ min: 1, max: 40 }).chain((n) => {
  const unknown = fc.integer({ min: 0, max: n - 1 });
  return fc.array(fc.tuple(unknown, unknown), { maxLength: 4 * n }).map((pairs) => patternFrom(n, pairs));
});

/** Diagonally dominant matrices with couplings of either sign over six orders of magnitude. */
export const definiteMatrices: fc.Arbitrary<SparseMatrix> = fc
  .tuple(patterns, fc.infiniteStream(fc.tuple(fc.double({ min: -3, max: 3, noNaN: true }), fc.boolean())))
  .map(([pattern, draws]) =>
    dominant(
      pattern,
      () => {
        const [log, negative] = draws.next().value as [number, boolean];
        return (negative ? -1 : 1) * 10 ** log;
      },
      1e-2,
    ),
  );

export function toDense({ pattern, values }: SparseMatrix): Matrix {
  const { n, start, row } = pattern;
  const dense = Matrix.zeros(n, n);
  for (let j = 0; j < n; j++) {
    for (let p = start[j]; p < start[j + 1]; p++) {
      dense.set(row[p], j, values[p]);
      dense.set(j, row[p], values[p]);
    }
  }
  return dense;
}

export function factorOf(matrix: SparseMatrix, analysis = analyse(matrix.pattern)): Factor {
  const factored = factor(analysis, matrix.values);
  if (!('blocks' in factored)) throw new Error(`not positive definite at ${factored.unknown}: ${factored.pivot}`);
  return factored;
}

export const solveSystem = (matrix: SparseMatrix, right: Float64Array): Float64Array =>
  solve(factorOf(matrix), right, new Float64Array(matrix.pattern.n));

export const largest = (v: Float64Array): number => v.reduce((most, value) => Math.max(most, Math.abs(value)), 0);

/** Largest of |b - A x| over largest of |A| |x| + |b|: the backward error, about 1e-16 x the terms of a row. */
export function backwardError({ pattern, values }: SparseMatrix, x: Float64Array, right: Float64Array): number {
  const product = multiply(pattern, values, x, new Float64Array(pattern.n));
  const sizes = multiply(pattern, values.map(Math.abs), x.map(Math.abs), new Float64Array(pattern.n));
  const scale = largest(sizes) + largest(right);
  return scale === 0 ? 0 : largest(right.map((value, i) => value - product[i])) / scale;
}

/** Numbers that look like nothing, the same each time: sin of squares. */
export const irregular = (n: number): Float64Array => Float64Array.from({ length: n }, (_, i) => Math.sin(7 + i * i));
