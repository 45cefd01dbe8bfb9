import { boxTree } from '../geometry/box-tree.js';
import type { Chord, Curve } from '../geometry/curve.js';
import { pointOnCurve } from '../geometry/curve.js';
import type { PlanarGraph } from '../geometry/planar-graph.js';
import { tooNear } from './too-near.js';

/**
 * Halves chords until no point lies between a chord and its arc, where it would change sides at a later cut. Chords of
 * matched sides are halved together.
 */
export function clearLenses(graph: PlanarGraph): PlanarGraph {
  const { curves } = graph;
  if (curves.every((curve) => curve.kind === 'line')) return graph;
  const cut: Cuttable = {
    curves,
    points: Array.from(graph.points),
    segments: Array.from(graph.segments),
    segmentToCurve: Array.from(graph.segmentToCurve),
    segmentToSide: Array.from(graph.segmentToSide),
    segmentToMatch: Array.from(graph.segmentToMatch),
    segmentToShapes: [...graph.segmentToShapes],
  };
  const given = cut.segmentToCurve.length;
  for (let round = 0; round < MAX_ROUNDS; round++) {
    const taken = takenLenses(cut);
    if (taken.length === 0) break;
    const done = new Set<number>();
    for (const s of taken) {
      if (done.has(s)) continue;
      const second = halve(cut, s);
      const mate = cut.segmentToMatch[s];
      if (mate < 0) continue;
      done.add(mate);
      const mateSecond = halve(cut, mate);
      cut.segmentToMatch[second] = mateSecond;
      cut.segmentToMatch[mateSecond] = second;
    }
    if (cut.segmentToCurve.length > 4 * given + MAX_HALVINGS) throw tooNear();
  }
  return {
    ...graph,
    points: Float64Array.from(cut.points),
    segments: Int32Array.from(cut.segments),
    segmentToCurve: Int32Array.from(cut.segmentToCurve),
    segmentToSide: Int32Array.from(cut.segmentToSide),
    segmentToMatch: Int32Array.from(cut.segmentToMatch),
    segmentToShapes: cut.segmentToShapes,
  };
}

/** Arcs that need more cuts than this to be told apart are nearer than any mesh of sensible size can fill. */
const MAX_HALVINGS = 10_000;
const MAX_ROUNDS = 20;

type Arc = Extract<Curve, { kind: 'arc' }>;

/** Points and segments of a planar graph, as growing lists. */
interface Cuttable {
  readonly curves: readonly Curve[];
  readonly points: number[];
  readonly segments: number[];
  readonly segmentToCurve: number[];
  readonly segmentToSide: number[];
  readonly segmentToMatch: number[];
  readonly segmentToShapes: (readonly number[])[];
}

/** Segments with a point between their chord and their arc. */
function takenLenses(graph: Cuttable): number[] {
  const { points, segments, curves, segmentToCurve } = graph;
  const boxes = new Float64Array(2 * points.length);
  for (let p = 0; p < points.length / 2; p++)
    boxes.set([points[2 * p], points[2 * p + 1], points[2 * p], points[2 * p + 1]], 4 * p);
  const tree = boxTree(boxes);
  const taken: number[] = [];
  for (let s = 0; s < segmentToCurve.length; s++) {
    const arc = curves[segmentToCurve[s]];
    if (arc.kind === 'line') continue;
    const [a, b] = [segments[2 * s], segments[2 * s + 1]];
    const chord = chordOf(graph, s);
    const [[x0, y0], [x1, y1]] = [chord.from, chord.to];
    const height = arc.radius - Math.hypot(0.5 * (x0 + x1) - arc.centre[0], 0.5 * (y0 + y1) - arc.centre[1]);
    const out = Math.abs(height) + 1e-12 * arc.radius;
    let held = false;
    tree.search(Math.min(x0, x1) - out, Math.min(y0, y1) - out, Math.max(x0, x1) + out, Math.max(y0, y1) + out, (p) => {
      held ||= p !== a && p !== b && lensHolds(chord, arc, points[2 * p], points[2 * p + 1]);
    });
    if (held) taken.push(s);
  }
  return taken;
}

/** The segment keeps its first half; returns the second. */
function halve(cut: Cuttable, s: number): number {
  const { from, to } = chordOf(cut, s);
  const middle = cut.points.length / 2;
  cut.points.push(...pointOnCurve(cut.curves[cut.segmentToCurve[s]], ...from, ...to, 0.5));
  cut.segments.push(middle, cut.segments[2 * s + 1]);
  cut.segments[2 * s + 1] = middle;
  cut.segmentToCurve.push(cut.segmentToCurve[s]);
  cut.segmentToSide.push(cut.segmentToSide[s]);
  cut.segmentToMatch.push(-1);
  return cut.segmentToShapes.push(cut.segmentToShapes[s]) - 1;
}

function chordOf(graph: Cuttable, s: number): Chord {
  const [a, b] = [2 * graph.segments[2 * s], 2 * graph.segments[2 * s + 1]];
  return { from: [graph.points[a], graph.points[a + 1]], to: [graph.points[b], graph.points[b + 1]] };
}

/** The point lies between the chord and its arc, and so within the circle that has the chord as diameter. */
function lensHolds({ from, to }: Chord, arc: Arc, x: number, y: number): boolean {
  if ((from[0] - x) * (to[0] - x) + (from[1] - y) * (to[1] - y) > 0) return false;
  const beyond = (px: number, py: number): number =>
    (to[0] - from[0]) * (py - from[1]) - (to[1] - from[1]) * (px - from[0]);
  if (beyond(x, y) * beyond(arc.centre[0], arc.centre[1]) > 0) return false;
  return Math.hypot(x - arc.centre[0], y - arc.centre[1]) < arc.radius * (1 - 1e-12);
}
