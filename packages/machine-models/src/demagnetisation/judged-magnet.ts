import type { CurvePlace } from '../materials/at-temperature.js';
import type { TemperatureLimit } from './judge-magnet.js';
import type { WorkingPoint } from './magnet-samples.js';

/** The worst hundredth of a magnet's area, of all slices, at one temperature. */
export interface MagnetState extends WorkingPoint {
  readonly celsius: number;
  /** `open`: no current. `short`: at its worst instant after the terminals were joined. */
  readonly circuit: 'open' | 'short';
  /** Radius of the slice, m; x and y lie in it, x counted from the axis of a main magnet. */
  readonly radius: number;
  /** Undefined where the coercivity is not known at that temperature. */
  readonly knee: CurvePlace | undefined;
  /** 1 - |H| / |H at the knee|; below 0 the magnet loses strength for good. */
  readonly margin: number | undefined;
}

/** One magnet of a pole: a main magnet, a piece of a Halbach array, an interpole; mirror images are left out. */
export interface JudgedMagnet {
  /** As in the slice: `upper magnet`, `upper magnet 1`, `upper interpole`, ... */
  readonly region: string;
  readonly material: string;
  readonly states: readonly MagnetState[];
  /** The one of the least margin; where margins are not known, of the lowest B. */
  readonly worst: MagnetState;
  /** Up to (down to) where it keeps a tenth of room in its worst state. */
  readonly limit: TemperatureLimit | undefined;
  /** Grades that would keep a tenth where this one does not: `gradesThatHold`. */
  readonly betterGrades: readonly string[];
}
