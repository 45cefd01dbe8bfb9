import type { Magnet } from '../materials/at-temperature.js';
import { kneeAt, lostAt, remanenceAt } from '../materials/at-temperature.js';
import { MATERIAL_GROUPS } from '../materials/library.js';

/** Room to the knee that a sound design keeps: knees are round, and fields at corners higher still (`kneeAt`). */
export const KEEP = 0.1;

/** A field against the magnetisation at a temperature. */
export interface Demand {
  readonly celsius: number;
  /** Along the magnetisation, A/m; negative where it opposes it. */
  readonly h: number;
}

/** 1 - |H| / |H at the knee|, 1 where H does not oppose the magnetisation; undefined where the knee is not known. */
export function marginOf(magnet: Magnet, { celsius, h }: Demand): number | undefined {
  const knee = kneeAt(magnet, celsius);
  if (knee === undefined) return undefined;
  return knee.h === 0 ? Number.NEGATIVE_INFINITY : 1 + Math.min(0, h) / -knee.h;
}

/** The temperature beyond which a magnet no longer keeps `KEEP`. */
export interface TemperatureLimit {
  readonly celsius: number;
  /** `heat` takes the coercivity of NdFeB, `cold` that of ferrite. */
  readonly by: 'heat' | 'cold';
}

const COLDEST = -100;
const HOTTEST = 400;

/**
 * The temperature up to which, or down to which, a magnet keeps `KEEP` under a demand that goes with its remanence (as do
 * fields without saturation, and the short-circuit current). Undefined where the knee is not known at other temperatures,
 * and where it keeps it, or not, at all of them.
 */
export function temperatureLimit(magnet: Magnet, { celsius, h }: Demand): TemperatureLimit | undefined {
  const room = (at: number): number | undefined => {
    if (lostAt(magnet, at) !== undefined) return Number.NEGATIVE_INFINITY;
    const margin = marginOf(magnet, { celsius: at, h: (h * remanenceAt(magnet, at)) / remanenceAt(magnet, celsius) });
    return margin === undefined ? undefined : margin - KEEP;
  };
  const by = (magnet.coercivitySlope ?? 0) > 0 ? 'cold' : 'heat';
  let [good, bad] = by === 'cold' ? [HOTTEST, COLDEST] : [COLDEST, HOTTEST];
  // Ferrite has no remanence left long before the hottest: there it is no magnet, but not for lack of coercivity.
  while (by === 'cold' && good > celsius && lostAt(magnet, good) !== undefined) good -= 10;
  const [atGood, atBad] = [room(good), room(bad)];
  if (atGood === undefined || atBad === undefined || atGood < 0 || atBad >= 0) return undefined;
  while (Math.abs(good - bad) > 0.01) {
    const middle = (good + bad) / 2;
    const enough = (room(middle) ?? Number.NEGATIVE_INFINITY) >= 0;
    if (enough) good = middle;
    else bad = middle;
  }
  return { celsius: good, by };
}

/**
 * Grades of the same family in the library that would keep `KEEP` under all demands where the magnet does not: of each class
 * of higher coercivity the one nearest in remanence, by rising coercivity, at most three. Demands go with the remanence.
 * The family is the library's own of that name, else that whose remanence changes with temperature most alike.
 */
export function gradesThatHold(name: string, magnet: Magnet, demands: readonly Demand[]): readonly string[] {
  const { coercivityIntrinsic = 0, remanence } = magnet;
  const holds = (grade: Magnet): boolean =>
    demands.every(({ celsius, h }) => {
      const share = remanenceAt(grade, celsius) / remanenceAt(magnet, celsius);
      return (marginOf(grade, { celsius, h: h * share }) ?? 0) >= KEEP;
    });
  const stronger = familyOf(name, magnet)
    .filter(([, grade]) => (grade.coercivityIntrinsic ?? 0) > coercivityIntrinsic)
    .sort(([, a], [, b]) => Math.abs(a.remanence - remanence) - Math.abs(b.remanence - remanence));
  const byClass = new Map<number, string>();
  for (const [grade, material] of stronger) {
    const coercivity = material.coercivityIntrinsic ?? 0;
    if (!byClass.has(coercivity) && holds(material)) byClass.set(coercivity, grade);
  }
  return [...byClass]
    .sort(([a], [b]) => a - b)
    .slice(0, MOST_GRADES)
    .map(([, grade]) => grade);
}

const MOST_GRADES = 3;

type Grade = readonly [name: string, magnet: Magnet];

function familyOf(name: string, magnet: Magnet): readonly Grade[] {
  const families = MATERIAL_GROUPS.map(({ materials }) =>
    Object.entries(materials).flatMap(([grade, one]): Grade[] => (one.kind === 'magnet' ? [[grade, one]] : [])),
  ).filter((family) => family.length > 0);
  const own = families.find((family) => family.some(([grade, one]) => grade === name && one === magnet));
  if (own !== undefined) return own;
  const distance = (family: readonly Grade[]): number =>
    Math.min(...family.map(([, grade]) => Math.abs(grade.remanenceSlope - magnet.remanenceSlope)));
  return families.reduce((nearest, family) => (distance(family) < distance(nearest) ? family : nearest));
}
