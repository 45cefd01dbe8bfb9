import { InputError, tellWrong } from '../base/fault.js';
import { boxTree, visitMeetings } from './box-tree.js';
import { CHORDS, checkShapes } from './check-shapes.js';
import type { Curve } from './curve.js';
import { chordCrossings, liesOn, pointOnCurve } from './curve.js';
import type { Drawing } from './drawing.js';
import { drawingOf } from './drawing.js';
import { MAX_MEETINGS, MAX_POINTS } from './limits.js';
import type { PointStore } from './point-store.js';
import { pointStore } from './point-store.js';
import type { Point, Section, Shape } from './section.js';
import { cornersOf, sameCircle } from './shapes.js';

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
  /** s lists: numbers, rising, of the drawing's shapes that a step across the segment enters or leaves. */
  readonly segmentToShapes: readonly (readonly number[])[];
  /** Points that no segment ends at and that are vertices all the same. */
  readonly loose: readonly number[];
  readonly drawing: Drawing;
}

/** A straight or curved piece of some shape's border, before it is cut. */
interface Piece {
  readonly from: Point;
  readonly to: Point;
  readonly curve: number;
  readonly side: number;
  readonly shape: number;
}

/** Pieces, and what is drawn of them so far. */
interface Sheet {
  readonly pieces: readonly Piece[];
  /** Pieces of the outlines come first. */
  readonly outlineCount: number;
  readonly curves: readonly Curve[];
  readonly snap: number;
  readonly store: PointStore;
  /** For each piece the points at which it must be cut, its ends included. */
  readonly cuts: readonly Set<number>[];
}

/**
 * Overlay of all shapes of a section.
 * @throws InputError for what `checkShapes` refuses, and for more crossings than `MAX_MEETINGS` and `MAX_POINTS` allow
 */
export function buildPlanarGraph(section: Section): PlanarGraph {
  checkShapes(section);
  const drawing = drawingOf(section);
  const { snap, beyond } = drawing;
  const { pieces, curves, outlineCount } = piecesOf(drawing);
  const store = pointStore(snap);
  const cuts = pieces.map((piece) => new Set([store.place(...piece.from), store.place(...piece.to)]));
  const sheet: Sheet = { pieces, outlineCount, curves, snap, store, cuts };
  cutPieces(sheet);
  mirrorMatchedCuts(drawing, sheet);
  cutAtSidePoints(sheet);
  partArcsFromChords(sheet);
  mirrorMatchedCuts(drawing, sheet); // arcs on sides may have been cut once more
  const loose = beyond === undefined ? [] : [store.place(...beyond.imageCentre)];
  const graph = { ...segmentsOf(sheet), curves, sideNames: drawing.sideNames, loose, drawing };
  const points = Float64Array.from(store.xy);
  return { ...graph, points, segmentToMatch: matchSegments(graph, store) };
}

type Arc = Extract<Curve, { kind: 'arc' }>;

function piecesOf(drawing: Drawing): Pick<Sheet, 'pieces' | 'curves' | 'outlineCount'> {
  const curves: Curve[] = [];
  const pieces: Piece[] = [];
  const centres = pointStore(4 * drawing.snap);
  const arcsAt = new Map<number, number[]>();
  /** The circle's curve: an earlier one where it is drawn again, but for rounding. */
  const curveOf = (shape: Extract<Shape, { kind: 'circle' }>): number => {
    const place = centres.place(...shape.centre);
    const known = arcsAt.get(place) ?? [];
    const same = known.find((c) => sameCircle(curves[c] as Arc, shape, drawing.snap));
    if (same !== undefined) return same;
    arcsAt.set(place, [...known, curves.length]);
    return curves.push({ kind: 'arc', centre: shape.centre, radius: shape.radius }) - 1;
  };
  let sides = 0;
  let outlineCount = 0;
  drawing.shapes.forEach(({ shape }, number) => {
    const outline = number < drawing.outlineCount;
    if (shape.kind === 'circle') {
      const curve = curveOf(shape);
      const at = Array.from({ length: CHORDS }, (_, i) => pointAt(curves[curve] as Arc, (2 * Math.PI * i) / CHORDS));
      at.forEach((from, i) => {
        pieces.push({ from, to: at[(i + 1) % CHORDS], curve, side: outline ? sides : -1, shape: number });
      });
      if (outline) sides++;
    } else {
      const corners = cornersOf(shape);
      corners.forEach((from, i) => {
        const curve = curves.push({ kind: 'line' }) - 1;
        pieces.push({
          from,
          to: corners[(i + 1) % corners.length],
          curve,
          side: outline ? sides++ : -1,
          shape: number,
        });
      });
    }
    if (outline) outlineCount = pieces.length;
  });
  curves.push({ kind: 'line' }); // for pieces of arcs too flat to be told from their chords
  return { pieces, curves, outlineCount };
}

