import type { Point, Section } from '@gapwright/fem-core';
import { checkMesh, measureMesh, meshSection } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { circle, drawing, faultCodes, moved, polygon, rectangle } from '../geometry/drawings.js';
import { overlayAreas } from '../geometry/overlay-areas.js';

const section = drawing([circle(0.3, 0.3, 0.2), rectangle(0.4, 0.2, 0.8, 0.7), circle(0.62, 0.45, 0.25)]);
const wanted = overlayAreas(section);

describe('sizes and places within the stated range are meshed', () => {
  test.each([1e-10, 1e-9, 1, 1e9, 7e9])('an outline of %f m, at the origin and far from it', (scale) => {
    for (const shift of [0, 1000, 6e4]) {
      const mesh = meshSection(moved(section, scale, 0.3, [shift, shift]));
      // Coordinates far off are rounded more than checkMesh allows areas to differ.
      const areas = wanted.map((area) => area * scale * scale);
      checkMesh(mesh, shift === 0 ? { regionAreas: areas } : {});
      const found = measureMesh(mesh).roundArea;
      for (const i of areas.keys())
        expect(Math.abs(found[i] / areas[i] - 1)).toBeLessThan(1e-8 + 100 * shift * Number.EPSILON);
    }
  });

  test('a thousandth of a millionth of a metre beside a metre is refused with the figure, not lost', () => {
    expect(() => meshSection(drawing([circle(0.5, 0.5, 3e-10)]))).toThrow(
      'regions.r0.shape: is thinner than 1e-9 m, the distance within which points are one',
    );
  });
});

describe('chains of matched sides', () => {
  const left: readonly Point[] = [
    [0, 0],
    [0.3, 0.4],
    [-0.1, 0.7],
    [0, 1],
  ];
  const outline = polygon(...left.map(([x, y]): Point => [x + 2, y]), ...[...left].reverse());
  const chained: Section = drawing([circle(0.1, 0.5, 0.25), circle(2.1, 0.5, 0.25), rectangle(1.7, 0.05, 2.2, 0.2)], {
    outline,
    matched: [
      [
        ['edge 1', 'edge 2', 'edge 3'],
        ['edge 5', 'edge 6', 'edge 7'],
      ],
    ],
    sizeAt: [{ at: [0.3, 0.4], maxEdge: 0.004 }],
  });

  test('are cut alike from end to end, kinks and all, where one of them is refined', () => {
    const mesh = meshSection(chained);
    checkMesh(mesh, { regionAreas: overlayAreas(chained), minFreeAngleDeg: 25 });
    const matched = mesh.edgeToMatch.filter((mate) => mate >= 0).length;
    expect(matched).toBe(mesh.edgeToSide.filter((side) => side >= 0 && side !== 3 && side !== 7).length);
    expect(matched).toBeGreaterThan(2 * 20);
  });
});

test('a region wholly outside a round outline is refused though their boxes meet; one that is covered is not', () => {
  const round = { outline: circle(0.5, 0.5, 0.5) };
  expect(faultCodes(() => meshSection(drawing([rectangle(0, 0, 0.1, 0.1)], round)))).toEqual(['outside-outline']);
  expect(faultCodes(() => meshSection(drawing([circle(0.5, 0.5, 0.1), circle(0.5, 0.5, 0.2)], round)))).toEqual([
    'not refused',
  ]);
  expect(faultCodes(() => meshSection(drawing([rectangle(0, 0, 0.2, 0.2)], round)))).toEqual(['not refused']);
});

test('arcs that bulge through flat triangles beside a cusp are cut finer', () => {
  const cusp = drawing([
    circle(0.36269087830868896, 0.35144224731028045, 0.10856287035545872),
    circle(0.5689418472084792, 0.35144224731028045, 0.09768809854433144),
  ]);
  checkMesh(meshSection(cusp), { regionAreas: overlayAreas(cusp) });
});

test('an outline thinner than the distance within which points are one is refused', () => {
  for (const shapes of [[], [circle(1e-7, 4e-7, 1e-8)]])
    expect(faultCodes(() => meshSection(drawing(shapes, { outline: rectangle(0, 0, 1e9, 1e-6) })))[0]).toBe('no-area');
});
