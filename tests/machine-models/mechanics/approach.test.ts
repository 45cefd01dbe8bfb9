import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import type { Approach } from '../../../packages/machine-models/src/mechanics/approach.js';
import {
  jackingCurve,
  pullAt,
  pullSlope,
  solveApproach,
} from '../../../packages/machine-models/src/mechanics/approach.js';
import { simpsonRadii } from '../../../packages/machine-models/src/rotor/slice-radii.js';
import { closedFormSlices, hutHydro, relativeError } from '../../helpers/machines.js';

const hut = hutHydro();

const apart = (machine: Machine, gap: number): Machine => ({ ...machine, rotor: { ...machine.rotor, gap } });

/** Pull over all radii by the closed series, N. */
const wholePull = (machine: Machine): number =>
  closedFormSlices(machine).reduce((sum, { weight, pull }) => sum + machine.rotor.poles * weight * pull, 0);

/** What `solveApproach` does, by the closed series. */
function closedApproach(machine: Machine): Approach {
  const { gap, poles, magnets } = machine.rotor;
  const pitch = (2 * Math.PI * magnets.meanRadius) / poles;
  const mean = { ...machine, model: { ...machine.model, slices: [{ radius: magnets.meanRadius, weight: 1 }] } };
  const gaps = [0.95 * gap, gap, 1.05 * gap, ...[0.2, 0.5, 1].map((share) => gap + share * pitch)];
  return { gaps, pulls: gaps.map((at) => closedFormSlices(apart(mean, at))[0].pull) };
}

const withLength = (length: number): Machine => {
  const { magnets } = hut.rotor;
  if (magnets.shape !== 'block') throw new Error('not blocks');
  return {
    ...hut,
    rotor: { ...hut.rotor, magnets: { ...magnets, length } },
    model: { ...hut.model, slices: simpsonRadii(0.128 - length / 2, 0.128 + length / 2, 9) },
  };
};

describe('pull while the discs come together', () => {
  test.each([
    [0.055, 0.015],
    [0.064, 0.015],
    [0.128, 0.06],
  ])(
    'magnets %f m long: within %f of the closed series over all radii, down to a twentieth of the pull',
    (length, bound) => {
      const machine = withLength(length);
      const slices = closedFormSlices(machine);
      const curve = jackingCurve(machine, slices, closedApproach(machine));
      for (const { gap, force } of curve)
        expect(relativeError(force, wholePull(apart(machine, gap)))).toBeLessThan(bound);
      expect(curve[0].force).toBeLessThan(0.06 * wholePull(machine));
    },
  );

  test('it ends at the pull of the slices, and rises all the way', () => {
    const curve = jackingCurve(hut, closedFormSlices(hut), closedApproach(hut));
    const last = curve[curve.length - 1];
    expect(last.gap).toBe(0.019);
    expect(relativeError(last.force, wholePull(hut))).toBeLessThan(1e-12);
    for (let i = 1; i < curve.length; i++) expect(curve[i].force).toBeGreaterThan(curve[i - 1].force);
  });

  test('1 mm more of gap costs the hut set 7.2 % of its pull (derivative and curve)', () => {
    const approach = closedApproach(hut);
    const exact = wholePull(apart(hut, 0.02)) / wholePull(hut) - 1;
    expect(exact).toBeCloseTo(-0.072, 2);
    expect(pullAt(hut, closedFormSlices(hut), approach, 0.02) / wholePull(hut) - 1).toBeCloseTo(exact, 3);
    const derivative = (wholePull(apart(hut, 0.01901)) / wholePull(apart(hut, 0.01899)) - 1) / 2e-5;
    expect(relativeError(pullSlope(hut, approach), derivative)).toBeLessThan(0.02);
  });

  test('solved by elements, the mean slice falls as the series of ideal discs does', () => {
    const solved = solveApproach(hut);
    const closed = closedApproach(hut);
    expect(solved?.gaps).toEqual(closed.gaps);
    const fallen = (approach: Approach, i: number): number => approach.pulls[i] / approach.pulls[1];
    for (let i = 0; i < closed.gaps.length; i++) {
      if (solved === undefined) throw new Error('not solved');
      expect(relativeError(fallen(solved, i), fallen(closed, i))).toBeLessThan(0.01); // air between the magnets there
    }
  });

  test('towards a keeper it falls twice as fast: a keeper at a gap is the plane between two discs at twice the gap', () => {
    const twin = apart(hut, 0.026);
    const keeper: Machine = {
      ...hut,
      winding: { ...hut.winding, thickness: 0.006 },
      rotor: { ...hut.rotor, gap: 0.013, arrangement: 'keeper', keeper: { material: 'plate', thickness: 0.01 } },
    };
    const [one, two] = [solveApproach(keeper), solveApproach({ ...twin, winding: keeper.winding })];
    if (one === undefined || two === undefined) throw new Error('not solved');
    expect(relativeError(pullSlope(keeper, one), 2 * pullSlope(twin, two))).toBeLessThan(0.01);
    const slices = closedFormSlices(twin);
    const far = pullAt(keeper, slices, one, 0.013 + 0.01) / pullAt(twin, slices, two, 0.026 + 0.02);
    expect(relativeError(far, 1)).toBeLessThan(0.01);
  });
});
