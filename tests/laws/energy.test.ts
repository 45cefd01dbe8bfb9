import type { Field, Material } from '@gapwright/fem-core';
import { energiesOf, MU0, solveSection } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';
import { meshSection, solveOnMesh } from '@gapwright/fem-core/mesh';
import { expect, test } from 'vitest';
import { AIR, box, core, coreSetup, relativeError, STEEL } from './sections.js';

/** Integral of J A over all regions that carry current, J/m. */
function integralOfJA(field: Field): number {
  let sum = 0;
  for (const [region, density] of Object.entries(field.setup.currentDensity ?? {})) {
    forEachSample(field, [region], (s) => {
      sum += s.area * density * s.a;
    });
  }
  return sum;
}

const STEELS: readonly [name: string, steel: Material][] = [
  ['linear steel', { kind: 'linear', muR: 1500 }],
  ['saturating steel', STEEL],
];

test.each(STEELS)('energy + coenergy = integral of J A: %s', (_, steel) => {
  for (const density of [1e4, 1e6, 1e7]) {
    const field = solveSection(core, coreSetup(steel, { out: density, back: -1.25 * density }), { tolerance: 1e-11 });
    expect(field.report.converged).toBe(true);
    const { energy, coenergy } = energiesOf(field);
    expect(relativeError(energy + coenergy, integralOfJA(field))).toBeLessThan(1e-9);
  }
});

test('energy equals coenergy where everything is linear, and is less where steel saturates', () => {
  const linear = energiesOf(solveSection(core, coreSetup(STEELS[0][1], { out: 5e6, back: -6.25e6 })));
  expect(relativeError(linear.energy, linear.coenergy)).toBeLessThan(1e-12);
  const saturated = energiesOf(solveSection(core, coreSetup(STEEL, { out: 3e7, back: -3.75e7 })));
  expect(saturated.energy).toBeLessThan(0.9 * saturated.coenergy);
});

test('work put in while the current rises is the energy stored: integral of I dLinkage, saturating steel', () => {
  // Linkage per ampere-turn is the derivative of the coenergy: d(coenergy) = (integral of J A / I) dI.
  const at = (density: number): Field =>
    solveSection(core, coreSetup(STEEL, { out: density, back: -1.25 * density }), { tolerance: 1e-11 });
  const [top, steps] = [2e7, 8];
  let coenergy = 0;
  for (let i = 0; i < steps; i++) {
    // Gauss, two points a step
    for (const s of [0.5 - Math.sqrt(3) / 6, 0.5 + Math.sqrt(3) / 6]) {
      const density = (top * (i + s)) / steps;
      coenergy += (0.5 * (top / steps) * integralOfJA(at(density))) / density;
    }
  }
  expect(relativeError(energiesOf(at(top)).coenergy, coenergy)).toBeLessThan(1e-4);
});

test('a magnet short of currents: energy + coenergy of the whole section is 0, energy is the integral of (B - Br)^2/(2 mu)', () => {
  const [remanence, recoil] = [1.2, 1.07];
  const field = solveSection(
    {
      outline: { kind: 'rectangle', from: [-0.05, -0.05], to: [0.05, 0.05] },
      background: 'air',
      regions: [box('magnet', -0.01, -0.005, 0.02, 0.01), box('plate', -0.015, 0.01, 0.03, 0.006)],
    },
    { materials: { air: AIR, magnet: { kind: 'magnet', recoil, remanence: [0, remanence] }, plate: STEEL } },
    { tolerance: 1e-11 },
  );
  const { energy, coenergy } = energiesOf(field);
  // The integral of H . B vanishes over all space when no current flows.
  expect(Math.abs(energy + coenergy)).toBeLessThan(1e-9 * energy);
  let byHand = energiesOf(field, ['plate']).energy;
  forEachSample(field, ['air'], (s) => {
    byHand += (s.area * (s.bx ** 2 + s.by ** 2)) / (2 * MU0);
  });
  forEachSample(field, ['magnet'], (s) => {
    byHand += (s.area * (s.bx ** 2 + (s.by - remanence) ** 2)) / (2 * MU0 * recoil);
  });
  expect(relativeError(energy, byHand)).toBeLessThan(1e-12);
});

test('the solved field has the least energy of all fields with the same currents: any change costs', () => {
  const setup = coreSetup(STEEL, { out: 3e6, back: -3.75e6 });
  const mesh = meshSection(core);
  const { field, system } = solveOnMesh(mesh, setup, { tolerance: 1e-11 });
  const cost = (potential: Float64Array): number => {
    const changed = { ...field, potential };
    return energiesOf(changed).energy - integralOfJA(changed);
  };
  const least = cost(field.potential);
  for (const seed of [1, 2, 3]) {
    const changed = field.potential.map((a, node) =>
      system.unknowns.unknownOf[node] < 0 ? a : a + 1e-4 * Math.sin(12.9898 * node * seed),
    );
    expect(cost(changed)).toBeGreaterThan(least);
  }
});
