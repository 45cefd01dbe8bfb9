import { InputError, tellWrong } from '../base/fault.js';
import type { Drawing } from '../geometry/drawing.js';
import type { PlanarGraph } from '../geometry/planar-graph.js';
import { boundsOf, contains, cornersOf, sizeOf } from '../geometry/shapes.js';
import type { Triangulation } from './triangulation.js';
import { triangleOf } from './triangulation.js';

/** Region number of what lies outside the outline; such triangles are removed. */
export const OUTSIDE = -1;

/**
 * Gives each triangle its region, without a question of place that rounding could answer wrongly: outside all lines one is
 * in no shape, and each segment crossed enters or leaves the shapes whose border it is.
 * @param outermost  a triangle that lies outside all shapes
 * @throws InputError for regions that cover nothing within the outline, or overhang the outline of an open section
 */
export function nameRegions(tri: Triangulation, graph: PlanarGraph, outermost: number): void {
  const { drawing } = graph;
  const present = new Uint8Array(drawing.shapes.length);
  const done = new Uint8Array(tri.slotCount);
  const open: { readonly seed: number; readonly within: readonly number[] }[] = [];
  // Points that all became one, or lie on one line, make no triangle: nothing of the outline is there.
  if (outermost >= 0 && outermost < tri.slotCount) open.push({ seed: outermost, within: [] });
  for (let part = open.pop(); part !== undefined; part = open.pop()) {
    if (done[part.seed] === 1) continue;
    const region = regionWithin(drawing, part.within);
    if (region !== OUTSIDE) for (const shape of part.within) present[shape] = 1;
    const list = [part.seed];
    done[part.seed] = 1;
    for (let i = 0; i < list.length; i++) {
      tri.region[list[i]] = region;
      for (let h = 3 * list[i]; h < 3 * list[i] + 3; h++) {
        const g = tri.twin[h];
        if (g < 0 || done[triangleOf(g)] === 1) continue;
        const seed = triangleOf(g);
        const s = tri.segment[h];
        if (s >= 0) {
          open.push({ seed, within: toggled(part.within, graph.segmentToShapes[s]) });
          continue;
        }
        done[seed] = 1;
        list.push(seed);
      }
    }
  }
  refuseAbsent(drawing, present);
}

/** Numbers that are in one of two rising lists and not in the other, rising. */
function toggled(p: readonly number[], q: readonly number[]): number[] {
  const out: number[] = [];
  let [i, j] = [0, 0];
  while (i < p.length || j < q.length) {
    if (j >= q.length || p[i] < q[j]) out.push(p[i++]);
    else if (i >= p.length || q[j] < p[i]) out.push(q[j++]);
    else [i, j] = [i + 1, j + 1];
  }
  return out;
}

function regionWithin(drawing: Drawing, within: readonly number[]): number {
  const { shapes, outlineCount, ground } = drawing;
  if (within.length === 0) return OUTSIDE;
  const top = within[within.length - 1];
  if (ground !== undefined && top > ground && top >= outlineCount && !within.includes(ground)) {
    throw new InputError([
      {
        code: 'overhangs-outline',
        key: shapes[top].key,
        wrong: 'reaches out of the outline of an open section',
        remedy: 'draw the outline round all regions',
      },
    ]);
  }
  return within[0] < outlineCount ? shapes[top].region : OUTSIDE;
}

/** Regions all of which a later one covers are there; those that nothing is left of without one are not. */
function refuseAbsent({ shapes, snap, ground = 0 }: Drawing, present: Uint8Array): void {
  const outline = shapes[ground].shape;
  const faults = shapes.flatMap(({ shape, key }, i) => {
    if (present[i] === 1) return [];
    const [x, y] = shape.kind === 'circle' ? shape.centre : cornersOf(shape)[0];
    const small = sizeOf(boundsOf(shape)) < 100 * snap || contains(outline, x, y);
    const thin = tellWrong(['is thinner than ', { metres: snap }, ', the distance within which points are one']);
    if (i <= ground) return [{ code: 'no-area', key, ...thin, remedy: 'give it a width and a height' }];
    return small
      ? [{ code: 'too-small', key, ...thin, remedy: 'leave it out, or draw it on a smaller section' }]
      : [
          {
            code: 'outside-outline',
            key,
            wrong: 'lies outside the outline',
            remedy: 'move it inside or enlarge the outline',
          },
        ];
  });
  if (faults.length > 0) throw new InputError(faults);
}

/** Int32Array(2s): regions to the left and to the right of each segment. */
export function regionsBeside(tri: Triangulation): Int32Array {
  const beside = new Int32Array(2 * tri.segments.half.length);
  for (let h = 0; h < 3 * tri.slotCount; h++) {
    const s = tri.segment[h];
    if (s >= 0) beside[2 * s + (tri.segments.from[s] === tri.origin[h] ? 0 : 1)] = tri.region[triangleOf(h)];
  }
  return beside;
}

/** Gives each triangle the region `beside` has for the segment that bounds its part; `at` tells a segment's place there. */
export function nameRegionsBy(tri: Triangulation, beside: Int32Array, at: (segment: number) => number): void {
  const done = new Uint8Array(tri.slotCount);
  for (let first = 0; first < 3 * tri.slotCount; first++) {
    const border = tri.segment[first];
    if (border < 0 || done[triangleOf(first)] === 1) continue;
    const region = beside[2 * at(border) + (tri.segments.from[border] === tri.origin[first] ? 0 : 1)];
    const part = [triangleOf(first)];
    done[part[0]] = 1;
    for (let i = 0; i < part.length; i++) {
      tri.region[part[i]] = region;
      for (let h = 3 * part[i]; h < 3 * part[i] + 3; h++) {
        const g = tri.twin[h];
        if (g < 0 || tri.segment[h] >= 0 || done[triangleOf(g)] === 1) continue;
        done[triangleOf(g)] = 1;
        part.push(triangleOf(g));
      }
    }
  }
}
