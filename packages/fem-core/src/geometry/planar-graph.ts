import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import type { Curve } from './curve.js';
import { chordCrossings, liesOn, pointOnCurve } from './curve.js';
import type { Point, Section, Shape } from './section.js';

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

/** Points nearer than this share of the section's size are one point. */
export const SNAP = 1e-9;

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

/** Distance in metres within which points of the section are one. */
export function snapOf(section: Section): number {
  const box = boundsOf(section.outline);
  return SNAP * Math.max(box.x1 - box.x0, box.y1 - box.y0);
}

type Circle = Extract<Shape, { kind: 'circle' }>;

/** Circles drawn twice but for rounding; they are cut alike. */
export function sameCircle(p: Pick<Circle, 'centre' | 'radius'>, q: typeof p, snap: number): boolean {
  const apart = Math.hypot(p.centre[0] - q.centre[0], p.centre[1] - q.centre[1]);
  return apart + Math.abs(p.radius - q.radius) <= 4 * snap;
}

/** Names of the sides of an outline, in order. */
export function sidesOf(shape: Shape): string[] {
  switch (shape.kind) {
    case 'rectangle':
      return ['bottom', 'right', 'top', 'left'];
    case 'polygon':
      return shape.corners.map((_, i) => `edge ${i + 1}`);
    case 'circle':
      return ['rim'];
  }
}

export interface Bounds {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
}

export function boundsOf(shape: Shape): Bounds {
  switch (shape.kind) {
    case 'rectangle':
      return {
        x0: Math.min(shape.from[0], shape.to[0]),
        y0: Math.min(shape.from[1], shape.to[1]),
        x1: Math.max(shape.from[0], shape.to[0]),
        y1: Math.max(shape.from[1], shape.to[1]),
      };
    case 'polygon': {
      const bounds = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity };
      for (const [x, y] of shape.corners) {
        bounds.x0 = Math.min(bounds.x0, x);
        bounds.x1 = Math.max(bounds.x1, x);
        bounds.y0 = Math.min(bounds.y0, y);
        bounds.y1 = Math.max(bounds.y1, y);
      }
      return bounds;
    }
    case 'circle': {
      const [x, y] = shape.centre;
      return { x0: x - shape.radius, y0: y - shape.radius, x1: x + shape.radius, y1: y + shape.radius };
    }
  }
}

