import { describe, expect, test } from 'vitest';
import type { Branch } from '../../../packages/machine-models/src/losses/circulation.js';
import {
  deltaCirculation,
  pathCirculation,
  pathEmfs,
} from '../../../packages/machine-models/src/losses/circulation.js';
import { computeEmf } from '../../../packages/machine-models/src/results/emf.js';
import type { Series } from '../../../packages/machine-models/src/waves/series.js';
import { amplitudes, combine, evaluate } from '../../../packages/machine-models/src/waves/series.js';
import { coilPlaces, pathsAreAlike } from '../../../packages/machine-models/src/winding/coil-places.js';
import { closedFormSlices, hutHydro, relativeError } from '../../helpers/machines.js';

const branch: Branch = { resistance: 0.47, inductance: 0.8e-3, omega: 44, polePairs: 8 };
const three = (order: readonly number[], sin: readonly number[]): readonly Series[] =>
  [0, 1, 2].map((k) => {
    const lag = (2 * Math.PI * k) / 3;
    return {
      order,
      cos: order.map((n, i) => -sin[i] * Math.sin(n * lag)),
      sin: order.map((n, i) => sin[i] * Math.cos(n * lag)),
    };
  });

describe('round a closed delta', () => {
  const phases = three([1, 3, 5, 7, 9], [70, 6, 3, -1, 0.8]);
  const found = deltaCirculation(phases, branch);

  test('is what an integration of the loop in time comes to', () => {
    // L0 di/dt + R i = (e1 + e2 + e3)/3 by fourth-order steps until it repeats.
    const speed = branch.omega * branch.polePairs;
    const mean = combine(phases, [1 / 3, 1 / 3, 1 / 3]);
    const slope = (t: number, i: number): number =>
      (evaluate(mean, speed * t) - branch.resistance * i) / branch.inductance;
    const steps = 2000;
    const h = (2 * Math.PI) / speed / steps;
    let [i, square] = [0, 0];
    for (let period = 0; period < 6; period++) {
      square = 0;
      for (let j = 0; j < steps; j++) {
        const t = j * h;
        const a = slope(t, i);
        const b = slope(t + h / 2, i + (h / 2) * a);
        const c = slope(t + h / 2, i + (h / 2) * b);
        const d = slope(t + h, i + h * c);
        i += (h / 6) * (a + 2 * b + 2 * c + d);
        square += (i * i) / steps;
      }
    }
    expect(relativeError(found.current[0], Math.sqrt(square))).toBeLessThan(1e-6);
  });

  test('only orders that three divides drive it', () => {
    const without = deltaCirculation(three([1, 5, 7, 11], [70, 3, -1, 0.5]), branch);
    expect(without.loss).toBeLessThan(1e-20);
    expect(relativeError(found.loss, 3 * branch.resistance * found.current[0] ** 2)).toBeLessThan(1e-12);
    expect(relativeError(found.torque * branch.omega, found.loss)).toBeLessThan(1e-12);
  });

  test('without inductance it is the EMF over the resistance', () => {
    const { current } = deltaCirculation(phases, { ...branch, inductance: 0 });
    expect(relativeError(current[0], Math.hypot(6, 0.8) / Math.SQRT2 / branch.resistance)).toBeLessThan(1e-12);
  });

  test('nothing at rest', () => {
    const still = deltaCirculation(three([1, 3], [0, 0]), { ...branch, omega: 0 });
    expect([still.loss, still.torque]).toEqual([0, 0]);
  });
});

describe('between parallel paths', () => {
  const path = (peak: number): Series => ({ order: [1, 3], cos: [0, 0], sin: [peak, 0.1 * peak] });

  test('none if they are alike', () => {
    expect(pathCirculation([path(20), path(20), path(20)], branch).loss).toBeLessThan(1e-20);
  });

  test('two paths: half their difference over the impedance of one', () => {
    const { current, loss } = pathCirculation([path(20), path(21)], { ...branch, inductance: 0 });
    const expected = (0.5 * Math.hypot(1, 0.1)) / Math.SQRT2 / branch.resistance;
    for (const one of current) expect(relativeError(one, expected)).toBeLessThan(1e-9);
    expect(relativeError(loss, 2 * branch.resistance * expected ** 2)).toBeLessThan(1e-9);
  });

  test('what a load takes does not change: the loss grows with the square of the difference alone', () => {
    const one = pathCirculation([path(20), path(21), path(20)], branch).loss;
    const two = pathCirculation([path(50), path(52), path(50)], branch).loss;
    expect(relativeError(two, 4 * one)).toBeLessThan(1e-9);
  });

  test('paths of neighbouring coils: their mean is the EMF of the phase', () => {
    const machine = hutHydro();
    const wound = { ...machine, winding: { ...machine.winding, paths: 4 } };
    const slices = closedFormSlices(wound);
    const { phases } = computeEmf(wound, slices);
    const places = coilPlaces(wound.winding, 16);
    expect(pathsAreAlike(places, 16, 4)).toBe(true);
    // All four coils of a phase are in step, so one coil has the amplitude of the phase.
    const coil = { order: phases[0].order, amplitude: phases[0].sin };
    const emfs = pathEmfs(coil, places, 16, 1, 4);
    const peaks = emfs.map((emf) => amplitudes(emf)[0]);
    for (const peak of peaks) expect(relativeError(peak, amplitudes(phases[0])[0])).toBeLessThan(1e-9);
    expect(pathCirculation(emfs, branch).loss).toBeLessThan(1e-18);
  });

  test('on 10 poles the two pairs of a phase lie opposite and are alike; the single coils are not', () => {
    const places = coilPlaces({ layout: 'concentrated', coils: 12, phases: 3 }, 10);
    const coil = { order: [1], amplitude: [10] };
    expect(pathsAreAlike(places, 10, 2)).toBe(true);
    expect(pathsAreAlike(places, 10, 4)).toBe(false);
    expect(pathCirculation(pathEmfs(coil, places, 10, 1, 2), branch).loss).toBeLessThan(1e-20);
    const four = pathEmfs(coil, places, 10, 1, 4);
    expect(pathCirculation(four, branch).loss).toBeGreaterThan(0.1);
  });
});
