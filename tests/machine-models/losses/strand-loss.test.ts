import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Strand } from '../../../packages/machine-models/src/losses/strand-loss.js';
import {
  reactionFactor,
  skinDepth,
  strandLossDensity,
  strandOf,
  strandSize,
} from '../../../packages/machine-models/src/losses/strand-loss.js';
import { MU0, relativeError } from '../../helpers/machines.js';

const RHO = 1.7241e-8;
const W50 = 2 * Math.PI * 50;
const round = (diameter: number): Strand => ({ kind: 'round', diameter });
const alternating = (peak: number, order = 1) => ({ order: [order], axial: [peak ** 2], tangential: [0] });

describe('round strand in an alternating field [CALC, E1]', () => {
  test.each([
    [0.001, 0.0351250706],
    [0.0015, 0.17782067],
    [0.002, 0.562001129],
  ])('%s m, 50 Hz, 0.5 T: %s W/m but for its own reaction', (diameter, perMetre) => {
    const factor = reactionFactor(diameter / skinDepth(W50, RHO));
    const simple = strandLossDensity(round(diameter), alternating(0.5), W50, RHO) / factor;
    expect(relativeError(simple * (Math.PI / 4) * diameter ** 2, perMetre)).toBeLessThan(1e-8);
    expect(factor).toBeGreaterThan(0.999);
  });

  test('44722.6288 W/m3 at 1 mm', () => {
    const density = strandLossDensity(round(0.001), alternating(0.5), W50, RHO);
    expect(relativeError(density, 44722.6288)).toBeLessThan(1e-6);
  });

  test('per metre it goes as the fourth power of the diameter, the square of field and frequency', () => {
    const perMetre = (d: number, b: number, w: number): number =>
      strandLossDensity(round(d), alternating(b), w, RHO) * (Math.PI / 4) * d ** 2;
    const one = perMetre(1e-4, 0.5, W50);
    expect(relativeError(perMetre(2e-4, 0.5, W50), 16 * one)).toBeLessThan(1e-6);
    expect(relativeError(perMetre(1e-4, 1, W50), 4 * one)).toBeLessThan(1e-12);
    expect(relativeError(perMetre(1e-4, 0.5, 2 * W50), 4 * one)).toBeLessThan(1e-6);
  });

  test('harmonics add with the square of their order, both components alike', () => {
    const squares = { order: [1, 3], axial: [0.25, 0.01], tangential: [0.04, 0.02] };
    const got = strandLossDensity(round(1e-4), squares, W50, RHO);
    const simple = (W50 ** 2 * (0.29 + 9 * 0.03) * 1e-8) / (32 * RHO);
    expect(relativeError(got, simple)).toBeLessThan(1e-6);
  });

  test('nothing in a field that stands still', () => {
    expect(strandLossDensity(round(0.002), alternating(0.5), 0, RHO)).toBe(0);
  });
});

test('skin depth of copper: 9.3458 mm at 50 Hz, 3.3042 mm at 400 Hz [CALC]', () => {
  expect(relativeError(skinDepth(W50, RHO), 9.3458e-3)).toBeLessThan(1e-5);
  expect(relativeError(skinDepth(8 * W50, RHO), 3.3042e-3)).toBeLessThan(2e-5);
});

describe('rectangular strand [CALC, E2]', () => {
  test('3 mm across the field, 50 Hz, 0.5 T: 536671.546 W/m3', () => {
    const strand: Strand = { kind: 'flat', across: 0.003, along: 0.001 };
    expect(relativeError(strandLossDensity(strand, alternating(0.5), W50, RHO), 536671.546)).toBeLessThan(1e-8);
  });

  test('the side across each component counts', () => {
    const strand: Strand = { kind: 'flat', across: 0.003, along: 0.001 };
    const axial = strandLossDensity(strand, { order: [1], axial: [1], tangential: [0] }, W50, RHO);
    const tangential = strandLossDensity(strand, { order: [1], axial: [0], tangential: [1] }, W50, RHO);
    expect(relativeError(axial, 9 * tangential)).toBeLessThan(1e-12);
  });

  test('a square one loses 4/3 of a round one as thick, for each volume', () => {
    const square = strandLossDensity({ kind: 'flat', across: 1e-4, along: 1e-4 }, alternating(0.5), W50, RHO);
    expect(relativeError(square, (4 / 3) * strandLossDensity(round(1e-4), alternating(0.5), W50, RHO))).toBeLessThan(
      1e-6,
    );
  });

  test('wire of the machine is taken with its width along the circumference', () => {
    const common = { strandArea: 3e-6, strands: 1 };
    expect(strandOf({ ...common, width: 0.003, height: 0.001 })).toEqual({ kind: 'flat', across: 0.003, along: 0.001 });
    expect(strandOf({ ...common, diameter: 0.002 })).toEqual(round(0.002));
    expect(strandSize(strandOf({ ...common, width: 0.001, height: 0.003 }))).toBe(0.003);
  });
});