const pointAt = ({ centre, radius }: Arc, angle: number): Point => [
  centre[0] + radius * Math.cos(angle),
  centre[1] + radius * Math.sin(angle),
];

/** Boxes of some pieces, wider by the snapping distance and by what an arc stands out of its chord. */
function boxesOf({ pieces, curves, snap }: Sheet, which: readonly number[]): Float64Array {
  const boxes = new Float64Array(4 * which.length);
  which.forEach((piece, i) => {
    const { from, to, curve } = pieces[piece];
    const arc = curves[curve];
    const out = snap + (arc.kind === 'arc' ? arc.radius * (1 - Math.cos(Math.PI / CHORDS)) : 0);
    boxes[4 * i] = Math.min(from[0], to[0]) - out;
    boxes[4 * i + 1] = Math.min(from[1], to[1]) - out;
    boxes[4 * i + 2] = Math.max(from[0], to[0]) + out;
    boxes[4 * i + 3] = Math.max(from[1], to[1]) + out;
  });
  return boxes;
}

/** Cuts those of some pieces that run through a point there. */
function cutterOf(sheet: Sheet, which: readonly number[]): (x: number, y: number) => void {
  const { pieces, curves, snap, store, cuts } = sheet;
  const tree = boxTree(boxesOf(sheet, which));
  return (x, y) => {
    tree.search(x, y, x, y, (k) => {
      const piece = pieces[which[k]];
      if (liesOn(piece, curves[piece.curve], [x, y], snap)) cuts[which[k]].add(store.place(x, y));
    });
  };
}

function cutPieces(sheet: Sheet): void {
  const { pieces, curves, snap, store, cuts } = sheet;
  const all = visitMeetings(boxesOf(sheet, [...pieces.keys()]), MAX_MEETINGS, (i, j) => {
    const [p, q] = [pieces[i], pieces[j]];
    if (p.curve === q.curve && curves[p.curve].kind === 'arc') return; // chords of one circle
    for (const [x, y] of chordCrossings(p, curves[p.curve], q, curves[q.curve], snap)) {
      const point = store.place(x, y);
      cuts[i].add(point);
      cuts[j].add(point);
    }
    if (store.xy.length > 2 * MAX_POINTS) throw entangled(`meet in more than ${MAX_POINTS} points`);
  });
  if (!all) throw entangled(`come near each other in more than ${MAX_MEETINGS} pairs`);
}

const entangled = (wrong: string): InputError =>
  new InputError([
    { code: 'too-entangled', key: 'regions', wrong: `their lines ${wrong}`, remedy: 'draw less in one' },
  ]);

/** The piece as a chain of segments through its cuts, from its start to its end. */
function chainOf({ store, pieces, cuts }: Sheet, i: number): [number, number][] {
  const { from, to } = pieces[i];
  const [start, end, ...between] = cuts[i]; // sets keep the order in which the ends came first
  if (end === undefined) return []; // shorter than the snapping distance
  const [ux, uy] = [to[0] - from[0], to[1] - from[1]];
  const along = (p: number): number => (store.xy[2 * p] - from[0]) * ux + (store.xy[2 * p + 1] - from[1]) * uy;
  const length = along(end); // monotone along a chord of 22.5 degrees as well
  const within = between.filter((p) => along(p) > 0 && along(p) < length).sort((p, q) => along(p) - along(q));
  const sorted = [start, ...within, end];
  return sorted.slice(1).map((p, k) => [sorted[k], p]);
}

/** Gives each side of a matched pair the cuts of the other. */
function mirrorMatchedCuts(drawing: Drawing, sheet: Sheet): void {
  const { pieces, outlineCount, store, cuts } = sheet;
  for (const { from, to, shift } of drawing.matched) {
    const piecesOn = (sides: ReadonlySet<number>): number[] =>
      pieces.slice(0, outlineCount).flatMap((piece, i) => (sides.has(piece.side) ? [i] : []));
    const [ours, theirs] = [piecesOn(new Set(from)), piecesOn(new Set(to))];
    const carry = (source: readonly number[], target: readonly number[], sign: number): void => {
      const cutAt = cutterOf(sheet, target);
      for (const p of new Set(source.flatMap((i) => [...cuts[i]])))
        cutAt(store.xy[2 * p] + sign * shift[0], store.xy[2 * p + 1] + sign * shift[1]);
    };
    carry(ours, theirs, 1);
    carry(theirs, ours, -1);
  }
}

