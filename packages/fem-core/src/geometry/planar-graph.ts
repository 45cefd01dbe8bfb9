import { checkShapes } from './check-shapes.js';
import type { Curve } from './curve.js';
import { chordCrossings, liesOn, pointOnCurve } from './curve.js';
import type { PointStore } from './point-store.js';
import { pointStore } from './point-store.js';
import type { Point, Section, Shape } from './section.js';
import { cornersOf, offsetBetween, sameCircle, sidesOf, snapOf } from './shapes.js';

/**
 * The drawn lines of a section, cut wherever they meet: no two segments cross, none passes through a point.
 * v points, s segments. Arcs are chains of chords whose ends lie on the circle.
 */
export interface PlanarGraph {
  /** Float64Array(2v), metres. */
  readonly points: Float64Array;
  /** Int32Array(2s): end points. */
  readonly segments: Int32Array;
  /** Int32Array(s): index into curves. */
  readonly segmentToCurve: Int32Array;
  readonly curves: readonly Curve[];
  /** Int32Array(s): index into sideNames, -1 for lines inside the outline. */
  readonly segmentToSide: Int32Array;
  readonly sideNames: readonly string[];
  /** Int32Array(s): the segment of the matched side that corresponds (ends in stored order), or -1. */
  readonly segmentToMatch: Int32Array;
}

/** Chords a full circle starts with; refinement halves them as needed, always on the circle. */
const CHORDS = 16;

/** A straight or curved piece of some shape's border, before it is cut. */
interface Piece {
  readonly from: Point;
  readonly to: Point;
  readonly curve: number;
  readonly side: number;
}

/**
 * Overlay of all shapes of a section.
 * @throws InputError for shapes without area, outlines that cross themselves, coordinates that are not finite, regions
 * wholly outside, sides that cannot be matched.
 */
export function buildPlanarGraph(section: Section): PlanarGraph {
  checkShapes(section);
  const snap = snapOf(section);
  const curves: Curve[] = [];
  const sideNames = sidesOf(section.outline);
  const pieces = piecesOf(section.outline, curves, snap, true);
  const outlineCount = pieces.length;
  for (const region of section.regions) pieces.push(...piecesOf(region.shape, curves, snap, false));

  const store = pointStore(snap);
  const cuts = cutPieces(pieces, curves, snap, store);
  mirrorMatchedCuts(section, pieces, outlineCount, sideNames, cuts, store);
  cutAtSidePoints(pieces, outlineCount, curves, snap, cuts, store);
  partArcsFromChords(pieces, curves, snap, cuts, store);

  const segments: number[] = [];
  const segmentToCurve: number[] = [];
  const segmentToSide: number[] = [];
  const known = new Map<string, number>();
  pieces.forEach((piece, i) => {
    for (const [a, b] of chainOf(piece, cuts[i], store)) {
      const key = pairKey(a, b);
      if (known.has(key)) continue; // a border shared by two shapes; the outline comes first and keeps its side
      known.set(key, segmentToCurve.length);
      segments.push(a, b);
      segmentToCurve.push(piece.curve);
      segmentToSide.push(piece.side);
    }
  });
  const graph = {
    points: Float64Array.from(store.xy),
    segments: Int32Array.from(segments),
    segmentToCurve: Int32Array.from(segmentToCurve),
    curves,
    segmentToSide: Int32Array.from(segmentToSide),
    sideNames,
  };
  return { ...graph, segmentToMatch: matchSegments(section, graph, store) };
}

const isArc = (curve: Curve): curve is Extract<Curve, { kind: 'arc' }> => curve.kind === 'arc';

function piecesOf(shape: Shape, curves: Curve[], snap: number, outline: boolean): Piece[] {
  const curve = curves.length;
  if (shape.kind === 'circle') {
    const { centre, radius } = curves.filter(isArc).find((arc) => sameCircle(arc, shape, snap)) ?? shape;
    curves.push({ kind: 'arc', centre, radius });
    const at = (i: number): Point => {
      const angle = (2 * Math.PI * (i % CHORDS)) / CHORDS;
      return [centre[0] + radius * Math.cos(angle), centre[1] + radius * Math.sin(angle)];
    };
    return Array.from({ length: CHORDS }, (_, i) => ({ from: at(i), to: at(i + 1), curve, side: outline ? 0 : -1 }));
  }
  const corners = cornersOf(shape);
  return corners.map((from, i) => {
    curves.push({ kind: 'line' });
    return { from, to: corners[(i + 1) % corners.length], curve: curve + i, side: outline ? i : -1 };
  });
}

/** For each piece the points at which it must be cut, its ends included. */
function cutPieces(pieces: readonly Piece[], curves: readonly Curve[], snap: number, store: PointStore): Set<number>[] {
  const cuts = pieces.map((piece) => new Set([store.place(...piece.from), store.place(...piece.to)]));
  const order = pieces.map((_, i) => i).sort((i, j) => left(pieces[i], curves) - left(pieces[j], curves));
  for (let a = 0; a < order.length; a++) {
    const p = pieces[order[a]];
    const reach = right(p, curves) + snap;
    for (let b = a + 1; b < order.length; b++) {
      const q = pieces[order[b]];
      if (left(q, curves) > reach) break; // sweep along x: no later piece reaches back to p
      if (p.curve === q.curve && curves[p.curve].kind === 'arc') continue; // chords of one circle
      for (const [x, y] of chordCrossings(p, curves[p.curve], q, curves[q.curve], snap)) {
        const point = store.place(x, y);
        cuts[order[a]].add(point);
        cuts[order[b]].add(point);
      }
    }
  }
  return cuts;
}

