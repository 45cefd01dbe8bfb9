import { describe, expect, test } from 'vitest';
import { coilWindow as endEffectWindow } from '../../../packages/machine-models/src/end-effect/coil-window.js';
import { coilWindow, windowWave } from '../../../packages/machine-models/src/inductance/coil-window.js';
import { hutHydro, overlappedHydro, withWinding } from '../../helpers/machines.js';

describe.each([
  ['side by side', hutHydro()],
  ['side by side, tapered', withWinding(hutHydro(), { legShape: 'tapered' })],
  ['overlapped', overlappedHydro()],
])('%s', (_, machine) => {
  const window = coilWindow(machine);

  test('its fundamental is that of the end effect', () => {
    const other = endEffectWindow(machine);
    for (const radius of [0.09, 0.102, 0.106, 0.128, 0.15, 0.154, 0.16]) {
      const wave = 2 * Math.PI * windowWave(window.profile(radius), machine.rotor.poles / 2);
      expect(Math.abs(wave - other.fundamental(radius))).toBeLessThan(2e-3 * other.fundamental(0.128));
    }
  });

  test('its waves add up to it', () => {
    const profile = window.profile(0.13);
    let [axis, outside] = [windowWave(profile, 0), windowWave(profile, 0)];
    for (let m = 1; m < 4000; m++) {
      axis += 2 * windowWave(profile, m);
      outside += 2 * windowWave(profile, m) * Math.cos(m * Math.PI);
    }
    expect(axis).toBeCloseTo(1, 3);
    expect(outside).toBeCloseTo(0, 3);
  });

  test('it vanishes at both ends', () => {
    for (const radius of [window.radii[0] ?? 0, window.radii[window.radii.length - 1] ?? 0]) {
      expect(windowWave(window.profile(radius), 0)).toBeLessThan(1e-3 * windowWave(window.profile(0.128), 0));
    }
  });
});
