import { checkMesh, nodeCount, triangleCount } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { solveSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { legSpreadFactor } from '../../../packages/machine-models/src/winding/factors.js';
import { legCut } from '../../../packages/machine-models/src/winding/leg-cut.js';
import { hutHydro } from '../../helpers/machines.js';
import { ALL_CUTS, ironless, nameOf, sectorHydro } from './variants.js';

const off = (got: number, expected: number): number => Math.abs(got / expected - 1);
const SLICE = { radius: 0.128, weight: 0.04 };

const heated = (machine: Machine, temperature: number): Machine => ({
  ...machine,
  rotor: { ...machine.rotor, magnets: { ...machine.rotor.magnets, temperature } },
});

describe('a slice cut along planes of symmetry is the whole slice', () => {
  const machine = hutHydro();
  const solved = ALL_CUTS.map((cuts) => solveSlice(machine, SLICE, { cuts, accuracy: 1e-3 }).answer);
  const [whole, ...cut] = solved;
  const rows = ALL_CUTS.slice(1).map((cuts, i) => [nameOf(cuts), cut[i]] as const);

  test.each(rows)('cut along %s: harmonics, pull, disc and energy of one pole', (_, answer) => {
    [0, 1, 2, 3].forEach((i) => {
      expect(Math.abs(answer.midB.amplitude[i] - whole.midB.amplitude[i])).toBeLessThan(2e-3 * whole.midB.amplitude[0]);
      const [got, expected] = [answer.windingB.amplitude[i], whole.windingB.amplitude[i]];
      expect(Math.abs(got - expected)).toBeLessThan(2e-3 * whole.windingB.amplitude[0]);
    });
    expect(off(answer.pull, whole.pull)).toBeLessThan(answer.pullRelErr + whole.pullRelErr);
    expect(off(answer.energy, whole.energy)).toBeLessThan(2 * (answer.energyRelErr + whole.energyRelErr));
    expect(off(answer.energy, whole.energy)).toBeLessThan(5e-3);
    expect(off(answer.discB ?? 0, whole.discB ?? 0)).toBeLessThan(1e-2);
    expect(off(answer.peakSteelB ?? 0, whole.peakSteelB ?? 0)).toBeLessThan(5e-2);
  });

  test('and takes fewer triangles', () => {
    expect(solved[3].mesh.triangles).toBeLessThan(0.5 * whole.mesh.triangles);
  });
});

describe('accuracy', () => {
  test.each([
    ['block magnets', hutHydro()],
    ['sector magnets', sectorHydro(0.75)],
    ['no discs', ironless()],
  ] as const)('asked is accuracy met, within the bounds told: %s', (_, machine) => {
    const cut = legCut(machine.winding, machine.rotor.poles, machine.rotor.magnets.meanRadius, SLICE.radius);
    const fine = solveSlice(machine, SLICE, { accuracy: 1e-4 }).answer;
    const factors = fine.windingB.order.map((n) => legSpreadFactor(cut.width, fine.polePitch, n));
    for (const accuracy of [3e-2, 5e-3]) {
      const { answer } = solveSlice(machine, SLICE, { accuracy });
      expect(answer.accurate).toBe(true);
      expect(answer.windingBErr).toHaveLength(answer.windingB.order.length);
      const scale = Math.abs(fine.windingB.amplitude[0] * factors[0]);
      let error = 0;
      answer.windingBErr.forEach((bound, i) => {
        const miss = Math.abs(answer.windingB.amplitude[i] - fine.windingB.amplitude[i]);
        expect(miss).toBeLessThan(bound + fine.windingBErr[i]);
        error += miss * Math.abs(factors[i]);
      });
      expect(error / scale).toBeLessThan(accuracy);
      expect(off(answer.pull, fine.pull)).toBeLessThan(answer.pullRelErr + fine.pullRelErr);
    }
  });

  test("is the machine's own where none is asked", () => {
    const machine = hutHydro();
    const own = solveSlice({ ...machine, model: { ...machine.model, accuracy: 7e-3 } }, SLICE).answer;
    expect(own).toEqual(solveSlice(machine, SLICE, { accuracy: 7e-3 }).answer);
  });
});

describe('magnet temperature', () => {
  test('in linear steel scales the field as the remanence, forces and energy as its square; the mesh is the same', () => {
    const cold = solveSlice(heated(hutHydro(), 20), SLICE, { accuracy: 5e-3 }).answer;
    for (const celsius of [-20, 70]) {
      const factor = 1 - 0.0012 * (celsius - 20);
      const { answer } = solveSlice(heated(hutHydro(), celsius), SLICE, { accuracy: 5e-3 });
      expect(answer.mesh).toEqual(cold.mesh);
      answer.windingB.amplitude.slice(0, 5).forEach((amplitude, i) => {
        expect(off(amplitude, factor * cold.windingB.amplitude[i])).toBeLessThan(1e-6);
      });
      expect(off(answer.midB.amplitude[0], factor * cold.midB.amplitude[0])).toBeLessThan(1e-6);
      expect(off(answer.pull, factor ** 2 * cold.pull)).toBeLessThan(1e-6);
      expect(off(answer.energy, factor ** 2 * cold.energy)).toBeLessThan(1e-6);
    }
  });
});

describe('the answer', () => {
  const progress: number[] = [];
  const { answer, field, recovered, pole } = solveSlice(hutHydro(), SLICE, {
    accuracy: 5e-3,
    onMesh: ({ triangles }) => {
      progress.push(triangles);
    },
  });

  test('tells the mesh it was read from', () => {
    checkMesh(field.mesh);
    expect(answer.mesh).toMatchObject({ nodes: nodeCount(field.mesh), triangles: triangleCount(field.mesh) });
    expect(answer.mesh.minAngleDeg).toBeGreaterThan(24.99);
    expect(answer.mesh.minAngleDeg).toBeLessThan(60);
    expect(progress).toHaveLength(answer.meshes);
    expect(progress.at(-1)).toBe(answer.mesh.triangles);
    expect(recovered).toHaveLength(12 * answer.mesh.triangles);
  });

  test('tells how the solve went', () => {
    expect(answer.converged).toBe(true);
    expect(answer.residuals).toHaveLength(answer.newtonSteps + 1);
    expect(answer.residuals.at(-1)).toBeLessThan(1e-8);
    expect(answer.newtonStepsTotal).toBeGreaterThanOrEqual(answer.newtonSteps);
  });

  test('hands radius and weight through, with pole pitch and orders as promised', () => {
    expect(answer).toMatchObject(SLICE);
    expect(answer.polePitch).toBe(pole.polePitch);
    expect(answer.midB.order).toEqual([1, 3, 5, 7, 9, 11]);
    expect(answer.windingB.order).toHaveLength(answer.windingB.amplitude.length);
    expect(answer.windingB.order.slice(0, 3)).toEqual([1, 3, 5]);
  });

  test('has errors that are small, positive shares', () => {
    for (const bound of answer.windingBErr) {
      expect(bound).toBeGreaterThan(0);
      expect(bound).toBeLessThan(5e-3 * answer.windingB.amplitude[0] * 3);
    }
    for (const share of [answer.pullRelErr, answer.energyRelErr]) {
      expect(share).toBeGreaterThan(0);
      expect(share).toBeLessThan(0.05);
    }
  });

  test('By is positive over the magnet, the discs attract, and the steel carries no more than its corners', () => {
    expect(answer.midB.amplitude[0]).toBeGreaterThan(0.2);
    expect(answer.midB.amplitude[0]).toBeLessThan(1.3); // the remanence
    expect(answer.windingB.amplitude[0]).toBeGreaterThan(answer.midB.amplitude[0]); // cosh(k y) is least at y = 0
    expect(answer.pull).toBeGreaterThan(0);
    expect(answer.energy).toBeGreaterThan(0);
    expect(answer.peakSteelB).toBeGreaterThan(answer.discB ?? Number.NaN);
    // Half the flux of a pole turns back through the disc: By and the disc's B are tied by continuity.
    expect(answer.discB).toBeGreaterThan((answer.midB.amplitude[0] * answer.polePitch) / Math.PI / 0.01);
  });

  test('without discs has no figures of discs', () => {
    const bare = solveSlice(ironless(), SLICE, { accuracy: 2e-2 }).answer;
    expect(bare.discB).toBeUndefined();
    expect(bare.peakSteelB).toBeUndefined();
    expect(bare.midB.amplitude[0]).toBeLessThan(answer.midB.amplitude[0]);
  });
});
