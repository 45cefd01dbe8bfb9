import type { Point, Section, Shape } from '@gapwright/fem-core';
import { checkMesh, measureMesh, meshSection, regionAreas, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { circle, drawing, faultCodes, moved, polar, polygon, rectangle } from '../geometry/drawings.js';
import { overlayAreas } from '../geometry/overlay-areas.js';

/** Drawings that nearly touch, or just do: where a mesher loses parts, crosses its own edges, or never ends. */

const ROUND = 1.6e-4; // see mesh-section.test.ts
const LIMITS = { minAngle: (25 * Math.PI) / 180, maxTriangles: 20_000 };

function expectRegions(section: Section, tolerance: number): void {
  const mesh = meshSection(section);
  checkMesh(mesh);
  const wanted = overlayAreas(section);
  regionAreas(mesh).forEach((area, i) => {
    expect(Math.abs(area - wanted[i])).toBeLessThan(tolerance);
  });
}

describe('circles', () => {
  test.each([0.2, 0.05, 0.02, 0.01, 0.003])(
    'the ring between two circles, %f of their radius wide, is there',
    (width) => {
      const mesh = meshSection(drawing([circle(0.5, 0.5, 0.4), circle(0.5, 0.5, 0.4 * (1 - width))]));
      checkMesh(mesh);
      const area = Math.PI * 0.16 * (1 - (1 - width) ** 2);
      expect(regionAreas(mesh)[1] / area).toBeGreaterThan(0.997);
      expect(regionAreas(mesh)[1] / area).toBeLessThan(1.003);
      expect(measureMesh(mesh).minAngleDeg).toBeGreaterThan(25 - 1e-9);
      expect(measureMesh(mesh).notDelaunay).toBe(0);
    },
  );

  test('eccentric rings, and three circles in one another', () => {
    expectRegions(drawing([circle(0.5, 0.5, 0.4), circle(0.5012, 0.5004, 0.394)]), 2 * ROUND * 0.16);
    expectRegions(
      drawing([circle(0.5, 0.5, 0.4), circle(0.501, 0.5, 0.396), circle(0.5005, 0.5003, 0.39)]),
      2 * ROUND * 0.16,
    );
  });

  test('a crescent thinner than the chords are high keeps its region, also beside a covered circle', () => {
    const apart = circle(0.4789, 0.5, 0.231);
    expectRegions(drawing([apart, circle(0.48, 0.499, 0.231)]), ROUND * 0.07);
    expectRegions(drawing([apart, circle(0.48, 0.499, 0.2309996), circle(0.48, 0.499, 0.231)]), ROUND * 0.07);
  });

  test.each([1, 3, 5])('a cap of %f degrees cut off within one chord belongs to the later shape', (half) => {
    const disc = circle(0.5, 0.5, 0.3);
    const [p, q] = [polar(0.5, 0.5, 11.25 - half, 0.3), polar(0.5, 0.5, 11.25 + half, 0.3)];
    const beyond = (at: Point): Point => [at[0] + 0.1, at[1] + 0.02];
    const box = polygon(p, beyond(p), beyond(q), q);
    const angle = (half * Math.PI) / 180;
    const cap = 0.09 * (angle - Math.sin(angle) * Math.cos(angle));
    const areas = [
      [disc, box],
      [box, disc],
    ].map((shapes) => regionAreas(meshSection(drawing(shapes))));
    expect((areas[0][2] - areas[1][1]) / cap).toBeCloseTo(1, 3); // of the box, over the disc and under it
  });

  test.each([0, 11.25, 33, 90])('touching a line, a circle outside and a circle inside, at %f degrees', (angle) => {
    const at = (along: number, across: number): Point => {
      const [c, s] = polar(0, 0, angle, 1);
      return [0.5 + along * c - across * s, 0.5 + along * s + across * c];
    };
    const disc = circle(0.5, 0.5, 0.2);
    const wall = polygon(at(0.2, -0.13), at(0.28, -0.13), at(0.28, 0.17), at(0.2, 0.17));
    for (const shapes of [
      [disc, wall],
      [wall, disc],
      [disc, circle(...at(0.3, 0), 0.1)],
      [disc, circle(...at(0.11, 0), 0.09)],
    ]) {
      expectRegions(drawing(shapes), ROUND * 0.05);
    }
  });

  test('inscribed in its outline, and in a triangle', () => {
    expectRegions(drawing([circle(0.5, 0.5, 0.5)]), ROUND * 0.25);
    const height = Math.sqrt(3) * 0.4;
    const triangle = polygon([0.1, 0.1], [0.9, 0.1], [0.5, 0.1 + height]);
    expectRegions(drawing([triangle, circle(0.5, 0.1 + height / 3, height / 3)]), ROUND * 0.06);
  });

  test('a polygon with all its corners on the circle, drawn before and after it', () => {
    for (const count of [4, 7, 14, 16, 40]) {
      const corners = Array.from({ length: count }, (_, k) => polar(0.5, 0.5, 10 + (360 * k) / count, 0.3));
      for (const shapes of [
        [polygon(...corners), circle(0.5, 0.5, 0.3)],
        [circle(0.5, 0.5, 0.3), polygon(...corners)],
      ]) {
        expectRegions(drawing(shapes), ROUND * 0.1);
      }
    }
  });
});

describe('lines', () => {
  test('a region flush with one matched side, where the other side is cut', () => {
    expectRegions(
      drawing([rectangle(0.6, 0.1, 1, 0.5), rectangle(0, 0.3, 0.4, 0.9)], { matched: [['left', 'right']] }),
      1e-12,
    );
  });

  test('needles and wedges keep their areas; angles below 25 degrees stay where the input has them', () => {
    for (const degrees of [0.5, 2, 10, 30, 55]) {
      const wedge = polygon([0.1, 0.5], [0.9, 0.5], polar(0.1, 0.5, degrees, 0.5));
      const mesh = meshSection(drawing([wedge]));
      checkMesh(mesh);
      expect(regionAreas(mesh)[1]).toBeCloseTo(0.2 * Math.sin((degrees * Math.PI) / 180), 12);
      const least = measureMesh(mesh).minAngleDeg;
      expect(least).toBeGreaterThan(degrees >= 30 ? 20 : 0.4 * degrees);
      expect(triangleCount(mesh)).toBeLessThan(5000);
    }
  });

  test('a gap of a thousandth', () => {
    expectRegions(drawing([rectangle(0.1, 0.1, 0.5, 0.9), rectangle(0.501, 0.1, 0.9, 0.9)]), 1e-12);
  });
});

/** Two shapes, the second one a hair off something the first one has. */
const hair = fc
  .tuple(fc.double({ min: -11, max: -1, noNaN: true }), fc.constantFrom(-1, 1))
  .map(([power, sign]) => sign * 10 ** power);
const angle = fc.double({ min: 0, max: 360, noNaN: true });
const nearMiss: fc.Arbitrary<readonly Shape[]> = fc
  .tuple(fc.integer({ min: 0, max: 6 }), hair, angle, fc.double({ min: 0.1, max: 0.28, noNaN: true }), fc.double())
  .map(([kind, off, turn, r]) => {
    const disc = circle(0.5, 0.5, r);
    const [c, s] = polar(0, 0, turn, 1);
    const at = (along: number, across: number): Point => [0.5 + along * c - across * s, 0.5 + along * s + across * c];
    const wall = r * (1 + off);
    const pairs: readonly (readonly Shape[])[] = [
      [disc, circle(0.5, 0.5, wall)],
      [disc, circle(...at(r * off, 0), r)],
      [disc, circle(...at(r + 0.1 + off, 0), 0.1)],
      [disc, circle(...at(0.4 * r + r * off, 0), 0.6 * r)],
      [disc, polygon(at(wall, -0.1), at(wall + 0.1, -0.05), at(wall + 0.1, 0.1), at(wall, 0.02))],
      [
        polygon(at(0, 0), at(r, 0), at(r, r), at(0, r)),
        polygon(at(wall, -0.1), at(0.4, 0), at(0.4, 0.2), at(r * (1 + off * s), 0.7 * r)),
      ],
      [disc, polygon(...Array.from({ length: 11 }, (_, k) => polar(0.5, 0.5, turn + (360 * k) / 11, wall)))],
    ];
    return pairs[kind];
  });

describe('hostile input', () => {
  test('a hair apart or a hair over: a valid mesh of the right areas, or a fault, in bounded time', () => {
    let meshed = 0;
    fc.assert(
      fc.property(nearMiss, fc.boolean(), fc.constantFrom(1e-6, 1, 1e6), (shapes, over, scale) => {
        const section = drawing(over ? shapes : [...shapes].reverse());
        const there = moved(section, scale, 0.3, [2, 1]);
        const codes = faultCodes(() => {
          const mesh = meshSection(there, LIMITS);
          checkMesh(mesh);
          meshed++;
          const wanted = overlayAreas(section);
          regionAreas(mesh).forEach((area, i) => {
            if (!(Math.abs(area / scale ** 2 - wanted[i]) < 1e-7 + 2 * ROUND * 0.1))
              throw new Error(`region ${i}: ${area / scale ** 2}, not ${wanted[i]}`);
          });
        });
        expect(['not refused', 'mesh-too-large', 'lines-too-near']).toContain(codes[0]);
      }),
      { seed: 51, numRuns: 150 },
    );
    expect(meshed).toBeGreaterThan(75);
  });

  test('slivers down to a billionth of the section', () => {
    for (let power = -9; power <= -1; power++) {
      const thin = 1.7 * 10 ** power;
      const codes = faultCodes(() => {
        const mesh = meshSection(drawing([rectangle(0.1, 0.5, 0.9, 0.5 + thin)]), LIMITS);
        checkMesh(mesh);
        expect(regionAreas(mesh)[1] / (0.8 * thin)).toBeCloseTo(1, 6);
      });
      expect(['not refused', 'mesh-too-large', 'too-small']).toContain(codes[0]);
      if (power >= -3) expect(codes).toEqual(['not refused']);
    }
  });

  test('a region thinner than the snapping distance is refused, not lost', () => {
    const thin = [rectangle(0.5, 0.5, 0.5 + 4e-10, 0.5 + 4e-10), rectangle(0.2, 0.5, 0.8, 0.5 + 4e-10)];
    for (const shape of thin) expect(faultCodes(() => meshSection(drawing([shape])))).toEqual(['too-small']);
  });

  test('thousands of corners, most of them sharp', () => {
    const star = Array.from({ length: 3000 }, (_, k) => polar(0.5, 0.5, (360 * k) / 3000, k % 2 === 0 ? 0.45 : 0.4));
    const mesh = meshSection(drawing([polygon(...star)]));
    checkMesh(mesh);
    // 3000 triangles round the centre.
    expect(regionAreas(mesh)[1]).toBeCloseTo(1500 * 0.45 * 0.4 * Math.sin((2 * Math.PI) / 3000), 10);
  });

  test('a hundred circles and a hundred rectangles over them', () => {
    const shapes = Array.from({ length: 100 }, (_, i) => [
      0.1 * (i % 10) + 0.05,
      0.1 * Math.floor(i / 10) + 0.05,
    ]).flatMap(([x, y]) => [circle(x, y, 0.04), rectangle(x, y, x + 0.045, y + 0.02)]);
    expectRegions(drawing(shapes), ROUND * 0.2);
  });

  test('more triangles than allowed is a fault that says so, at once', () => {
    const section = drawing([circle(0.5, 0.5, 0.2)], { maxEdge: 1e-4 });
    expect(faultCodes(() => meshSection(section, { ...LIMITS, maxTriangles: 2000 }))).toEqual(['mesh-too-large']);
    expect(() => meshSection(section, { ...LIMITS, maxTriangles: 2000 })).toThrow(
      /background: the mesh would pass 2000 triangles, most of them in 'air', .* near \(0\.\d+, 0\.\d+\) m; ask for longer/,
    );
  });
});
