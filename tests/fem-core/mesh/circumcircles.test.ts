import fc from 'fast-check';
import { expect, test } from 'vitest';
import { inCircle } from '../../../packages/fem-core/src/geometry/predicates.js';
import {
  fitCircumcircles,
  isInCircle,
  keepCircle,
  newCircumcircles,
} from '../../../packages/fem-core/src/mesh/circumcircles.js';
import { addVertex, emptyTriangulation, takeSlot } from '../../../packages/fem-core/src/mesh/triangulation.js';

/** What refinement computes of a triangle, and the answer that is then given about a point. */
function answer(p: readonly (readonly [number, number])[], x: number, y: number): boolean {
  const tri = emptyTriangulation(3, 1, []);
  takeSlot(tri);
  p.forEach(([px, py], k) => {
    tri.origin[k] = addVertex(tri, px, py);
  });
  const circles = newCircumcircles();
  fitCircumcircles(circles, tri);
  const [[ax, ay], [bx, by], [cx, cy]] = p;
  const [ux, uy, vx, vy] = [bx - ax, by - ay, cx - ax, cy - ay];
  const [u2, v2, w2] = [ux * ux + uy * uy, vx * vx + vy * vy, (vx - ux) ** 2 + (vy - uy) ** 2];
  const det = ux * vy - uy * vx;
  const centre = [(vy * u2 - uy * v2) / (2 * det), (ux * v2 - vx * u2) / (2 * det)];
  keepCircle(circles, 0, ax, ay, centre[0], centre[1], Math.max(u2, v2, w2), det);
  return isInCircle(circles, tri, 0, x, y);
}

test('in or out of a circumcircle is told as the exact predicate tells it, also a few roundings off the circle', () => {
  const angle = fc.double({ min: 0, max: 6.28, noNaN: true });
  const off = fc.tuple(fc.integer({ min: 1, max: 17 }), fc.constantFrom(-1, 0, 1)).map(([p, s]) => s * 10 ** -p);
  const shift = fc.constantFrom(0, 1, 1e3, 1e6);
  fc.assert(
    fc.property(fc.tuple(angle, angle, angle), angle, off, shift, (corners, at, beyond, far) => {
      const [a, b, c] = [...corners].sort((p, q) => p - q).map((t) => [far + Math.cos(t), Math.sin(t) - far] as const);
      if (!((b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0]) > 0)) return;
      const [x, y] = [far + (1 + beyond) * Math.cos(at), (1 + beyond) * Math.sin(at) - far];
      expect(answer([a, b, c], x, y)).toBe(inCircle(...a, ...b, ...c, x, y) > 0);
    }),
    { seed: 72, numRuns: 3000 },
  );
});
