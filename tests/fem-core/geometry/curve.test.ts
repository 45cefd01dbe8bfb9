import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Chord, Curve } from '../../../packages/fem-core/src/geometry/curve.js';
import { chordCrossings, liesOn, pointOnCurve } from '../../../packages/fem-core/src/geometry/curve.js';
import { polar } from './drawings.js';

const LINE: Curve = { kind: 'line' };
const SNAP = 1e-9;
const arcOf = (x: number, y: number, radius: number): Curve => ({ kind: 'arc', centre: [x, y], radius });
/** The piece of a circle between two angles, degrees. */
const piece = (x: number, y: number, radius: number, from: number, to: number): readonly [Chord, Curve] => [
  { from: polar(x, y, from, radius), to: polar(x, y, to, radius) },
  arcOf(x, y, radius),
];
const line = (ax: number, ay: number, bx: number, by: number): readonly [Chord, Curve] => [
  { from: [ax, ay], to: [bx, by] },
  LINE,
];
const crossings = (p: readonly [Chord, Curve], q: readonly [Chord, Curve]) =>
  chordCrossings(p[0], p[1], q[0], q[1], SNAP);

describe('pointOnCurve', () => {
  test('halves of an arc are equal and on the circle, the shorter way round', () => {
    const degrees = fc.double({ min: -180, max: 180, noNaN: true });
    fc.assert(
      fc.property(degrees, fc.double({ min: 1, max: 170, noNaN: true }), fc.boolean(), (from, turn, back) => {
        const [[chord, arc]] = [piece(3, -2, 0.7, from, back ? from - turn : from + turn)];
        const [x, y] = pointOnCurve(arc, ...chord.from, ...chord.to, 0.5);
        expect(Math.hypot(x - 3, y + 2)).toBeCloseTo(0.7, 12);
        const halves = [chord.from, chord.to].map((end) => Math.hypot(x - end[0], y - end[1]));
        expect(halves[0]).toBeCloseTo(halves[1], 12);
        expect(halves[0]).toBeCloseTo(2 * 0.7 * Math.sin((turn * Math.PI) / 720), 12);
      }),
      { seed: 21, numRuns: 200 },
    );
  });

  test('a share of a line is that share of its length', () => {
    expect(pointOnCurve(LINE, 1, 2, 5, 10, 0.25)).toEqual([2, 4]);
    expect(pointOnCurve(LINE, 1, 2, 5, 10, 0.5)).toEqual([3, 6]);
  });
});

describe('chordCrossings', () => {
  test('two lines cross once, or not at all', () => {
    expect(crossings(line(0, 0, 2, 2), line(0, 2, 2, 0))).toEqual([[1, 1]]);
    expect(crossings(line(0, 0, 1, 1), line(0, 3, 3, 0))).toEqual([]);
    expect(crossings(line(0, 0, 1, 0), line(0, 1, 1, 1))).toEqual([]);
  });

  test('a line that ends on another touches it there', () => {
    expect(crossings(line(0, 0, 4, 0), line(1, 0, 1, 5))).toEqual([[1, 0]]);
  });

  test('lines that run along each other are cut at the ends that lie on the other', () => {
    const hits = crossings(line(0, 0, 4, 0), line(3, 0, 9, 0));
    expect(hits).toHaveLength(2);
    expect(hits).toContainEqual([3, 0]);
    expect(hits).toContainEqual([4, 0]);
  });

  test('a line through an arc crosses it where the circle is, and only on the side of the chord the arc is on', () => {
    const arc = piece(0, 0, 1, -10, 10);
    const hits = crossings(line(0, 0.1, 2, 0.1), arc);
    expect(hits).toHaveLength(1);
    expect(Math.hypot(...hits[0])).toBeCloseTo(1, 14);
    expect(crossings(line(-2, 0.1, 0, 0.1), arc)).toEqual([]);
    const twice = crossings(line(0.995, -1, 0.995, 1), arc);
    expect(twice).toHaveLength(2);
    for (const hit of twice) expect(Math.hypot(...hit)).toBeCloseTo(1, 14);
  });

  test.each([3, 11.25, 77])('a tangent touches its circle once, rounding or not: at %f degrees', (angle) => {
    const arc = piece(0, 0, 1, angle - 9, angle + 9);
    for (const distance of [1 - 4e-10, 1 - 1e-16, 1, 1 + 1e-16, 1 + 4e-10]) {
      const [c, s] = polar(0, 0, angle, 1);
      const tangent = line(distance * c - s, distance * s + c, distance * c + s, distance * s - c);
      const hits = crossings(tangent, arc);
      expect(hits).toHaveLength(1);
      expect(Math.hypot(hits[0][0] - c, hits[0][1] - s)).toBeLessThan(SNAP);
    }
  });

  test('circles cross in two points on both, touch in one, from outside and from within, and else keep apart', () => {
    const arc = piece(0, 0, 1, -20, 20);
    const two = crossings(arc, piece(1.99, 0, 1, 160, 200));
    expect(two).toHaveLength(2);
    for (const [x, y] of two) {
      expect(Math.hypot(x, y)).toBeCloseTo(1, 14);
      expect(Math.hypot(x - 1.99, y)).toBeCloseTo(1, 14);
    }
    for (const [distance, radius, from, to] of [
      [1.5, 0.5, 160, 200],
      [0.4, 0.6, -20, 20],
      [-2, 3, -5, 5],
    ]) {
      for (const off of [-4e-10, 0, 4e-10]) {
        const hits = crossings(arc, piece(distance + off, 0, radius, from, to));
        expect(hits).toHaveLength(1);
        expect(Math.hypot(hits[0][0] - 1, hits[0][1])).toBeLessThan(SNAP);
      }
    }
    expect(crossings(arc, piece(2.1, 0, 1, 160, 200))).toEqual([]);
    expect(crossings(arc, piece(0, 0, 0.9, -20, 20))).toEqual([]);
  });

  test('what is crossed does not depend on which is asked first', () => {
    const number = fc.double({ min: -1, max: 1, noNaN: true });
    const lines = fc.tuple(number, number, number, number).map(([a, b, c, d]) => line(a, b, c, d));
    const arcs = fc
      .tuple(number, number, fc.double({ min: 0.3, max: 1, noNaN: true }), fc.integer({ min: 0, max: 15 }))
      .map(([x, y, r, k]) => piece(x, y, r, 22.5 * k, 22.5 * (k + 1)));
    const any = fc.oneof(lines, arcs);
    fc.assert(
      fc.property(any, any, (p, q) => {
        const [one, other] = [crossings(p, q), crossings(q, p)];
        expect(other).toHaveLength(one.length);
        for (const [x, y] of one) {
          expect(Math.min(...other.map((hit) => Math.hypot(hit[0] - x, hit[1] - y)))).toBeLessThan(1e-7);
          expect(liesOn(...p, [x, y], 1e-7) && liesOn(...q, [x, y], 1e-7)).toBe(true);
        }
      }),
      { seed: 22, numRuns: 2000 },
    );
  });
});
