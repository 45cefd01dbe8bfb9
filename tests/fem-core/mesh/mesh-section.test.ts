import type { Section } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import {
  checkMesh,
  cornerCount,
  edgeCount,
  measureMesh,
  meshSection,
  regionAreas,
  triangleCount,
} from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  circle,
  circles,
  drawing,
  faultCodes,
  moved,
  polygon,
  polygons,
  rectangle,
  rectangles,
} from '../geometry/drawings.js';
import { overlayAreas } from '../geometry/overlay-areas.js';

/**
 * What a mesh may miss of a circle's area, of radius squared: the parabola through the ends and the middle of an arc of
 * 2 phi keeps to the circle within r phi^4/8 or so; sixteen arcs make 1.6e-4 r^2 where all of it is missed.
 */
const ROUND = 1.6e-4;

function roundness(section: Section): number {
  const shapes = [section.outline, ...section.regions.map((region) => region.shape)];
  return shapes.reduce((sum, shape) => sum + (shape.kind === 'circle' ? shape.radius ** 2 : 0), 0);
}

function expectAreas(mesh: Mesh, section: Section, wanted: readonly number[]): void {
  const whole = wanted.reduce((a, b) => a + b, 0);
  const tolerance = 1e-8 * whole + ROUND * roundness(section);
  regionAreas(mesh).forEach((area, i) => {
    expect(Math.abs(area - wanted[i])).toBeLessThan(tolerance);
  });
}

/** What is drawn here needs no more; a mesh that grows without end is to fail soon. */
const LIMITS = { minAngle: (25 * Math.PI) / 180, maxTriangles: 60_000 };

/** Meshed, checked, Delaunay, of the right areas. */
function expectSound(section: Section, wanted = overlayAreas(section)): Mesh {
  const mesh = meshSection(section, LIMITS);
  checkMesh(mesh);
  expect(measureMesh(mesh).notDelaunay).toBe(0);
  expectAreas(mesh, section, wanted);
  return mesh;
}

const someOf = (shape: fc.Arbitrary<ReturnType<typeof rectangle>>, most = 5) =>
  fc.array(shape, { minLength: 1, maxLength: most });

describe('areas are those of the overlay, later shapes over earlier', () => {
  test('rectangles that share corners, overlap and stick out; no angle below 25 degrees', () => {
    fc.assert(
      fc.property(someOf(rectangles, 7), (shapes) => {
        const section = drawing(shapes);
        const mesh = expectSound(section);
        expect(measureMesh(mesh).minAngleDeg).toBeGreaterThan(25 - 1e-9);
        // Straight regions to the last digit.
        const exact = overlayAreas(section);
        regionAreas(mesh).forEach((area, i) => {
          expect(area).toBeCloseTo(exact[i], 12);
        });
      }),
      { seed: 41, numRuns: 150 },
    );
  });

  test('polygons of any angle', () => {
    fc.assert(
      fc.property(someOf(polygons, 4), (shapes) => {
        expectSound(drawing(shapes));
      }),
      { seed: 42, numRuns: 100 },
    );
  });

  test('circles, rectangles and polygons over each other', () => {
    fc.assert(
      fc.property(someOf(fc.oneof(circles, circles, rectangles, polygons)), (shapes) => {
        expectSound(drawing(shapes));
      }),
      { seed: 43, numRuns: 120 },
    );
  });

  test('in a round outline', () => {
    fc.assert(
      fc.property(someOf(fc.oneof(circles, rectangles), 3), (shapes) => {
        const section = drawing(shapes, { outline: circle(0.5, 0.5, 0.5) });
        const wanted = overlayAreas(section);
        fc.pre(wanted[0] > 0);
        // Shapes wholly outside are refused.
        const codes = faultCodes(() => meshSection(section));
        if (codes[0] === 'not refused') expectSound(section, wanted);
        else expect(codes).toContain('outside-outline');
      }),
      { seed: 44, numRuns: 50 },
    );
  });
});

describe('shifted, turned and scaled', () => {
  test.each([
    [1e-6, 0, [0, 0]],
    [1e6, 0, [0, 0]],
    [1e-6, 0.7, [3, -5]],
    [1e6, 2.1, [-100, 40]],
    [1, 0.4, [1000, 1000]],
  ] as const)('by %f, %f rad, %j sizes', (scale, angle, shift) => {
    fc.assert(
      fc.property(someOf(fc.oneof(circles, rectangles, polygons), 4), (shapes) => {
        const section = drawing(shapes, { matched: [['left', 'right']] });
        const wanted = overlayAreas(section).map((area) => area * scale * scale);
        const there = moved(section, scale, angle, shift);
        const mesh = meshSection(there, LIMITS);
        checkMesh(mesh);
        expectAreas(mesh, there, wanted);
        for (let e = 0; e < edgeCount(mesh); e++) {
          if (['edge 2', 'edge 4'].includes(mesh.sideNames[mesh.edgeToSide[e]])) {
            expect(mesh.edgeToMatch[e]).toBeGreaterThanOrEqual(0);
          }
        }
      }),
      { seed: 45, numRuns: 15 },
    );
  });

  test('by powers of two: the same mesh, to the bit', () => {
    const section = drawing([circle(0.3, 0.4, 0.21), rectangle(0.4, 0.2, 0.9, 0.5)], { maxEdge: 0.125 });
    const scaled = (f: number): Section => ({
      ...moved(section, f, 0, [0, 0]),
      outline: rectangle(0, 0, f, f),
      maxEdge: 0.125 * f,
    });
    const base = meshSection(scaled(1));
    for (const f of [2 ** -20, 2 ** 20]) {
      const mesh = meshSection(scaled(f));
      expect(mesh.triangles).toEqual(base.triangles);
      expect(mesh.xy.map((value) => value / f)).toEqual(base.xy);
    }
  });
});

