import { describe, expect, test } from 'vitest';
import { armatureWaves, wavesOnRotor } from '../../../packages/machine-models/src/demagnetisation/armature-waves.js';
import { currentWaves } from '../../../packages/machine-models/src/inductance/current-waves.js';
import { hutHydro, overlappedHydro, relativeError } from '../../helpers/machines.js';

describe.each([
  ['concentrated', hutHydro()],
  ['overlapped', overlappedHydro()],
])('%s coils', (_, machine) => {
  const { turns, paths, thickness } = machine.winding;
  const armature = armatureWaves(machine, 0.12);

  test('waves both ways hold what self less mutual inductance is made of (Parseval): 3 (self - mutual)', () => {
    const known = currentWaves(machine, 0.12);
    for (const { order, along, against } of armature.waves) {
      const wave = known.find((one) => one.order === order);
      const square = along.re ** 2 + along.im ** 2 + against.re ** 2 + against.im ** 2;
      const expected = 3 * ((wave?.self ?? 0) - (wave?.mutual ?? 0)) * (turns / (paths * thickness)) ** 2;
      expect(relativeError(square, expected), `order ${order}`).toBeLessThan(1e-9);
    }
  });

  test('of the wave with as many waves as pole pairs nothing runs against the rotor', () => {
    const working = armature.waves.find(({ order }) => order === 8);
    if (working === undefined) throw new Error('a working wave');
    const size = Math.hypot(working.along.re, working.along.im);
    expect(Math.hypot(working.against.re, working.against.im)).toBeLessThan(1e-9 * size);
  });

  test('that wave stands still to the rotor: sin of a direct current, against the magnets, cos of the other', () => {
    const at = armature.waves.findIndex(({ order }) => order === 8);
    const { along } = armature.waves[at] ?? { along: { re: 0, im: 0 } };
    const size = Math.hypot(along.re, along.im);
    const seen = (current: { readonly direct: number; readonly quadrature: number }) =>
      wavesOnRotor(armature, current).map((waves) => waves[at] ?? { re: Number.NaN, im: Number.NaN });
    // Re((re + i im) exp(i k x)) = re cos(k x) - im sin(k x)
    for (const { re, im } of seen({ direct: 1, quadrature: 0 })) {
      expect(Math.abs(re)).toBeLessThan(1e-9 * size);
      expect(relativeError(-im, size)).toBeLessThan(1e-9);
    }
    for (const { re, im } of seen({ direct: 0, quadrature: 1 })) {
      expect(relativeError(Math.abs(re), size)).toBeLessThan(1e-9);
      expect(Math.abs(im)).toBeLessThan(1e-9 * size);
    }
  });
});
