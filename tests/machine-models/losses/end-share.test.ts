import { describe, expect, test } from 'vitest';
import { conductorAt, endShare } from '../../../packages/machine-models/src/losses/end-share.js';
import { legConductor } from '../../../packages/machine-models/src/losses/leg-conductor.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import type { CoilWindow } from '../../../packages/machine-models/src/winding/coil-window.js';
import { coilWindow } from '../../../packages/machine-models/src/winding/coil-window.js';
import { meanTurn } from '../../../packages/machine-models/src/winding/turn.js';
import { hutHydro, overlappedHydro, relativeError, withWinding } from '../../helpers/machines.js';

/** Hut hydro on a larger circle with as many poles as keep its pitch, magnets and opening longer by `more`. */
function longHydro(more: number, times: number): Machine {
  const hut = hutHydro();
  const { magnets } = hut.rotor;
  if (magnets.shape !== 'block') throw new Error('not a block');
  const meanRadius = magnets.meanRadius * times;
  const half = 0.0235 + more / 2;
  const machine = withWinding(hut, {
    coils: 12 * times,
    opening: {
      innerRadius: meanRadius - half,
      outerRadius: meanRadius + half,
      innerWidth: 0.021,
      outerWidth: 0.021,
    },
  });
  return {
    ...machine,
    rotor: { ...machine.rotor, poles: 16 * times, magnets: { ...magnets, meanRadius, length: magnets.length + more } },
  };
}

describe('share of the ends in the eddy loss', () => {
  test('is 1 for magnets without end, and what is missing goes as one over their length', () => {
    const [short, long] = [0.1, 0.3].map((more) => endShare(longHydro(more, 8)));
    expect(Math.abs(1 - long)).toBeLessThan(0.025);
    const ratio = ((1 - short) * 0.155) / ((1 - long) * 0.355);
    expect(ratio).toBeGreaterThan(0.8);
    expect(ratio).toBeLessThan(1.25);
  });

  test('is between two thirds and 1 for machines as they are made', () => {
    for (const machine of [hutHydro(), overlappedHydro()]) {
      const share = endShare(machine);
      expect(share).toBeGreaterThan(0.67);
      expect(share).toBeLessThan(1);
    }
  });

  test('coil ends farther out lie in less field', () => {
    const hut = hutHydro();
    const { opening } = hut.winding;
    const larger = { ...opening, innerRadius: opening.innerRadius - 0.004, outerRadius: opening.outerRadius + 0.004 };
    expect(endShare(withWinding(hut, { opening: larger }))).toBeLessThan(endShare(hut));
  });
});

describe('conductor per length of radius', () => {
  const hut = hutHydro();

  test('over the whole coil it is the mean turn', () => {
    const window = coilWindow(hut);
    const total = integrate(window, (radius) => conductorAt(hut, window, radius));
    expect(relativeError(total, meanTurn(hut.winding, hut.rotor.poles))).toBeLessThan(0.01);
  });

  test("between the opening's ends it is that of two legs, which lie along the radius but for a degree or two", () => {
    for (const radius of [0.11, 0.128, 0.15]) {
      const found = conductorAt(hut, coilWindow(hut), radius);
      expect(relativeError(found, legConductor(hut, radius))).toBeLessThan(1e-9);
      expect(relativeError(found, 2)).toBeLessThan(5e-3);
    }
  });

  test('of overlapped coils too the legs count once each', () => {
    const machine = overlappedHydro();
    expect(relativeError(conductorAt(machine, coilWindow(machine), 0.128), 2)).toBeLessThan(0.01);
    expect(conductorAt(machine, coilWindow(machine), 0.2)).toBe(0);
  });

  function integrate({ radii }: CoilWindow, value: (radius: number) => number): number {
    const [from, to] = [radii[0], radii[radii.length - 1]];
    const steps = 4000;
    let sum = 0;
    for (let i = 0; i < steps; i++) sum += value(from + ((i + 0.5) * (to - from)) / steps);
    return (sum * (to - from)) / steps;
  }
});
