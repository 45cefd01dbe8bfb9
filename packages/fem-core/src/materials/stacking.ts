import { MU0 } from '../base/constants.js';
import { InputError } from '../base/fault.js';

/**
 * B-H table of a stack of sheets that lie in the plane of the section: sheets fill the share k of the depth and carry flux
 * beside the gaps between them under the same H, so that B_mean(H) = k B(H) + (1 - k) mu0 H.
 *
 * @param rows  [H in A/m, B in T] of the solid sheet
 * @param factor  k, above 0 and at most 1; 0.95 to 0.98 is common practice
 * @throws InputError for a factor out of range
 */
export function stackedTable(
  rows: readonly (readonly [H: number, B: number])[],
  factor: number,
): (readonly [H: number, B: number])[] {
  checkFactor(factor);
  return rows.map(([h, b]) => [h, factor * b + (1 - factor) * MU0 * h]);
}

/**
 * Relative permeability of such a stack of linear sheets: k mu_r + 1 - k.
 * @param factor  k, see `stackedTable`
 * @throws InputError for a factor out of range
 */
export function stackedPermeability(muR: number, factor: number): number {
  checkFactor(factor);
  return factor * muR + 1 - factor;
}

function checkFactor(factor: number): void {
  if (factor > 0 && factor <= 1) return;
  throw new InputError([
    {
      code: 'out-of-range',
      key: 'stacking_factor',
      wrong: `must be above 0 and at most 1, got ${factor}`,
      remedy: 'give the share of the depth that the sheets fill, for example 0.96',
    },
  ]);
}
