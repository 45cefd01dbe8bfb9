import { verificationCases } from './cases.js';
import type { Honesty } from './honesty.js';
import { measureHonesty } from './honesty.js';
import type { MeasuredOrder } from './orders.js';
import { measureOrders } from './orders.js';
import type { FigureResult } from './verification-case.js';
import { runCase } from './verification-case.js';

/** The solver held against closed forms. */
export interface Verification {
  /** Cases are numbered from 0. */
  readonly caseCount: number;
  /** Figures of case k, in the order of the table; `now` gives milliseconds since any moment. */
  readonly runCase: (k: number, now: () => number) => readonly FigureResult[];
  /** Orders of convergence of linear, quadratic and curved quadratic elements on a smooth field. */
  readonly measureOrders: () => readonly MeasuredOrder[];
  /** How the reported errors compare with the true ones. */
  readonly measureHonesty: (figures: readonly FigureResult[]) => Honesty;
}

/** All closed-form cases, ready to run one by one; nothing is solved yet. */
export function buildVerification(): Verification {
  const cases = verificationCases();
  return {
    caseCount: cases.length,
    runCase: (k, now) => runCase(cases[k], { now }),
    measureOrders: () => measureOrders(),
    measureHonesty,
  };
}
