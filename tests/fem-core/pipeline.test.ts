import type { Section, Setup } from '@gapwright/fem-core';
import { energiesOf, InputError, meanOver, solveSection } from '@gapwright/fem-core';
import type { AdaptiveOptions, AdaptiveSolution, Goal } from '@gapwright/fem-core/goals';
import { applyFunctional, solveAdaptively, weightedFlux, weightedIntegral } from '@gapwright/fem-core/goals';
import { checkMesh, measureMesh, solveOnMesh, triangleCount } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { box, STEEL } from '../laws/sections.js';

const AIR = { kind: 'linear', muR: 1 } as const;

/** A magnet over a saturating plate, with a pick-up strip far to the right where the mesh starts coarse. */
const section: Section = {
  outline: { kind: 'rectangle', from: [-0.04, -0.03], to: [0.08, 0.03] },
  background: 'air',
  maxEdge: 0.03,
  regions: [
    box('plate', -0.02, -0.014, 0.04, 0.008),
    box('magnet', -0.01, -0.004, 0.02, 0.008),
    box('strip', 0.05, -0.005, 0.01, 0.01),
  ],
};
const setup: Setup = {
  materials: { air: AIR, plate: STEEL, magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.25] }, strip: AIR },
};

const meanPotential = (region: string): Goal => ({
  name: `integral of A over the ${region}`,
  functional: ({ mesh }) => weightedIntegral(mesh, [region], (x) => 1 + 30 * x),
});
const plateFlux: Goal = {
  name: 'flux along the plate',
  functional: ({ mesh }) => weightedFlux(mesh, ['plate'], (x) => [x < 0 ? -1 : 1, 0]),
};

const relative = (values: readonly number[]): readonly number[] => values.map((value) => 1 / Math.abs(value));
const optionsFor = (goals: readonly Goal[], accuracy: number): AdaptiveOptions => ({
  goals,
  weights: relative,
  accuracy,
});

describe('an adaptive solution', () => {
  const goals = [meanPotential('strip'), plateFlux];
  const fine = solveAdaptively(section, setup, optionsFor(goals, 2e-4));

  test.each([0.05, 0.01, 0.002])('meets the accuracy %s, in its own estimate and in truth', (accuracy) => {
    const solution = solveAdaptively(section, setup, optionsFor(goals, accuracy));
    expect(solution.accurate).toBe(true);
    expect(solution.field.report.converged).toBe(true);
    expect(solution.error).toBeLessThanOrEqual(accuracy);
    const summed = solution.bounds.reduce((sum, bound, k) => sum + bound / Math.abs(solution.values[k]), 0);
    expect(solution.error / summed).toBeCloseTo(1, 12);
    solution.values.forEach((value, k) => {
      expect(Math.abs(value - fine.values[k])).toBeLessThan(1.2 * (solution.bounds[k] + fine.bounds[k])); // in practice
      expect(Math.abs(value / fine.values[k] - 1)).toBeLessThan(accuracy);
    });
  });

  test('hands back the values, the bounds and the mesh they belong to', () => {
    expect(fine.accurate).toBe(true);
    goals.forEach((goal, k) => {
      expect(fine.values[k]).toBe(applyFunctional(goal.functional(fine.field), fine.field.potential));
    });
    expect(fine.bounds).toBe(fine.estimate.bounds);
    expect(fine.estimate.recovered).toHaveLength(12 * triangleCount(fine.field.mesh));
    checkMesh(fine.field.mesh);
    expect(measureMesh(fine.field.mesh).minAngleDeg).toBeGreaterThan(24.99);
  });

  test('a value of its own stands in for the functional applied to A', () => {
    const energy: Goal = {
      name: 'energy of the plate',
      functional: ({ mesh }) => weightedIntegral(mesh, ['plate'], () => 1),
      value: (field) => energiesOf(field, ['plate']).energy,
    };
    const { values, field } = solveAdaptively(section, setup, { ...optionsFor([energy], 1), weights: () => [0] });
    expect(values[0]).toBe(energiesOf(field, ['plate']).energy);
  });

  test('without goals takes the first mesh', () => {
    const solution = solveAdaptively(section, setup, optionsFor([], 1e-9));
    expect(solution).toMatchObject({ accurate: true, meshes: 1, error: 0, values: [], bounds: [] });
  });
});

