import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import type { QualityLimits } from './refine.js';
import type { Triangulation } from './triangulation.js';
import { inUse, nextHalf, previousHalf, triangleOf } from './triangulation.js';

/**
 * Runs a refinement; where it would pass `limits.maxTriangles`, the fault tells of the region and the place where the
 * triangles pile up. Wishes for edges so short, and gaps so thin, that the limit must be passed are told of at once.
 * @throws InputError 'mesh-too-large'
 */
export function tellCrowd(
  tri: Triangulation,
  regionNames: readonly string[],
  limits: QualityLimits,
  refinement: () => void,
): void {
  const weights = leastCounts(tri);
  let least = 0;
  for (let t = 0; t < tri.slotCount; t++) least += weights[t];
  if (least > limits.maxTriangles) throw crowded(tri, regionNames, weights, limits);
  try {
    refinement();
  } catch (error) {
    if (!(error instanceof InputError && error.faults[0].code === 'mesh-too-large')) throw error;
    const ones = Float64Array.from({ length: tri.slotCount }, (_, t) => (inUse(tri, t) ? 1 : 0));
    throw crowded(tri, regionNames, ones, limits);
  }
}

/** Triangles made in and beside a gap as long as it is wide; five to seven are usual, half a one is the least. */
const IN_GAP = 5;

/**
 * Triangles that each triangle must be cut into at least, of either cause: no triangle with edges of at most h has more
 * area than sqrt(3)/4 h^2; and between two segments that run along each other for a length l at a distance w, triangles
 * without small angles are little longer than w. Where w goes from w1 to w2, 1/w is ln(w2/w1)/(w2 - w1) in the mean.
 */
function leastCounts(tri: Triangulation): Float64Array {
  const counts = new Float64Array(tri.slotCount);
  for (let t = 0; t < tri.slotCount; t++) {
    if (!inUse(tri, t)) continue;
    counts[t] = doubleArea(tri, t) / (0.5 * Math.sqrt(3) * tri.size[t] ** 2);
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

function doubleArea({ xy, origin }: Triangulation, t: number): number {
  const [a, b, c] = [2 * origin[3 * t], 2 * origin[3 * t + 1], 2 * origin[3 * t + 2]];
  return (xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a]);
}

/** Names the region with most weight, and in it the middle of the smallest triangle among the heavy ones. */
function crowded(
  tri: Triangulation,
  regionNames: readonly string[],
  weights: Float64Array,
  limits: QualityLimits,
): InputError {
  const sums = regionNames.map(() => 0);
  for (let t = 0; t < tri.slotCount; t++) if (inUse(tri, t)) sums[tri.region[t]] += weights[t];
  const region = sums.indexOf(Math.max(...sums));
  let worst = -1;
  let most = 0;
  for (let t = 0; t < tri.slotCount; t++) {
    if (!inUse(tri, t) || tri.region[t] !== region) continue;
    const density = weights[t] / Math.abs(doubleArea(tri, t));
    if (density > most) [worst, most] = [t, density];
  }
  const corners = [0, 1, 2].map((k) => tri.origin[3 * worst + k]);
  const [x, y] = [0, 1].map((k) => corners.reduce((sum, v) => sum + tri.xy[2 * v + k] / 3, 0));
  const fault: Fault = {
    code: 'mesh-too-large',
    key: region === 0 ? 'background' : `regions.${regionNames[region]}`,
    wrong: `the mesh would pass ${limits.maxTriangles} triangles, most of them in '${regionNames[region]}', the smallest there near (${x.toPrecision(6)}, ${y.toPrecision(6)}) m`,
    remedy: 'ask for longer edges or less accuracy, or leave out details far smaller than the section',
  };
  return new InputError([fault]);
}
