import type { Machine } from '@gapwright/machine-models';
import { describeMachine, solveSlice } from '@gapwright/machine-models';
import { describe, expect, test } from 'vitest';
import { closedFormSlices, hutHydro, simpson, withWinding } from '../helpers/machines.js';
import { check } from './table.js';

/**
 * The hut hydro set with recoil 1 and discs of mu_r 1e6, where the harmonic series of the gap is exact (derived there and
 * checked against an independent finite-element solution; standard physics), slot spaces and all.
 */
function idealHydro(legWidth: number, radii: 1 | 3, accuracy: number): Machine {
  const machine = withWinding(hutHydro(), { legWidth });
  const magnet = machine.materials.magnet_42;
  if (magnet?.kind !== 'magnet') throw new Error('magnet_42 is no magnet');
  return {
    ...machine,
    materials: { plate: { kind: 'steel', muR: 1e6, source: 'ideal' }, magnet_42: { ...magnet, recoil: 1 } },
    model: {
      slices: radii === 1 ? [{ radius: 0.128, weight: 0.055 }] : simpson(0.128, 0.055),
      auto: false,
      accuracy,
      endCorrection: false,
    },
  };
}

const stamp = { version: '0', inputSha256: '' };

describe.each([0.003, 0.008, 0.0205])('a leg %s m wide', (legWidth) => {
  test.each([
    [1, 0.01],
    [1, 0.002],
    [3, 0.002],
    [3, 0.0002],
  ] as const)('%s slices at %s: every angle, every harmonic, every peak within what is told', (radii, accuracy) => {
    const machine = idealHydro(legWidth, radii, accuracy);
    const solved = machine.model.slices.map((slice) => solveSlice(machine, slice).answer);
    const got = describeMachine(machine, { slices: solved }, [], stamp);
    const exact = describeMachine(machine, { slices: closedFormSlices(machine) }, [], stamp);
    got.slices.forEach((slice, i) => {
      expect(slice.leg_B_rel_err).toBeLessThanOrEqual(accuracy);
      const wave = exact.slices[i].leg_B;
      const worst = Math.max(...slice.leg_B.value_T.map((value, j) => Math.abs(value - wave.value_T[j]))) / wave.peak_T;
      expect(worst).toBeLessThan(slice.leg_B_rel_err);
      for (const key of ['winding_B', 'mid_B'] as const) {
        slice[key].amplitude_T.forEach((value, k) => {
          const miss = Math.abs(value - exact.slices[i][key].amplitude_T[k]);
          expect(miss).toBeLessThanOrEqual(Math.abs(value) * slice[key].amplitude_T_rel_err[k] + 1e-6);
        });
      }
    });
    for (const kind of ['phase', 'line'] as const) {
      const [a, b] = [got.emf[kind], exact.emf[kind]];
      const name = `${kind} EMF, ${1000 * legWidth} mm leg, ${radii} slices at ${100 * accuracy} %`;
      const source = 'double-disc harmonic series, computed for this project';
      for (const key of ['rms_V', 'peak_V', 'fundamental_rms_V'] as const) {
        check(
          {
            case: 'ideal hut hydro',
            quantity: `${name}: ${key}`,
            source,
            expected: b[key],
            got: a[key],
            bound: a[`${key}_rel_err`] * b[key],
          },
          accuracy,
        );
      }
      a.harmonic_rms_V.forEach((value, i) => {
        const bound = value * a.harmonic_rms_V_rel_err[i];
        // An order that one slice left out, as under a fiftieth of the wanted error, is short of that slice's part.
        const leftOut = 0.02 * accuracy * b.fundamental_rms_V;
        expect(Math.abs(value - b.harmonic_rms_V[i])).toBeLessThanOrEqual(bound + leftOut);
      });
      expect(Math.abs(a.thd - b.thd)).toBeLessThan(a.thd * a.thd_rel_err + 1e-5);
    }
  });
});