/** Corners of a rectangle or polygon, counter-clockwise from the first for rectangles, as drawn for polygons. */
function cornersOf(shape: Exclude<Shape, { kind: 'circle' }>): readonly Point[] {
  if (shape.kind === 'polygon') return shape.corners;
  const { x0, y0, x1, y1 } = boundsOf(shape);
  return [
    [x0, y0],
    [x1, y0],
    [x1, y1],
    [x0, y1],
  ];
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

/** Points by number, one for all that lie within the snapping distance (grid of twice that size, four cells looked at). */
interface PointStore {
  readonly xy: number[];
  /** Number of the point there, made if it is new. */
  place(x: number, y: number): number;
}

function pointStore(snap: number): PointStore {
  const xy: number[] = [];
  const cells = new Map<string, number[]>();
  const size = 2 * snap;
  return {
    xy,
    place(x, y) {
      const cx = Math.floor(x / size - 0.5);
      const cy = Math.floor(y / size - 0.5);
      for (let i = cx; i <= cx + 1; i++) {
        for (let j = cy; j <= cy + 1; j++) {
          for (const p of cells.get(`${i},${j}`) ?? []) {
            if (Math.hypot(xy[2 * p] - x, xy[2 * p + 1] - y) <= snap) return p;
          }
        }
      }
      const p = xy.length / 2;
      xy.push(x, y);
      const key = `${Math.floor(x / size)},${Math.floor(y / size)}`;
      const cell = cells.get(key);
      if (cell === undefined) cells.set(key, [p]);
      else cell.push(p);
      return p;
    },
  };
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

/** Offset that carries side `from` onto side `to`, or undefined where they are not parallel and equal. */
function offsetBetween(section: Section, from: string, to: string): Point | undefined {
  if (section.outline.kind === 'circle') return undefined;
  const corners = cornersOf(section.outline);
  const names = sidesOf(section.outline);
  const i = names.indexOf(from);
  const j = names.indexOf(to);
  if (i < 0 || j < 0) return undefined;
  const [a, b] = [corners[i], corners[(i + 1) % corners.length]];
  const [c, d] = [corners[j], corners[(j + 1) % corners.length]];
  const size = Math.hypot(b[0] - a[0], b[1] - a[1]);
  const near = (p: Point, q: Point): boolean => Math.hypot(p[0] - q[0], p[1] - q[1]) <= 1e-9 * size;
  const shift: Point = [d[0] - a[0], d[1] - a[1]]; // outlines run round, so the start of one meets the end of the other
  if (near([b[0] + shift[0], b[1] + shift[1]], c)) return shift;
  const straight: Point = [c[0] - a[0], c[1] - a[1]];
  return near([b[0] + straight[0], b[1] + straight[1]], d) ? straight : undefined;
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

/** Gathers every fault of the drawing. */
function checkShapes(section: Section): void {
  const faults: Fault[] = [];
  const tell = (code: string, key: string, wrong: string, remedy: string): void => {
    faults.push({ code, key, wrong, remedy });
  };
  const shapes: readonly (readonly [string, Shape])[] = [
    ['outline', section.outline],
    ...section.regions.map((region) => [region.name, region.shape] as const),
  ];
  for (const [name, shape] of shapes) {
    const box = boundsOf(shape);
    if (![box.x0, box.y0, box.x1, box.y1].every(Number.isFinite)) {
      tell('not-finite', name, 'has a coordinate that is not a finite number', 'give every coordinate in metres');
    } else if (!(box.x1 > box.x0 && box.y1 > box.y0)) {
      tell('no-area', name, 'has no area', 'give corners that span a width and a height');
    } else if (shape.kind === 'polygon' && shape.corners.length < 3) {
      tell('too-few-corners', name, `has ${shape.corners.length} corners`, 'a polygon needs three or more');
    } else if (shape.kind === 'polygon') {
      const crossing = selfCrossing(shape.corners);
      if (crossing !== undefined) {
        tell(
          'outline-crosses-itself',
          name,
          `crosses itself near (${crossing.join(', ')}) m`,
          'order the corners round the shape',
        );
      }
    }
  }
  const outer = boundsOf(section.outline);
  for (const region of section.regions) {
    const box = boundsOf(region.shape);
    const apart = box.x0 >= outer.x1 || box.x1 <= outer.x0 || box.y0 >= outer.y1 || box.y1 <= outer.y0;
    if (apart) tell('outside', region.name, 'lies outside the outline', 'move it inside or enlarge the outline');
  }
  const names = [section.background, ...section.regions.map((region) => region.name)];
  const twice = names.find((name, i) => names.indexOf(name) !== i);
  if (twice !== undefined) tell('name-twice', twice, 'names two regions', 'give each region a name of its own');
  const sizes = [[section.background, section.maxEdge] as const].concat(
    section.regions.map((r) => [r.name, r.maxEdge]),
  );
  for (const [name, maxEdge] of sizes) {
    if (maxEdge !== undefined && !(maxEdge > 0)) {
      tell('bad-edge-length', name, `maxEdge must be more than 0 m, got ${maxEdge}`, 'leave it out for no limit');
    }
  }
  const paired = (section.matched ?? []).flat();
  const again = paired.find((side, i) => paired.indexOf(side) !== i);
  if (again !== undefined) tell('matched-twice', again, 'is matched twice', 'match a side with one other side');
  for (const [from, to] of section.matched ?? []) {
    if (offsetBetween(section, from, to) === undefined) {
      tell(
        'not-matching',
        `${from}, ${to}`,
        'are not sides of equal length and direction',
        `sides here are: ${sidesOf(section.outline).join(', ')}`,
      );
    }
  }
  if (faults.length > 0) throw new InputError(faults);
}

/** A point where a polygon's border meets itself other than at neighbouring corners. */
function selfCrossing(corners: readonly Point[]): Point | undefined {
  const n = corners.length;
  const box = boundsOf({ kind: 'polygon', corners });
  const snap = SNAP * Math.max(box.x1 - box.x0, box.y1 - box.y0);
  const line: Curve = { kind: 'line' };
  for (let i = 0; i < n; i++) {
    const p = { from: corners[i], to: corners[(i + 1) % n] };
    for (let j = i + 2; j < n; j++) {
      if (i === 0 && j === n - 1) continue;
      const hit = chordCrossings(p, line, { from: corners[j], to: corners[(j + 1) % n] }, line, snap)[0];
      if (hit !== undefined) return hit;
    }
  }
  return undefined;
}

/** True when the point lies inside the shape (its border counts for neither side reliably). */
export function contains(shape: Shape, x: number, y: number): boolean {
  switch (shape.kind) {
    case 'rectangle': {
      const { x0, y0, x1, y1 } = boundsOf(shape);
      return x > x0 && x < x1 && y > y0 && y < y1;
    }
    case 'circle':
      return Math.hypot(x - shape.centre[0], y - shape.centre[1]) < shape.radius;
    case 'polygon': {
      let inside = false; // ray towards +x, Jordan
      const { corners } = shape;
      for (let i = 0, j = corners.length - 1; i < corners.length; j = i++) {
        const [xi, yi] = corners[i];
        const [xj, yj] = corners[j];
        if (yi > y !== yj > y && x < xi + ((y - yi) / (yj - yi)) * (xj - xi)) inside = !inside;
      }
      return inside;
    }
  }
}
