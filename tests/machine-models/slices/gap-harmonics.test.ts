import {
  applyFunctional,
  buildLocator,
  nodeCount,
  nodePoint,
  solveSection,
  valueAt,
  weightedIntegral,
} from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import {
  midPlaneHarmonics,
  oddOrders,
  windingHarmonics,
} from '../../../packages/machine-models/src/slices/gap-harmonics.js';
import { buildPoleSection } from '../../../packages/machine-models/src/slices/pole-section.js';
import { hutHydro } from '../../helpers/machines.js';
import { ALL_CUTS, nameOf } from './variants.js';

test('odd orders', () => {
  expect(oddOrders(0)).toEqual([]);
  expect(oddOrders(4)).toEqual([1, 3, 5, 7]);
});

describe.each(ALL_CUTS.map((cuts) => [nameOf(cuts), cuts] as const))('cut along %s', (_, cuts) => {
  const pole = buildPoleSection(hutHydro(), 0.128, cuts);
  const field = solveSection(pole.section, pole.setup);
  const locator = buildLocator(field.mesh);
  const orders = oddOrders(4);

  test('harmonics on the mid-plane are those of By itself, integrated against the cosines', () => {
    const { order, amplitude } = midPlaneHarmonics(field, locator, pole, orders);
    expect(order).toEqual(orders);
    const stations = 4000;
    orders.forEach((n, i) => {
      let sum = 0;
      for (let j = 0; j < stations; j++) {
        const x = pole.from + ((j + 0.5) * (pole.to - pole.from)) / stations;
        const by = valueAt(field, locator, x, 0)?.by ?? Number.NaN;
        sum += by * Math.cos((n * Math.PI * x) / pole.polePitch);
      }
      // By of the elements is one order poorer than A, and the mesh is the first one.
      expect(Math.abs(amplitude[i] - (2 * sum) / stations)).toBeLessThan(5e-3 * amplitude[0]);
    });
  });

  test('harmonics over the winding are the integrals of A that steer the mesh, to the roughness of the elements', () => {
    const { amplitude } = windingHarmonics(field, locator, pole, orders);
    orders.forEach((n, i) => {
      const k = (n * Math.PI) / pole.polePitch;
      const area = (pole.to - pole.from) * (pole.windingTo - pole.windingFrom);
      const functional = weightedIntegral(field.mesh, ['winding'], (x) => (-2 * k * Math.sin(k * x)) / area);
      const direct = applyFunctional(functional, field.potential);
      expect(Math.abs(amplitude[i] - direct)).toBeLessThan(1e-3 * amplitude[0]);
    });
  });

  test('of a made field come back as put in, each order by itself, at y = 0 and averaged over the winding', () => {
    const [b1, b3, b5] = [0.6, -0.2, 0.05];
    const k = Math.PI / pole.polePitch;
    const a = (x: number, y: number): number =>
      [b1, b3, b5].reduce((sum, b, i) => {
        const q = (2 * i + 1) * k;
        return sum - (b / q) * Math.sin(q * x) * Math.cosh(q * y);
      }, 0);
    const potential = Float64Array.from({ length: nodeCount(field.mesh) }, (_n, i) => a(...nodePoint(field.mesh, i)));
    const made = { ...field, potential };
    const mid = midPlaneHarmonics(made, locator, pole, orders).amplitude;
    const winding = windingHarmonics(made, locator, pole, orders).amplitude;
    [b1, b3, b5, 0].forEach((b, i) => {
      const q = ((2 * i + 1) * k * hutHydro().winding.thickness) / 2;
      expect(Math.abs(mid[i] - b)).toBeLessThan(1e-3);
      expect(Math.abs(winding[i] - (b * Math.sinh(q)) / q)).toBeLessThan(2e-3);
    });
  });
});

test('a place outside the section is a fault of the caller, told as such', () => {
  const pole = buildPoleSection(hutHydro(), 0.128);
  const field = solveSection(pole.section, pole.setup);
  const wrong = { ...pole, to: 2 * pole.to };
  expect(() => midPlaneHarmonics(field, buildLocator(field.mesh), wrong, [1])).toThrow('outside the section');
});
