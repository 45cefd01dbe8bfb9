import { InputError, tellWrong } from '../base/fault.js';
import type { Steps } from '../base/steps.js';
import type { Point, SizeAt } from '../geometry/section.js';
import { demandOf, doubleArea } from './demand.js';
import { GROWTH } from './point-sizes.js';
import type { QualityLimits, RefineProgress } from './refine.js';
import type { Triangulation } from './triangulation.js';
import { inUse, nextHalf, previousHalf, triangleOf } from './triangulation.js';

/** What is about to be refined, and what for. */
interface Task {
  readonly tri: Triangulation;
  readonly regionNames: readonly string[];
  /** Wishes at points, beside those in `tri.size`. */
  readonly wishes: readonly SizeAt[];
  readonly limits: QualityLimits;
  /** Gaps between lines are still empty; in a mesh they are filled, and its finest ones are told of by no width. */
  readonly drawn: boolean;
}

/**
 * Runs a refinement; where it would pass `limits.maxTriangles`, the fault tells of the wish, or of the region and the place,
 * for which the triangles pile up. Wishes for edges so short, and gaps so thin, that the limit must be passed are told of at
 * once.
 * @throws InputError 'mesh-too-large'
 */
export function* tellCrowd(task: Task, refinement: () => Steps<RefineProgress, void>): Steps<RefineProgress, void> {
  const { tri, wishes, limits } = task;
  const { byTriangle, byWish } = demandOf(tri, wishes, limits.maxTriangles);
  const least = task.drawn ? gapCounts(tri) : new Float64Array(tri.slotCount);
  for (let t = 0; t < least.length; t++) least[t] += byTriangle[t];
  if (sumOf(least) + USUAL * sumOf(byWish) > limits.maxTriangles) throw crowded(task, least, byWish);
  try {
    yield* refinement();
  } catch (error) {
    if (!(error instanceof InputError && error.faults[0].code === 'mesh-too-large')) throw error;
    throw crowded(task, ...presentCounts(task));
  }
}

const sumOf = (counts: Float64Array): number => counts.reduce((sum, count) => sum + count, 0);

/** The triangles that there are: those as large as a wish at a point lets them be, by wish, and the others. */
function presentCounts({ tri, wishes }: Task): [byTriangle: Float64Array, byWish: Float64Array] {
  const byTriangle = new Float64Array(tri.slotCount);
  const byWish = new Float64Array(wishes.length);
  for (let t = 0; t < tri.slotCount; t++) {
    if (!inUse(tri, t)) continue;
    const [x, y] = middleOf(tri, t);
    const across = Math.sqrt(doubleArea(tri, t));
    let [wanted, by] = [tri.size[t], -1];
    for (let k = 0; k < wishes.length; k++) {
      const { at, maxEdge, growth = GROWTH } = wishes[k];
      const here = maxEdge + growth * Math.sqrt((at[0] - x) ** 2 + (at[1] - y) ** 2);
      if (here <= wanted && across > here / FINER) [wanted, by] = [here, k];
    }
    if (by < 0) byTriangle[t] = 1;
    else byWish[by]++;
  }
  return [byTriangle, byWish];
}

/** Triangles smaller than wished by more than this have another reason to be there. */
const FINER = 6;

/** Triangles that wishes at points take in fact, over the least: 2.1 to 3.1 in trials, more for wishes that grow fast. */
const USUAL = 2;

/** Triangles made in and beside a gap as long as it is wide; five to seven are usual, half a one is the least. */
const IN_GAP = 5;

/**
 * Triangles that gaps must be filled with at least, in each triangle: between two segments that run along each other for a
 * length l at a distance w, triangles without small angles are little longer than w. Where w goes from w1 to w2, 1/w is
 * ln(w2/w1)/(w2 - w1) in the mean.
 */
function gapCounts(tri: Triangulation): Float64Array {
  const counts = new Float64Array(tri.slotCount);
  for (let t = 0; t < tri.slotCount; t++) {
    if (!inUse(tri, t)) continue;
    for (let d = 3 * t; d < 3 * t + 3; d++) {
      const e = tri.twin[d];
      if (tri.segment[d] >= 0 || e < d) continue;
      const [near, far] = [longestSegment(tri, d), longestSegment(tri, e)];
      if (near < 0 || far < 0 || shareEnd(tri, near, far)) continue;
      const w = doubleArea(tri, t) / lengthOf(tri, near);
      const v = doubleArea(tri, triangleOf(e)) / lengthOf(tri, far);
      const thin = Math.abs(v - w) < 1e-3 * w ? 1 / w : Math.log(v / w) / (v - w);
      counts[t] += IN_GAP * overlapOf(tri, near, far) * thin;
    }
  }
  return counts;
}

