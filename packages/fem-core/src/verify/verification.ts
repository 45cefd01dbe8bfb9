import { verificationCases } from './cases.js';
import { measureHonesty } from './honesty.js';
import { measureOrders } from './orders.js';
import type { FigureResult } from './verification-case.js';
import { runCase } from './verification-case.js';

/** The solver held against closed forms: what there is to run, in the order of the table. */
export const verification = {
  caseCount: verificationCases.length,
  /** Figures of case k; `now` gives milliseconds since any moment. */
  runCase: (k: number, now: () => number): FigureResult[] => runCase(verificationCases[k], { now }),
  /** Orders of convergence of linear, quadratic and curved quadratic elements on a smooth field. */
  measureOrders: () => measureOrders(),
  /** How the reported errors compare with the true ones. */
  measureHonesty,
} as const;
