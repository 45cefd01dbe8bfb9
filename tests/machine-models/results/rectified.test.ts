import fc from 'fast-check';
import { expect, test } from 'vitest';
import { rectifiedAt, rectifiedMean } from '../../../packages/machine-models/src/results/rectified.js';
import { peak, rms, type Series } from '../../../packages/machine-models/src/waves/series.js';

/** Line voltages of three phases sum peak_n sin(n theta), the next one 120 degrees later. */
function starLines(peaks: readonly number[]): readonly Series[] {
  const order = peaks.map((_, i) => 2 * i + 1);
  return [0, 1, 2].map((k) => {
    const [a, b] = [(k * 2 * Math.PI) / 3, ((k + 1) * 2 * Math.PI) / 3];
    return {
      order,
      cos: peaks.map((p, i) => p * (Math.sin(order[i] * b) - Math.sin(order[i] * a))),
      sin: peaks.map((p, i) => p * (Math.cos(order[i] * a) - Math.cos(order[i] * b))),
    };
  });
}

test('sinusoidal EMFs: the mean is 3 sqrt(2)/pi of the rms line voltage and 3/pi of the peak (Mohan et al. [MEM])', () => {
  const lines = starLines([10]);
  expect(rectifiedMean(lines) / rms(lines[0])).toBeCloseTo(1.35047447, 8);
  expect(rectifiedMean(lines) / (10 / Math.SQRT2)).toBeCloseTo(2.3390904, 7);
  expect(rectifiedMean(lines) / peak(lines[0])).toBeCloseTo(0.954929659, 9);
});

test('it is the highest less the lowest of the three terminals', () => {
  const peaks = [10, 2, -1, 0.5];
  const lines = starLines(peaks);
  for (const theta of [0, 0.3, 1, 2.5, 4]) {
    const terminals = [0, 1, 2].map((k) =>
      peaks.reduce((sum, p, i) => sum + p * Math.sin((2 * i + 1) * (theta - (k * 2 * Math.PI) / 3)), 0),
    );
    expect(rectifiedAt(lines, theta)).toBeCloseTo(Math.max(...terminals) - Math.min(...terminals), 12);
  }
});

test('with harmonics the closed integral agrees with brute-force sampling', () => {
  const harmonic = fc.double({ min: -2, max: 2, noNaN: true });
  fc.assert(
    fc.property(fc.array(harmonic, { minLength: 4, maxLength: 4 }), (rest) => {
      const lines = starLines([10, ...rest]);
      const points = 20_000;
      let mean = 0;
      for (let i = 0; i < points; i++) mean += rectifiedAt(lines, (Math.PI * (i + 0.5)) / points) / points;
      expect(Math.abs(rectifiedMean(lines) / mean - 1)).toBeLessThan(1e-6);
    }),
    { numRuns: 15 },
  );
});

test('a third harmonic of the phases does not reach the rectifier of a star', () => {
  expect(rectifiedMean(starLines([10, 3]))).toBeCloseTo(rectifiedMean(starLines([10, 0])), 9);
});
