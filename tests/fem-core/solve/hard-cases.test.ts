import type { Material, Section } from '@gapwright/fem-core';
import { buildBHCurve } from '@gapwright/fem-core';
import { solveAdaptively, weightedIntegral } from '@gapwright/fem-core/goals';
import { meshSection, solveOnMesh } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { SHEET_470, TEAM_13 } from '../../reference/bh-tables.js';

const AIR = { kind: 'linear', muR: 1 } as const;
const rect = (name: string, x0: number, y0: number, x1: number, y1: number) =>
  ({ name, shape: { kind: 'rectangle', from: [x0, y0], to: [x1, y1] } }) as const;

/** A closed core with a coil on one leg and a slot in the other that leaves a bridge of the given thickness. */
const core = (bridge: number): Section => ({
  outline: { kind: 'rectangle', from: [0, 0], to: [0.1, 0.08] },
  background: 'air',
  maxEdge: 0.006,
  regions: [
    rect('core', 0.02, 0.01, 0.08, 0.07),
    rect('window', 0.035, 0.02, 0.065, 0.06),
    rect('coil in', 0.036, 0.025, 0.042, 0.055),
    rect('coil out', 0.012, 0.025, 0.018, 0.055),
    rect('slot', 0.067, 0.035, 0.08 - bridge, 0.045),
  ],
});
const filled = (steel: Material, slot: Material): Record<string, Material> => ({
  ...{ air: AIR, window: AIR, 'coil in': AIR, 'coil out': AIR },
  ...{ core: steel, slot },
});
const MAGNET: Material = { kind: 'magnet', recoil: 1.05, remanence: [0, 1.3] };

const CURVES = [
  ['measured, TEAM 13', buildBHCurve(TEAM_13)],
  ['measured, sheet of 4.7 W/kg', buildBHCurve(SHEET_470)],
  // 1.5 T at 1 A/m: the reluctivity rises by a factor of a million within half a tesla.
  [
    'steep, with a sharp knee',
    buildBHCurve([
      [1, 1.5],
      [1000, 1.6],
      [1e5, 1.9],
      [1e6, 3.1],
    ]),
  ],
  // Hardly any flux up to 400 A/m, and then all of it at once.
  [
    'wasp-waisted',
    buildBHCurve([
      [400, 0.02],
      [410, 1.2],
      [2000, 1.5],
      [50000, 2.0],
    ]),
  ],
] as const;

describe.each(CURVES)('steel that is %s', (_, curve) => {
  const steel: Material = { kind: 'curve', curve };
  test.each([
    ['a bridge of 0.2 mm beside a magnet', 0.0002, MAGNET, 0],
    ['a bridge of 0.5 mm beside a magnet, and a current against it', 0.0005, MAGNET, 3000],
    ['a coil that saturates all of it', 0.004, AIR, 1e5],
    ['a coil far beyond reason', 0.004, AIR, 1e7],
    ['next to no current', 0.004, AIR, 1e-3],
  ] as const)('%s: from zero to a residual of 1e-8, without help', (_name, bridge, slot, amperes) => {
    const { field } = solveOnMesh(meshSection(core(bridge)), {
      materials: filled(steel, slot),
      current: { 'coil in': amperes, 'coil out': -amperes },
    });
    expect(field.report.failure).toBeUndefined();
    expect(field.report.residuals.at(-1)).toBeLessThan(1e-8);
    expect(field.report.steps).toBeLessThanOrEqual(40);
  });
});

test('at the end the residual falls with the square: Newton with the exact tangent', () => {
  const steel: Material = { kind: 'curve', curve: CURVES[0][1] };
  const { field } = solveOnMesh(
    meshSection(core(0.004)),
    { materials: filled(steel, AIR), current: { 'coil in': 600, 'coil out': -600 } },
    { tolerance: 1e-13 },
  );
  const late = field.report.residuals.filter((r) => r < 1e-2 && r > 1e-11);
  expect(late.length).toBeGreaterThanOrEqual(3);
  // Each step adds at least 1.6 times as many digits as are there: quadratic, but for kinks of dH/dB at the rows.
  const rates = late.slice(1).map((r, i) => Math.log(r) / Math.log(late[i]));
  expect(Math.max(...rates)).toBeGreaterThan(1.6);
  expect(Math.min(...rates)).toBeGreaterThan(1.1);
});

describe('where the factor would not fit memory', () => {
  const setup = {
    materials: filled({ kind: 'curve', curve: CURVES[0][1] }, MAGNET),
    current: { 'coil in': 300, 'coil out': -300 },
  };

  test('conjugate gradients find the same field, step by step', () => {
    const mesh = meshSection(core(0.002));
    const direct = solveOnMesh(mesh, setup, { tolerance: 1e-11 });
    const iterative = solveOnMesh(mesh, setup, { tolerance: 1e-11, memory: 0 });
    expect(iterative.factor).toBeUndefined();
    expect(iterative.field.report.converged).toBe(true);
    expect(iterative.field.report.steps).toBe(direct.field.report.steps);
    const scale = Math.max(...direct.field.potential.map(Math.abs));
    const worst = Math.max(...direct.field.potential.map((a, node) => Math.abs(a - iterative.field.potential[node])));
    expect(worst / scale).toBeLessThan(1e-8);
  });

  test('the errors of answers are estimated all the same', () => {
    const options = {
      goals: [
        {
          name: 'A',
          functional: ({ mesh }: { mesh: Parameters<typeof weightedIntegral>[0] }) =>
            weightedIntegral(mesh, ['coil in'], () => 1),
        },
      ],
      weights: ([value]: readonly number[]) => [1 / Math.abs(value)],
      accuracy: 0.01,
    };
    const direct = solveAdaptively(core(0.002), setup, options);
    const iterative = solveAdaptively(core(0.002), setup, { ...options, newton: { memory: 0 } });
    expect(iterative.meshes).toBe(direct.meshes);
    expect(iterative.values[0] / direct.values[0]).toBeCloseTo(1, 7);
    expect(iterative.bounds[0] / direct.bounds[0]).toBeCloseTo(1, 5);
  });
});
