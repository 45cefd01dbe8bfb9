import { expect, test } from 'vitest';
import { greatestBrake } from '../../../packages/machine-models/src/faults/brake.js';
import {
  controllerWarning,
  shortCircuitCaution,
  touchSpeed,
} from '../../../packages/machine-models/src/faults/fault-notes.js';
import { shortCircuit } from '../../../packages/machine-models/src/faults/short-circuit.js';
import { shorted } from './shorted.js';

test('the rectified voltage passes 60 V in proportion to speed', () => {
  expect(touchSpeed(120, 420)).toBe(210);
  expect(touchSpeed(0, 420)).toBeUndefined();
});

test('a controller is warned for when the peak passes its limit, or comes near it', () => {
  expect(controllerWarning(150, 250)).toBeUndefined();
  expect(controllerWarning(237, 250)).toBeUndefined();
  expect(controllerWarning(240, 250)?.text).toContain('4 % below');
  expect(controllerWarning(250.5, 250)?.text).toContain('it will fail');
  expect(controllerWarning(250.5, 250)?.key).toBe('limits.controller_voltage');
});

test('the caution tells current and torque against rated ones, and that the brake weakens above its best speed', () => {
  const machine = shorted();
  const top = greatestBrake(machine);
  const slow = shortCircuitCaution(shortCircuit(machine, 420), top, { current: 8, torque: 26 }, 9);
  expect(slow).toContain('86 A rms (10.7 times rated)');
  expect(slow).toContain('(10.4 times rated)');
  expect(slow).toContain('9 K/s');
  expect(slow).not.toContain('weaker');
  const fast = shortCircuitCaution(shortCircuit(machine, 1500), top, {}, 0.01);
  expect(fast).toContain('gets weaker with speed');
  expect(fast).not.toMatch(/rated|K\/s/);
});
