import { recoverGradients } from '@gapwright/fem-core/goals';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { meshSection, triangleCount } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { FULL_RULE, gradients, NODES, nodeCoordinates } from '../../../packages/fem-core/src/elements/six-node.js';
import {
  interpolantIn,
  interpolate,
  mapPoint,
  roundMesh,
  roundSection,
  straightMesh,
  straightSection,
} from '../field/made-fields.js';

const oneSmoothPart = (mesh: Mesh): Int32Array => new Int32Array(triangleCount(mesh));

type Gradient = (x: number, y: number) => readonly [gx: number, gy: number];

/** Largest distance of the recovered from the true gradient, over all nodes of all triangles kept. */
function worstAtNodes(
  mesh: Mesh,
  recovered: Float64Array,
  exact: (x: number, y: number, t: number) => readonly [number, number],
): number {
  let worst = 0;
  for (let t = 0; t < triangleCount(mesh); t++) {
    NODES.forEach(([xi, eta], i) => {
      const [gx, gy] = exact(...mapPoint(mesh, t, xi, eta), t);
      worst = Math.max(worst, Math.hypot(recovered[12 * t + i] - gx, recovered[12 * t + 6 + i] - gy));
    });
  }
  return worst;
}

/** Root mean square distance of the recovered gradient, and of the elements' own, from the true one. */
function rmsErrors(
  mesh: Mesh,
  a: (x: number, y: number) => number,
  exact: Gradient,
): { readonly recovered: number; readonly element: number } {
  const field = interpolate(mesh, a);
  const [recovered] = recoverGradients(mesh, oneSmoothPart(mesh), [field.potential]);
  const at = new Float64Array(12);
  const grad = new Float64Array(12);
  let [area, ours, theirs] = [0, 0, 0];
  for (let t = 0; t < triangleCount(mesh); t++) {
    nodeCoordinates(mesh, t, at);
    const nodal = NODES.map(([xi, eta]) => interpolantIn(field, t, xi, eta));
    for (let q = 0; q < FULL_RULE.count; q++) {
      const weight = FULL_RULE.weights[q] * gradients(at, FULL_RULE.slopes, 12 * q, grad);
      let [x, y, rx, ry, gx, gy] = [0, 0, 0, 0, 0, 0];
      for (let i = 0; i < 6; i++) {
        const n = FULL_RULE.values[6 * q + i];
        x += n * at[2 * i];
        y += n * at[2 * i + 1];
        rx += n * recovered[12 * t + i];
        ry += n * recovered[12 * t + 6 + i];
        gx += nodal[i] * grad[i];
        gy += nodal[i] * grad[6 + i];
      }
      const [ex, ey] = exact(x, y);
      area += weight;
      ours += weight * ((rx - ex) ** 2 + (ry - ey) ** 2);
      theirs += weight * ((gx - ex) ** 2 + (gy - ey) ** 2);
    }
  }
  return { recovered: Math.sqrt(ours / area), element: Math.sqrt(theirs / area) };
}

describe('a quadratic potential', () => {
  const a = (x: number, y: number): number => 3 * x * x - 5 * x * y + 2 * y * y + x - 4 * y + 7;
  const exact: Gradient = (x, y) => [6 * x - 5 * y + 1, -5 * x + 4 * y - 4];

  test('has its gradient back at every corner and every middle, to rounding', () => {
    const [recovered] = recoverGradients(straightMesh, oneSmoothPart(straightMesh), [
      interpolate(straightMesh, a).potential,
    ]);
    expect(worstAtNodes(straightMesh, recovered, exact)).toBeLessThan(1e-10);
  });

  test('the parts it is cut into change nothing, were they of one triangle each', () => {
    const { potential } = interpolate(straightMesh, a);
    for (const part of [
      straightMesh.triangleToRegion,
      Int32Array.from({ length: triangleCount(straightMesh) }, (_, t) => t),
    ]) {
      const [recovered] = recoverGradients(straightMesh, part, [potential]);
      expect(worstAtNodes(straightMesh, recovered, exact)).toBeLessThan(1e-10);
    }
  });

  test('on a mesh of a few triangles too', () => {
    const mesh = meshSection({
      outline: { kind: 'rectangle', from: [0, 0], to: [0.02, 0.01] },
      background: 'air',
      regions: [],
    });
    expect(triangleCount(mesh)).toBeLessThan(12);
    const [recovered] = recoverGradients(mesh, oneSmoothPart(mesh), [interpolate(mesh, a).potential]);
    expect(worstAtNodes(mesh, recovered, exact)).toBeLessThan(1e-10);
  });

  test('functions handed in together come back as they do one by one', () => {
    const other = interpolate(straightMesh, (x, y) => Math.sin(100 * x) * y).potential;
    const { potential } = interpolate(straightMesh, a);
    const part = straightMesh.triangleToRegion;
    const together = recoverGradients(straightMesh, part, [potential, other]);
    expect(together[0]).toEqual(recoverGradients(straightMesh, part, [potential])[0]);
    expect(together[1]).toEqual(recoverGradients(straightMesh, part, [other])[0]);
    expect(recoverGradients(straightMesh, part, [])).toEqual([]);
  });
});

