import { analyse, factor, solve } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import { rowStartInBlock } from '../../../packages/fem-core/src/sparse/front-layout.js';
import type { SparseMatrix } from './systems.js';
import {
  backwardError,
  definiteMatrices,
  dominant,
  factorOf,
  gridLaplacian,
  irregular,
  largest,
  patternFrom,
  solveSystem,
  toDense,
} from './systems.js';

/** The factor as a dense lower triangle, in the order of the analysis. */
function denseFactor(matrix: SparseMatrix): Matrix {
  const { analysis, blocks } = factorOf(matrix);
  const { first, below, rowStart, rows, blockStart } = analysis;
  const lower = Matrix.zeros(matrix.pattern.n, matrix.pattern.n);
  for (let s = 0; s < below.length; s++) {
    const width = first[s + 1] - first[s];
    for (let c = 0; c < width; c++) {
      const entry = (row: number): number => blocks[blockStart[s] + rowStartInBlock(row, width) + 4 * c];
      lower.set(first[s] + c, first[s] + c, 1 / entry(c));
      for (let r = c + 1; r < width; r++) lower.set(first[s] + r, first[s] + c, entry(r));
      for (let i = 0; i < below[s]; i++) lower.set(rows[rowStart[s] + i], first[s] + c, entry(width + i));
    }
  }
  return lower;
}

describe('factor and solve', () => {
  test('L L^T is the matrix in the order of the analysis', () => {
    fc.assert(
      fc.property(definiteMatrices, (matrix) => {
        const lower = denseFactor(matrix);
        const product = lower.mmul(lower.transpose());
        const dense = toDense(matrix);
        const { order } = analyse(matrix.pattern);
        const scale = largest(matrix.values);
        for (let i = 0; i < order.length; i++) {
          for (let j = 0; j <= i; j++) {
            expect(Math.abs(product.get(i, j) - dense.get(order[i], order[j]))).toBeLessThan(1e-13 * scale);
          }
        }
      }),
      { numRuns: 50 },
    );
  });

  test('the residual of random definite matrices is rounding', () => {
    fc.assert(
      fc.property(definiteMatrices, (matrix) => {
        const right = irregular(matrix.pattern.n);
        expect(backwardError(matrix, solveSystem(matrix, right), right)).toBeLessThan(1e-12);
      }),
      { numRuns: 300 },
    );
  });

  test.each([
    [1, 1],
    [30, 1],
    [9, 7],
    [60, 45],
  ])('the residual on a grid of %i x %i is rounding', (columns, rows) => {
    const matrix = gridLaplacian(columns, rows);
    const right = irregular(columns * rows);
    expect(backwardError(matrix, solveSystem(matrix, right), right)).toBeLessThan(1e-14);
  });

  test('the grid has the solution known for it: an eigenvector, sin x sin, over its eigenvalue', () => {
    const [columns, rows] = [23, 17];
    const wave = Float64Array.from({ length: columns * rows }, (_, at) => {
      const [i, j] = [at % columns, Math.floor(at / columns)];
      return Math.sin((2 * Math.PI * (i + 1)) / (columns + 1)) * Math.sin((3 * Math.PI * (j + 1)) / (rows + 1));
    });
    const value = 4 - 2 * Math.cos((2 * Math.PI) / (columns + 1)) - 2 * Math.cos((3 * Math.PI) / (rows + 1));
    const x = solveSystem(gridLaplacian(columns, rows), wave);
    x.forEach((got, at) => {
      expect(Math.abs(got - wave[at] / value)).toBeLessThan(1e-12);
    });
  });

  test('a dense solver of another make finds the same', () => {
    fc.assert(
      fc.property(definiteMatrices, (matrix) => {
        const right = irregular(matrix.pattern.n);
        const x = solveSystem(matrix, right);
        const peer = new CholeskyDecomposition(toDense(matrix)).solve(Matrix.columnVector(Array.from(right)));
        const scale = largest(x);
        // Both err by the condition number, at most some 1e6 here, times rounding.
        peer.to1DArray().forEach((value, i) => {
          expect(Math.abs(x[i] - value)).toBeLessThan(1e-8 * scale);
        });
      }),
    );
  });

  test('x may be the array that holds b', () => {
    const matrix = gridLaplacian(11, 8);
    const b = irregular(88);
    const apart = solveSystem(matrix, b);
    expect(solve(factorOf(matrix), b, b)).toBe(b);
    expect(b).toEqual(apart);
  });

  test('solving leaves b as it was', () => {
    const b = irregular(88);
    solveSystem(gridLaplacian(11, 8), b);
    expect(b).toEqual(irregular(88));
  });

  test('a system without unknowns is solved', () => {
    const empty = { pattern: patternFrom(0, []), values: new Float64Array(0) };
    expect(analyse(empty.pattern).blockSize).toBe(0);
    expect(solveSystem(empty, new Float64Array(0))).toHaveLength(0);
  });

  test('unknowns that nothing couples are divisions', () => {
    const matrix = { pattern: patternFrom(4, []), values: Float64Array.of(1, 2, 4, 8) };
    solveSystem(matrix, Float64Array.of(3, 3, 3, 3)).forEach((x, i) => {
      expect(x).toBeCloseTo([3, 1.5, 0.75, 0.375][i], 14);
    });
  });
});

describe('a matrix that is not positive definite is told', () => {
  test('with the unknown whose diagonal is at fault', () => {
    fc.assert(
      fc.property(definiteMatrices, fc.nat(), fc.constantFrom(0, -1), (matrix, draw, value) => {
        const culprit = draw % matrix.pattern.n;
        const values = matrix.values.slice();
        values[matrix.pattern.start[culprit]] = value;
        const result = factor(analyse(matrix.pattern), values);
        if ('blocks' in result) throw new Error('no fault found');
        // What comes before it in the order is definite without it, so that elimination gets as far as the culprit;
        // and elimination only takes from its diagonal.
        expect(result.unknown).toBe(culprit);
        expect(result.pivot).toBeLessThanOrEqual(value);
      }),
    );
  });

  test('a floating body: the row sums are zero, so that the last pivot vanishes', () => {
    // Couplings of -1 alone: all arithmetic is exact in a star.
    const star = dominant(
      patternFrom(
        5,
        [1, 2, 3, 4].map((i) => [0, i]),
      ),
      () => 1,
      0,
    );
    const result = factor(analyse(star.pattern), star.values);
    if ('blocks' in result) throw new Error('no fault found');
    expect(Math.abs(result.pivot)).toBeLessThan(1e-15);
  });

  test('numbers that are none', () => {
    const { pattern, values } = gridLaplacian(5, 5);
    values[pattern.start[12]] = Number.NaN;
    const result = factor(analyse(pattern), values);
    expect('blocks' in result).toBe(false);
  });
});
