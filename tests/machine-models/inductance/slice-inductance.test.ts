import { describe, expect, test } from 'vitest';
import { sliceInductance } from '../../../packages/machine-models/src/inductance/slice-inductance.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { solveSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { coilPlaces } from '../../../packages/machine-models/src/winding/coil-places.js';
import { legCut } from '../../../packages/machine-models/src/winding/leg-cut.js';
import { hutHydro, overlappedHydro, relativeError } from '../../helpers/machines.js';
import { TEAM_13 } from '../../reference/bh-tables.js';
import type { Leg } from './direct.js';
import { directInductances } from './direct.js';

const RADIUS = 0.128;

/** Thin plates of mild steel: they carry some 2 T midway between poles. */
function saturated<M extends Machine>(machine: M): M {
  const { disc } = machine.rotor;
  if (disc === undefined) throw new Error('no disc');
  return {
    ...machine,
    materials: { ...machine.materials, plate: { kind: 'steel-curve', bh: TEAM_13, source: 'TEAM problem 13' } },
    rotor: { ...machine.rotor, disc: { ...disc, thickness: 0.005 } },
  };
}

const sliceOf = (machine: Machine, radius = RADIUS) =>
  sliceInductance(machine, solveSlice(machine, { radius, weight: 1 }));

describe.each([
  ['plates of constant permeability', (machine: Machine) => machine],
  ['saturated plates', saturated],
])('legs drawn as they are, mean over the rotor at several positions: %s', (_, change) => {
  test('overlapped: one leg of each phase in one pole', () => {
    const machine = change(overlappedHydro());
    const { width } = legCut(machine.winding, 16, RADIUS, RADIUS);
    const positions = [0, 1, 2, 3].map((i) => i / 4 - 0.4);
    let [self, mutual] = [0, 0];
    for (const at of positions) {
      const legs = [0, 1, 2].map((k): Leg[] => [{ at: at + (2 * k) / 3 - (k === 2 ? 1 : 0), turns: k === 2 ? -1 : 1 }]);
      const matrix = directInductances(machine, RADIUS, 1, legs, width);
      self += (matrix[0][0] + matrix[1][1] + matrix[2][2]) / 3 / positions.length;
      mutual += (matrix[0][1] + matrix[1][2] + matrix[2][0]) / 3 / positions.length;
    }
    const { leg } = sliceOf(machine);
    if (leg === undefined) throw new Error('not overlapped');
    console.log(self, leg.self.value, mutual, leg.mutual.value);
    expect(relativeError(leg.self.value, self)).toBeLessThan(5e-4);
    expect(relativeError(leg.mutual.value, mutual)).toBeLessThan(5e-4);
  });

  test('side by side: three coils on four poles', () => {
    const machine = change(hutHydro());
    const { halfSpan, width } = legCut(machine.winding, 16, RADIUS, RADIUS);
    const places = coilPlaces(machine.winding, 16).slice(0, 3);
    const positions = [0, 1, 2].map((i) => i / 3 + 0.1);
    const inPitches = (angle: number): number => (angle * 16) / (2 * Math.PI);
    let [self, mutual] = [0, 0];
    for (const position of positions) {
      const coils = places.map(({ axis, sense }): Leg[] => [
        { at: inPitches(axis - halfSpan) + position, turns: sense },
        { at: inPitches(axis + halfSpan) + position, turns: -sense },
      ]);
      const matrix = directInductances(machine, RADIUS, 4, coils, width);
      self += (matrix[0][0] + matrix[1][1] + matrix[2][2]) / 3 / positions.length;
      mutual += (matrix[0][1] + matrix[1][2] + matrix[2][0]) / 3 / positions.length;
    }
    const units = 4 * 58 ** 2;
    const slice = sliceOf(machine);
    console.log(units * self, slice.self.value, units * mutual, slice.mutual.value);
    expect(relativeError(slice.self.value, units * self)).toBeLessThan(5e-4);
    expect(relativeError(slice.mutual.value, units * mutual)).toBeLessThan(5e-4);
  });
});
