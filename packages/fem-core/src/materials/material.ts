import type { BHCurve } from './bh-curve.js';
import type { DemagnetisationCurve } from './demagnetisation.js';
import type { Direction } from './direction.js';

/** What fills a region, seen by the field. */
export type Material =
  /** B = mu0 muR H. */
  | {
      readonly kind: 'linear';
      /** Relative permeability, above 0. */
      readonly muR: number;
    }
  /** B = mu0 recoil H + remanence. */
  | {
      readonly kind: 'magnet';
      /** Relative permeability of the recoil line, above 0. */
      readonly recoil: number;
      /** A vector, T. */
      readonly remanence: readonly [x: number, y: number];
    }
  /**
   * A magnet whose direction may turn from place to place. Along it, B = mu0 recoil H + remanence (T), or a curve with a
   * knee; across it, B = mu0 recoil H.
   */
  | {
      readonly kind: 'directed-magnet';
      /** Of the magnetisation, by place. */
      readonly direction: Direction;
      /** Relative permeability across the direction and, without a curve, along it; above 0. */
      readonly recoil: number;
      /** Remanence, T, or the curve that the magnet follows along its direction. */
      readonly along: number | DemagnetisationCurve;
    }
  /** Soft steel: H along B, of the size that the curve gives. */
  | {
      readonly kind: 'curve';
      /** By `buildBHCurve`. */
      readonly curve: BHCurve;
    };

/** H is not an affine function of B: the region takes part in Newton's method. */
export const isNonlinear = (material: Material): boolean =>
  material.kind === 'curve' || (material.kind === 'directed-magnet' && typeof material.along !== 'number');
