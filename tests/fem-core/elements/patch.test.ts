import type { Field, Point, Section, Setup, Shape } from '@gapwright/fem-core';
import { energiesOf, MU0 } from '@gapwright/fem-core';
import { meshSection, nodeCount, nodePoint, solveOnMesh } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { AIR, relativeError } from '../../laws/sections.js';

type Potential = (x: number, y: number) => number;

/**
 * The patch test (Irons, Razzaque, Experience with the patch test for convergence of finite elements, 1972): a potential
 * the elements can hold, given on the outline, must come out inside to rounding, whatever the mesh.
 */
function solveWithin(section: Section, a: Potential, density = 0): Field {
  const names = [section.background, ...section.regions.map(({ name }) => name)];
  const sides = meshSection(section).sideNames;
  const setup: Setup = {
    materials: Object.fromEntries(names.map((name) => [name, AIR])),
    currentDensity: Object.fromEntries(names.map((name) => [name, density])),
    edges: Object.fromEntries(sides.map((side) => [side, { kind: 'potential', value: a }])),
  };
  return solveOnMesh(meshSection(section), setup, { tolerance: 1e-14 }).field;
}

/** Largest difference from `a` over all nodes, as a share of its span. */
function worst({ mesh, potential }: Field, a: Potential): number {
  let [error, low, high] = [0, Infinity, -Infinity];
  for (let node = 0; node < nodeCount(mesh); node++) {
    const wanted = a(...nodePoint(mesh, node));
    error = Math.max(error, Math.abs(potential[node] - wanted));
    [low, high] = [Math.min(low, wanted), Math.max(high, wanted)];
  }
  return error / (high - low);
}

/** Rectangles with a polygon of irregular corners within, so that no two meshes look alike; size over ten decades. */
const drawings: fc.Arbitrary<Section> = fc
  .tuple(
    fc.array(fc.double({ min: 0.35, max: 1, noNaN: true }), { minLength: 3, maxLength: 7 }),
    fc.double({ min: -5, max: 5, noNaN: true }),
    fc.double({ min: 0.5, max: 2, noNaN: true }),
  )
  .map(([radii, log, aspect]) => {
    const size = 10 ** log;
    const corners = radii.map((r, i): Point => {
      const angle = (2 * Math.PI * (i + 0.3 * Math.sin(9 * r))) / radii.length;
      return [size * (0.5 + 0.4 * r * Math.cos(angle)), size * aspect * (0.5 + 0.4 * r * Math.sin(angle))];
    });
    return {
      outline: { kind: 'rectangle', from: [0, 0], to: [size, size * aspect] },
      background: 'air',
      maxEdge: 0.6 * size,
      regions: [{ name: 'patch', shape: { kind: 'polygon', corners }, maxEdge: 0.4 * size }],
    };
  });

const sizeOf = (section: Section): number => (section.outline.kind === 'rectangle' ? section.outline.to[0] : 1);

describe('straight elements of random meshes reproduce', () => {
  test('every uniform field', () => {
    fc.assert(
      fc.property(drawings, fc.double({ min: 0, max: 6.3, noNaN: true }), (section, angle) => {
        const a: Potential = (x, y) => Math.cos(angle) * y - Math.sin(angle) * x;
        expect(worst(solveWithin(section, a), a)).toBeLessThan(1e-12);
      }),
      { numRuns: 15 },
    );
  });

  test('fields that rise along the patch: A = x^2 - y^2 and x y, no current', () => {
    fc.assert(
      fc.property(drawings, fc.double({ min: -2, max: 2, noNaN: true }), (section, share) => {
        const s = sizeOf(section);
        const a: Potential = (x, y) => (x * x - y * y + share * x * y) / s + 0.3 * x;
        expect(worst(solveWithin(section, a), a)).toBeLessThan(1e-12);
      }),
      { numRuns: 15 },
    );
  });

  test('the field within a uniform current: A = -mu0 J (p x^2 + (1 - p) y^2)/2', () => {
    fc.assert(
      fc.property(drawings, fc.double({ min: -1, max: 2, noNaN: true }), (section, p) => {
        const density = 1e6 / sizeOf(section);
        const a: Potential = (x, y) => (-MU0 * density * (p * x * x + (1 - p) * y * y)) / 2;
        expect(worst(solveWithin(section, a, density), a)).toBeLessThan(1e-12);
      }),
      { numRuns: 15 },
    );
  });
});

describe('elements on round rims', () => {
  const disc: Shape = { kind: 'circle', centre: [0.2, -0.1], radius: 1 };
  const section: Section = {
    outline: disc,
    background: 'air',
    maxEdge: 0.5,
    regions: [{ name: 'bar', shape: { kind: 'circle', centre: [0.4, 0], radius: 0.3 } }],
  };

  test('reproduce every uniform field', () => {
    for (const angle of [0, 0.7, 2]) {
      const a: Potential = (x, y) => Math.cos(angle) * y - Math.sin(angle) * x + 0.4;
      expect(worst(solveWithin(section, a), a)).toBeLessThan(1e-12);
    }
  });

  test('hold a quadratic potential to the order of their curvature, not exactly', () => {
    const a: Potential = (x, y) => x * x - y * y;
    const [coarse, fine] = [0.5, 0.25].map((maxEdge) => worst(solveWithin({ ...section, maxEdge }, a), a));
    expect(coarse).toBeGreaterThan(1e-9);
    expect(coarse).toBeLessThan(1e-3);
    expect(fine).toBeLessThan(0.3 * coarse);
  });

  test('the energy of a uniform field is that of the area: B^2/(2 mu0) pi r^2', () => {
    const field = solveWithin({ ...section, maxEdge: 0.2 }, (_, y) => y);
    expect(field.mesh.curved).toContain(1);
    expect(relativeError(energiesOf(field).energy, Math.PI / (2 * MU0))).toBeLessThan(1e-5);
  });
});
