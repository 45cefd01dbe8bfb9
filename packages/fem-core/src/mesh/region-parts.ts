import type { PlanarGraph } from '../geometry/planar-graph.js';
import type { Section, Shape } from '../geometry/section.js';
import { boundsOf, contains, sameCircle, snapOf } from '../geometry/shapes.js';
import { chordOf, lensHolds } from './lenses.js';
import type { Triangulation } from './triangulation.js';
import { triangleOf, turn } from './triangulation.js';

/** Region number of what lies outside the outline; such triangles are removed. */
export const OUTSIDE = -1;

/** Gives each part bounded by segments, a list of triangles, the region it is judged to be. */
export function nameRegions(tri: Triangulation, judge: (part: readonly number[]) => number): void {
  const done = new Uint8Array(tri.slotCount);
  for (let seed = 0; seed < tri.slotCount; seed++) {
    if (done[seed] === 1) continue;
    const part = [seed];
    done[seed] = 1;
    for (let i = 0; i < part.length; i++) {
      for (let h = 3 * part[i]; h < 3 * part[i] + 3; h++) {
        const g = tri.twin[h];
        if (tri.segment[h] >= 0 || g < 0 || done[triangleOf(g)] === 1) continue;
        done[triangleOf(g)] = 1;
        part.push(triangleOf(g));
      }
    }
    const region = judge(part);
    for (const t of part) tri.region[t] = region;
  }
}

export function largestOf(tri: Triangulation, part: readonly number[]): number {
  return part.reduce((largest, t) => (area(tri, t) > area(tri, largest) ? t : largest));
}

/** Int32Array(2s): regions to the left and to the right of each segment. */
export function regionsBeside(tri: Triangulation): Int32Array {
  const beside = new Int32Array(2 * tri.segments.half.length);
  for (let h = 0; h < 3 * tri.slotCount; h++) {
    const s = tri.segment[h];
    if (s >= 0) beside[2 * s + (isForward(tri, h) ? 0 : 1)] = tri.region[triangleOf(h)];
  }
  return beside;
}

const isForward = (tri: Triangulation, h: number): boolean => tri.segments.from[tri.segment[h]] === tri.origin[h];

/** Region of a part by any segment that bounds it, whose regions stand in `beside` from place at(segment) on. */
export function regionBy(
  tri: Triangulation,
  part: readonly number[],
  at: (segment: number) => number,
  beside: Int32Array,
): number {
  for (const t of part) {
    for (let h = 3 * t; h < 3 * t + 3; h++) {
      if (tri.segment[h] >= 0) return beside[at(tri.segment[h]) + (isForward(tri, h) ? 0 : 1)];
    }
  }
  throw new Error('regionBy: a part without a border');
}

export function regionAt(section: Section, graph: PlanarGraph, x: number, y: number): number {
  const snap = snapOf(section);
  const box = boundsOf(section.outline);
  const out = x < box.x0 || x > box.x1 || y < box.y0 || y > box.y1;
  if (out || !drawnRound(section.outline, graph, snap, x, y)) return OUTSIDE;
  for (let i = section.regions.length - 1; i >= 0; i--) {
    if (drawnRound(section.regions[i].shape, graph, snap, x, y)) return i + 1;
  }
  return 0;
}

/** The point lies in the shape as the segments draw it: what is between a chord and its arc is still outside. */
function drawnRound(shape: Shape, graph: PlanarGraph, snap: number, x: number, y: number): boolean {
  if (!contains(shape, x, y)) return false;
  if (shape.kind !== 'circle') return true;
  for (let s = 0; s < graph.segmentToCurve.length; s++) {
    const curve = graph.curves[graph.segmentToCurve[s]];
    if (curve.kind !== 'arc' || !sameCircle(curve, shape, snap)) continue; // drawn twice, it keeps one set of chords
    if (lensHolds(chordOf(graph, s), curve, x, y)) return false;
  }
  return true;
}

export function middle(tri: Triangulation, t: number): [number, number] {
  let [x, y] = [0, 0];
  for (let h = 3 * t; h < 3 * t + 3; h++) {
    x += tri.xy[2 * tri.origin[h]] / 3;
    y += tri.xy[2 * tri.origin[h] + 1] / 3;
  }
  return [x, y];
}

const area = (tri: Triangulation, t: number): number => {
  const c = tri.origin[3 * t + 2];
  return turn(tri, tri.origin[3 * t], tri.origin[3 * t + 1], tri.xy[2 * c], tri.xy[2 * c + 1]);
};
