import { describe, expect, test } from 'vitest';
import type { Machine } from '../../packages/machine-models/src/machine.js';
import { effectiveWave } from '../../packages/machine-models/src/results/leg-wave.js';
import { autoRadii, roundRadii } from '../../packages/machine-models/src/rotor/slice-radii.js';
import type { SolvedSlices } from '../../packages/machine-models/src/solve-machine.js';
import { sliceSteps } from '../../packages/machine-models/src/solve-machine.js';
import { hutHydro } from '../helpers/machines.js';
import { roundHydro } from './slices/variants.js';

function solveAll(machine: Machine): { readonly solved: SolvedSlices; readonly count: number } {
  const steps = sliceSteps(machine);
  for (let count = 0; ; count++) {
    const step = steps.next();
    if (step.done) return { solved: step.value, count };
  }
}

const automatic = (machine: Machine, accuracy: number): Machine => ({
  ...machine,
  model: { ...machine.model, slices: autoRadii(machine.rotor.magnets, 0), auto: true, accuracy },
});

const fundamental = (machine: Machine, { slices }: SolvedSlices): number =>
  effectiveWave(
    machine,
    slices.map(({ answer }) => answer),
  ).series.cos[0];

describe('slices are added until the flux of the leg settles', () => {
  test('blocks: five do at 0.2 %, and no radius is solved twice', () => {
    const machine = automatic(hutHydro(), 0.002);
    const { solved, count } = solveAll(machine);
    expect(solved.refined?.settled).toBe(true);
    expect(solved.refined?.change).toBeLessThan(0.002);
    expect(solved.slices).toHaveLength(5);
    expect(count).toBe(5);
    const radii = solved.slices.map(({ answer }) => answer.radius);
    expect(radii).toEqual([...radii].sort((a, b) => a - b));
    const length = solved.slices.reduce((sum, { answer }) => sum + answer.weight, 0);
    expect(length).toBeCloseTo(0.055, 14);
  });

  test('round magnets: within the wanted accuracy of many slices, by few', () => {
    const machine = automatic(roundHydro(), 0.005);
    const { solved } = solveAll(machine);
    expect(solved.refined?.settled).toBe(true);
    expect(solved.slices.length).toBeLessThanOrEqual(9);
    const many = { ...machine, model: { ...machine.model, auto: false, slices: roundRadii(0.128, 0.036, 15) } };
    const exact = fundamental(machine, solveAll(many).solved);
    expect(Math.abs(fundamental(machine, solved) / exact - 1)).toBeLessThan(0.005);
  });

  test('a choice that is given is kept', () => {
    const { solved, count } = solveAll(hutHydro());
    expect(solved.refined).toBeUndefined();
    expect(count).toBe(3);
  });
});
