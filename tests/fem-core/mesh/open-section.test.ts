import type { Section, Shape } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { checkMesh, cornerCount, edgeCount, meshSection, refineMesh, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { BEYOND_REGION, OUTSIDE_REGION } from '../../../packages/fem-core/src/geometry/unbounded.js';
import { circle, drawing, faultCodes, polar, polygon, rectangle } from '../geometry/drawings.js';
import { overlayAreas } from '../geometry/overlay-areas.js';
import { openSections, proveOpenSection } from './random-sections.js';

const open = (shapes: readonly Shape[], outline: Shape, more: Partial<Section> = {}): Section =>
  drawing(shapes, { outline, open: true, ...more });

const areaOutside = (mesh: Mesh): number => Math.PI * (mesh.beyond?.radius ?? Number.NaN) ** 2;

describe('an open section', () => {
  const outlines: readonly (readonly [string, Shape, number])[] = [
    ['a rectangle', rectangle(1, 2, 4, 6), 1.2 * 2.5],
    ['a polygon', polygon([0, 0], [2, 0], [1, 2]), 1.2 * Math.SQRT2],
    ['a circle', circle(3, -1, 0.7), 0.7],
  ];

  test.each(outlines)('in %s has two discs of equal radius, and its regions in the first', (_, outline, radius) => {
    const [x, y] = outline.kind === 'circle' ? outline.centre : outline.kind === 'rectangle' ? [2.5, 4] : [1, 1];
    const section = open([circle(x, y, 0.3), rectangle(x, y, x + 0.2, y + 0.3)], outline);
    const mesh = meshSection(section);
    const areas = overlayAreas(section);
    const inner = areas.reduce((sum, area) => sum + area, 0);
    expect(mesh.beyond?.radius).toBeCloseTo(radius, 14);
    expect(mesh.beyond?.centre).toEqual([x, y]);
    const own = outline.kind === 'circle';
    expect(mesh.regionNames).toEqual(['air', 'r0', 'r1', ...(own ? [] : [OUTSIDE_REGION]), BEYOND_REGION]);
    const disc = areaOutside(mesh);
    checkMesh(mesh, {
      area: 2 * disc,
      regionAreas: [...areas, ...(own ? [] : [disc - inner]), disc],
      minFreeAngleDeg: 25,
    });
  });

  test('the image is the first rim moved by three radii, infinity in its middle', () => {
    const mesh = meshSection(open([circle(0.2, 0.1, 0.3)], rectangle(-1, -1, 1, 1), { maxEdge: 0.3 }));
    const { beyond, xy } = mesh;
    if (beyond === undefined) throw new Error('nothing beyond');
    expect(beyond.imageCentre[0] - beyond.centre[0]).toBeCloseTo(3 * beyond.radius, 14);
    expect([xy[2 * beyond.infinity], xy[2 * beyond.infinity + 1]]).toEqual(beyond.imageCentre);
    expect(mesh.regionNames[beyond.region]).toBe(BEYOND_REGION);
    let seen = 0;
    for (let e = 0; e < edgeCount(mesh); e++) {
      if (mesh.sideNames[mesh.edgeToSide[e]] !== 'rim') continue;
      seen++;
      const mate = mesh.edgeToMatch[e];
      expect(mesh.sideNames[mesh.edgeToSide[mate]]).toBe('far rim');
      for (const [list, p, q] of [
        [xy, mesh.edges[2 * e], mesh.edges[2 * mate]],
        [xy, mesh.edges[2 * e + 1], mesh.edges[2 * mate + 1]],
        [mesh.middles, e, mate],
      ] as const) {
        expect(list[2 * q] - list[2 * p]).toBeCloseTo(3 * beyond.radius, 12);
        expect(list[2 * q + 1]).toBeCloseTo(list[2 * p + 1], 12);
      }
    }
    expect(seen).toBeGreaterThanOrEqual(16);
  });

  test('stays one when refined, on either disc', () => {
    const coarse = meshSection(open([rectangle(0.2, 0.2, 0.5, 0.4)], rectangle(0, 0, 1, 1)));
    const wanted = Float64Array.from({ length: triangleCount(coarse) }, (_, t) =>
      coarse.triangleToRegion[t] === coarse.beyond?.region ? 0.05 : Infinity,
    );
    const fine = refineMesh(coarse, wanted);
    checkMesh(fine, { area: 2 * areaOutside(coarse) });
    expect(fine.beyond).toEqual({ ...coarse.beyond, infinity: fine.beyond?.infinity });
    expect(cornerCount(fine)).toBeGreaterThan(2 * cornerCount(coarse));
    const near = fine.triangleToRegion.filter((region) => region !== fine.beyond?.region).length;
    expect(near).toBeGreaterThan(coarse.triangleToRegion.length); // its rim is cut together with the far one
  });

  test('regions may touch the rim of a round outline', () => {
    const mesh = meshSection(open([polygon([0, 0], polar(0, 0, 10, 1), polar(0, 0, 47, 1))], circle(0, 0, 1)));
    checkMesh(mesh, { area: 2 * Math.PI });
  });

  test('holds of random drawings', () => {
    fc.assert(fc.property(openSections, proveOpenSection), { seed: 81, numRuns: 200 });
  });
});

describe('refused', () => {
  test.each([
    ['overhangs-outline', open([rectangle(0.5, 0.5, 1.5, 0.7)], rectangle(0, 0, 1, 1))],
    ['overhangs-outline', open([circle(0.5, 0, 0.2)], circle(0, 0, 0.6))],
    ['overhangs-outline', open([rectangle(0.5, 0.5, 1.5, 0.7), rectangle(0.4, 0.4, 1.6, 0.8)], rectangle(0, 0, 1, 1))],
    ['outside-outline', open([circle(5, 0, 0.2)], circle(0, 0, 0.6))],
    ['not-matching', open([], rectangle(0, 0, 1, 1), { matched: [['left', 'right']] })],
    ['name-twice', { ...open([], rectangle(0, 0, 1, 1)), background: OUTSIDE_REGION }],
  ] as const)('%s', (code, section) => {
    expect(faultCodes(() => meshSection(section))).toContain(code);
  });

  test('a region that ends on the outline does not overhang it', () => {
    for (const outline of [rectangle(0, 0, 1, 1), circle(0.5, 0.5, 0.6)]) {
      const same = open([outline, rectangle(0.3, 0.3, 0.6, 0.6)], outline);
      expect(faultCodes(() => meshSection(same))).toEqual(['not refused']);
    }
  });
});
