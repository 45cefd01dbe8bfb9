import { buildLocator } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { edgeCount, meshSection, nodeCount, nodePoint, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { newSearch, spotIn } from '../../../packages/fem-core/src/field/locate.js';
import { MESHES, mapPoint, ROD, ROUND, roundMesh, roundSection, straightMesh } from './made-fields.js';

const share = fc.double({ min: 0, max: 1, noNaN: true });

/** Any triangle of the mesh with any point of the reference triangle, borders included. */
const placeIn = (mesh: Mesh) =>
  fc
    .tuple(fc.nat({ max: triangleCount(mesh) - 1 }), share, share)
    .map(([t, u, v]) => (u + v <= 1 ? ([t, u, v] as const) : ([t, 1 - u, 1 - v] as const)));

const distance = (p: readonly [number, number], x: number, y: number): number => Math.hypot(p[0] - x, p[1] - y);

describe.each(MESHES)('points of the %s mesh', (_, mesh) => {
  const locator = buildLocator(mesh);

  test('a point made in a triangle is found in one whose map gives the point back', () => {
    fc.assert(
      fc.property(placeIn(mesh), ([t, xi, eta]) => {
        const [x, y] = mapPoint(mesh, t, xi, eta);
        const spot = locator.find(x, y);
        if (spot === undefined) throw new Error(`(${x}, ${y}) of triangle ${t} is not found`);
        expect(distance(mapPoint(mesh, spot.triangle, spot.xi, spot.eta), x, y)).toBeLessThan(1e-15);
        expect(Math.min(spot.xi, spot.eta, 1 - spot.xi - spot.eta)).toBeGreaterThan(-1e-6);
        if (Math.min(xi, eta, 1 - xi - eta) > 1e-9) expect(spot.triangle).toBe(t); // triangles do not overlap
      }),
      { numRuns: 2000 },
    );
  });

  test('reference coordinates survive the way into the plane and back, somewhat outside the triangle too', () => {
    const nearby = fc.double({ min: -0.2, max: 1.2, noNaN: true });
    fc.assert(
      fc.property(fc.nat({ max: triangleCount(mesh) - 1 }), nearby, nearby, (t, xi, eta) => {
        const spot = spotIn(mesh, t, ...mapPoint(mesh, t, xi, eta), newSearch());
        expect(Math.hypot(spot.xi - xi, spot.eta - eta)).toBeLessThan(1e-11);
      }),
      { numRuns: 1000 },
    );
  });

  test('every corner and every edge middle is found where it is', () => {
    for (let node = 0; node < nodeCount(mesh); node++) {
      const [x, y] = nodePoint(mesh, node);
      const spot = locator.find(x, y);
      if (spot === undefined) throw new Error(`node ${node} at (${x}, ${y}) is not found`);
      expect(distance(mapPoint(mesh, spot.triangle, spot.xi, spot.eta), x, y)).toBeLessThan(1e-15);
    }
  });

  test('points along every edge of the outline are found', () => {
    for (let t = 0; t < triangleCount(mesh); t++) {
      for (let k = 0; k < 3; k++) {
        if (mesh.neighbours[3 * t + k] >= 0) continue;
        for (const s of [0.05, 0.31, 0.77]) {
          const [xi, eta] = [
            [1 - s, s],
            [0, 1 - s],
            [s, 0],
          ][k];
          const spot = locator.find(...mapPoint(mesh, t, xi, eta));
          expect(spot?.triangle).toBe(t);
        }
      }
    }
  });

  test('a place is found alike whatever was asked before', () => {
    const ask = (): unknown => [locator.find(0.004, 0.003), locator.find(-0.01, 0.002), locator.find(1, 1)];
    const first = ask();
    for (let t = 0; t < triangleCount(mesh); t++) locator.find(...mapPoint(mesh, t, 0.3, 0.3));
    expect(ask()).toEqual(first);
  });
});

test('each triangle of a straight mesh holds its own middle, by its corners alone', () => {
  const locator = buildLocator(straightMesh);
  const { xy, triangles } = straightMesh;
  for (let t = 0; t < triangleCount(straightMesh); t++) {
    const [x, y] = [0, 1].map((i) => [0, 1, 2].reduce((sum, k) => sum + xy[2 * triangles[3 * t + k] + i], 0) / 3);
    expect(locator.find(x, y)?.triangle).toBe(t);
  }
});

test('nothing is found outside a rectangle, close to its sides as well as far away', () => {
  const locator = buildLocator(straightMesh);
  for (const s of [-0.97, -0.4, 0, 0.123, 0.9]) {
    for (const off of [1e-7, 1e-4, 1]) {
      for (const sign of [-1, 1]) {
        expect(locator.find(sign * (0.03 + off), 0.02 * s)).toBeUndefined();
        expect(locator.find(0.03 * s, sign * (0.02 + off))).toBeUndefined();
      }
    }
  }
  expect(locator.find(Number.NaN, 0)).toBeUndefined();
  expect(locator.find(0, Number.POSITIVE_INFINITY)).toBeUndefined();
});

describe('a round rim', () => {
  const locator = buildLocator(roundMesh);
  const onCircle = (radius: number, angle: number): readonly [number, number] => [
    ROUND.x + radius * Math.cos(angle),
    ROUND.y + radius * Math.sin(angle),
  ];
  const angles = Array.from({ length: 720 }, (_, i) => (i * Math.PI) / 360 + 1e-3);

  test('just within it a point is found, also beyond the chords; just outside it is not, also within the box', () => {
    for (const angle of angles) {
      expect(locator.find(...onCircle(0.9999 * ROUND.radius, angle))).toBeDefined();
      expect(locator.find(...onCircle(1.0001 * ROUND.radius, angle))).toBeUndefined();
    }
    expect(locator.find(...onCircle(1.3 * ROUND.radius, Math.PI / 4))).toBeUndefined();
  });

  test.each([1, 0.012, 0.006, 0.003])(
    'points on the drawn circle itself are found, though quadratic edges run a little within: edges to %s m',
    (edge) => {
      const { find } = buildLocator(meshSection(roundSection(edge)));
      expect(angles.filter((angle) => find(...onCircle(ROUND.radius, angle)) === undefined)).toEqual([]);
      expect(angles.filter((angle) => find(...onCircle(1.001 * ROUND.radius, angle)) !== undefined)).toEqual([]);
    },
  );

  test('the border of a rod within parts points a hair inside from points a hair outside', () => {
    const regionAt = (x: number, y: number): string => {
      const spot = locator.find(x, y);
      return spot === undefined ? 'nothing' : roundMesh.regionNames[roundMesh.triangleToRegion[spot.triangle]];
    };
    for (const angle of angles) {
      const at = (r: number): readonly [number, number] => [ROD.x + r * Math.cos(angle), ROD.y + r * Math.sin(angle)];
      expect(regionAt(...at(0.9999 * ROD.radius))).toBe('rod');
      expect(regionAt(...at(1.0001 * ROD.radius))).toBe('air');
    }
  });
});

test('a mesh of very few large curved triangles is searched without gaps', () => {
  const coarse = meshSection({ ...roundSection(1), regions: [] });
  expect(edgeCount(coarse)).toBeLessThan(200);
  const locator = buildLocator(coarse);
  fc.assert(
    fc.property(placeIn(coarse), ([t, xi, eta]) => {
      const [x, y] = mapPoint(coarse, t, xi, eta);
      const spot = locator.find(x, y);
      if (spot === undefined) throw new Error(`(${x}, ${y}) of triangle ${t} is not found`);
      expect(distance(mapPoint(coarse, spot.triangle, spot.xi, spot.eta), x, y)).toBeLessThan(1e-15);
    }),
    { numRuns: 1000 },
  );
});
