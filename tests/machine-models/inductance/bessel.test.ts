import { expect, test } from 'vitest';
import { besselOrders } from '../../../packages/machine-models/src/inductance/bessel.js';

/** Bessel's integral (1/pi) integral of cos(m u - x sin u), by midpoints: exact to rounding once they are enough. */
function byIntegral(m: number, x: number): number {
  const points = 2000;
  let sum = 0;
  for (let i = 0; i < points; i++) {
    const u = ((i + 0.5) * Math.PI) / points;
    sum += Math.cos(m * u - x * Math.sin(u));
  }
  return sum / points;
}

test('Bessel functions are those of the integral', () => {
  const out = new Float64Array(301);
  for (const x of [0, 1e-6, 0.3, 1, 7.7, 40, 250, 700]) {
    besselOrders(x, out);
    for (const m of [0, 1, 2, 3, 8, 20, 41, 150, 300]) expect(out[m]).toBeCloseTo(byIntegral(m, x), 11);
  }
});