/** Triangles whose middle lies to the right of the line x = 30 mm, by the strip. */
function countRight({ field: { mesh } }: AdaptiveSolution): number {
  let count = 0;
  for (let t = 0; t < triangleCount(mesh); t++) {
    const x = [0, 1, 2].reduce((sum, k) => sum + mesh.xy[2 * mesh.triangles[3 * t + k]], 0) / 3;
    if (x > 0.03) count++;
  }
  return count;
}

test("the mesh is refined where the goal's error comes from: by the strip for the strip, not for the plate", () => {
  const first = solveAdaptively(section, setup, optionsFor([plateFlux], 1e9));
  const forPlate = solveAdaptively(section, setup, optionsFor([plateFlux], 3e-3));
  const forStrip = solveAdaptively(section, setup, optionsFor([meanPotential('strip')], 1e-3));
  expect(triangleCount(forPlate.field.mesh)).toBeGreaterThan(3 * triangleCount(first.field.mesh));
  expect(countRight(forPlate)).toBeLessThan(2 * countRight(first));
  expect(countRight(forStrip)).toBeGreaterThan(2 * countRight(forPlate));
});

describe('limits', () => {
  const STRICT = 2e-4; // takes more meshes than the tests grant
  const goals = [meanPotential('strip')];
  const record = (limits: Partial<AdaptiveOptions>) => {
    const seen: { readonly mesh: number; readonly triangles: number; readonly error: number }[] = [];
    const onMesh = (progress: (typeof seen)[number]): void => {
      seen.push(progress);
    };
    return { seen, solution: solveAdaptively(section, setup, { ...optionsFor(goals, STRICT), onMesh, ...limits }) };
  };

  test('of meshes: stops there, with accurate false and what there is', () => {
    for (const maxMeshes of [1, 2, 3]) {
      const { seen, solution } = record({ maxMeshes });
      expect(solution.meshes).toBe(maxMeshes);
      expect(seen).toHaveLength(maxMeshes);
      expect(solution.accurate).toBe(false);
      expect(solution.error).toBeGreaterThan(STRICT);
      expect(Number.isFinite(solution.values[0])).toBe(true);
    }
  });

  test('of triangles: the first mesh that reaches it is the last', () => {
    const { seen, solution } = record({ maxTriangles: 200 });
    expect(solution.accurate).toBe(false);
    expect(triangleCount(solution.field.mesh)).toBeGreaterThanOrEqual(200);
    for (const { triangles } of seen.slice(0, -1)) expect(triangles).toBeLessThan(200);
  });

  test('progress is told once a mesh, in order; meshes grow and the error shrinks', () => {
    const { seen, solution } = record({ maxMeshes: 3 });
    expect(seen.map(({ mesh }) => mesh)).toEqual([1, 2, 3]);
    for (let i = 1; i < seen.length; i++) {
      expect(seen[i].triangles).toBeGreaterThan(seen[i - 1].triangles);
      expect(seen[i].error).toBeLessThan(seen[i - 1].error);
    }
    expect(seen.at(-1)).toEqual({ mesh: 3, triangles: triangleCount(solution.field.mesh), error: solution.error });
  });

  test('of Newton steps: stops on the first mesh, says so, and claims no accuracy', () => {
    const none = solveAdaptively(section, setup, { ...optionsFor(goals, 1), newton: { maxSteps: 0 } });
    expect(none).toMatchObject({ accurate: false, meshes: 1, error: Infinity });
    expect(none.field.report.converged).toBe(false);
    expect(none.field.report.failure).toContain('0 steps');
    const few = solveAdaptively(section, setup, { ...optionsFor(goals, STRICT), newton: { maxSteps: 1 } });
    expect(few.meshes).toBe(1);
    expect(few.accurate).toBe(false);
    expect(few.field.report.converged).toBe(false);
  });

  test('a field that is not converged is never called accurate, however lax the wish', () => {
    const lax = solveAdaptively(section, setup, { ...optionsFor(goals, 1e9), newton: { maxSteps: 1 } });
    expect(lax.field.report.converged).toBe(false);
    expect(lax.accurate).toBe(false);
  });
});