/** Gives drawn pieces that run along an outline its cuts, those mirrored from a matched side included. */
function cutAtSidePoints(sheet: Sheet): void {
  const { pieces, outlineCount, store, cuts } = sheet;
  const cutAt = cutterOf(sheet, [...pieces.keys()].slice(outlineCount));
  for (const p of new Set(cuts.slice(0, outlineCount).flatMap((set) => [...set])))
    cutAt(store.xy[2 * p], store.xy[2 * p + 1]);
}

/** Where an arc and another piece run between the same two points, cuts the arc half-way, so that they differ. */
function partArcsFromChords(sheet: Sheet): void {
  const { pieces, curves, snap, store, cuts } = sheet;
  if (curves.every((curve) => curve.kind === 'line')) return;
  const chains = pieces.map((_, i) => chainOf(sheet, i));
  const curveOf = new Map<number, number>();
  const shared = new Set<number>();
  chains.forEach((chain, i) => {
    for (const [a, b] of chain) {
      const key = pairKey(a, b);
      const known = curveOf.get(key);
      if (known === undefined) curveOf.set(key, pieces[i].curve);
      else if (known !== pieces[i].curve) shared.add(key);
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

/** One number for two points, in either order; there are fewer than 2^26 points. */
const pairKey = (a: number, b: number): number => (a < b ? a * 0x4000000 + b : b * 0x4000000 + a);

type Segments = Pick<PlanarGraph, 'segments' | 'segmentToCurve' | 'segmentToSide' | 'segmentToShapes'>;

function segmentsOf(sheet: Sheet): Segments {
  const segments: number[] = [];
  const segmentToCurve: number[] = [];
  const segmentToSide: number[] = [];
  const segmentToShapes: number[][] = [];
  const known = new Map<number, number>();
  sheet.pieces.forEach((piece, i) => {
    for (const [a, b] of chainOf(sheet, i)) {
      const key = pairKey(a, b);
      let s = known.get(key); // a border shared by two shapes; the outline comes first and keeps its side
      if (s === undefined) {
        s = segmentToCurve.length;
        known.set(key, s);
        segments.push(a, b);
        segmentToCurve.push(piece.curve);
        segmentToSide.push(piece.side);
        segmentToShapes.push([]);
      }
      const shapes = segmentToShapes[s];
      if (shapes[shapes.length - 1] === piece.shape)
        shapes.pop(); // there and back again
      else shapes.push(piece.shape);
    }
  });
  return {
    segments: Int32Array.from(segments),
    segmentToCurve: Int32Array.from(segmentToCurve),
    segmentToSide: Int32Array.from(segmentToSide),
    segmentToShapes,
  };
}

function matchSegments(graph: Segments & Pick<PlanarGraph, 'drawing'>, store: PointStore): Int32Array {
  const { segments, segmentToSide, drawing } = graph;
  const match = new Int32Array(segmentToSide.length).fill(-1);
  for (const { from, to, shift } of drawing.matched) {
    const [ours, theirs] = [new Set(from), new Set(to)];
    const opposite = new Map<number, number>();
    segmentToSide.forEach((side, q) => {
      if (theirs.has(side)) opposite.set(pairKey(segments[2 * q], segments[2 * q + 1]), q);
    });
    const image = (p: number): number => store.place(store.xy[2 * p] + shift[0], store.xy[2 * p + 1] + shift[1]);
    segmentToSide.forEach((side, s) => {
      if (!ours.has(side)) return;
      const [a, b] = [image(segments[2 * s]), image(segments[2 * s + 1])];
      const q = opposite.get(pairKey(a, b));
      if (q === undefined) return;
      segments.set([a, b], 2 * q); // stored ends correspond
      match[s] = q;
      match[q] = s;
      opposite.delete(pairKey(a, b));
    });
    const alone = segmentToSide.findIndex((side, s) => ours.has(side) && match[s] < 0);
    if (alone >= 0 || opposite.size > 0) throw unmatched(drawing, from, to);
  }
  return match;
}

function unmatched({ sideNames, snap }: Drawing, from: readonly number[], to: readonly number[]): InputError {
  const names = [...from, ...to].slice(0, 6).map((side) => sideNames[side]);
  const wrong = tellWrong([
    'cannot be cut alike: lines meet them at places that differ by about ',
    { metres: Number(snap.toPrecision(2)) },
  ]);
  return new InputError([
    { code: 'not-matching', key: names.join(', '), ...wrong, remedy: 'let lines meet both sides at the same places' },
  ]);
}
