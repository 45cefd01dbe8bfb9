import { meanOver } from '@gapwright/fem-core';
import { applyFunctional } from '@gapwright/fem-core/goals';
import { triangleCount } from '@gapwright/fem-core/mesh';
import { expect, test } from 'vitest';
import { NODES } from '../../../packages/fem-core/src/elements/six-node.js';
import { valueAtSpot } from '../../../packages/fem-core/src/field/values.js';
import { densityRemainder, meanDensityFunctional } from '../../../packages/fem-core/src/probes/goals.js';
import { interpolate, straightMesh } from '../field/made-fields.js';

test('the mean of |B| is that of another field, what its derivative tells of the way there, and the remainder', () => {
  const from = interpolate(straightMesh, (x, y) => Math.sin(40 * x) + 20 * x * y);
  const to = interpolate(straightMesh, (x, y) => Math.sin(40 * x) + 24 * x * y + 300 * y * y);
  // Straight quadratic elements: the gradient is linear, so its values at the six nodes are all of it.
  const gradient = new Float64Array(12 * triangleCount(straightMesh));
  for (let t = 0; t < triangleCount(straightMesh); t++) {
    NODES.forEach(([xi, eta], i) => {
      const { bx, by } = valueAtSpot(to, { triangle: t, xi, eta });
      gradient[12 * t + i] = -by;
      gradient[12 * t + 6 + i] = bx;
    });
  }
  for (const regions of [['block'], ['bar', 'air']]) {
    const { area, b } = meanOver(from, regions);
    const step = to.potential.map((a, node) => a - from.potential[node]);
    const tangent = applyFunctional(meanDensityFunctional(from, regions, area), step);
    const remainder = densityRemainder(from, regions, area, gradient);
    const beyond = remainder.reduce((sum, part) => sum + part, 0);
    expect(beyond).toBeGreaterThan(1e-3 * b);
    expect(Math.min(...remainder)).toBe(0); // of triangles elsewhere, and nowhere less: |B| is convex
    expect(b + tangent + beyond).toBeCloseTo(meanOver(to, regions).b, 10);
  }
});