/** J_m of a complex argument z by its power series, good enough up to |z| = 12. */
function bessel(order: number, re: number, im: number): readonly [number, number] {
  const times = (a: readonly [number, number], b: readonly [number, number]): readonly [number, number] => [
    a[0] * b[0] - a[1] * b[1],
    a[0] * b[1] + a[1] * b[0],
  ];
  const half = [re / 2, im / 2] as const;
  const square = times(half, half);
  let term: readonly [number, number] = [1, 0];
  for (let i = 1; i <= order; i++) term = times(term, [half[0] / i, half[1] / i]);
  let sum = term;
  for (let k = 1; k < 80; k++) {
    const next = times(term, square);
    term = [-next[0] / (k * (k + order)), -next[1] / (k * (k + order))];
    sum = [sum[0] + term[0], sum[1] + term[1]];
  }
  return sum;
}

describe("the eddies' own field", () => {
  test.each([
    [0.5, 0.999553],
    [1, 0.992892],
    [1.5, 0.965065],
    [2, 0.897641],
    [3, 0.63841],
    [4, 0.369308],
  ])('d/delta = %s: exact over simple %s [CALC, E1]', (x, expected) => {
    expect(Math.abs(reactionFactor(x) - expected)).toBeLessThan(6e-7);
  });

  test.each([0.7, 2.5, 6, 12])('is what current density squared comes to over the strand, d/delta = %s', (x) => {
    // J = -i w C J1(z r) sin(phi), C = 2 B/(z J0(z R)); with R = 1, delta = 2/x: z = (1 - i) x/2.
    const part = x / 2;
    const [j0re, j0im] = bessel(0, part, -part);
    const u2 = 2 * part * part;
    const c2 = 4 / (u2 * (j0re ** 2 + j0im ** 2));
    const steps = 4000;
    let sum = 0;
    for (let i = 0; i < steps; i++) {
      const r = (i + 0.5) / steps;
      const [re, im] = bessel(1, part * r, -part * r);
      sum += ((re * re + im * im) * r) / steps;
    }
    // Without reaction A = B r sin(phi): the integral of r^2 r dr is 1/4.
    expect(relativeError(reactionFactor(x), c2 * sum * 4)).toBeLessThan(1e-5);
  });

  test('vanishes with the strand like (11/1536) x^4 and leaves 32/x^3 deep in the skin', () => {
    expect(reactionFactor(0)).toBe(1);
    expect(relativeError(1 - reactionFactor(0.1), (11 / 1536) * 1e-4)).toBeLessThan(1e-3);
    for (const x of [100, 1000, 1e4]) expect(relativeError(reactionFactor(x), 32 / x ** 3)).toBeLessThan(3 / x);
  });

  test('falls steadily, but the loss of a metre grows with the diameter all the same', () => {
    const any = fc.double({ min: 1e-3, max: 300, noNaN: true });
    fc.assert(
      fc.property(any, fc.double({ min: 1.001, max: 3, noNaN: true }), (x, times) => {
        expect(reactionFactor(x * times)).toBeLessThan(reactionFactor(x) * (1 + 1e-12));
        expect((x * times) ** 4 * reactionFactor(x * times)).toBeGreaterThan(x ** 4 * reactionFactor(x));
      }),
      { seed: 5, numRuns: 300 },
    );
  });

  test('skin depth is where the wave in copper falls by e: delta^2 = 2 rho/(w mu0)', () => {
    expect(relativeError(skinDepth(W50, RHO) ** 2 * W50 * MU0, 2 * RHO)).toBeLessThan(1e-9);
  });
});
