import type { Point } from './section.js';

/** A drawn line that element edges follow. */
export type Curve =
  | { readonly kind: 'line' }
  | {
      readonly kind: 'arc';
      /** Of its circle. */
      readonly centre: Point;
      /** Metres. */
      readonly radius: number;
    };

export interface Chord {
  readonly from: Point;
  readonly to: Point;
}

/**
 * Point of the curve at share s of the way from a to b, both on the curve: along the line, or by angle on the (shorter)
 * arc, so that halves of an arc are equal.
 */
export function pointOnCurve(curve: Curve, ax: number, ay: number, bx: number, by: number, s: number): Point {
  if (curve.kind === 'line')
    return s === 0.5 ? [0.5 * (ax + bx), 0.5 * (ay + by)] : [ax + s * (bx - ax), ay + s * (by - ay)];
  const [cx, cy] = curve.centre;
  const start = Math.atan2(ay - cy, ax - cx);
  const turn = Math.atan2((ax - cx) * (by - cy) - (ay - cy) * (bx - cx), (ax - cx) * (bx - cx) + (ay - cy) * (by - cy));
  const angle = start + s * turn;
  return [cx + curve.radius * Math.cos(angle), cy + curve.radius * Math.sin(angle)];
}

/** Points two border pieces have in common, ends included; parallel overlapping lines give the ends that lie on the other. */
export function chordCrossings(p: Chord, pCurve: Curve, q: Chord, qCurve: Curve, snap: number): Point[] {
  const hits: Point[] = [];
  if (pCurve.kind === 'line' && qCurve.kind === 'line') lineWithLine(p, q, snap, hits);
  else if (pCurve.kind === 'line' && qCurve.kind === 'arc') lineWithArc(p, q, qCurve, snap, hits);
  else if (pCurve.kind === 'arc' && qCurve.kind === 'line') lineWithArc(q, p, pCurve, snap, hits);
  else if (pCurve.kind === 'arc' && qCurve.kind === 'arc') arcWithArc(p, pCurve, q, qCurve, snap, hits);
  return hits;
}

function lineWithLine(p: Chord, q: Chord, snap: number, hits: Point[]): void {
  if (boxesApart(p, q, snap) || isBeside(p, q, snap) || isBeside(q, p, snap)) return;
  for (const end of [q.from, q.to]) if (nearLine(p, end, snap)) hits.push(end);
  for (const end of [p.from, p.to]) if (nearLine(q, end, snap)) hits.push(end);
  if (hits.length > 0) return; // they touch at an end or overlap; a further crossing would be the same point
  const [px, py] = [p.to[0] - p.from[0], p.to[1] - p.from[1]];
  const [qx, qy] = [q.to[0] - q.from[0], q.to[1] - q.from[1]];
  const cross = px * qy - py * qx;
  if (cross === 0) return;
  const [dx, dy] = [q.from[0] - p.from[0], q.from[1] - p.from[1]];
  const s = (dx * qy - dy * qx) / cross;
  const t = (dx * py - dy * px) / cross;
  if (s > 0 && s < 1 && t > 0 && t < 1) hits.push([p.from[0] + s * px, p.from[1] + s * py]);
}

function boxesApart(p: Chord, q: Chord, snap: number): boolean {
  const apart = (i: 0 | 1): boolean =>
    Math.max(p.from[i], p.to[i]) + snap < Math.min(q.from[i], q.to[i]) ||
    Math.max(q.from[i], q.to[i]) + snap < Math.min(p.from[i], p.to[i]);
  return apart(0) || apart(1);
}

/** Both ends of q lie on one side of the line through p, farther than the snapping distance. */
function isBeside(p: Chord, q: Chord, snap: number): boolean {
  const [ux, uy] = [p.to[0] - p.from[0], p.to[1] - p.from[1]];
  const off = snap * Math.hypot(ux, uy);
  const from = ux * (q.from[1] - p.from[1]) - uy * (q.from[0] - p.from[0]);
  const to = ux * (q.to[1] - p.from[1]) - uy * (q.to[0] - p.from[0]);
  return (from > off && to > off) || (from < -off && to < -off);
}

