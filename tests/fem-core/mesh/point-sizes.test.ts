import type { Point, Section } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { checkMesh, meshSection, triangleCount } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { circle, drawing, rectangle } from '../geometry/drawings.js';

const LIMITS = { minAngle: (25 * Math.PI) / 180, maxTriangles: 100_000 };

/** Longest edge of each triangle over what is wished at its distance (of its nearest corner) from a point; the largest. */
function worst(mesh: Mesh, [x, y]: Point, maxEdge: number, growth: number): number {
  let most = 0;
  for (let t = 0; t < triangleCount(mesh); t++) {
    const corners = [0, 1, 2].map((k) => 2 * mesh.triangles[3 * t + k]);
    const near = Math.min(...corners.map((v) => Math.hypot(mesh.xy[v] - x, mesh.xy[v + 1] - y)));
    const longest = Math.max(
      ...corners.map((v, k) => {
        const w = corners[(k + 1) % 3];
        return Math.hypot(mesh.xy[v] - mesh.xy[w], mesh.xy[v + 1] - mesh.xy[w + 1]);
      }),
    );
    most = Math.max(most, longest / (maxEdge + growth * near));
  }
  return most;
}

describe('sizes by point', () => {
  const at: Point = [0.37, 0.61];
  const section = (more: Partial<Section>): Section =>
    drawing([circle(0.6, 0.4, 0.3), rectangle(0, 0, 0.3, 0.2)], more);

  test('edges grow from the wished length by no more than the growth asked for', () => {
    for (const growth of [0.1, 0.3, 1]) {
      const mesh = meshSection(section({ sizeAt: [{ at, maxEdge: 1e-3, growth }] }), LIMITS);
      checkMesh(mesh, { minFreeAngleDeg: 25 });
      expect(worst(mesh, at, 1e-3, growth)).toBeLessThanOrEqual(1 + 1e-9);
    }
  });

  test('cost grows with the logarithm of the length: a millionth is asked for as well as a thousandth', () => {
    const counts = [1e-2, 1e-4, 1e-6].map((maxEdge) =>
      triangleCount(meshSection(section({ sizeAt: [{ at, maxEdge }] }), LIMITS)),
    );
    expect(counts[2]).toBeLessThan(10_000);
    expect((counts[2] - counts[1]) / (counts[1] - counts[0])).toBeLessThan(1.3);
  });

  test('several points, on borders and outside, and a region with a wish of its own', () => {
    const sizeAt = [
      { at: [0.3, 0.2], maxEdge: 0.002 },
      { at: [0.9, 0.4], maxEdge: 0.004 },
      { at: [1.5, 0.5], maxEdge: 0.01 },
    ] as const;
    const mesh = meshSection(section({ sizeAt, maxEdge: 0.1 }), LIMITS);
    checkMesh(mesh);
    for (const wish of sizeAt) expect(worst(mesh, wish.at, wish.maxEdge, 0.3)).toBeLessThanOrEqual(1 + 1e-9);
  });

  test('no growth wants the length everywhere', () => {
    const mesh = meshSection(section({ sizeAt: [{ at, maxEdge: 0.05, growth: 0 }] }), LIMITS);
    expect(worst(mesh, at, 0.05, 0)).toBeLessThanOrEqual(1 + 1e-9);
  });
});
