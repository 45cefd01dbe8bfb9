import fc from 'fast-check';
import { expect, test } from 'vitest';
import type { Point, Shape } from '../../../packages/fem-core/src/geometry/section.js';
import { contains } from '../../../packages/fem-core/src/geometry/shapes.js';
import { liesOutside } from '../../../packages/machine-models/src/section-file/outline-side.js';

const coordinate = fc.integer({ min: -50, max: 50 }).map((n) => n / 1000);
const place = fc.tuple(coordinate, coordinate);
/** Star-shaped about the origin, so that it never crosses itself. */
const star: fc.Arbitrary<Shape> = fc
  .array(fc.double({ min: 0.005, max: 0.05, noNaN: true }), { minLength: 3, maxLength: 12 })
  .map((radii) => ({
    kind: 'polygon',
    corners: radii.map((r, i): Point => {
      const angle = (2 * Math.PI * i) / radii.length;
      return [r * Math.cos(angle), r * Math.sin(angle)];
    }),
  }));
const shape = fc.oneof(
  star,
  fc
    .tuple(place, fc.double({ min: 0.001, max: 0.05, noNaN: true }))
    .map(([centre, radius]): Shape => ({ kind: 'circle', centre, radius })),
  fc
    .tuple(place, place)
    .filter(([from, to]) => from[0] !== to[0] && from[1] !== to[1])
    .map(([from, to]): Shape => ({ kind: 'rectangle', from, to })),
);

test('off the border a point is outside just where the shape does not contain it', () => {
  fc.assert(
    fc.property(
      shape,
      fc.double({ min: -0.06, max: 0.06, noNaN: true }),
      fc.double({ min: -0.06, max: 0.06, noNaN: true }),
      (drawn, x, y) => {
        if (liesOutside(drawn, [x, y])) expect(contains(drawn, x, y)).toBe(false);
        else if (!contains(drawn, x, y)) {
          // Only within a hair of the border may both be false: a step of 1e-9 towards the middle, or away, decides.
          const near = [-1, 0, 1].flatMap((i) => [-1, 0, 1].map((j): Point => [x + i * 1e-9, y + j * 1e-9]));
          expect(near.some((p) => contains(drawn, ...p))).toBe(true);
        }
      },
    ),
    { seed: 7, numRuns: 2000 },
  );
});

test('corners and points of the sides are inside, and so is what is only rounding beyond them', () => {
  fc.assert(
    fc.property(star, fc.nat(11), fc.double({ min: 0, max: 1, noNaN: true }), (drawn, k, s) => {
      if (drawn.kind !== 'polygon') return;
      const { corners } = drawn;
      const [p, q] = [corners[k % corners.length], corners[(k + 1) % corners.length]];
      expect(liesOutside(drawn, [p[0] + s * (q[0] - p[0]), p[1] + s * (q[1] - p[1])])).toBe(false);
      expect(liesOutside(drawn, p)).toBe(false);
    }),
    { seed: 8 },
  );
  expect(liesOutside({ kind: 'rectangle', from: [0, 0], to: [0.3, 0.3] }, [0.1 + 0.2, 0.3])).toBe(false);
  expect(liesOutside({ kind: 'circle', centre: [0, 0], radius: 1 }, [Number.NaN, 0])).toBe(false);
});