test('a uniform field comes back on curved elements', () => {
  const { potential } = interpolate(roundMesh, (x, y) => 0.8 * y - 0.6 * x);
  const [recovered] = recoverGradients(roundMesh, roundMesh.triangleToRegion, [potential]);
  expect(worstAtNodes(roundMesh, recovered, () => [-0.6, 0.8])).toBeLessThan(1e-10);
});

test('within a smooth part the recovered gradient is one value a corner', () => {
  const { potential } = interpolate(straightMesh, (x, y) => Math.sin(90 * x) * Math.cosh(70 * y));
  const [recovered] = recoverGradients(straightMesh, straightMesh.triangleToRegion, [potential]);
  const seen = new Map<string, number>();
  for (let t = 0; t < triangleCount(straightMesh); t++) {
    for (let k = 0; k < 3; k++) {
      const key = `${straightMesh.triangleToRegion[t]}/${straightMesh.triangles[3 * t + k]}`;
      const before = seen.get(key);
      if (before !== undefined) expect(recovered[12 * t + k]).toBe(before);
      seen.set(key, recovered[12 * t + k]);
    }
  }
});

describe.each([
  ['straight', straightSection],
  ['round', roundSection],
] as const)('a smooth potential on %s meshes', (_, section) => {
  const a = (x: number, y: number): number => Math.sin(60 * x + 0.3) * Math.cosh(60 * y);
  const exact: Gradient = (x, y) => [
    60 * Math.cos(60 * x + 0.3) * Math.cosh(60 * y),
    60 * Math.sin(60 * x + 0.3) * Math.sinh(60 * y),
  ];

  test('is recovered to a higher order than the elements have', () => {
    const levels = [0.008, 0.004, 0.002].map((edge) => {
      const mesh = meshSection(section(edge));
      return { size: triangleCount(mesh) ** -0.5, ...rmsErrors(mesh, a, exact) };
    });
    const [coarse, , fine] = levels;
    const order = (key: 'recovered' | 'element'): number =>
      Math.log(coarse[key] / fine[key]) / Math.log(coarse.size / fine.size);
    expect(Math.abs(order('element') - 2)).toBeLessThan(0.2);
    // Patches at the outline look to one side only, so the whole order more within shows as about half of one.
    expect(order('recovered')).toBeGreaterThan(order('element') + 0.4);
    for (const level of levels) expect(level.recovered).toBeLessThan(0.35 * level.element);
  });
});

describe('at a border where the gradient jumps', () => {
  // Continuous across x = -5 mm, the right side of the block; slope in x of 2 within, 0.25 without.
  const inside = 2;
  const outside = 0.25;
  const a = (x: number, y: number): number => (x + 0.005) * (x < -0.005 ? inside : outside) + 0.5 * y;
  const mesh = meshSection({
    outline: { kind: 'rectangle', from: [-0.02, -0.01], to: [0.015, 0.01] },
    background: 'air',
    maxEdge: 0.004,
    regions: [{ name: 'iron', shape: { kind: 'rectangle', from: [-0.02, -0.01], to: [-0.005, 0.01] } }],
  });
  const { potential } = interpolate(mesh, a);
  const exact = (_x: number, _y: number, t: number): readonly [number, number] => [
    mesh.regionNames[mesh.triangleToRegion[t]] === 'iron' ? inside : outside,
    0.5,
  ];

  test('each part keeps its own up to the border', () => {
    const [recovered] = recoverGradients(mesh, mesh.triangleToRegion, [potential]);
    expect(worstAtNodes(mesh, recovered, exact)).toBeLessThan(1e-10);
  });

  test('which takes telling the parts: as one smooth part the jump is smeared', () => {
    const [recovered] = recoverGradients(mesh, oneSmoothPart(mesh), [potential]);
    expect(worstAtNodes(mesh, recovered, exact)).toBeGreaterThan(0.3 * (inside - outside));
  });
});
