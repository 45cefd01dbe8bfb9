import fc from 'fast-check';
import { expect, test } from 'vitest';
import {
  freeResponse,
  logOfOutside,
  reactionOfPlates,
} from '../../../packages/machine-models/src/inductance/current-layer.js';
import { MU0, relativeError } from '../../helpers/machines.js';

/**
 * Mean over the layer -t/2 ... t/2 of the field of another one alike, its middle `apart` away, by the Green function
 * mu0 exp(-k |y - y'|)/(2 k): midpoints, so many in each.
 */
function byGreenFunction(k: number, thickness: number, apart: number, points = 400): number {
  let sum = 0;
  for (let d = 1 - points; d < points; d++) {
    sum += (points - Math.abs(d)) * Math.exp(-k * Math.abs(apart + (d * thickness) / points));
  }
  return (MU0 * thickness * sum) / (2 * k * points ** 2);
}

const figures = fc.record({
  k: fc.double({ min: 1, max: 400, noNaN: true }),
  thickness: fc.double({ min: 0.002, max: 0.03, noNaN: true }),
  up: fc.double({ min: 1, max: 8, noNaN: true }),
  down: fc.double({ min: 1, max: 8, noNaN: true }),
});

test('free space: the Green function summed over the layer', () => {
  fc.assert(
    fc.property(figures, ({ k, thickness }) => {
      expect(relativeError(freeResponse(k, thickness), byGreenFunction(k, thickness, 0))).toBeLessThan(2e-4);
    }),
    { seed: 1 },
  );
});

test('plates: the images of the layer in them, summed', () => {
  fc.assert(
    fc.property(figures, ({ k, thickness, up, down }) => {
      const [u, v] = [(up * thickness) / 2, (down * thickness) / 2];
      const period = 2 * (u + v);
      // Reflected in one plate first and then in turns, or in both the same number of times.
      let sum = 0;
      const most = Math.ceil(30 / (k * period)) + 2;
      for (let n = 0; n < most; n++) {
        for (const apart of [2 * u + n * period, 2 * v + n * period, (n + 1) * period, (n + 1) * period]) {
          sum += byGreenFunction(k, thickness, apart, 100);
        }
      }
      expect(relativeError(reactionOfPlates(k, thickness, u, v), sum)).toBeLessThan(2e-3);
    }),
    { seed: 2, numRuns: 60 },
  );
});

test('a plate endlessly far away is none', () => {
  expect(reactionOfPlates(60, 0.015, Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY)).toBe(0);
  const one = reactionOfPlates(60, 0.015, 0.01, Number.POSITIVE_INFINITY);
  expect(relativeError(one, byGreenFunction(60, 0.015, 0.02))).toBeLessThan(1e-4);
});

test('beyond the layer A falls from what the Green function gives', () => {
  const [k, thickness, y] = [80, 0.012, 0.009];
  let sum = 0;
  for (let i = 0; i < 1000; i++) sum += Math.exp(-k * (y - ((i + 0.5) / 1000 - 0.5) * thickness));
  const expected = (MU0 * thickness * sum) / (2 * k * 1000);
  expect(relativeError(Math.exp(logOfOutside(k, thickness) - k * y), expected)).toBeLessThan(1e-6);
});

test('thin layers: mu0 t/(2 k), the sheet; no digits lost', () => {
  for (const t of [1e-9, 1e-6, 9e-6, 1.1e-5]) {
    const x = 100 * t;
    expect(relativeError(freeResponse(100, t), ((MU0 * t) / 200) * (1 - x / 3 + (x * x) / 12))).toBeLessThan(1e-9);
  }
});
