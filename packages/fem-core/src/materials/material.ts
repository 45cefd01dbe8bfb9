import type { BHCurve } from './bh-curve.js';
import type { DemagnetisationCurve } from './demagnetisation.js';
import type { Direction } from './direction.js';

/** What fills a region, seen by the field. */
export type Material =
  | { readonly kind: 'linear'; readonly muR: number }
  /** B = mu0 recoil H + remanence; the remanence is a vector in tesla. */
  | { readonly kind: 'magnet'; readonly recoil: number; readonly remanence: readonly [x: number, y: number] }
  /**
   * A magnet whose direction may turn from place to place. Along it, B = mu0 recoil H + remanence (T), or a curve with a
   * knee; across it, B = mu0 recoil H.
   */
  | {
      readonly kind: 'directed-magnet';
      readonly direction: Direction;
      readonly recoil: number;
      readonly along: number | DemagnetisationCurve;
    }
  | { readonly kind: 'curve'; readonly curve: BHCurve };

/** H is not an affine function of B: the region takes part in Newton's method. */
export const isNonlinear = (material: Material): boolean =>
  material.kind === 'curve' || (material.kind === 'directed-magnet' && typeof material.along !== 'number');
