import { describe, expect, test } from 'vitest';
import { buildDrawingMesh, pointsAlongEdge, valuesAtPoints } from '../../../packages/fem-core/src/io/drawing-mesh.js';
import { triangleCount } from '../../../packages/fem-core/src/mesh/mesh.js';
import { atNodes, gridMesh } from './grid-mesh.js';

const mesh = gridMesh({
  from: [-0.01, 0],
  to: [0.03, 0.02],
  columns: 4,
  rows: 3,
  regionNames: ['all'],
  regionAt: () => 0,
});

describe.each([1, 2, 5])('a drawing mesh of %i pieces an edge', (pieces) => {
  const drawing = buildDrawingMesh(mesh, pieces);
  const { xy, corners } = drawing;

  test('covers the section once: its triangles are all alike in orientation and add up to the area', () => {
    let area = 0;
    for (let q = 0; q < corners.length; q += 3) {
      const [a, b, c] = [2 * corners[q], 2 * corners[q + 1], 2 * corners[q + 2]];
      const part = 0.5 * ((xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[c] - xy[a]) * (xy[b + 1] - xy[a + 1]));
      expect(part).toBeGreaterThan(0);
      area += part;
    }
    expect(area).toBeCloseTo(0.04 * 0.02, 15);
  });

  test('has each point once, shared by the triangles that meet there', () => {
    expect(xy.length / 2).toBe((4 * pieces + 1) * (3 * pieces + 1));
    expect(new Set(corners).size).toBe(xy.length / 2);
  });

  test('carries a quadratic function over exactly', () => {
    const f = (x: number, y: number) => 3 + 40 * x - 7 * y + 900 * x * x - 500 * x * y + 60 * y * y;
    valuesAtPoints(drawing, atNodes(mesh, f)).forEach((value, point) => {
      expect(value).toBeCloseTo(f(xy[2 * point], xy[2 * point + 1]), 12);
    });
  });

  test('runs along an edge the same way for both triangles, turned round', () => {
    for (let t = 0; t < triangleCount(mesh); t++) {
      for (let k = 0; k < 3; k++) {
        const across = mesh.neighbours[3 * t + k];
        if (across < 0) continue;
        const edge = mesh.triangleToEdge[3 * t + k];
        const there = [0, 1, 2].find((other) => mesh.triangleToEdge[3 * across + other] === edge) ?? -1;
        expect(pointsAlongEdge(drawing, across, there)).toEqual(pointsAlongEdge(drawing, t, k).reverse());
      }
    }
  });
});
