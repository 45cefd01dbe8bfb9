import { expect, test } from 'vitest';
import { measureHonesty } from '../../../packages/fem-core/src/verify/honesty.js';
import type { FigureResult } from '../../../packages/fem-core/src/verify/verification-case.js';

const figure = (relativeError: number, estimatedError: number, slack = 0): FigureResult => ({
  name: 'case',
  quantity: 'quantity',
  formula: 'formula',
  source: 'source',
  expected: 1,
  got: 1 + relativeError,
  relativeError,
  estimatedError,
  bound: 1,
  slack,
  nodes: 1,
  ms: 0,
  holds: true,
});

test('covered counts the figures whose error is within the estimate, the median is of error over estimate', () => {
  const honesty = measureHonesty([figure(1e-3, 2e-3), figure(1e-4, 1e-3), figure(3e-3, 1e-3), figure(1e-3, 1e-3)]);
  expect(honesty.figures).toBe(4);
  expect(honesty.covered).toBe(0.75);
  expect(honesty.median).toBeCloseTo(1, 12);
});

test('figures exact but for rounding, or for what the formula leaves out, say nothing', () => {
  expect(measureHonesty([figure(1e-12, 1e-15), figure(1e-5, 1e-9, 2e-5)]).figures).toBe(0);
});

test('an estimate may miss what the formula leaves out, and no more', () => {
  expect(measureHonesty([figure(1.05e-4, 1e-4, 1e-5)]).covered).toBe(1);
  expect(measureHonesty([figure(1.2e-4, 1e-4, 1e-5)]).covered).toBe(0);
});

test('an error or an estimate that is no number is not covered', () => {
  for (const odd of [figure(Number.NaN, 1e-3), figure(1e-3, Number.NaN)]) {
    expect(measureHonesty([odd, figure(1e-3, 2e-3)])).toMatchObject({ figures: 2, covered: 0.5 });
  }
});
