import type { Harmonics, Series } from '../waves/series.js';
import { amplitudes, combine } from '../waves/series.js';
import type { CoilPlace } from '../winding/coil-places.js';
import { coilSum } from '../winding/factors.js';

/** Current that flows inside the winding with no load. */
export interface Circulation {
  /** Rms, A: in each phase of a delta; in each path, by path. */
  readonly current: readonly number[];
  /** In the whole winding, W. */
  readonly loss: number;
  /** Braking torque at the speed, Nm. */
  readonly torque: number;
}

/** The electrical side of one branch, and the speed that drives it. */
export interface Branch {
  /** At the temperature of the copper, ohm. */
  readonly resistance: number;
  /** H. */
  readonly inductance: number;
  /** Of the shaft, rad/s. */
  readonly omega: number;
  readonly polePairs: number;
}

/**
 * Current round a closed delta: orders 3, 9, 15, ... of the phases' EMFs are in step, so they add up round the loop,
 *
 *   I_n = E_n / |R + i n w L0|,  E_n that of (e1 + e2 + e3)/3,   loss = 3 R sum I_n^2,
 *
 * with L0 = self + 2 mutual (the same current in all three). Load currents between the terminals have no share in it: they
 * see R and self - mutual.
 *
 * @param phases EMFs of the three phases at the speed of the branch, V
 */
export function deltaCirculation(phases: readonly Series[], branch: Branch): Circulation {
  const mean = combine(
    phases,
    phases.map(() => 1 / phases.length),
  );
  const current = branchCurrent(mean, branch);
  return total(
    phases.map(() => current),
    branch,
  );
}

/**
 * Currents between parallel paths of one phase with the load open. The paths have R and L each and no coupling, so their
 * common voltage is the mean of their EMFs and  I_k = (E_k - mean) / (R + i n w L), order by order; a load current adds to
 * these without changing them. The loss is that of one phase.
 *
 * @param paths EMF of each path at the speed of the branch, V
 */
export function pathCirculation(paths: readonly Series[], branch: Branch): Circulation {
  const currents = paths.map((_, k) => {
    const against = paths.map((_path, j) => (j === k ? 1 : 0) - 1 / paths.length);
    return branchCurrent(combine(paths, against), branch);
  });
  return total(currents, branch);
}

/**
 * EMFs of the parallel paths of a phase whose coils, as they follow round the machine, are shared out in groups of neighbours,
 * V. Paths that are not alike circulate; how the coils are really shared out decides how much.
 *
 * @param coil  EMF of one coil, sum amplitude_n sin(n theta), theta from its own axis, V
 * @param paths a divisor of the phase's number of coils
 */
export function pathEmfs(
  coil: Harmonics,
  places: readonly CoilPlace[],
  poles: number,
  phase: number,
  paths: number,
): readonly Series[] {
  const own = places.filter((place) => place.phase === phase);
  const each = own.length / paths;
  return Array.from({ length: paths }, (_, k) => {
    const group = own.slice(k * each, (k + 1) * each);
    const sums = coil.order.map((n) => coilSum(group, poles, phase, n, 0));
    // sin(n (theta - alpha)) = sin(n theta) cos(n alpha) - cos(n theta) sin(n alpha)
    return {
      order: coil.order,
      cos: sums.map(({ im }, i) => -im * coil.amplitude[i]),
      sin: sums.map(({ re }, i) => re * coil.amplitude[i]),
    };
  });
}

/** Rms of the current that an EMF drives through a branch, A. */
function branchCurrent(emf: Series, { resistance, inductance, omega, polePairs }: Branch): number {
  const squares = amplitudes(emf).map((peak, i) => {
    const reactance = emf.order[i] * polePairs * omega * inductance;
    return peak ** 2 / 2 / (resistance ** 2 + reactance ** 2);
  });
  return Math.sqrt(squares.reduce((sum, square) => sum + square, 0));
}

function total(current: readonly number[], { resistance, omega }: Branch): Circulation {
  const loss = resistance * current.reduce((sum, one) => sum + one ** 2, 0);
  return { current, loss, torque: omega === 0 ? 0 : loss / omega };
}
