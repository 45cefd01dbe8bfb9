import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  amplitudes,
  antiderivative,
  combine,
  evaluate,
  peak,
  rms,
  type Series,
} from '../../../packages/machine-models/src/waves/series.js';

const part = fc.double({ min: -10, max: 10, noNaN: true });
const anySeries = fc.array(fc.tuple(part, part), { minLength: 1, maxLength: 30 }).map(
  (parts): Series => ({
    order: parts.map((_, i) => 2 * i + 1),
    cos: parts.map(([c]) => c),
    sin: parts.map(([, s]) => s),
  }),
);
const angle = fc.double({ min: -20, max: 20, noNaN: true });

function directSum({ order, cos, sin }: Series, theta: number): number {
  return order.reduce((sum, n, i) => sum + cos[i] * Math.cos(n * theta) + sin[i] * Math.sin(n * theta), 0);
}

/** sgn(sin theta) up to the given order, amplitudes 4/(n pi). */
function squareWave(highest: number): Series {
  const order = Array.from({ length: (highest + 1) / 2 }, (_, i) => 2 * i + 1);
  return { order, cos: order.map(() => 0), sin: order.map((n) => 4 / (n * Math.PI)) };
}

describe('a series of odd harmonics', () => {
  test('is the sum of its cosines and sines', () => {
    fc.assert(
      fc.property(anySeries, angle, (series, theta) => {
        expect(evaluate(series, theta)).toBeCloseTo(directSum(series, theta), 9);
      }),
    );
  });

  test('is so with orders left out as well', () => {
    const series = { order: [1, 7, 9, 15], cos: [1, 0.5, -0.25, 2], sin: [0, 1, 3, -1] };
    for (const theta of [0, 0.4, 2, -3]) expect(evaluate(series, theta)).toBeCloseTo(directSum(series, theta), 12);
  });

  test('turns into its negative half a period on', () => {
    fc.assert(
      fc.property(anySeries, angle, (series, theta) => {
        expect(evaluate(series, theta + Math.PI)).toBeCloseTo(-evaluate(series, theta), 8);
      }),
    );
  });

  test('has the rms of its samples (Parseval)', () => {
    fc.assert(
      fc.property(anySeries, (series) => {
        const points = 256;
        let sum = 0;
        for (let i = 0; i < points; i++) sum += evaluate(series, (2 * Math.PI * i) / points) ** 2 / points;
        expect(rms(series)).toBeCloseTo(Math.sqrt(sum), 9);
      }),
    );
  });

  test('peaks at or above every sample, and no higher than the sum of its amplitudes', () => {
    fc.assert(
      fc.property(anySeries, (series) => {
        const top = peak(series);
        for (let i = 0; i < 500; i++) expect(top).toBeGreaterThanOrEqual(Math.abs(evaluate(series, i)) - 1e-9);
        expect(top).toBeLessThanOrEqual(amplitudes(series).reduce((a, b) => a + b, 0) + 1e-9);
      }),
    );
  });

  test('a square wave cut off at order 2m-1 overshoots to (2/pi) Si(pi) as m grows (Gibbs 1899 [MEM])', () => {
    expect(peak(squareWave(999))).toBeCloseTo(1.178979744, 5);
    // exactly: the first peak stands at theta = pi/(2m), m the number of terms
    expect(peak(squareWave(39))).toBeCloseTo(evaluate(squareWave(39), Math.PI / 40), 12);
  });

  test('its antiderivative grows by its values', () => {
    fc.assert(
      fc.property(anySeries, angle, (series, theta) => {
        const h = 1e-5;
        const integral = antiderivative(series);
        const slope = (evaluate(integral, theta + h) - evaluate(integral, theta - h)) / (2 * h);
        expect(slope).toBeCloseTo(evaluate(series, theta), 3);
      }),
    );
  });

  test('combines term by term', () => {
    fc.assert(
      fc.property(anySeries, angle, part, (series, theta, factor) => {
        const sum = combine([series, squareWave(2 * series.order.length - 1)], [factor, -1]);
        const expected = factor * evaluate(series, theta) - evaluate(squareWave(2 * series.order.length - 1), theta);
        expect(evaluate(sum, theta)).toBeCloseTo(expected, 8);
      }),
    );
  });
});
