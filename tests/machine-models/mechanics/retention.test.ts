import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { describeRetention } from '../../../packages/machine-models/src/mechanics/retention.js';
import { hutHydro, relativeError } from '../../helpers/machines.js';

const hut = hutHydro();
const magnets = {
  shape: 'block',
  width: 0.03,
  length: 0.046,
  thickness: 0.01,
  meanRadius: 0.123,
  material: 'magnet_42',
  temperature: 20,
} as const;
const worked: Machine = {
  ...hut,
  rotor: { ...hut.rotor, poles: 12, magnets },
  operation: { ...hut.operation, speedRpm: 500, overspeedRpm: 1000 },
};
const retention = describeRetention(worked);

describe('centrifugal force on the magnets', () => {
  test('a block of 46 x 30 x 10 mm, 0.1035 kg, at 123 mm and 1000 rpm: 139.6056 N', () => {
    expect(retention?.mass).toBeCloseTo(0.1035, 12);
    expect(retention?.force).toBeCloseTo(139.6056, 4);
    expect(retention?.speedRpm).toBe(1000);
    expect(retention?.atOverspeed).toBe(true);
  });

  test('glue bears it over the face, a band the force of a radian', () => {
    expect(retention?.glueShear).toBeCloseTo(139.6056 / (0.046 * 0.03), 0);
    expect(retention?.bandTension).toBeCloseTo((12 * 139.6056) / (2 * Math.PI), 3);
  });

  test('it goes as the speed squared; without an overspeed the operating speed is told, and that it is', () => {
    const { overspeedRpm: _none, ...operation } = worked.operation;
    const slow = describeRetention({ ...worked, operation });
    expect(relativeError(4 * (slow?.force ?? 0), retention?.force ?? 0)).toBeLessThan(1e-12);
    expect(slow?.atOverspeed).toBe(false);
  });

  test('a full ring of sectors has the force of the ring: 2/3 pi rho t w^2 (r2^3 - r1^3), whatever the number of pieces', () => {
    // In thin pieces: each pulls along its own radius.
    const { width: _width, ...common } = magnets;
    const pieces = { ...common, shape: 'sector', arc: 1, segments: 50 } as const;
    const forces = describeRetention({ ...worked, rotor: { ...worked.rotor, magnets: pieces } });
    const [r1, r2, w] = [0.1, 0.146, (2 * Math.PI * 1000) / 60];
    const ring = (2 / 3) * Math.PI * 7500 * 0.01 * w * w * (r2 ** 3 - r1 ** 3);
    expect(relativeError(forces?.discForce ?? 0, ring)).toBeLessThan(1e-4);
  });

  test('interpoles pull too', () => {
    const interpoles = { width: 0.01, depth: 0.02, through: false, material: 'magnet_42' } as const;
    const both = describeRetention({ ...worked, rotor: { ...worked.rotor, interpoles } });
    const share = (0.01 * 0.046 * 0.02) / (0.03 * 0.046 * 0.01);
    expect(relativeError(both?.interpoleForce ?? 0, share * 139.6056)).toBeLessThan(1e-6);
    expect(relativeError(both?.discForce ?? 0, 12 * (1 + share) * 139.6056)).toBeLessThan(1e-6);
  });

  test('no density, no figure', () => {
    const { density: _density, ...light } = hut.materials.magnet_42;
    expect(describeRetention({ ...worked, materials: { ...hut.materials, magnet_42: light } })).toBeUndefined();
  });
});
