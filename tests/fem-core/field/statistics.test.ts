import type { Section, Setup } from '@gapwright/fem-core';
import { buildLocator, lineHarmonics, solveSection } from '@gapwright/fem-core';
import { exceededIn, fieldLines, fieldStatistics } from '@gapwright/fem-core/field';
import { describe, expect, test } from 'vitest';

const AIR = { kind: 'linear', muR: 1 } as const;

/** A slab with A = A1 sin(kx) cosh(ky) held on its outline: a field of one wave. */
const L = 0.08;
const K = (2 * Math.PI) / L;
const wave = (x: number, y: number): number => 1e-3 * Math.sin(K * x) * Math.cosh(K * y);
const slab: Section = {
  outline: { kind: 'rectangle', from: [0, -0.01], to: [L, 0.01] },
  background: 'air',
  maxEdge: 0.002,
  regions: [{ name: 'left', shape: { kind: 'rectangle', from: [0, -0.01], to: [0.02, 0.01] }, maxEdge: 0.002 }],
};
const held = { kind: 'potential', value: wave } as const;
const setup: Setup = {
  materials: { air: AIR, left: AIR },
  edges: { left: held, right: held, top: held, bottom: held },
};
const field = solveSection(slab, setup);

describe('harmonics along a line', () => {
  test('of A = sin kx cosh ky: By = -k cos kx cosh ky and nothing else across, Bx = k sin kx sinh ky along', () => {
    const y = 0.004;
    const { across, along } = lineHarmonics(field, buildLocator(field.mesh), [0, y], [L, y], 5);
    expect(across.cos[1] / (-1e-3 * K * Math.cosh(K * y))).toBeCloseTo(1, 3);
    expect(along.sin[1] / (1e-3 * K * Math.sinh(K * y))).toBeCloseTo(1, 2);
    const rest = [0, 2, 3, 4, 5].flatMap((n) => [across.cos[n], across.sin[n], along.cos[n], along.sin[n]]);
    expect(Math.max(...rest.map(Math.abs))).toBeLessThan(1e-3 * Math.abs(across.cos[1]));
  });

  test('a line that leaves the section has none', () => {
    const { across } = lineHarmonics(field, buildLocator(field.mesh), [0, 0], [2 * L, 0], 2);
    expect(across.cos.every(Number.isNaN)).toBe(true);
  });
});

describe('statistics of a region', () => {
  const { area, mean, meanSquare, meanSquareX, meanSquareY, peak, peakInNinetyNine } = fieldStatistics(field, ['left']);
  const b1 = 1e-3 * K;

  test('mean squares are those of the closed form', () => {
    expect(area).toBeCloseTo(0.02 * 0.02, 12);
    // Over a quarter wave cos^2 and sin^2 average 1/2; cosh^2 averages (1 + sinh(2kh)/(2kh))/2 over |y| < h.
    const cosh2 = 0.5 * (1 + Math.sinh(2 * K * 0.01) / (2 * K * 0.01));
    expect(meanSquareY / (0.5 * b1 * b1 * cosh2)).toBeCloseTo(1, 4);
    expect(meanSquareX / (0.5 * b1 * b1 * (cosh2 - 1))).toBeCloseTo(1, 3);
    expect(meanSquare).toBeCloseTo(meanSquareX + meanSquareY, 15);
  });

  test('mean <= root mean square <= usable peak <= peak, and the peak is that of the corner', () => {
    expect(mean).toBeLessThan(Math.sqrt(meanSquare));
    expect(Math.sqrt(meanSquare)).toBeLessThan(peakInNinetyNine);
    expect(peakInNinetyNine).toBeLessThan(peak);
    expect(peak / (b1 * Math.cosh(K * 0.01))).toBeCloseTo(1, 2);
    expect(exceededIn(field, ['left'], 0.01)).toBe(peakInNinetyNine);
  });

  test('of a region without area they are not numbers', () => {
    expect(fieldStatistics(field, ['nowhere'])).toMatchObject({ area: 0, peak: Number.NaN, mean: Number.NaN });
  });
});

test('between neighbouring field lines runs the same flux, and B points along them', () => {
  const lines = fieldLines(field, 8);
  const steps = lines.slice(1).map((line, i) => line.potential - lines[i].potential);
  for (const step of steps) expect(step / steps[0]).toBeCloseTo(1, 9);
  for (const { potential, lines: traces } of lines) {
    for (const { xy } of traces) {
      for (let i = 0; i + 3 < xy.length; i += 2) {
        expect(Math.abs(wave(xy[i], xy[i + 1]) - potential)).toBeLessThan(2e-5);
      }
      // On the left A is higher: grad A . (left of the way) > 0.
      const m = 2 * Math.floor(xy.length / 4);
      const [dx, dy] = [xy[m + 2] - xy[m], xy[m + 3] - xy[m + 1]];
      const gx = K * 1e-3 * Math.cos(K * xy[m]) * Math.cosh(K * xy[m + 1]);
      const gy = K * 1e-3 * Math.sin(K * xy[m]) * Math.sinh(K * xy[m + 1]);
      if (xy.length > 6) expect(gx * -dy + gy * dx).toBeGreaterThan(0);
    }
  }
});
