import type { Material } from '@gapwright/fem-core';
import { buildBHCurve, energiesOf, MU0, meanOver, triangleMeans, valueAt } from '@gapwright/fem-core';
import { exceededIn, forEachSample } from '@gapwright/fem-core/field';
import { meshSection, regionAreas, triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { buildLocator } from '../../../packages/fem-core/src/field/locate.js';
import { interpolate, MESHES, ROD, ROUND, roundMesh, roundSection, straightMesh } from './made-fields.js';

const off = (got: number, expected: number): number => Math.abs(got / expected - 1);
const areaOf = (mesh: typeof straightMesh, name: string): number => regionAreas(mesh)[mesh.regionNames.indexOf(name)];

describe('areas', () => {
  test('of straight regions are those drawn', () => {
    expect(off(areaOf(straightMesh, 'block'), 0.015 * 0.02)).toBeLessThan(1e-12);
    const bar = Math.hypot(0.017, 0.016) * Math.hypot(0.004, 0.004) * Math.sin(Math.PI / 4 + Math.atan2(0.016, 0.017));
    expect(off(areaOf(straightMesh, 'bar'), bar)).toBeLessThan(1e-12);
    const all = regionAreas(straightMesh).reduce((sum, area) => sum + area, 0);
    expect(off(all, 0.06 * 0.04)).toBeLessThan(1e-12);
  });

  test('of circles are those of circles, however coarse the mesh: each curved edge cuts off its segment', () => {
    for (const edge of [0.012, 0.006, 0.003]) {
      const mesh = meshSection(roundSection(edge));
      const all = regionAreas(mesh).reduce((sum, area) => sum + area, 0);
      expect(off(all, Math.PI * ROUND.radius ** 2)).toBeLessThan(1e-12);
      expect(off(areaOf(mesh, 'rod'), Math.PI * 1e-4)).toBeLessThan(1e-12);
    }
  });
});

describe.each(MESHES)('means over the %s mesh', (_, mesh) => {
  const names = mesh.regionNames;

  test('of a uniform field are the field, over any regions', () => {
    const field = interpolate(mesh, (x, y) => 0.3 * y + 0.4 * x);
    for (const regions of [names, [names[0]], [names[1]], names.slice(1)]) {
      const { bx, by, b } = meanOver(field, regions);
      expect(bx).toBeCloseTo(0.3, 12);
      expect(by).toBeCloseTo(-0.4, 12);
      expect(b).toBeCloseTo(0.5, 12);
    }
  });

  test('over several regions together weigh each by its area', () => {
    const field = interpolate(mesh, (x, y) => Math.sin(80 * x) + Math.cos(60 * y));
    const together = meanOver(field, names);
    const parts = names.map((name) => meanOver(field, [name]));
    for (const key of ['a', 'bx', 'by', 'b'] as const) {
      const sum = parts.reduce((s, part) => s + part.area * part[key], 0);
      expect(together.area * together[key]).toBeCloseTo(sum, 12);
    }
    parts.forEach((part, i) => {
      expect(off(part.area, regionAreas(mesh)[i])).toBeLessThan(1e-12);
    });
  });

  test('triangle by triangle, weighed by area, give the mean over all', () => {
    const field = interpolate(mesh, (x, y) => Math.sin(80 * x) * Math.cosh(50 * y));
    const { fluxDensity } = triangleMeans(field);
    const area = new Float64Array(triangleCount(mesh));
    forEachSample(field, 'all', (s) => {
      area[s.triangle] += s.area;
    });
    const all = meanOver(field, names);
    const sum = (k: 0 | 1): number => area.reduce((s, a, t) => s + a * fluxDensity[2 * t + k], 0);
    expect(sum(0)).toBeCloseTo(all.area * all.bx, 14);
    expect(sum(1)).toBeCloseTo(all.area * all.by, 14);
  });
});

test('the mean flux density of a rectangle is the difference of A across it', () => {
  const field = interpolate(straightMesh, (x, y) => 3 * x * x + x * y);
  const block = meanOver(field, ['block']); // x from -20 to -5 mm, y from -10 to 10 mm
  expect(block.by).toBeCloseTo(-3 * (-0.005 - 0.02), 12);
  expect(block.bx).toBeCloseTo(-0.0125, 12);
});

test('means of triangles: the field at their middle where it is linear, and the permeability of what fills them', () => {
  const field = interpolate(straightMesh, (x, y) => 3 * x * x - x * y, {
    block: { kind: 'magnet', recoil: 1.07, remanence: [0, 1] },
    bar: { kind: 'linear', muR: 800 },
  });
  const { fluxDensity, relativePermeability } = triangleMeans(field);
  const { xy, triangles, triangleToRegion, regionNames } = straightMesh;
  for (let t = 0; t < triangleCount(straightMesh); t++) {
    const [x, y] = [0, 1].map((i) => [0, 1, 2].reduce((sum, k) => sum + xy[2 * triangles[3 * t + k] + i], 0) / 3);
    expect(fluxDensity[2 * t]).toBeCloseTo(-x, 12);
    expect(fluxDensity[2 * t + 1]).toBeCloseTo(-6 * x + y, 12);
    const muR = { air: 1, block: 1.07, bar: 800 }[regionNames[triangleToRegion[t]]];
    expect(off(relativePermeability[t], muR ?? Number.NaN)).toBeLessThan(1e-12);
  }
});

describe('the flux density exceeded in a share of the area', () => {
  test('of a uniform field is the field, whatever the share', () => {
    const field = interpolate(roundMesh, (x, y) => 0.3 * y + 0.4 * x);
    for (const share of [0, 0.01, 0.5, 1]) expect(exceededIn(field, ['rod'], share)).toBeCloseTo(0.5, 10);
  });

  test('of a field that rises steadily across a rectangle falls steadily with the share', () => {
    const field = interpolate(straightMesh, (x) => -20 * (x + 0.02) ** 2); // |B| from 0 to 0.6 T across the block
    for (const share of [0.05, 0.2, 0.5, 0.9]) {
      expect(Math.abs(exceededIn(field, ['block'], share) - 0.6 * (1 - share))).toBeLessThan(0.015);
    }
  });

  test('never rises with the share, and is never above the largest', () => {
    const field = interpolate(roundMesh, (x, y) => Math.sin(100 * x) * Math.cosh(90 * y));
    let largest = 0;
    forEachSample(field, 'all', (s) => {
      largest = Math.max(largest, Math.hypot(s.bx, s.by));
    });
    expect(exceededIn(field, ['air', 'rod'], 0)).toBe(largest);
    const share = fc.double({ min: 0, max: 1, noNaN: true });
    fc.assert(
      fc.property(share, share, (p, q) => {
        const [less, more] = [Math.min(p, q), Math.max(p, q)];
        expect(exceededIn(field, ['air', 'rod'], less)).toBeGreaterThanOrEqual(exceededIn(field, ['air', 'rod'], more));
      }),
      { numRuns: 20 },
    );
  });

  test('of regions without area is nothing', () => {
    expect(
      exceededIn(
        interpolate(roundMesh, (x) => x),
        ['nowhere'],
        0.01,
      ),
    ).toBe(0);
  });
});

describe('energies of a uniform field', () => {
  const curve = buildBHCurve([
    [50, 0.3],
    [100, 0.8],
    [400, 1.3],
    [5000, 1.8],
  ]);
  const [bx, by] = [0.36, -0.48]; // 0.6 T
  const energiesIn = (material: Material, factor = 1) =>
    energiesOf(
      interpolate(straightMesh, (x, y) => factor * (bx * y - by * x), { block: material }),
      ['block'],
    );
  const area = 0.015 * 0.02;

  test('linear: B^2/(2 mu) times the area, and the coenergy the same', () => {
    const { energy, coenergy } = energiesIn({ kind: 'linear', muR: 40 });
    expect(off(energy, (area * 0.36) / (2 * 40 * MU0))).toBeLessThan(1e-12);
    expect(off(coenergy, energy)).toBeLessThan(1e-12);
  });

  test('magnet: (B - Br)^2/(2 mu), and H . B less that', () => {
    const { energy, coenergy } = energiesIn({ kind: 'magnet', recoil: 1.1, remanence: [0.1, -1.2] });
    const [dx, dy] = [bx - 0.1, by + 1.2];
    const density = (dx * dx + dy * dy) / (2 * 1.1 * MU0);
    expect(off(energy, area * density)).toBeLessThan(1e-12);
    expect(off(coenergy, area * ((dx * bx + dy * by) / (1.1 * MU0) - density))).toBeLessThan(1e-12);
  });

  test('magnet at its remanence: none, H being nothing', () => {
    const { energy, coenergy } = energiesIn({ kind: 'magnet', recoil: 1.1, remanence: [bx, by] });
    expect(Math.abs(energy)).toBeLessThan(1e-12);
    expect(Math.abs(coenergy)).toBeLessThan(1e-9);
  });

  test('steel: the energy is the integral of H dB, summed over small steps of B with the H of the field itself', () => {
    const steel: Material = { kind: 'curve', curve };
    const strength = (factor: number): number => {
      const field = interpolate(straightMesh, (x, y) => factor * (bx * y - by * x), { block: steel });
      const value = valueAt(field, buildLocator(straightMesh), -0.01, 0.001);
      return Math.hypot(value?.hx ?? Number.NaN, value?.hy ?? Number.NaN);
    };
    const steps = 200;
    let sum = 0;
    for (let i = 0; i < steps; i++) sum += (strength((2.5 * (i + 0.5)) / steps) * 2.5 * 0.6) / steps;
    const { energy, coenergy } = energiesIn(steel, 2.5); // 1.5 T
    expect(off(energy, area * sum)).toBeLessThan(1e-3);
    expect(off(energy + coenergy, area * strength(2.5) * 1.5)).toBeLessThan(1e-12);
  });

  test('energies of regions add up to those of all', () => {
    const field = interpolate(roundMesh, (x, y) => Math.sin(90 * x) * y, { rod: { kind: 'curve', curve } });
    const [air, rod, all] = [energiesOf(field, ['air']), energiesOf(field, ['rod']), energiesOf(field)];
    expect(off(air.energy + rod.energy, all.energy)).toBeLessThan(1e-12);
    expect(off(air.coenergy + rod.coenergy, all.coenergy)).toBeLessThan(1e-12);
    expect(energiesOf(field, [])).toEqual({ energy: 0, coenergy: 0 });
  });
});

test('samples visit each triangle of the wanted regions seven times, where A, B and their weights are those told', () => {
  const field = interpolate(roundMesh, (x, y) => 2 * x - 3 * y);
  const visits = new Int32Array(triangleCount(roundMesh));
  forEachSample(field, ['rod'], (s) => {
    visits[s.triangle]++;
    expect(Math.hypot(s.x - ROD.x, s.y - ROD.y)).toBeLessThan(ROD.radius);
    expect(s.a).toBeCloseTo(2 * s.x - 3 * s.y, 14);
    expect(s.bx).toBeCloseTo(-3, 10);
    expect(s.by).toBeCloseTo(-2, 10);
    expect(s.area).toBeGreaterThan(0);
  });
  const rod = roundMesh.regionNames.indexOf('rod');
  visits.forEach((count, t) => {
    expect(count).toBe(roundMesh.triangleToRegion[t] === rod ? 7 : 0);
  });
});
