import type { FigureResult } from './verification-case.js';

/** How the errors that the solver reports compare with the true ones. */
export interface Honesty {
  /** Figures whose error or estimate is more than the remainder of the formula and of rounding. */
  readonly figures: number;
  /** Share of them whose true error is not above the estimate. */
  readonly covered: number;
  /** Median of true over estimated error. */
  readonly median: number;
}

/** Errors below this are rounding, and what Newton's method leaves. */
const ROUNDING = 1e-9;

/** True where a figure says something of the estimate. */
export const isTelling = ({ relativeError, estimatedError, slack }: FigureResult): boolean =>
  !(Math.max(relativeError, estimatedError) <= Math.max(ROUNDING, slack)); // what is no number tells, too

/** True where the estimate, with the formula's own remainder, bounds the true error. */
export const isCovered = ({ relativeError, estimatedError, slack }: FigureResult): boolean =>
  relativeError <= estimatedError + slack;

export function measureHonesty(results: readonly FigureResult[]): Honesty {
  const telling = results.filter(isTelling);
  const ratios = telling.map(ratioOf).sort((p, q) => p - q);
  return {
    figures: telling.length,
    covered: telling.filter(isCovered).length / telling.length,
    median: ratios[Math.floor(ratios.length / 2)] ?? Number.NaN,
  };
}

/** True over estimated error. */
function ratioOf({ relativeError, estimatedError }: FigureResult): number {
  const ratio = relativeError / estimatedError;
  return Number.isNaN(ratio) ? Infinity : ratio;
}