function lineWithArc(
  line: Chord,
  chord: Chord,
  arc: Extract<Curve, { kind: 'arc' }>,
  snap: number,
  hits: Point[],
): void {
  for (const end of [chord.from, chord.to]) if (nearLine(line, end, snap)) hits.push(end);
  for (const end of [line.from, line.to]) if (nearArc(chord, arc, end, snap)) hits.push(end);
  const [ux, uy] = [line.to[0] - line.from[0], line.to[1] - line.from[1]];
  const [fx, fy] = [line.from[0] - arc.centre[0], line.from[1] - arc.centre[1]];
  const a = ux * ux + uy * uy;
  const b = fx * ux + fy * uy;
  const nearest = Math.abs(fx * uy - fy * ux) / Math.sqrt(a); // of the line to the centre
  if (Math.abs(nearest - arc.radius) <= snap) {
    const touch: Point = [line.from[0] - (b / a) * ux, line.from[1] - (b / a) * uy];
    if (nearLine(line, touch, snap) && onArc(chord, arc, touch)) hits.push(touch);
    return;
  }
  const disc = b * b - a * (fx * fx + fy * fy - arc.radius * arc.radius);
  if (disc < 0) return;
  for (const root of [-Math.sqrt(disc), Math.sqrt(disc)]) {
    const s = (-b + root) / a;
    const at: Point = [line.from[0] + s * ux, line.from[1] + s * uy];
    if (s >= 0 && s <= 1 && onArc(chord, arc, at)) hits.push(at);
  }
}

function arcWithArc(
  p: Chord,
  pArc: Extract<Curve, { kind: 'arc' }>,
  q: Chord,
  qArc: Extract<Curve, { kind: 'arc' }>,
  snap: number,
  hits: Point[],
): void {
  for (const end of [q.from, q.to]) if (nearArc(p, pArc, end, snap)) hits.push(end);
  for (const end of [p.from, p.to]) if (nearArc(q, qArc, end, snap)) hits.push(end);
  const [dx, dy] = [qArc.centre[0] - pArc.centre[0], qArc.centre[1] - pArc.centre[1]];
  const d2 = dx * dx + dy * dy;
  if (d2 === 0) return; // concentric: equal circles meet at the ends found above
  const s = 0.5 * (1 + (pArc.radius * pArc.radius - qArc.radius * qArc.radius) / d2);
  const [apart, r] = [Math.sqrt(d2), pArc.radius];
  if (Math.min(Math.abs(apart - r - qArc.radius), Math.abs(apart - Math.abs(r - qArc.radius))) <= snap) {
    const reach = (Math.sign(s) * r) / apart; // they touch, from outside or from within
    const touch: Point = [pArc.centre[0] + reach * dx, pArc.centre[1] + reach * dy];
    if (onArc(p, pArc, touch) && onArc(q, qArc, touch)) hits.push(touch);
    return;
  }
  const h2 = r * r - s * s * d2;
  if (h2 < 0) return;
  const h = Math.sqrt(h2 / d2);
  for (const sign of [1, -1]) {
    const at: Point = [pArc.centre[0] + s * dx - sign * h * dy, pArc.centre[1] + s * dy + sign * h * dx];
    if (onArc(p, pArc, at) && onArc(q, qArc, at)) hits.push(at);
  }
}

/** The point lies on the border piece, but for the snapping distance. */
export function liesOn(piece: Chord, curve: Curve, at: Point, snap: number): boolean {
  return curve.kind === 'line' ? nearLine(piece, at, snap) : nearArc(piece, curve, at, snap);
}

function nearLine(line: Chord, [x, y]: Point, snap: number): boolean {
  const [ux, uy] = [line.to[0] - line.from[0], line.to[1] - line.from[1]];
  const length = Math.hypot(ux, uy);
  if (length === 0) return false;
  const along = ((x - line.from[0]) * ux + (y - line.from[1]) * uy) / length;
  const off = ((x - line.from[0]) * uy - (y - line.from[1]) * ux) / length;
  return Math.abs(off) <= snap && along >= -snap && along <= length + snap;
}

/** The arc is the one cut off by the chord (under 180 degrees): on the far side of the chord from the centre. */
function onArc(chord: Chord, arc: Extract<Curve, { kind: 'arc' }>, [x, y]: Point): boolean {
  const side = (px: number, py: number): number =>
    (chord.to[0] - chord.from[0]) * (py - chord.from[1]) - (chord.to[1] - chord.from[1]) * (px - chord.from[0]);
  return side(x, y) * side(arc.centre[0], arc.centre[1]) <= 0;
}

function nearArc(chord: Chord, arc: Extract<Curve, { kind: 'arc' }>, at: Point, snap: number): boolean {
  const off = Math.hypot(at[0] - arc.centre[0], at[1] - arc.centre[1]) - arc.radius;
  return Math.abs(off) <= snap && onArc(chord, arc, at);
}
