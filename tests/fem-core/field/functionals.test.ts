import type { Field } from '@gapwright/fem-core';
import { buildLocator, energiesOf, meanOver, solveSection, valueAt } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';
import {
  applyFunctional,
  pointPotential,
  stressFunctional,
  stressThrough,
  weightedFlux,
  weightedIntegral,
} from '@gapwright/fem-core/goals';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { fill, interpolate, MESHES, ROD, roundMesh, roundSection, straightMesh } from './made-fields.js';

const off = (got: number, expected: number): number => Math.abs(got / expected - 1);
const weight = (x: number, y: number): number => 1 + Math.sin(120 * x) + 40 * y;
const vector = (x: number, y: number): readonly [number, number] => [Math.cos(70 * y), 30 * x - 0.4];

function sum(field: Field, regions: readonly string[], term: (x: number, y: number, s: Sample) => number): number {
  let total = 0;
  forEachSample(field, regions, (s) => {
    total += s.area * term(s.x, s.y, s);
  });
  return total;
}
type Sample = { readonly a: number; readonly bx: number; readonly by: number };

describe.each(MESHES)('functionals of A on the %s mesh', (_, mesh) => {
  const field = interpolate(mesh, (x, y) => Math.sin(90 * x) * Math.cosh(50 * y) + 0.2);
  const inner = mesh.regionNames.slice(1);

  test('a weighted integral is the sum over the samples', () => {
    for (const regions of [inner, mesh.regionNames, ['air']]) {
      const direct = sum(field, regions, (x, y, s) => weight(x, y) * s.a);
      expect(off(applyFunctional(weightedIntegral(mesh, regions, weight), field.potential), direct)).toBeLessThan(
        1e-12,
      );
    }
  });

  test('a weighted flux is the sum over the samples', () => {
    for (const regions of [inner, mesh.regionNames, ['air']]) {
      const direct = sum(field, regions, (x, y, s) => vector(x, y)[0] * s.bx + vector(x, y)[1] * s.by);
      expect(off(applyFunctional(weightedFlux(mesh, regions, vector), field.potential), direct)).toBeLessThan(1e-10);
    }
  });

  test('a weighted flux tells its weight which triangle and point it is at: B itself gives the integral of B^2', () => {
    const samples: (readonly [number, number])[] = [];
    const places: (readonly [x: number, y: number, triangle: number])[] = [];
    forEachSample(field, inner, (s) => {
      samples.push([s.bx, s.by]);
      places.push([s.x, s.y, s.triangle]);
    });
    let visit = 0;
    const functional = weightedFlux(mesh, inner, (x, y, triangle, point) => {
      expect([x, y, triangle]).toEqual(places[visit]);
      expect(point).toBe(visit % 7);
      return samples[visit++];
    });
    expect(visit).toBe(samples.length);
    const direct = sum(field, inner, (_x, _y, s) => s.bx ** 2 + s.by ** 2);
    expect(off(applyFunctional(functional, field.potential), direct)).toBeLessThan(1e-12);
  });

  test('with weight 1 they are the means times the area; nothing over no regions', () => {
    const mean = meanOver(field, inner);
    const applied = (functional: Float64Array): number => applyFunctional(functional, field.potential) / mean.area;
    expect(applied(weightedIntegral(mesh, inner, () => 1))).toBeCloseTo(mean.a, 12);
    expect(applied(weightedFlux(mesh, inner, () => [1, 0]))).toBeCloseTo(mean.bx, 9);
    expect(applied(weightedFlux(mesh, inner, () => [0, 1]))).toBeCloseTo(mean.by, 9);
    expect(weightedIntegral(mesh, [], weight).every((g) => g === 0)).toBe(true);
  });

  test('a constant potential carries no flux', () => {
    const flux = weightedFlux(mesh, mesh.regionNames, vector);
    const scale = flux.reduce((s, g) => s + Math.abs(g), 0);
    expect(Math.abs(flux.reduce((s, g) => s + g, 0))).toBeLessThan(1e-13 * scale);
  });

  test('the potential of a point is the value there', () => {
    const locator = buildLocator(mesh);
    const place = fc.double({ min: -0.018, max: 0.018, noNaN: true });
    fc.assert(
      fc.property(place, place, (x, y) => {
        const spot = locator.find(x, y);
        if (spot === undefined) throw new Error(`(${x}, ${y}) is not found`);
        const functional = pointPotential(mesh, spot);
        expect(functional.reduce((s, g) => s + g, 0)).toBeCloseTo(1, 13);
        const value = valueAt(field, locator, x, y)?.a ?? Number.NaN;
        expect(applyFunctional(functional, field.potential)).toBeCloseTo(value, 12);
      }),
    );
  });

  test('the functional of the stress is its derivative: differences of the force along any change of A', () => {
    const slope = (x: number, y: number): readonly [number, number] => [20 + 900 * y, 50 - 2000 * x];
    const functional = stressFunctional(field, ['air'], slope);
    for (const seed of [1, 2, 3]) {
      const change = field.potential.map((_a, node) => 0.01 * Math.sin(7.3 * node * seed + seed));
      const forceAt = (s: number): number =>
        stressThrough({ ...field, potential: field.potential.map((a, i) => a + s * change[i]) }, ['air'], slope).fy;
      // The stress is quadratic in A, so central differences are exact whatever the step.
      expect(off(applyFunctional(functional, change), (forceAt(1) - forceAt(-1)) / 2)).toBeLessThan(1e-9);
    }
    // and homogeneous: twice the force along A itself
    const { fy } = stressThrough(field, ['air'], slope);
    expect(off(applyFunctional(functional, field.potential), 2 * fy)).toBeLessThan(1e-12);
  });
});

test('the weighted integral of a polynomial is met to rounding where weight and A together reach degree 5', () => {
  const field = interpolate(straightMesh, (x, y) => 1 + x * y);
  const functional = weightedIntegral(straightMesh, ['block'], (x) => x * x);
  // integral over x in [-0.02, -0.005], y in [-0.01, 0.01] of x^2 (1 + x y): the odd part in y falls out
  const expected = (0.02 * (0.02 ** 3 - 0.005 ** 3)) / 3;
  expect(off(applyFunctional(functional, field.potential), expected)).toBeLessThan(1e-12);
});

test('a rod with current in a linear room: energy = coenergy = half the integral of J A', () => {
  const density = 3e6;
  const section = roundSection(0.006);
  const setup = { ...fill(roundMesh, { air: { kind: 'linear', muR: 5 } }), currentDensity: { rod: density } };
  const field = solveSection(section, setup, { tolerance: 1e-12 });
  const { energy, coenergy } = energiesOf(field);
  const half =
    0.5 *
    applyFunctional(
      weightedIntegral(field.mesh, ['rod'], () => density),
      field.potential,
    );
  expect(off(energy, half)).toBeLessThan(1e-10);
  expect(off(coenergy, half)).toBeLessThan(1e-10);
  expect(energy).toBeGreaterThan(0);
  expect(Math.hypot(ROD.x, ROD.y)).toBeLessThan(ROD.radius); // the rod covers the origin
});
