import { drive, finish } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { meshSection, refineMesh, triangleCount } from '@gapwright/fem-core/mesh';
import { expect, test } from 'vitest';
import { meshSteps, refineMeshSteps } from '../../../packages/fem-core/src/mesh/mesh-section.js';
import { DEFAULT_LIMITS } from '../../../packages/fem-core/src/mesh/refine.js';
import { circle, drawing } from '../geometry/drawings.js';

const section = drawing([circle(0.5, 0.5, 0.3)], { maxEdge: 0.008 });

/** Corners and triangles alike, bit by bit. */
function expectSame(mesh: Mesh, other: Mesh): void {
  expect([mesh.xy.length, mesh.triangles.length]).toEqual([other.xy.length, other.triangles.length]);
  expect(mesh.xy.every((x, k) => x === other.xy[k])).toBe(true);
  expect(mesh.triangles.every((corner, k) => corner === other.triangles[k])).toBe(true);
}

test('a mesh made step by step tells how it grows, and is the one made at once', () => {
  const sizes: number[] = [];
  const mesh = finish(meshSteps(section, DEFAULT_LIMITS), ({ refined }) => sizes.push(refined));
  expect(sizes.length).toBeGreaterThanOrEqual(2);
  expect([...sizes].sort((a, b) => a - b)).toEqual(sizes);
  expectSame(mesh, meshSection(section));
  const wanted = new Float64Array(triangleCount(mesh)).fill(0.005);
  const finer = finish(refineMeshSteps(mesh, wanted, DEFAULT_LIMITS), ({ refined }) => sizes.push(refined));
  expect(sizes.at(-1)).toBeGreaterThan(triangleCount(mesh));
  expectSame(finer, refineMesh(mesh, wanted));
});

test('meshing can be called off in its midst', async () => {
  const off = new AbortController();
  let refined = 0;
  const run = drive(meshSteps(section, DEFAULT_LIMITS), {
    pause: () => Promise.resolve(),
    signal: off.signal,
    onStep: (progress) => {
      refined = progress.refined;
      off.abort(new Error('no longer wanted'));
    },
  });
  await expect(run).rejects.toThrow('no longer wanted');
  expect(refined).toBeGreaterThan(0);
  expect(refined).toBeLessThan(0.8 * triangleCount(meshSection(section)));
});
