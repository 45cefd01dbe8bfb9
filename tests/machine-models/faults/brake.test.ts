import fc from 'fast-check';
import { expect, test } from 'vitest';
import { brakeCurve, greatestBrake, heatingRate } from '../../../packages/machine-models/src/faults/brake.js';
import { emfs, shorted } from './shorted.js';

const PAIRS = 8;
const perRadian = 51.7 / (2 * Math.PI * 7); // V rms over mechanical rad/s

test('the greatest torque is 3 (E/w)^2/(2 p L), at w = R/(p L): resistance moves it, and does not change it', () => {
  for (const resistance of [0.1, 0.535, 2]) {
    const top = greatestBrake(shorted({ resistance }));
    expect(((top?.speedRpm ?? 0) * 2 * Math.PI) / 60 / (resistance / (PAIRS * 0.78e-3))).toBeCloseTo(1, 6);
    expect((top?.torque ?? 0) / ((3 * perRadian ** 2) / (2 * PAIRS * 0.78e-3))).toBeCloseTo(1, 9);
  }
});

test('no speed brakes more than the greatest', () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: -20, max: 20, noNaN: true }), { minLength: 3, maxLength: 3 }),
      fc.double({ min: 0.1, max: 10, noNaN: true }),
      fc.constantFrom('star' as const, 'delta' as const),
      ([third = 0, fifth = 0, seventh = 0], ratio, connection) => {
        const emf = emfs(3, [1, 3, 5, 7], [40, third, fifth, seventh]);
        const machine = shorted({ emf, connection, homopolarInductance: 0.3e-3 });
        const top = greatestBrake(machine);
        if (top === undefined) throw new Error('a greatest torque');
        const speeds = [1, ratio].map((times) => times * top.speedRpm);
        const [same, other] = brakeCurve(machine, speeds);
        expect(same?.torque).toBeCloseTo(top.torque, 9);
        expect(other?.torque ?? 0).toBeLessThanOrEqual(top.torque * (1 + 1e-9));
      },
    ),
    { seed: 4, numRuns: 60 },
  );
});

test('at low speed it rises with the speed, 3 (E/w)^2 w/R; without inductance for ever', () => {
  const [slow] = brakeCurve(shorted(), [1]);
  expect((slow?.torque ?? 0) / ((3 * perRadian ** 2 * ((2 * Math.PI) / 60)) / 0.535)).toBeCloseTo(1, 5);
  const resistive = shorted({ inductance: 0 });
  expect(greatestBrake(resistive)).toBeUndefined();
  const [one, ten] = brakeCurve(resistive, [100, 1000]);
  expect((ten?.torque ?? 0) / (one?.torque ?? 1)).toBeCloseTo(10, 9);
});

test('a kilogram of copper warms by a kelvin with 385 J', () => {
  expect(heatingRate(385, 1)).toBe(1);
});
