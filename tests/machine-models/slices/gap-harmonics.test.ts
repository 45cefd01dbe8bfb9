import { buildLocator, solveSection, valueAt } from '@gapwright/fem-core';
import { applyFunctional } from '@gapwright/fem-core/goals';
import { nodeCount, nodePoint } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import {
  midPlaneShare,
  oddOrders,
  ordersThatMatter,
  windingFunctional,
} from '../../../packages/machine-models/src/slices/gap-harmonics.js';
import { buildPoleSection } from '../../../packages/machine-models/src/slices/pole-section.js';
import { closedFormSlices, hutHydro, withWinding } from '../../helpers/machines.js';
import { ALL_CUTS, nameOf } from './variants.js';

test('odd orders', () => {
  expect(oddOrders(0)).toEqual([]);
  expect(oddOrders(4)).toEqual([1, 3, 5, 7]);
});

describe.each(ALL_CUTS.map((cuts) => [nameOf(cuts), cuts] as const))('cut along %s', (_, cuts) => {
  const pole = buildPoleSection(hutHydro(), 0.128, cuts);
  const field = solveSection(pole.section, pole.setup);
  const orders = oddOrders(4);

  test('harmonics are those of By itself, integrated over the winding against the cosines', () => {
    const locator = buildLocator(field.mesh);
    const [stations, levels] = [600, 24];
    const first = applyFunctional(windingFunctional(field.mesh, pole, 1), field.potential);
    for (const n of orders) {
      let sum = 0;
      for (let j = 0; j < stations; j++) {
        const x = pole.from + ((j + 0.5) * (pole.to - pole.from)) / stations;
        for (let i = 0; i < levels; i++) {
          const y = pole.windingFrom + ((i + 0.5) * (pole.windingTo - pole.windingFrom)) / levels;
          sum += (valueAt(field, locator, x, y)?.by ?? Number.NaN) * Math.cos((n * Math.PI * x) / pole.polePitch);
        }
      }
      const amplitude = applyFunctional(windingFunctional(field.mesh, pole, n), field.potential);
      // By of the elements is one order poorer than A, and the mesh is the first one.
      expect(Math.abs(amplitude - (2 * sum) / (stations * levels))).toBeLessThan(5e-3 * first);
    }
  });

  test('of a made field come back as put in, each order by itself, over the winding and on the mid-plane', () => {
    const mid = [0.6, -0.2, 0.05, 0];
    const k = Math.PI / pole.polePitch;
    const a = (x: number, y: number): number =>
      mid.reduce((sum, b, i) => {
        const q = (2 * i + 1) * k;
        return sum - (b / q) * Math.sin(q * x) * Math.cosh(q * y);
      }, 0);
    const potential = Float64Array.from({ length: nodeCount(field.mesh) }, (_n, i) => a(...nodePoint(field.mesh, i)));
    orders.forEach((n, i) => {
      const q = (n * k * hutHydro().winding.thickness) / 2;
      const over = applyFunctional(windingFunctional(field.mesh, pole, n), potential);
      expect(Math.abs(over - (mid[i] * Math.sinh(q)) / q)).toBeLessThan(1e-3);
      expect(Math.abs(over * midPlaneShare(pole, n) - mid[i])).toBeLessThan(5e-4);
    });
  });
});

describe('orders that matter', () => {
  const pole = buildPoleSection(hutHydro(), 0.128);
  const kept = (legWidth: number, share: number): number => ordersThatMatter(hutHydro(), pole, legWidth, share).length;

  test('grow in number as legs narrow and as more is asked', () => {
    expect(kept(0.003, 4e-5)).toBeGreaterThan(kept(0.02, 4e-5));
    expect(kept(0.02, 1e-7)).toBeGreaterThan(kept(0.02, 4e-5));
    expect(kept(0.02, 1)).toBe(6);
    expect(kept(1e-5, 0)).toBe(40);
  });

  test.each([0.003, 0.008, 0.0205])(
    'leave out no order that brings more than the share, by the closed form: leg of %s m',
    (legWidth) => {
      const share = 4e-5;
      const machine = withWinding(hutHydro(), { legWidth });
      const slice = closedFormSlices(machine)[1];
      const spread = (n: number): number => {
        const x = (n * Math.PI * legWidth) / (2 * slice.polePitch);
        return Math.sin(x) / x;
      };
      const all = slice.windingB.order.map((n, i) => Math.abs(slice.windingB.amplitude[i] * spread(n)));
      const orders = ordersThatMatter(machine, pole, legWidth, share);
      slice.windingB.order.forEach((n, i) => {
        if (!orders.includes(n)) expect(all[i]).toBeLessThan(share * all[0]);
      });
    },
  );
});

test('a thick winding and a high order overflow nothing', () => {
  const machine = withWinding(hutHydro(), { thickness: 0.0189 });
  const pole = buildPoleSection(machine, 0.128);
  const { mesh } = solveSection(pole.section, pole.setup);
  expect(windingFunctional(mesh, pole, 999).every(Number.isFinite)).toBe(true);
  expect(midPlaneShare(pole, 9999)).toBe(0);
});
