import type { Section, SizeAt } from '@gapwright/fem-core';
import { meshSection, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { buildPlanarGraph } from '../../../packages/fem-core/src/geometry/planar-graph.js';
import { triangulateGraph } from '../../../packages/fem-core/src/mesh/constrained-delaunay.js';
import { demandOf } from '../../../packages/fem-core/src/mesh/demand.js';
import { meshSteps } from '../../../packages/fem-core/src/mesh/mesh-section.js';
import { drawing, polygon, rectangle } from '../geometry/drawings.js';

const LIMITS = { minAngle: (25 * Math.PI) / 180, maxTriangles: 200_000 };
const FULL = Math.sqrt(3) / 4;

function demand(section: Section): { readonly regions: number; readonly wishes: readonly number[] } {
  const graph = buildPlanarGraph(section);
  const tri = triangulateGraph(graph);
  for (let t = 0; t < tri.slotCount; t++) tri.size[t] = graph.drawing.maxEdges[tri.region[t]] ?? Infinity;
  const { byTriangle, byWish } = demandOf(tri, section.sizeAt ?? [], Infinity);
  return { regions: byTriangle.reduce((sum, count) => sum + count, 0), wishes: [...byWish] };
}

const all = ({ regions, wishes }: ReturnType<typeof demand>): number => wishes.reduce((a, b) => a + b, regions);

/** Integral of dA / (FULL (m + g r)^2) over a disc of radius R about the point. */
const inDisc = (m: number, g: number, R: number): number =>
  ((2 * Math.PI) / FULL / g ** 2) * (Math.log1p((g * R) / m) - (g * R) / (m + g * R));

describe('what wishes ask for', () => {
  test('a region of area S with edges of h: S over the area of a triangle of side h', () => {
    const triangle = drawing([], { outline: polygon([0, 0], [3, 0], [0, 2]), maxEdge: 0.01 });
    expect(demand(triangle).regions).toBeCloseTo(3 / (FULL * 1e-4), 6);
  });

  test('a point: the integral of 1/h^2 with h growing from it, between those over the discs in and round a square', () => {
    for (const [maxEdge, growth] of [
      [1e-2, 0.3],
      [1e-5, 0.3],
      [1e-3, 0.05],
      [1e-9, 0.3],
    ]) {
      const { regions, wishes } = demand(drawing([], { sizeAt: [{ at: [0.5, 0.5], maxEdge, growth }] }));
      expect(regions).toBe(0);
      expect(wishes[0]).toBeGreaterThan(0.9 * inDisc(maxEdge, growth, 0.5));
      expect(wishes[0]).toBeLessThan(1.1 * inDisc(maxEdge, growth, Math.SQRT1_2));
    }
  });

  test('a wish finer than coordinates can tell is counted as far as they can', () => {
    const all64 = inDisc(1e-16, 0.3, 1);
    for (const maxEdge of [1e-30, 1e-300]) {
      const { wishes } = demand(drawing([], { sizeAt: [{ at: [0.37, 0.61], maxEdge }] }));
      expect(wishes[0]).toBeGreaterThan(0.5 * all64);
      expect(wishes[0]).toBeLessThan(2 * all64);
    }
  });

  test('far apart points add up; of two at one place the shorter counts; a region counts where it asks for less', () => {
    const at = (x: number, maxEdge = 1e-5): SizeAt => ({ at: [x, 0.5], maxEdge });
    const one = all(demand(drawing([], { sizeAt: [at(0.2)] })));
    expect(all(demand(drawing([], { sizeAt: [at(0.2), at(0.8)] }))) / one).toBeGreaterThan(1.7);
    expect(demand(drawing([], { sizeAt: [at(0.2, 1e-3), at(0.2)] })).wishes[0]).toBe(0);
    const fine = { ...drawing([rectangle(0.7, 0.7, 0.9, 0.9)], { sizeAt: [at(0.2)] }) };
    const regions = fine.regions.map((region) => ({ ...region, maxEdge: 0.002 }));
    expect(demand({ ...fine, regions }).regions).toBeCloseTo(0.04 / (FULL * 4e-6), 6);
  });

  test('meshes that meet wishes at points have more than twice as many triangles: refusing at that refuses none', () => {
    const wish = fc.record({
      at: fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.double({ min: 0, max: 1, noNaN: true })),
      maxEdge: fc.integer({ min: 10, max: 50 }).map((k) => 10 ** (-k / 10)),
      growth: fc.constantFrom(0.1, 0.3, 1),
    });
    fc.assert(
      fc.property(fc.array(wish, { minLength: 1, maxLength: 4 }), (sizeAt) => {
        const section = drawing([], { sizeAt });
        expect(triangleCount(meshSection(section, LIMITS))).toBeGreaterThan(2 * all(demand(section)));
      }),
      { seed: 3, numRuns: 25 },
    );
  });
});

describe('a mesh beyond its limit is refused', () => {
  const key = (section: Section, maxTriangles: number): string => {
    try {
      meshSection(section, { ...LIMITS, maxTriangles });
    } catch (error) {
      return String(error).split(': ')[1];
    }
    return 'meshed';
  };

  test('before a single point is placed where the wishes alone show it, and the wish is named', () => {
    const sizeAt: SizeAt[] = [
      { at: [0.2, 0.2], maxEdge: 0.01 },
      { at: [0.7, 0.4], maxEdge: 1e-3, growth: 0 },
    ];
    const section = drawing([rectangle(0.1, 0.1, 0.9, 0.9)], { sizeAt });
    expect(() => meshSteps(section, LIMITS).next()).toThrow(
      /^sizeAt\.1\.maxEdge: the mesh would pass 200000 .* edges of 0\.001 m near \(0\.7, 0\.4\) m; /,
    );
    const many = Array.from({ length: 400 }, (_, i) => ({ at: [(i % 20) / 20, i / 400] as const, maxEdge: 1e-6 }));
    expect(() => meshSteps({ ...section, sizeAt: many }, LIMITS).next()).toThrow(
      /^sizeAt\.\d+\..* and others like it; /,
    );
    expect(key({ ...section, sizeAt: sizeAt.slice(0, 1), maxEdge: 1e-3 }, 200_000)).toBe('background');
  });

  test('on the way where they do not, the wish or the region that took most of it named', () => {
    const wish = drawing([], { sizeAt: [{ at: [0.3, 0.3], maxEdge: 1e-3 }] });
    const least = all(demand(wish));
    const found = triangleCount(meshSection(wish, LIMITS));
    expect(key(wish, Math.round(0.5 * (2 * least + found)))).toBe('sizeAt.0.maxEdge');
    const pile = drawing([rectangle(0.4, 0.4, 0.4001, 0.4001)], { sizeAt: [{ at: [0.9, 0.9], maxEdge: 0.5 }] });
    expect(key(pile, Math.round(0.7 * triangleCount(meshSection(pile, LIMITS))))).toBe('background');
  });
});
