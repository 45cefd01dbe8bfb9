import type { Steps } from '../base/steps.js';
import { SNAP } from '../geometry/limits.js';
import { isUnfolded } from './jacobian.js';
import { middleOnArc } from './middle-on-arc.js';
import type { QualityLimits, RefineProgress } from './refine.js';
import { refine } from './refine.js';
import type { Triangulation } from './triangulation.js';
import { inUse } from './triangulation.js';

const ROUNDS = 20;

/** Arcs that stand off their chords by no more than this many snapping distances are as good as straight. */
const FLAT = 4;

/**
 * Refines until no triangle is turned over by its curved edges: near sharp corners triangles may be so flat that an arc
 * bulges through them, and are then wanted half as long. Where lines touch but for the snapping distance, arcs that are
 * told from their chords by hardly more than that are made straight.
 */
export function* unfold(tri: Triangulation, limits: QualityLimits): Steps<RefineProgress, void> {
  const straight = tri.curves.findIndex((curve) => curve.kind === 'line');
  const flat = FLAT * SNAP * sizeOfAll(tri);
  for (let round = 0; round < ROUNDS; round++) {
    let again = false;
    for (let t = 0; t < tri.slotCount; t++) {
      if (!inUse(tri, t)) continue;
      const longest = longestArc(tri, t);
      if (longest === 0 || isUnfolded(...nodesOf(tri, t))) continue;
      again = true;
      if (straight < 0 || !straighten(tri, t, straight, flat)) tri.size[t] = Math.min(tri.size[t], 0.5 * longest);
    }
    if (!again) return;
    yield* refine(tri, limits);
  }
}

/** Makes those arcs of a triangle lines that are no farther than `flat` from their chords; false where there are none. */
function straighten(tri: Triangulation, t: number, line: number, flat: number): boolean {
  const { segment, segments, curves } = tri;
  const [x, y] = nodesOf(tri, t);
  let some = false;
  for (let k = 0; k < 3; k++) {
    const [i, j] = [(k + 1) % 3, (k + 2) % 3];
    const s = segment[3 * t + i];
    if (s < 0 || curves[segments.curve[s]].kind === 'line') continue;
    if (Math.hypot(x[3 + k] - 0.5 * (x[i] + x[j]), y[3 + k] - 0.5 * (y[i] + y[j])) > flat) continue;
    segments.curve[s] = line;
    some = true;
  }
  return some;
}

/** The longer of width and height of all that is meshed. */
function sizeOfAll({ xy, vertexCount }: Triangulation): number {
  const box = [Infinity, Infinity, -Infinity, -Infinity];
  for (let v = 0; v < vertexCount; v++) {
    for (const i of [0, 1]) {
      box[i] = Math.min(box[i], xy[2 * v + i]);
      box[2 + i] = Math.max(box[2 + i], xy[2 * v + i]);
    }
  }
  return Math.max(box[2] - box[0], box[3] - box[1]);
}

/** Chord of the longest of a triangle's edges that lie on arcs, 0 of none. */
function longestArc(tri: Triangulation, t: number): number {
  const { xy, origin, segment, segments, curves } = tri;
  let longest = 0;
  for (let k = 0; k < 3; k++) {
    const s = segment[3 * t + k];
    if (s < 0 || curves[segments.curve[s]].kind === 'line') continue;
    const [a, b] = [2 * origin[3 * t + k], 2 * origin[3 * t + ((k + 1) % 3)]];
    longest = Math.max(longest, Math.hypot(xy[a] - xy[b], xy[a + 1] - xy[b + 1]));
  }
  return longest;
}

function nodesOf(tri: Triangulation, t: number): [number[], number[]] {
  const { xy, origin, segment, segments, curves } = tri;
  const corners = [0, 1, 2].map((k) => 2 * origin[3 * t + k]);
  const x = corners.map((v) => xy[v]);
  const y = corners.map((v) => xy[v + 1]);
  for (let k = 0; k < 3; k++) {
    const [i, j] = [(k + 1) % 3, (k + 2) % 3];
    const s = segment[3 * t + i]; // from corner i to j, opposite k
    const curve = s < 0 ? undefined : curves[segments.curve[s]];
    const round = curve?.kind === 'arc' ? middleOnArc(curve, x[i], y[i], x[j], y[j]) : undefined;
    x.push(round?.[0] ?? 0.5 * (x[i] + x[j]));
    y.push(round?.[1] ?? 0.5 * (y[i] + y[j]));
  }
  return [x, y];
}
