import { multiply } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import { Matrix } from 'ml-matrix';
import { expect, test } from 'vitest';
import { solveLower, solveUpper } from '../../../packages/fem-core/src/sparse/pattern.js';
import { definiteMatrices, gridLaplacian, irregular, largest, patternFrom, toDense } from './systems.js';

test('the product is that of the dense matrix', () => {
  fc.assert(
    fc.property(definiteMatrices, (matrix) => {
      const { n } = matrix.pattern;
      const x = irregular(n);
      const dense = toDense(matrix)
        .mmul(Matrix.columnVector(Array.from(x)))
        .to1DArray();
      const y = multiply(matrix.pattern, matrix.values, x, new Float64Array(n));
      const scale = largest(matrix.values);
      y.forEach((value, i) => {
        expect(Math.abs(value - dense[i])).toBeLessThan(1e-13 * scale);
      });
    }),
  );
});

test('what stood in y before does not matter', () => {
  const { pattern, values } = gridLaplacian(4, 3);
  const x = irregular(12);
  const y = new Float64Array(12).fill(Number.NaN);
  expect(multiply(pattern, values, x, y)).toBe(y);
  expect(y).toEqual(multiply(pattern, values, x, new Float64Array(12)));
});

test('x A y = y A x, as of every symmetric matrix', () => {
  const { pattern, values } = gridLaplacian(9, 7);
  const [x, y] = [irregular(63), irregular(63).map(Math.cos)];
  const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i], 0);
  const times = (v: Float64Array): Float64Array => multiply(pattern, values, v, new Float64Array(63));
  expect(dot(x, times(y))).toBeCloseTo(dot(y, times(x)), 12);
});

test('a matrix without unknowns has an empty product', () => {
  expect(multiply(patternFrom(0, []), new Float64Array(0), new Float64Array(0), new Float64Array(0))).toHaveLength(0);
});

test('sweeps forward and backward undo the lower triangle and its transpose', () => {
  fc.assert(
    fc.property(definiteMatrices, ({ pattern, values }) => {
      const { n } = pattern;
      const lower = toDense({ pattern, values });
      for (let i = 0; i < n; i++) for (let j = i + 1; j < n; j++) lower.set(i, j, 0);
      const wanted = irregular(n);
      for (const [matrix, undo] of [
        [lower, solveLower],
        [lower.transpose(), solveUpper],
      ] as const) {
        const x = Float64Array.from(matrix.mmul(Matrix.columnVector(Array.from(wanted))).to1DArray());
        undo(pattern, values, x);
        expect(largest(x.map((value, i) => value - wanted[i]))).toBeLessThan(1e-9);
      }
    }),
  );
});
