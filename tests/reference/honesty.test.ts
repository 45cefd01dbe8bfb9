import { expect, test } from 'vitest';
import { verificationCases } from '../../packages/fem-core/src/verify/cases.js';
import { isCovered, isTelling, measureHonesty } from '../../packages/fem-core/src/verify/honesty.js';
import { runCase } from '../../packages/fem-core/src/verify/verification-case.js';

test('over the closed forms true errors are within their estimates, and not far below them', () => {
  const results = verificationCases().flatMap((given) => runCase(given));
  const { covered, median } = measureHonesty(results);
  const missed = results
    .filter((result) => isTelling(result) && !isCovered(result))
    .map(
      ({ name, quantity, relativeError, estimatedError }) =>
        `${name}, ${quantity}: ${relativeError} of ${estimatedError}`,
    );
  expect(covered, missed.join('\n')).toBeGreaterThanOrEqual(0.95);
  expect(median).toBeGreaterThanOrEqual(1 / 20);
});
