import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { describeMachine } from '../../../packages/machine-models/src/results/assemble.js';
import {
  harmonicBound,
  peakBound,
  relative,
  rmsBound,
} from '../../../packages/machine-models/src/results/error-bounds.js';
import type { MachineResult } from '../../../packages/machine-models/src/results/result.js';
import { closedFormSlices, hutHydro, overlappedHydro, withWinding } from '../../helpers/machines.js';

const stamp = { version: '0.0.0', inputSha256: '' };
const bounds = [4e-3, 3e-3, 2e-3, 1e-3];

/** Each figure that has an error twin, with its twin: [name, value, relative bound]. */
function figuresOf(result: MachineResult): readonly (readonly [string, number, number])[] {
  const pairs: [string, number, number][] = [];
  const walk = (value: unknown, path: string): void => {
    if (typeof value !== 'object' || value === null) return;
    const record = value as Record<string, unknown>; // results are plain data; the values are checked below
    for (const [key, inner] of Object.entries(record)) {
      const twin = record[`${key}_rel_err`];
      if (typeof inner === 'number' && typeof twin === 'number') pairs.push([`${path}.${key}`, inner, twin]);
      walk(inner, `${path}.${key}`);
    }
  };
  walk(result, '');
  result.slices.forEach((slice, i) => {
    pairs.push([`slices[${i}].leg_B.peak_T`, slice.leg_B.peak_T, slice.leg_B_rel_err]);
  });
  return pairs;
}

describe('error bounds', () => {
  const shares = fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: 12, maxLength: 12 });

  test.each([
    ['star', hutHydro()],
    ['delta', withWinding(hutHydro(), { connection: 'delta' })],
    ['overlapped', overlappedHydro()],
    ['coils out of step', { ...hutHydro(), rotor: { ...hutHydro().rotor, poles: 14 } }],
  ])('%s: no error of the slices within their bounds moves a figure by more than its own bound', (_, machine) => {
    const slices = closedFormSlices(machine, bounds);
    const told = figuresOf(describeMachine(machine, { slices }, [], stamp));
    expect(told.length).toBeGreaterThan(15);
    fc.assert(
      fc.property(shares, (share) => {
        const wrong = slices.map((slice, s) => ({
          ...slice,
          windingB: {
            ...slice.windingB,
            amplitude: slice.windingB.amplitude.map((b, i) => (i < 4 ? b + share[4 * s + i] * bounds[i] : b)),
          },
        }));
        const got = figuresOf(describeMachine(machine, { slices: wrong }, [], stamp));
        for (const [i, [name, value, relativeBound]] of told.entries()) {
          const secondOrder = 1 + 2 * relativeBound; // the bounds are first order; squares need their own square
          const off = Math.abs(got[i][1] - value);
          expect(off, name).toBeLessThanOrEqual(Math.abs(value) * relativeBound * secondOrder + 1e-12);
        }
      }),
      { numRuns: 25 },
    );
  });

  test('the bounds are not idle: the worst errors in step use up the whole bound of the fundamental', () => {
    const machine = hutHydro();
    const slices = closedFormSlices(machine, bounds);
    const worst = slices.map((slice) => ({
      ...slice,
      windingB: {
        ...slice.windingB,
        amplitude: slice.windingB.amplitude.map((b, i) => (i === 0 ? b + bounds[0] : b)),
      },
    }));
    const [told, got] = [slices, worst].map((list) => describeMachine(machine, { slices: list }, [], stamp).emf.phase);
    const moved = got.fundamental_rms_V / told.fundamental_rms_V - 1;
    expect(moved).toBeCloseTo(told.fundamental_rms_V_rel_err, 10);
  });

  test('merit has twice the bound of the voltage it squares, line_B_squared_thickness that of the line peak', () => {
    const machine = hutHydro();
    const result = describeMachine(machine, { slices: closedFormSlices(machine, bounds) }, [], stamp);
    expect(result.merit.merit_W_rel_err).toBe(2 * result.emf.rectified_mean_V_rel_err);
    expect(result.merit.line_B_squared_thickness_T2m_rel_err).toBe(2 * result.effective_B.line_peak_T_rel_err);
  });

  test('bounds scale with the slices', () => {
    const machine = hutHydro();
    const [once, thrice] = [1, 3].map((k) => {
      const slices = closedFormSlices(
        machine,
        bounds.map((b) => k * b),
      );
      return figuresOf(describeMachine(machine, { slices }, [], stamp));
    });
    for (const [i, [, , bound]] of once.entries()) expect(thrice[i][2]).toBeCloseTo(3 * bound, 12);
  });
});

test('the rms of an error is at most its largest value', () => {
  fc.assert(
    fc.property(fc.array(fc.double({ min: 0, max: 5, noNaN: true }), { minLength: 1 }), (list) => {
      expect(rmsBound(list)).toBeLessThanOrEqual(peakBound(list) + 1e-12);
    }),
  );
});

test('orders past the estimated ones, and figures without error, have none', () => {
  const [slice] = closedFormSlices(hutHydro(), [0.1, 0.2]);
  expect([1, 3, 5].map((order) => harmonicBound(slice, order))).toEqual([0.1, 0.2, 0]);
  expect(relative(0, 0)).toBe(0);
  expect(relative(1, -4)).toBe(0.25);
});
