import type { Machine, Rotor } from '../machine.js';
import type { SliceAnswer } from '../slices/slice-answer.js';
import { solveSlice } from '../slices/solve-slice.js';

/** How the pull of the mean slice falls as the discs are taken apart. */
export interface Approach {
  /** Gaps, m, rising, the machine's own among them, and the mean slice's pull there, N per metre of depth and pole. */
  readonly gaps: readonly number[];
  readonly pulls: readonly number[];
}

/** Share of the gap to either side of it that tells the slope. */
const NEAR = 0.05;
/** Farther gaps: how much more than the machine's, in lengths over which the pull falls by exp(-pi). */
const FAR = [0.2, 0.5, 1] as const;
/** Wanted accuracy of these slices, where the machine's own is not looser. */
const ACCURACY = 0.005;

/**
 * Solves the slice at the magnets' mean radius at gaps from 5 % below the machine's to where about 4 % of the pull is left:
 * far out it falls as exp(-pi x/polePitch) for magnets on both discs and twice as fast towards a keeper. At the smaller
 * gap the winding is drawn thinner in proportion, so that there is room for it; it is air to the field. Undefined where
 * nothing pulls.
 *
 * @param known  slices solved at the machine's gap: one at the mean radius is not solved again
 */
export function solveApproach(machine: Machine, known: readonly SliceAnswer[] = []): Approach | undefined {
  const { rotor, winding, model } = machine;
  const radius = rotor.magnets.meanRadius;
  const step = ((2 * Math.PI * radius) / rotor.poles) * (rotor.arrangement === 'twin' ? 1 : 0.5);
  const near = [1 - NEAR, 1, 1 + NEAR].map((share) => share * rotor.gap);
  const gaps = [...near, ...FAR.map((share) => rotor.gap + share * step).filter((gap) => gap > 1.02 * near[2])];
  const atOwnGap = known.find((slice) => slice.radius === radius);
  const pulls = gaps.map((gap) => {
    if (gap === rotor.gap && atOwnGap !== undefined) return atOwnGap.pull;
    const thickness = winding.thickness * Math.min(1, gap / rotor.gap);
    const apart = { ...machine, rotor: { ...rotor, gap }, winding: { ...winding, thickness } };
    const accuracy = Math.max(ACCURACY, model.accuracy);
    return solveSlice(apart, { radius, weight: 0 }, { accuracy }).answer.pull;
  });
  return pulls.every((pull) => pull > 0) ? { gaps, pulls } : undefined;
}

/** Pull between the discs at a gap. */
export interface PullAtGap {
  /** m. */
  readonly gap: number;
  /** N. */
  readonly force: number;
}

/** Gaps to tell the pull at while the discs come together, besides the machine's own. */
const STEPS = 12;

/**
 * Pull on the way in, from the farthest gap solved to the machine's own.
 *
 * The mean slice's pull at a gap over that at the machine's gap multiplies the whole pull; that the other radii fall faster
 * or slower is put right by the fundamental of ideal discs (see `fall`), x the gap beyond the machine's:
 *
 *   F(x) = F(0) ratio(x) [sum f_i fall_i(x) / sum f_i] / fall_mean(x),   f_i = weight_i pull_i of the slices.
 *
 * Against the closed series of ideal discs summed over all radii: within 1.5 % for magnets no longer than half their mean
 * radius, 6 % for magnets as long as it. The slices know nothing of the magnets' ends, here as at the machine's own gap.
 */
export function jackingCurve(
  machine: Machine,
  slices: readonly SliceAnswer[],
  approach: Approach,
): readonly PullAtGap[] {
  const { gap } = machine.rotor;
  const farthest = approach.gaps[approach.gaps.length - 1];
  return Array.from({ length: STEPS + 1 }, (_, i) => {
    const wider = farthest + ((gap - farthest) * i) / STEPS;
    const at = i === STEPS ? gap : wider;
    return { gap: at, force: pullAt(machine, slices, approach, at) };
  });
}

/** Pull at a gap between the nearest and the farthest solved, N; see `jackingCurve`. */
export function pullAt(machine: Machine, slices: readonly SliceAnswer[], approach: Approach, gap: number): number {
  const { rotor } = machine;
  const x = gap - rotor.gap;
  const ratio = interpolate(approach, gap) / ownPull(approach, rotor.gap);
  const mean = fall(rotor, rotor.magnets.meanRadius, x);
  return slices.reduce((sum, { weight, pull, radius }) => {
    return sum + (rotor.poles * weight * pull * ratio * fall(rotor, radius, x)) / mean;
  }, 0);
}

/**
 * Pull of the fundamental at a gap wider by x, over that at the machine's gap. With k = pi/polePitch, a the way from magnet
 * face to the plane of zero potential (half the gap, or all of it towards a keeper) and ideal steel behind magnets of
 * thickness h and recoil 1, B goes as 1/(cosh(k a) + sinh(k a) coth(k h)), that is as 1/sinh(k (a + h)); without steel as
 * exp(-k a). The pull goes as B^2.
 */
function fall({ arrangement, gap, magnets, poles, disc }: Rotor, radius: number, x: number): number {
  const k = poles / (2 * radius);
  const half = arrangement === 'twin' ? 0.5 : 1;
  const steep = Math.exp(-2 * k * half * x);
  if (disc === undefined) return steep;
  const reach = half * gap + magnets.thickness;
  // sinh(u)/sinh(v) as exp(u - v) (1 - exp(-2 u))/(1 - exp(-2 v)), which does not overflow.
  return steep * (Math.expm1(-2 * k * reach) / Math.expm1(-2 * k * (reach + half * x))) ** 2;
}

/** Relative change of the pull per metre of gap, dF/dg / F, 1/m; negative. From the solved gaps next to the machine's. */
export function pullSlope({ rotor }: Machine, { gaps, pulls }: Approach): number {
  const at = gaps.indexOf(rotor.gap);
  return Math.log(pulls[at + 1] / pulls[at - 1]) / (gaps[at + 1] - gaps[at - 1]);
}

const ownPull = ({ gaps, pulls }: Approach, gap: number): number => pulls[gaps.indexOf(gap)];

/**
 * ln(pull) by cubic pieces, each with the slopes of the parabolas through its ends and their neighbours: the logarithm is
 * almost straight.
 */
function interpolate({ gaps, pulls }: Approach, gap: number): number {
  const logs = pulls.map(Math.log);
  const last = gaps.length - 1;
  let i = 0;
  while (i < last - 1 && gap > gaps[i + 1]) i++;
  const width = gaps[i + 1] - gaps[i];
  const secant = (j: number): number => (logs[j + 1] - logs[j]) / (gaps[j + 1] - gaps[j]);
  const slope = (j: number): number => {
    if (j === 0 || j === last) {
      const [end, next] = j === 0 ? [secant(0), secant(1)] : [secant(last - 1), secant(last - 2)];
      const [near, far] =
        j === 0 ? [gaps[1] - gaps[0], gaps[2] - gaps[0]] : [gaps[last] - gaps[last - 1], gaps[last] - gaps[last - 2]];
      return end + ((end - next) * near) / far;
    }
    const [before, after] = [gaps[j] - gaps[j - 1], gaps[j + 1] - gaps[j]];
    return (secant(j - 1) * after + secant(j) * before) / (before + after);
  };
  const t = (gap - gaps[i]) / width;
  const u = 1 - t;
  const value =
    logs[i] * (1 + 2 * t) * u * u +
    logs[i + 1] * (1 + 2 * u) * t * t +
    width * t * u * (slope(i) * u - slope(i + 1) * t);
  return Math.exp(value);
}
