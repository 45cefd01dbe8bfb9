import { describe, expect, test } from 'vitest';
import { freeResponse, reactionOfPlates } from '../../../packages/machine-models/src/inductance/current-layer.js';
import { rotorReactions } from '../../../packages/machine-models/src/inductance/rotor-reaction.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { solveSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { hutHydro } from '../../helpers/machines.js';
import { halbachHydro, ironless, keeperHydro } from '../slices/variants.js';

const RADIUS = 0.128;
/** Waves round the shaft: shorter and longer than the pole pair (8), in step with the poles and not. */
const ORDERS = [1, 2, 4, 7, 8, 12, 16, 20, 24, 28, 40];

function withMaterials(machine: Machine, muR: number, recoil: number): Machine {
  const magnet = machine.materials.magnet_42;
  if (magnet?.kind !== 'magnet') throw new Error('not a magnet');
  const plate = { kind: 'steel', muR, source: 'invented' } as const;
  return { ...machine, materials: { plate, magnet_42: { ...magnet, recoil } } };
}

function reactions(machine: Machine) {
  const solved = solveSlice(machine, { radius: RADIUS, weight: 1 });
  return rotorReactions(solved, ORDERS, machine.rotor.poles);
}

/** The reaction expected of each order, against all of its response; the error told covers the difference. */
function expectReactions(machine: Machine, expected: (k: number) => number, bound: number): void {
  reactions(machine).forEach(({ value, error }, i) => {
    const k = (ORDERS[i] ?? 0) / RADIUS;
    const whole = freeResponse(k, machine.winding.thickness) + expected(k);
    expect(Math.abs(value - expected(k)) / whole, `order ${ORDERS[i]}`).toBeLessThan(bound);
    expect(Math.abs(value - expected(k)), `order ${ORDERS[i]}`).toBeLessThan(3 * error + 3e-6 * whole);
  });
}

describe('layers that are alike all along: closed forms', () => {
  test('steel of endless permeability, magnets like air: two plates', () => {
    const machine = withMaterials(hutHydro(), 1e8, 1);
    const far = 0.019 / 2 + 0.012;
    expectReactions(machine, (k) => reactionOfPlates(k, 0.015, far, far), 1e-4);
  });

  test('a keeper of such steel: plates at unlike distances', () => {
    const machine = withMaterials(keeperHydro(), 1e8, 1);
    expectReactions(machine, (k) => reactionOfPlates(k, 0.015, 0.019 / 2 + 0.012, 0.019 / 2), 3e-4);
  });

  test('magnets of high recoil that fill the pole pitch: a wave comes back by (1 - s)/(1 + s), s = tanh(k h)/m', () => {
    const machine = withMaterials(halbachHydro(2), 1e8, 1.5);
    expectReactions(
      machine,
      (k) => {
        const s = Math.tanh(k * 0.012) / 1.5;
        const back = ((1 - s) / (1 + s)) * Math.exp(-k * 0.019);
        const half = (k * 0.015) / 2;
        const outside = (4e-7 * Math.PI * Math.sinh(half)) / (k * k);
        return (((2 * outside * back) / (1 - back)) * Math.sinh(half)) / half;
      },
      1e-4,
    );
  });
});

test('no steel, magnets like air: no reaction at all', () => {
  for (const { value } of reactions(withMaterials(ironless(), 1, 1))) expect(value).toBe(0);
});

test('more permeable material never takes away', () => {
  const [some, more] = [reactions(hutHydro()), reactions(withMaterials(hutHydro(), 1e5, 1.2))];
  some.forEach(({ value }, i) => {
    expect(value).toBeGreaterThan(0);
    expect(more[i]?.value).toBeGreaterThan(value);
  });
});
