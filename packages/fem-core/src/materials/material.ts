import type { BHCurve } from './bh-curve.js';

/** What fills a region, seen by the field. */
export type Material =
  | { readonly kind: 'linear'; readonly muR: number }
  /** B = mu0 recoil H + remanence; the remanence is a vector in tesla. */
  | { readonly kind: 'magnet'; readonly recoil: number; readonly remanence: readonly [x: number, y: number] }
  | { readonly kind: 'curve'; readonly curve: BHCurve };
