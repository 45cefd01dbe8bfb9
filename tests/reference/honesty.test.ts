import { expect, test } from 'vitest';
import { verificationCases } from '../../packages/fem-core/src/verify/cases.js';
import { isCovered, isTelling, measureHonesty } from '../../packages/fem-core/src/verify/honesty.js';
import { runCase } from '../../packages/fem-core/src/verify/verification-case.js';

test.each([
  ['each its own accuracy', {}],
  ['1 %', { accuracy: 1e-2 }],
  ['0.1 %', { accuracy: 1e-3 }],
  ['0.01 %', { accuracy: 1e-4 }],
  ['5 % by linear elements', { accuracy: 5e-2, order: 1 }],
] as const)(
  'over the closed forms at %s, true errors are within their estimates, and not far below them',
  (_, options) => {
    const results = verificationCases().flatMap((given) => runCase(given, options));
    const { covered, median } = measureHonesty(results);
    const missed = results
      .filter((result) => isTelling(result) && !isCovered(result))
      .map(
        ({ name, quantity, relativeError, estimatedError }) =>
          `${name}, ${quantity}: ${relativeError} of ${estimatedError}`,
      );
    expect(covered, missed.join('\n')).toBeGreaterThanOrEqual(0.95);
    expect(median).toBeGreaterThanOrEqual(1 / 20);
  },
  300_000,
);