/** Of the edges besides half-edge d in its triangle the longer one that lies on a segment, or -1. */
function longestSegment(tri: Triangulation, d: number): number {
  const [p, q] = [nextHalf(d), previousHalf(d)].map((h) => (tri.segment[h] < 0 ? -1 : h));
  return p >= 0 && (q < 0 || lengthOf(tri, p) > lengthOf(tri, q)) ? p : q;
}

const endsOf = ({ origin }: Triangulation, h: number): readonly number[] => [origin[h], origin[nextHalf(h)]];

const shareEnd = (tri: Triangulation, h: number, g: number): boolean =>
  endsOf(tri, h).some((v) => endsOf(tri, g).includes(v));

function lengthOf(tri: Triangulation, h: number): number {
  const [a, b] = endsOf(tri, h);
  return Math.hypot(tri.xy[2 * a] - tri.xy[2 * b], tri.xy[2 * a + 1] - tri.xy[2 * b + 1]);
}

/** Length along which two half-edges, seen across the first, run beside each other. */
function overlapOf(tri: Triangulation, h: number, g: number): number {
  const [a, b] = endsOf(tri, h);
  const length = lengthOf(tri, h);
  const [ux, uy] = [0, 1].map((k) => (tri.xy[2 * b + k] - tri.xy[2 * a + k]) / length);
  const [p, q] = endsOf(tri, g).map(
    (v) => ux * (tri.xy[2 * v] - tri.xy[2 * a]) + uy * (tri.xy[2 * v + 1] - tri.xy[2 * a + 1]),
  );
  return Math.max(0, Math.min(length, Math.max(p, q)) - Math.max(0, Math.min(p, q)));
}

const middleOf = ({ xy, origin }: Triangulation, t: number): Point => {
  const [a, b, c] = [2 * origin[3 * t], 2 * origin[3 * t + 1], 2 * origin[3 * t + 2]];
  return [(xy[a] + xy[b] + xy[c]) / 3, (xy[a + 1] + xy[b + 1] + xy[c + 1]) / 3];
};

/** Names what takes most triangles: a wish at a point, or a region and in it the middle of the smallest of the heavy ones. */
function crowded(task: Task, byTriangle: Float64Array, byWish: Float64Array): InputError {
  const { tri, regionNames, wishes, limits } = task;
  const sums = regionNames.map(() => 0);
  for (let t = 0; t < tri.slotCount; t++) if (inUse(tri, t)) sums[tri.region[t]] += byTriangle[t];
  const most = Math.max(...sums);
  const region = sums.indexOf(most);
  const wish = byWish.reduce((best, count, k) => (count > (byWish[best] ?? 0) ? k : best), -1);
  const passed = `the mesh would pass ${limits.maxTriangles} triangles, most of them `;
  if (sumOf(byWish) > most) {
    const { at, maxEdge } = wishes[wish];
    const others = byWish[wish] < 0.5 * sumOf(byWish) ? ' and others like it' : '';
    const wrong = tellWrong([passed, 'for edges of ', { metres: maxEdge }, ' near ', { metres: at }, others]);
    const remedy = 'ask for longer edges there, or at fewer points';
    return new InputError([{ code: 'mesh-too-large', key: `sizeAt.${wish}.maxEdge`, ...wrong, remedy }]);
  }
  const place = middleOf(tri, heaviest(tri, byTriangle, region));
  const wrong = tellWrong([passed, `in '${regionNames[region]}', the smallest there near `, { metres: place }]);
  const key = region === 0 ? 'background' : `regions.${regionNames[region]}`;
  const remedy = 'ask for longer edges or less accuracy, or leave out details far smaller than the section';
  return new InputError([{ code: 'mesh-too-large', key, ...wrong, remedy }]);
}

/** The triangle of a region that has most counts to its area. */
function heaviest(tri: Triangulation, counts: Float64Array, region: number): number {
  let [worst, most] = [-1, 0];
  for (let t = 0; t < tri.slotCount; t++) {
    if (!inUse(tri, t) || tri.region[t] !== region) continue;
    const density = counts[t] / Math.abs(doubleArea(tri, t));
    if (density > most) [worst, most] = [t, density];
  }
  return worst;
}
