import { describe, expect, test } from 'vitest';
import { dragTorque, rotorSize } from '../../../packages/machine-models/src/losses/drag.js';
import { hutHydro, relativeError } from '../../helpers/machines.js';
import { halbachHydro, interpoled } from '../slices/variants.js';

const size = { outerRadius: 0.165, mass: 15, proud: true };

test('coefficients that are given are taken: bearing + windage w^2', () => {
  const found = dragTorque({ bearing: 0.15, windage: 2e-6 }, size, 44);
  expect(found.assumed).toBeUndefined();
  expect(relativeError(found.torque, 0.15 + 2e-6 * 44 ** 2)).toBeLessThan(1e-12);
  expect(relativeError(found.loss, 44 * found.torque)).toBeLessThan(1e-12);
});

test('nothing at rest', () => {
  for (const drag of [undefined, { bearing: 0.15, windage: 2e-6 }]) expect(dragTorque(drag, size, 0).loss).toBe(0);
});

describe('friction by size', () => {
  test('is told, and hut hydro loses a few watts at 420 rpm (practice: about 10)', () => {
    const found = dragTorque(undefined, size, (2 * Math.PI * 420) / 60);
    expect(found.assumed).toMatch(/operation.drag/);
    expect(found.loss).toBeGreaterThan(3);
    expect(found.loss).toBeLessThan(20);
  });

  test('a laminar disc in air, both sides: moment 3.87 Re^-0.5 rho w^2 R^5/2 (von Karman); faces to the winding add 2.67', () => {
    const [omega, radius] = [20, 0.1];
    const re = (omega * radius ** 2) / 1.589e-5;
    const found = dragTorque(undefined, { outerRadius: radius, mass: 3, proud: false }, omega);
    const expected = ((3.87 + 2.67) / Math.sqrt(re)) * 0.5 * 1.1614 * omega ** 2 * radius ** 5;
    expect(relativeError(found.windage, expected)).toBeLessThan(1e-12);
  });

  test('turbulent windage goes with speed to the power 1.8', () => {
    const at = (omega: number): number => dragTorque(undefined, { ...size, outerRadius: 0.4 }, omega).windage;
    expect(Math.log2(at(400) / at(200))).toBeCloseTo(1.8, 6);
  });

  test('grows with size, mass and speed; magnets that stand proud stir', () => {
    const base = dragTorque(undefined, size, 44);
    expect(dragTorque(undefined, { ...size, outerRadius: 0.2 }, 44).torque).toBeGreaterThan(base.torque);
    expect(dragTorque(undefined, { ...size, mass: 30 }, 44).bearing).toBeGreaterThan(base.bearing);
    expect(dragTorque(undefined, size, 88).windage).toBeGreaterThan(2 * base.windage);
    expect(dragTorque(undefined, { ...size, proud: false }, 44).windage).toBeLessThan(base.windage);
  });

  test('blocks stand proud; a Halbach ring and interpoles that fill the room do not', () => {
    expect(rotorSize(hutHydro().rotor, 15)).toEqual({ outerRadius: 0.165, mass: 15, proud: true });
    expect(rotorSize(halbachHydro(4, { disc: undefined }).rotor, 5)).toMatchObject({
      outerRadius: 0.1555,
      proud: false,
    });
    expect(rotorSize(interpoled(0.012).rotor, 15).proud).toBe(false);
  });
});