describe('promises of the mesh', () => {
  const section: Section = {
    outline: rectangle(0, 0, 0.3, 0.2),
    background: 'air',
    maxEdge: 0.05,
    regions: [
      { name: 'bar', shape: rectangle(0.05, 0.05, 0.15, 0.15) },
      { name: 'rod', shape: circle(0.22, 0.1, 0.04), maxEdge: 0.01 },
    ],
    matched: [['left', 'right']],
  };
  const mesh = meshSection(section);

  test('no edge is longer than its region wishes, straight or curved', () => {
    const wishes = [0.05, Infinity, 0.01];
    for (let t = 0; t < triangleCount(mesh); t++) {
      for (let k = 0; k < 3; k++) {
        const [a, b] = [mesh.triangles[3 * t + k], mesh.triangles[3 * t + ((k + 1) % 3)]].map((v) => 2 * v);
        const length = Math.hypot(mesh.xy[a] - mesh.xy[b], mesh.xy[a + 1] - mesh.xy[b + 1]);
        expect(length).toBeLessThanOrEqual(wishes[mesh.triangleToRegion[t]] * (1 + 1e-12));
      }
    }
  });

  test('sizes grow gently from a fine region: neighbours differ by less than four in length', () => {
    const size = (t: number): number => {
      const [a, b, c] = [0, 1, 2].map((k) => 2 * mesh.triangles[3 * t + k]);
      const { xy } = mesh;
      return Math.sqrt((xy[b] - xy[a]) * (xy[c + 1] - xy[a + 1]) - (xy[b + 1] - xy[a + 1]) * (xy[c] - xy[a]));
    };
    for (let t = 0; t < triangleCount(mesh); t++) {
      for (let k = 0; k < 3; k++) {
        const u = mesh.neighbours[3 * t + k];
        if (u >= 0) expect(size(t) / size(u)).toBeLessThan(4);
      }
    }
  });

  test('middles of edges on a circle lie off it by phi^2/80 of their rise, all others half-way', () => {
    let round = 0;
    for (let e = 0; e < edgeCount(mesh); e++) {
      const [x, y] = [mesh.middles[2 * e], mesh.middles[2 * e + 1]];
      const [a, b] = [2 * mesh.edges[2 * e], 2 * mesh.edges[2 * e + 1]];
      const curve = mesh.edgeToCurve[e] < 0 ? undefined : mesh.curves[mesh.edgeToCurve[e]];
      if (curve?.kind === 'arc') {
        round++;
        const phi = 2 * Math.asin(Math.hypot(mesh.xy[a] - mesh.xy[b], mesh.xy[a + 1] - mesh.xy[b + 1]) / 0.08);
        const off = Math.hypot(x - 0.22, y - 0.1) - 0.04;
        expect(off / (0.04 * (1 - Math.cos(phi / 2)) * (phi ** 2 / 80))).toBeCloseTo(1, 2);
        continue;
      }
      expect(x).toBe(0.5 * (mesh.xy[a] + mesh.xy[b]));
      expect(y).toBe(0.5 * (mesh.xy[a + 1] + mesh.xy[b + 1]));
    }
    expect(round).toBeGreaterThan(16);
    for (let t = 0; t < triangleCount(mesh); t++) {
      const onArc = [0, 1, 2].some((k) => {
        const curve = mesh.edgeToCurve[mesh.triangleToEdge[3 * t + k]];
        return curve >= 0 && mesh.curves[curve].kind === 'arc';
      });
      expect(mesh.curved[t]).toBe(onArc ? 1 : 0);
    }
  });

  test('sides of the outline are named, and matched edges stand opposite', () => {
    const named = new Set(mesh.edgeToSide.filter((side) => side >= 0).map((side) => side));
    expect([...named].sort()).toEqual([0, 1, 2, 3]);
    for (let e = 0; e < edgeCount(mesh); e++) {
      const side = mesh.sideNames[mesh.edgeToSide[e]];
      const mate = mesh.edgeToMatch[e];
      expect(mate >= 0).toBe(side === 'left' || side === 'right');
      if (mate < 0) continue;
      for (const k of [0, 1]) {
        expect(mesh.xy[2 * mesh.edges[2 * e + k] + 1]).toBeCloseTo(mesh.xy[2 * mesh.edges[2 * mate + k] + 1], 15);
      }
    }
  });

  test('every corner is a corner of some triangle', () => {
    expect(new Set(mesh.triangles).size).toBe(cornerCount(mesh));
  });

  test('the same section gives the same mesh', () => {
    expect(meshSection(section)).toEqual(mesh);
  });

  test('lines covered by a later region leave no trace', () => {
    const plain = meshSection(drawing([rectangle(0.1, 0.1, 0.9, 0.9)]));
    const covered = meshSection(
      drawing([polygon([0.2, 0.2], [0.8, 0.3], [0.5, 0.8]), circle(0.5, 0.5, 0.2), rectangle(0.1, 0.1, 0.9, 0.9)]),
    );
    expect(triangleCount(covered)).toBe(triangleCount(plain));
    expect(regionAreas(covered).map((area) => area > 0)).toEqual([true, false, false, true]);
  });

  test('a wish for finer angles is met, up to 30 degrees', () => {
    const limits = { minAngle: (30 * Math.PI) / 180, maxTriangles: 10_000 };
    const fine = meshSection(drawing([rectangle(0.13, 0.2, 0.31, 0.77), rectangle(0.5, 0.4, 0.9, 0.43)]), limits);
    checkMesh(fine);
    expect(measureMesh(fine).minAngleDeg).toBeGreaterThan(30 - 1e-9);
  });
});
