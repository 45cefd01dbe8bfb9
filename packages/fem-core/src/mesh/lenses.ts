import type { Chord, Curve } from '../geometry/curve.js';
import { pointOnCurve } from '../geometry/curve.js';
import type { PlanarGraph } from '../geometry/planar-graph.js';
import { tooNear } from './too-near.js';

/** Halves chords until no point lies between a chord and its arc, where it would change sides at a later cut. */
export function clearLenses(graph: PlanarGraph): PlanarGraph {
  const { curves } = graph;
  if (curves.every((curve) => curve.kind === 'line')) return graph;
  const cut: Cuttable = {
    curves,
    points: Array.from(graph.points),
    segments: Array.from(graph.segments),
    segmentToCurve: Array.from(graph.segmentToCurve),
  };
  const segmentToSide = Array.from(graph.segmentToSide);
  const segmentToMatch = Array.from(graph.segmentToMatch);
  const given = segmentToSide.length;
  for (let s = 0; s < cut.segmentToCurve.length; s++) {
    const curve = curves[cut.segmentToCurve[s]];
    if (curve.kind !== 'arc') continue;
    for (let halvings = 0; halvings < 20 && isLensTaken(cut, s, curve); halvings++) {
      const b = cut.segments[2 * s + 1];
      const m = cut.points.length / 2;
      const { from, to } = chordOf(cut, s);
      cut.points.push(...pointOnCurve(curve, ...from, ...to, 0.5));
      cut.segments[2 * s + 1] = m;
      cut.segments.push(m, b);
      cut.segmentToCurve.push(cut.segmentToCurve[s]);
      segmentToSide.push(segmentToSide[s]);
      segmentToMatch.push(-1);
      if (cut.segmentToCurve.length > given + MAX_HALVINGS) throw tooNear();
    }
  }
  return {
    points: Float64Array.from(cut.points),
    segments: Int32Array.from(cut.segments),
    segmentToCurve: Int32Array.from(cut.segmentToCurve),
    curves,
    segmentToSide: Int32Array.from(segmentToSide),
    sideNames: graph.sideNames,
    segmentToMatch: Int32Array.from(segmentToMatch),
  };
}

/** Arcs that need more cuts than this to be told apart are nearer than any mesh of sensible size can fill. */
const MAX_HALVINGS = 10_000;

type Arc = Extract<Curve, { kind: 'arc' }>;

/** Points and segments of a planar graph, as growing lists. */
interface Cuttable {
  readonly curves: readonly Curve[];
  readonly points: number[];
  readonly segments: number[];
  readonly segmentToCurve: number[];
}

export function chordOf(graph: Pick<PlanarGraph, 'points' | 'segments'> | Cuttable, s: number): Chord {
  const [a, b] = [2 * graph.segments[2 * s], 2 * graph.segments[2 * s + 1]];
  return { from: [graph.points[a], graph.points[a + 1]], to: [graph.points[b], graph.points[b + 1]] };
}

/** A point lies between the chord of segment s and its arc. */
function isLensTaken(graph: Cuttable, s: number, arc: Arc): boolean {
  const { points, segments } = graph;
  const [a, b] = [segments[2 * s], segments[2 * s + 1]];
  const chord = chordOf(graph, s);
  for (let p = 0; p < points.length / 2; p++) {
    if (p !== a && p !== b && lensHolds(chord, arc, points[2 * p], points[2 * p + 1])) return true;
  }
  return false;
}

/** The point lies between the chord and its arc, and so within the circle that has the chord as diameter. */
export function lensHolds({ from, to }: Chord, arc: Arc, x: number, y: number): boolean {
  if ((from[0] - x) * (to[0] - x) + (from[1] - y) * (to[1] - y) > 0) return false;
  const beyond = (px: number, py: number): number =>
    (to[0] - from[0]) * (py - from[1]) - (to[1] - from[1]) * (px - from[0]);
  if (beyond(x, y) * beyond(arc.centre[0], arc.centre[1]) > 0) return false;
  return Math.hypot(x - arc.centre[0], y - arc.centre[1]) < arc.radius * (1 - 1e-12);
}
