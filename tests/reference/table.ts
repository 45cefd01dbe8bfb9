import { appendFileSync } from 'node:fs';
import { afterAll, expect } from 'vitest';

/** One figure held against the outside. */
export interface Check {
  readonly case: string;
  readonly quantity: string;
  /** Where the expected figure comes from, in words. */
  readonly source: string;
  readonly expected: number;
  readonly got: number;
  /** What the error is measured against; |expected| where absent. */
  readonly scale?: number;
  /** Bound the solver itself reports for the error, in the unit of the quantity, where it reports one. */
  readonly bound?: number;
}

/** A check as it is written down: errors are shares of the scale. */
interface Row {
  readonly case: string;
  readonly quantity: string;
  readonly source: string;
  readonly expected: number;
  readonly got: number;
  readonly relErr: number;
  readonly estimated?: number;
}

const rows: Row[] = [];

/**
 * Holds a figure against the outside: off by less than `tolerance` of the scale, and by no more than the solver's own
 * bound where there is one. `slack` is what the expected figure itself may be off by (share of the scale).
 */
export function check(given: Check, tolerance: number, slack = 1e-10): void {
  const { scale = Math.abs(given.expected), bound, expected, got, quantity, source } = given;
  const relErr = Math.abs(got - expected) / scale;
  const estimated = bound === undefined ? {} : { estimated: bound / scale };
  rows.push({ case: given.case, quantity, source, expected, got, relErr, ...estimated });
  const what = `${given.case}, ${quantity}: expected ${expected}, got ${got}`;
  expect(relErr, what).toBeLessThan(tolerance);
  if (bound !== undefined) expect(relErr, `${what}: the reported bound`).toBeLessThanOrEqual(bound / scale + slack);
}

/** With GAPWRIGHT_TABLE=FILE in the environment, each test file adds its rows to FILE, one JSON object a line. */
afterAll(() => {
  const file = process.env.GAPWRIGHT_TABLE;
  if (file === undefined || file === '' || rows.length === 0) return;
  appendFileSync(file, rows.map((row) => `${JSON.stringify(row)}\n`).join(''));
});