describe('the same asked twice', () => {
  const ask = (extra: Partial<AdaptiveOptions> = {}): AdaptiveSolution =>
    solveAdaptively(section, setup, { ...optionsFor([meanPotential('strip'), plateFlux], 5e-3), ...extra });
  const once = ask();

  test('gives the same numbers to the last bit', () => {
    const again = ask();
    expect(again.values).toEqual(once.values);
    expect(again.bounds).toEqual(once.bounds);
    expect(again.field.potential).toEqual(once.field.potential);
    expect(again.field.mesh).toEqual(once.field.mesh);
  });

  test('another solve in between, from within its own calls, disturbs nothing', () => {
    const other: Section = {
      outline: { kind: 'circle', centre: [0, 0], radius: 0.05 },
      background: 'air',
      regions: [{ name: 'wire', shape: { kind: 'circle', centre: [0.01, 0.004], radius: 0.006 } }],
    };
    let disturbances = 0;
    const disturb = (): void => {
      disturbances++;
      const field = solveSection(other, { materials: { air: AIR, wire: STEEL }, currentDensity: { wire: 1e7 } });
      expect(meanOver(field, ['wire']).a).toBeGreaterThan(0);
    };
    const weights = (values: readonly number[]): readonly number[] => {
      disturb();
      return relative(values);
    };
    const nosy = (goal: Goal): Goal => ({
      name: goal.name,
      functional: (field) => {
        disturb();
        return goal.functional(field);
      },
    });
    const goals = [meanPotential('strip'), plateFlux].map(nosy);
    const disturbed = ask({ goals, weights, onMesh: disturb });
    expect(disturbances).toBe(4 * once.meshes);
    expect(disturbed.values).toEqual(once.values);
    expect(disturbed.bounds).toEqual(once.bounds);
    expect(disturbed.field.potential).toEqual(once.field.potential);
  });

  test('what is handed in is left as it was', () => {
    const copy = JSON.stringify([section, setup.edges, setup.materials.magnet]);
    ask();
    expect(JSON.stringify([section, setup.edges, setup.materials.magnet])).toBe(copy);
  });
});

test('going on from the coarser mesh saves Newton steps, and the field is that of a fresh start', () => {
  const solution = solveAdaptively(section, setup, optionsFor([plateFlux], 3e-3));
  expect(solution.meshes).toBeGreaterThan(2);
  const fresh = solveOnMesh(solution.field.mesh, setup);
  expect(fresh.field.report.steps).toBeGreaterThan(2);
  expect(solution.field.report.steps).toBeLessThan(fresh.field.report.steps);
  expect(solution.newtonSteps).toBeLessThan(solution.meshes * fresh.field.report.steps);
  expect(solution.field.report.residuals[0]).toBeLessThan(0.1 * fresh.field.report.residuals[0]);
  const scale = fresh.field.potential.reduce((most, a) => Math.max(most, Math.abs(a)), 0);
  fresh.field.potential.forEach((a, node) => {
    expect(Math.abs(a - solution.field.potential[node])).toBeLessThan(1e-6 * scale);
  });
});

test('reversing sides carry over with their signs: the fine field starts near its end', () => {
  const reversing = { kind: 'reversing' } as const;
  const pole: Section = { ...section, matched: [['left', 'right']] };
  const bound: Setup = { ...setup, edges: { left: reversing, right: reversing } };
  const solution = solveAdaptively(pole, bound, optionsFor([plateFlux], 5e-3));
  expect(solution.meshes).toBeGreaterThan(1);
  expect(solution.field.report.residuals[0]).toBeLessThan(0.1);
  expect(solution.accurate).toBe(true);
});

describe('no sources at all', () => {
  const dead: Setup = { materials: { air: AIR, plate: STEEL, magnet: AIR, strip: AIR } };

  test('the field is nothing, known at once without error', () => {
    const solution = solveAdaptively(section, dead, { ...optionsFor([plateFlux], 1e-3), weights: () => [1] });
    expect(solution).toMatchObject({ accurate: true, meshes: 1, error: 0, values: [0], bounds: [0] });
    expect(solution.field.potential.every((a) => a === 0)).toBe(true);
    expect(solution.field.report.converged).toBe(true);
  });

  test('an error of nothing is no error under any weight, 1/0 included', () => {
    const solution = solveAdaptively(section, dead, optionsFor([meanPotential('strip'), plateFlux], 1e-3));
    expect(solution).toMatchObject({ accurate: true, meshes: 1, error: 0 });
  });
});

test('solveSection is the first mesh of the adaptive solution; faults of the setup are told', () => {
  const field = solveSection(section, setup);
  const first = solveAdaptively(section, setup, optionsFor([plateFlux], 1e9));
  expect(first.meshes).toBe(1);
  expect(first.field.potential).toEqual(field.potential);
  expect(() => solveSection(section, { materials: { air: AIR } })).toThrow(InputError);
  expect(() => solveSection(section, { ...setup, edges: { roof: { kind: 'closed' } } })).toThrow(InputError);
});