const bulge = (piece: Piece, curves: readonly Curve[]): number => {
  const curve = curves[piece.curve]; // an arc stands out of its chord by less than r (1 - cos(pi / CHORDS))
  return curve.kind === 'arc' ? curve.radius * (1 - Math.cos(Math.PI / CHORDS)) : 0;
};
const left = (p: Piece, curves: readonly Curve[]): number => Math.min(p.from[0], p.to[0]) - bulge(p, curves);
const right = (p: Piece, curves: readonly Curve[]): number => Math.max(p.from[0], p.to[0]) + bulge(p, curves);

/** The piece as a chain of segments through its cuts, in order from its start. */
function chainOf(piece: Piece, cuts: ReadonlySet<number>, store: PointStore): [number, number][] {
  const [ux, uy] = [piece.to[0] - piece.from[0], piece.to[1] - piece.from[1]];
  const along = (p: number): number =>
    (store.xy[2 * p] - piece.from[0]) * ux + (store.xy[2 * p + 1] - piece.from[1]) * uy;
  const sorted = [...cuts].sort((p, q) => along(p) - along(q)); // monotone along a chord of 22.5 degrees as well
  const chain: [number, number][] = [];
  for (let i = 1; i < sorted.length; i++) chain.push([sorted[i - 1], sorted[i]]);
  return chain;
}

/** Gives each side of a matched pair the cuts of the other. */
function mirrorMatchedCuts(
  section: Section,
  pieces: readonly Piece[],
  outlineCount: number,
  sideNames: readonly string[],
  cuts: readonly Set<number>[],
  store: PointStore,
): void {
  for (const [from, to] of section.matched ?? []) {
    const shift = offsetBetween(section, from, to);
    if (shift === undefined) continue; // told by checkShapes
    const i = pieces.findIndex((piece, k) => k < outlineCount && sideNames[piece.side] === from);
    const j = pieces.findIndex((piece, k) => k < outlineCount && sideNames[piece.side] === to);
    for (const p of [...cuts[i]]) cuts[j].add(store.place(store.xy[2 * p] + shift[0], store.xy[2 * p + 1] + shift[1]));
    for (const p of [...cuts[j]]) cuts[i].add(store.place(store.xy[2 * p] - shift[0], store.xy[2 * p + 1] - shift[1]));
  }
}

/** Gives drawn pieces that run along the outline its cuts, those mirrored from a matched side included. */
function cutAtSidePoints(
  pieces: readonly Piece[],
  outlineCount: number,
  curves: readonly Curve[],
  snap: number,
  cuts: readonly Set<number>[],
  store: PointStore,
): void {
  for (const p of new Set(cuts.slice(0, outlineCount).flatMap((set) => [...set]))) {
    const at: Point = [store.xy[2 * p], store.xy[2 * p + 1]];
    for (let k = outlineCount; k < pieces.length; k++) {
      if (liesOn(pieces[k], curves[pieces[k].curve], at, snap)) cuts[k].add(p);
    }
  }
}

/** Where an arc and another piece run between the same two points, cuts the arc half-way, so that they differ. */
function partArcsFromChords(
  pieces: readonly Piece[],
  curves: readonly Curve[],
  snap: number,
  cuts: readonly Set<number>[],
  store: PointStore,
): void {
  const chains = pieces.map((piece, i) => chainOf(piece, cuts[i], store));
  const curveOf = new Map<string, number>();
  const shared = new Set<string>();
  chains.forEach((chain, i) => {
    for (const [a, b] of chain) {
      const key = pairKey(a, b);
      const known = curveOf.get(key);
      if (known === undefined) curveOf.set(key, pieces[i].curve);
      else if (!isSameCurve(curves[known], curves[pieces[i].curve])) shared.add(key);
    }
  });
  chains.forEach((chain, i) => {
    const curve = curves[pieces[i].curve];
    if (curve.kind === 'line') return;
    for (const [a, b] of chain) {
      if (!shared.has(pairKey(a, b))) continue;
      const [ax, ay, bx, by] = [store.xy[2 * a], store.xy[2 * a + 1], store.xy[2 * b], store.xy[2 * b + 1]];
      const [x, y] = pointOnCurve(curve, ax, ay, bx, by, 0.5);
      if (Math.hypot(x - 0.5 * (ax + bx), y - 0.5 * (ay + by)) > snap) cuts[i].add(store.place(x, y));
    }
  });
}

const isSameCurve = (p: Curve, q: Curve): boolean =>
  p === q || (p.kind === 'arc' && q.kind === 'arc' && p.centre === q.centre && p.radius === q.radius);

const pairKey = (a: number, b: number): string => (a < b ? `${a},${b}` : `${b},${a}`);

function matchSegments(section: Section, graph: Omit<PlanarGraph, 'segmentToMatch'>, store: PointStore): Int32Array {
  const match = new Int32Array(graph.segmentToCurve.length).fill(-1);
  const { segments, segmentToSide, sideNames } = graph;
  for (const [from, to] of section.matched ?? []) {
    const shift = offsetBetween(section, from, to);
    if (shift === undefined) continue;
    const image = (p: number): number => store.place(store.xy[2 * p] + shift[0], store.xy[2 * p + 1] + shift[1]);
    for (let s = 0; s < match.length; s++) {
      if (sideNames[segmentToSide[s]] !== from) continue;
      const [a, b] = [image(segments[2 * s]), image(segments[2 * s + 1])];
      for (let q = 0; q < match.length; q++) {
        if (sideNames[segmentToSide[q]] !== to) continue;
        const same = segments[2 * q] === a && segments[2 * q + 1] === b;
        const turned = segments[2 * q] === b && segments[2 * q + 1] === a;
        if (!same && !turned) continue;
        if (turned) segments.set([a, b], 2 * q); // stored ends correspond
        match[s] = q;
        match[q] = s;
      }
    }
  }
  return match;
}
