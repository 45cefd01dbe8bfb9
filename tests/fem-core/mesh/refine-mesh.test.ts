import type { Section } from '@gapwright/fem-core';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { checkMesh, measureMesh, meshSection, refineMesh, regionAreas, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { circle, drawing, faultCodes, polar, polygon, rectangle, rectangles } from '../geometry/drawings.js';

const LIMITS = { minAngle: (25 * Math.PI) / 180, maxTriangles: 50_000 };

const cornersOf = (mesh: Mesh, t: number): readonly (readonly [number, number])[] =>
  [0, 1, 2].map((k) => {
    const v = 2 * mesh.triangles[3 * t + k];
    return [mesh.xy[v], mesh.xy[v + 1]] as const;
  });

function longest(mesh: Mesh, t: number): number {
  const c = cornersOf(mesh, t);
  return Math.max(...[0, 1, 2].map((k) => Math.hypot(c[k][0] - c[(k + 1) % 3][0], c[k][1] - c[(k + 1) % 3][1])));
}

function middle(mesh: Mesh, t: number): readonly [number, number] {
  const c = cornersOf(mesh, t);
  return [(c[0][0] + c[1][0] + c[2][0]) / 3, (c[0][1] + c[1][1] + c[2][1]) / 3];
}

const each = (mesh: Mesh): number[] => Array.from({ length: triangleCount(mesh) }, (_, t) => t);

/** Wanted sizes by place, at the middles of the triangles. */
const wishes = (mesh: Mesh, size: (x: number, y: number, t: number) => number): Float64Array =>
  Float64Array.from(each(mesh), (t) => size(...middle(mesh, t), t));

/** Triangles by the coordinates of their corners, whatever their numbers. */
const figures = (mesh: Mesh): Set<string> =>
  new Set(each(mesh).map((t) => cornersOf(mesh, t).map(String).sort().join(' ')));

function expectKept(mesh: Mesh, before: Mesh): void {
  checkMesh(mesh);
  const quality = measureMesh(mesh);
  expect(quality.notDelaunay).toBe(0);
  expect(quality.minAngleDeg).toBeGreaterThan(Math.min(25, measureMesh(before).minAngleDeg) - 1e-9);
  expect(mesh.regionNames).toEqual(before.regionNames);
  expect(mesh.sideNames).toEqual(before.sideNames);
  expect(mesh.edgeToMatch.some((mate) => mate >= 0)).toBe(before.edgeToMatch.some((mate) => mate >= 0));
}

const section: Section = drawing([rectangle(0.1, 0.3, 0.4, 0.7), circle(0.7, 0.5, 0.2)], {
  maxEdge: 0.1,
  matched: [['left', 'right']],
});
const start = meshSection(section);

describe('refineMesh', () => {
  test('without a wish the mesh stays as it is', () => {
    const mesh = refineMesh(
      start,
      wishes(start, () => Infinity),
    );
    expect(figures(mesh)).toEqual(figures(start));
    expectKept(mesh, start);
  });

  test('no triangle stays longer than was wished where it lies, and what is far away is not touched', () => {
    const near = (x: number, y: number): boolean => Math.hypot(x - 0.2, y - 0.2) < 0.1;
    const mesh = refineMesh(
      start,
      wishes(start, (x, y) => (near(x, y) ? 0.01 : Infinity)),
    );
    expectKept(mesh, start);
    // Sizes are inherited: wherever a triangle within the disc was asked, its children are short.
    for (const t of each(mesh)) {
      const [x, y] = middle(mesh, t);
      if (Math.hypot(x - 0.2, y - 0.2) < 0.05) expect(longest(mesh, t)).toBeLessThanOrEqual(0.01 * (1 + 1e-12));
    }
    const far = (m: Mesh): string[] =>
      each(m)
        .filter((t) => Math.hypot(middle(m, t)[0] - 0.2, middle(m, t)[1] - 0.2) > 0.45)
        .map((t) => cornersOf(m, t).map(String).sort().join(' '));
    const kept = figures(mesh);
    const there = far(start);
    expect(there.filter((figure) => kept.has(figure)).length).toBeGreaterThan(0.97 * there.length);
  });

  test('a finer wish on one matched side makes the same nodes on the other', () => {
    const mesh = refineMesh(
      start,
      wishes(start, (x, y) => (x < 0.06 && y > 0.6 ? 0.012 : Infinity)),
    );
    expectKept(mesh, start);
    const heights = (side: string): number[] => {
      const ys: number[] = [];
      mesh.edgeToSide.forEach((s, e) => {
        if (mesh.sideNames[s] === side) ys.push(mesh.middles[2 * e + 1]);
      });
      return ys.sort((a, b) => a - b);
    };
    const [left, right] = [heights('left'), heights('right')];
    expect(left.length).toBeGreaterThan(20);
    left.forEach((y, i) => {
      expect(right[i]).toBeCloseTo(y, 14);
    });
  });

  test('areas stay, those of circles too', () => {
    let mesh = start;
    for (let i = 0; i < 3; i++) {
      const areas = regionAreas(mesh);
      expect(areas[1]).toBeCloseTo(0.12, 14);
      expect(areas[2]).toBeCloseTo(Math.PI * 0.04, 14);
      mesh = refineMesh(
        mesh,
        wishes(mesh, (_x, _y, t) => 0.5 * longest(mesh, t)),
      );
      expectKept(mesh, start);
    }
  });

  test('any wishes, round after round, on any rectangles', () => {
    const rounds = fc.array(fc.tuple(fc.integer({ min: 0, max: 9 }), fc.integer({ min: 3, max: 9 })), {
      minLength: 1,
      maxLength: 3,
    });
    fc.assert(
      fc.property(fc.array(rectangles, { minLength: 1, maxLength: 4 }), rounds, (shapes, list) => {
        const first = meshSection(drawing(shapes, { matched: [['bottom', 'top']] }), LIMITS);
        let mesh = first;
        for (const [where, share] of list) {
          mesh = refineMesh(
            mesh,
            wishes(mesh, (_x, _y, t) => (t % 10 === where ? (share / 10) * longest(mesh, t) : Infinity)),
            LIMITS,
          );
          expectKept(mesh, first);
          regionAreas(mesh).forEach((area, i) => {
            expect(area).toBeCloseTo(regionAreas(first)[i], 12);
          });
        }
      }),
      { seed: 61, numRuns: 40 },
    );
  });

  test('towards a point triangles are added in rings: as many for each halving', () => {
    let mesh = meshSection(drawing([], { maxEdge: 0.2 }));
    const counts: number[] = [];
    for (let k = 0; k < 12; k++) {
      const at = (x: number, y: number, t: number): number =>
        Math.hypot(x - 0.41, y - 0.37) < longest(mesh, t) ? 0.5 * longest(mesh, t) : Infinity;
      mesh = refineMesh(mesh, wishes(mesh, at));
      counts.push(triangleCount(mesh));
    }
    checkMesh(mesh);
    const steps = counts.slice(1).map((count, k) => count - counts[k]);
    expect(Math.max(...steps)).toBeLessThan(200);
    expect(counts[11]).toBeLessThan(2000);
  });

  test('round sharp corners of the input too', () => {
    const wedge = meshSection(drawing([polygon([0.1, 0.5], [0.9, 0.5], polar(0.1, 0.5, 12, 0.6))], { maxEdge: 0.05 }));
    const near = (x: number, y: number): boolean => Math.hypot(x - 0.1, y - 0.5) < 0.1;
    const mesh = refineMesh(
      wedge,
      wishes(wedge, (x, y) => (near(x, y) ? 0.005 : Infinity)),
    );
    checkMesh(mesh);
    expect(measureMesh(mesh).minAngleDeg).toBeGreaterThan(5);
    expect(triangleCount(mesh)).toBeLessThan(10_000);
  });

  test('more triangles than allowed is a fault', () => {
    const all = wishes(start, () => 1e-3);
    expect(faultCodes(() => refineMesh(start, all, { ...LIMITS, maxTriangles: 3000 }))).toEqual(['mesh-too-large']);
  });

  test('the mesh it is given is left as it was', () => {
    const copy = structuredClone(start);
    refineMesh(
      start,
      wishes(start, () => 0.02),
    );
    expect(start).toEqual(copy);
  });
});

test('few triangles for the edges wanted: on average above half the area of the equilateral one', () => {
  for (const turned of [0, 0.3, 0.7]) {
    const corners = [0, 1, 2, 3].map((k) => polar(0, 0, (turned * 180) / Math.PI + 90 * k, 1));
    const mesh = meshSection({ outline: polygon(...corners), background: 'air', maxEdge: 0.04, regions: [] });
    checkMesh(mesh);
    const area = 2 / triangleCount(mesh);
    expect(area / (0.25 * Math.sqrt(3) * 0.04 ** 2)).toBeGreaterThan(0.5);
    expect(measureMesh(mesh).minAngleDeg).toBeGreaterThan(25 - 1e-9);
  }
});

test('round things that touch each other and the outline are refined: gaps that narrow to nothing ask for no more', () => {
  const packed = [0, 1, 2, 3, 4].flatMap((i) => [0, 1, 2, 3, 4].map((j) => circle(0.1 + 0.2 * i, 0.1 + 0.2 * j, 0.1)));
  for (const shapes of [packed, [circle(0.1, 0.5, 0.1)]]) {
    const coarse = meshSection(drawing(shapes));
    const fine = refineMesh(
      coarse,
      wishes(coarse, () => 0.05),
      { ...LIMITS, maxTriangles: triangleCount(coarse) + 6000 },
    );
    expect(triangleCount(fine)).toBeGreaterThan(triangleCount(coarse));
    checkMesh(fine, { minFreeAngleDeg: 25 });
  }
});
