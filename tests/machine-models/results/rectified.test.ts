import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
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

describe('sinusoidal EMFs of other numbers of phases, against the integral over one pulse', () => {
  /** Differences of unit sines that lag by these degrees, every two of them. */
  const between = (degrees: readonly number[]): readonly Series[] =>
    degrees.flatMap((a, i) =>
      degrees.slice(i + 1).map((b): Series => {
        const [x, y] = [a, b].map((lag) => (lag * Math.PI) / 180);
        return { order: [1], cos: [Math.sin(y) - Math.sin(x)], sin: [Math.cos(x) - Math.cos(y)] };
      }),
    );
  const star = (phases: number): readonly number[] => Array.from({ length: phases }, (_, k) => (360 * k) / phases);
  const tops = (lines: readonly Series[]): number => {
    const values = Array.from({ length: 3600 }, (_, i) => rectifiedAt(lines, ((i + 0.5) * Math.PI) / 1800));
    return values.filter((v, i) => v > values[(i + 3599) % 3600] && v >= values[(i + 1) % 3600]).length;
  };

  test.each([3, 5, 7, 9])('a star of %i: (2m/pi) sin(pi/m) of the EMF, 2m pulses', (m) => {
    const lines = between(star(m));
    expect(rectifiedMean(lines)).toBeCloseTo(((2 * m) / Math.PI) * Math.sin(Math.PI / m), 9);
    expect(tops(lines)).toBe(2 * m);
  });

  test('two phases 90 degrees apart: a sine of sqrt(2), rectified, 2 sqrt(2)/pi, two pulses', () => {
    const lines = between([0, 90]);
    expect(rectifiedMean(lines)).toBeCloseTo((2 * Math.SQRT2) / Math.PI, 9);
    expect(tops(lines)).toBe(2);
  });

  test('two stars 30 degrees apart, each on its bridge, one bus: twelve pulses of 15 degrees to either side of the top', () => {
    const lines = [...between([0, 120, 240]), ...between([30, 150, 270])];
    expect(rectifiedMean(lines)).toBeCloseTo(Math.sqrt(3) * (12 / Math.PI) * Math.sin(Math.PI / 12), 9);
    expect(tops(lines)).toBe(12);
    const values = Array.from({ length: 3600 }, (_, i) => rectifiedAt(lines, (i * Math.PI) / 1800));
    expect(Math.min(...values) / Math.max(...values)).toBeCloseTo(Math.cos(Math.PI / 12), 6); // ripple 3.4 %
  });

  test('more phases never lower the mean: each pulse is cut nearer to its top', () => {
    const means = [3, 5, 7, 9].map((m) => rectifiedMean(between(star(m))));
    expect(means).toEqual([...means].sort((a, b) => a - b));
    expect(means.every((mean) => mean < 2)).toBe(true);
  });
});
