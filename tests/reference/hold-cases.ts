import { test } from 'vitest';
import type { VerificationCase } from '../../packages/fem-core/src/verify/verification-case.js';
import { runCase } from '../../packages/fem-core/src/verify/verification-case.js';
import { check } from './table.js';

/** One test a case: each figure within its bound of the closed form. */
export function holdCases(cases: readonly VerificationCase[]): void {
  test.each(cases.map((given) => [given.name, given] as const))('%s', (_, given) => {
    runCase(given).forEach((found, i) => {
      const { name, quantity, source, expected, got, bound } = found;
      const { scale = Math.abs(expected) } = given.figures[i];
      check({ case: name, quantity, source, expected, got, scale }, bound);
    });
  });
}
