import type { Field, Material, NewtonOptions, Setup } from '@gapwright/fem-core';
import { buildBHCurve, InputError } from '@gapwright/fem-core';
import type { Solution } from '@gapwright/fem-core/equations';
import { assemble, numberUnknowns, solveNewton } from '@gapwright/fem-core/equations';
import { exceededIn } from '@gapwright/fem-core/field';
import { meshSection, nodeCount } from '@gapwright/fem-core/mesh';
import { analyse, multiply, solve } from '@gapwright/fem-core/sparse';
import { describe, expect, test } from 'vitest';
import { AIR, core, coreSetup, STEEL } from '../../laws/sections.js';
import { SHEET_470, TEAM_13 } from '../../reference/bh-tables.js';
import { functionalAt, largest, residualAt, systemOf, tile, withEdges } from '../assembly/tile.js';

const mesh = meshSection({ ...core, maxEdge: 0.03 });
const curve = (rows: readonly (readonly [number, number])[]): Material => ({
  kind: 'curve',
  curve: buildBHCurve(rows),
});

/** Soft up to 1.9 T within 2 A/m, then all but vacuum: H(B) bends by a factor of some 1e5 within a tenth of a tesla. */
const SUDDEN = curve([
  [0, 0],
  [1, 1],
  [2, 1.9],
  [2e4, 2],
]);

/** The C core with its first coil at the density J, A/m^2; the way back is a quarter narrower. */
const driven = (steel: Material, density: number): Setup => coreSetup(steel, { out: density, back: -1.25 * density });

const run = (steel: Material, density: number, options?: NewtonOptions): Solution =>
  solveNewton(systemOf(mesh, driven(steel, density)), options);

const fieldOf = (steel: Material, density: number): Field => {
  const { potential, report } = run(steel, density);
  return { mesh, setup: driven(steel, density), potential, report };
};

describe('convergence', () => {
  test.each([
    ['Froehlich steel', STEEL, 1e6],
    ['TEAM 13 steel', curve(TEAM_13), 1e7],
    ['sheet of 4.7 W/kg', curve(SHEET_470), 1e7],
  ])('is quadratic at the end: %s', (_, steel, density) => {
    const { report } = run(steel, density, { tolerance: 1e-10 });
    expect(report.converged).toBe(true);
    const { residuals } = report;
    // Residual r after r0 of r0^2 times a constant: from 1e-2 on, each step at least 1.5 times the digits, but for the
    // last, which may reach the floor of rounding.
    const late = residuals.filter((r) => r < 1e-2 && r > 1e-11);
    expect(late.length).toBeGreaterThan(1);
    for (let i = 1; i < late.length; i++) expect(Math.log(late[i]) / Math.log(late[i - 1])).toBeGreaterThan(1.2);
    const gain = Math.log(late[late.length - 1]) / Math.log(late[late.length - 2]);
    expect(gain).toBeGreaterThan(1.5);
  });

  test('the report tells each step: a residual before the first and after each, a length for each', () => {
    const { report } = run(STEEL, 1e7);
    expect(report.residuals).toHaveLength(report.steps + 1);
    expect(report.stepLengths).toHaveLength(report.steps);
    expect(report.residuals[0]).toBe(1);
    expect(report.residuals[report.steps]).toBeLessThanOrEqual(1e-8);
    expect(report.failure).toBeUndefined();
    const system = systemOf(mesh, driven(STEEL, 1e7));
    expect(report.unknowns).toBe(system.unknowns.count);
    expect(report.factorEntries).toBe(analyse(system.pattern).blockSize);
  });

  test('a linear problem takes one full step', () => {
    const { report } = run({ kind: 'linear', muR: 1000 }, 1e7);
    expect(report).toMatchObject({ converged: true, steps: 1, stepLengths: [1] });
  });

  test('what it reports is the residual: that of the system at its unknowns', () => {
    const system = systemOf(mesh, driven(STEEL, 1e7));
    const { u, potential, report } = solveNewton(system);
    const norm = (v: Float64Array): number => Math.hypot(...v);
    const start = norm(residualAt(system, new Float64Array(u.length)));
    expect(norm(residualAt(system, u)) / start).toBeCloseTo(report.residuals[report.steps], 12);
    system.nodeOf.forEach((node, i) => {
      expect(potential[node]).toBe(system.unknowns.sign[node] * u[i]);
    });
  });

  test('every kind of material and side together converge', () => {
    const edges = { left: { kind: 'reversing' }, right: { kind: 'reversing' }, top: { kind: 'crossing' } } as const;
    const setup = withEdges({ ...edges, bottom: { kind: 'potential', value: (x) => 0.012 - 0.4 * x } }); // minus itself across the tile
    const system = systemOf(meshSection(tile), setup);
    const { report } = solveNewton(system, { tolerance: 1e-11 });
    expect(report.converged).toBe(true);
  });
});

describe('a start', () => {
  const { u } = run(STEEL, 1e7, { tolerance: 1e-12 });

  test('at the solution takes no step, and the factor is there all the same', () => {
    const again = run(STEEL, 1e7, { start: u });
    expect(again.report).toMatchObject({ converged: true, steps: 0, stepLengths: [] });
    expect(again.u).toEqual(u);
    expect(again.factor).toBeDefined();
  });

  test('near the solution saves steps and ends at the same place', () => {
    const cold = run(STEEL, 1e7, { tolerance: 1e-12 });
    const warm = run(STEEL, 1e7, { tolerance: 1e-12, start: u.map((value) => 1.02 * value) });
    expect(warm.report.steps).toBeLessThan(cold.report.steps);
    expect(largest(warm.u.map((value, i) => value - u[i]))).toBeLessThan(1e-9 * largest(u));
  });

  test('far away, even upside down and tenfold, ends at the same place: the energy has one valley', () => {
    const { report, u: found } = run(STEEL, 1e7, { tolerance: 1e-12, start: u.map((value) => -10 * value) });
    expect(report.converged).toBe(true);
    expect(largest(found.map((value, i) => value - u[i]))).toBeLessThan(1e-9 * largest(u));
  });

  test('is left as it was, and so is the analysis that is handed in', () => {
    const start = u.map((value) => 0.5 * value);
    const copy = start.slice();
    const analysis = analyse(systemOf(mesh, driven(STEEL, 1e7)).pattern);
    const with_ = run(STEEL, 1e7, { start, analysis });
    expect(start).toEqual(copy);
    expect(with_.u).toEqual(run(STEEL, 1e7, { start }).u);
  });
});

test('without sources there is no field, no step, and a factor', () => {
  const { u, potential, report, factor } = run(STEEL, 0);
  expect(report).toMatchObject({ converged: true, steps: 0, residuals: [0] });
  expect([largest(u), largest(potential)]).toEqual([0, 0]);
  expect(factor).toBeDefined();
});

describe('a sudden bend of the curve', () => {
  const density = 1e7;

  test('converges, with steps cut by the line search', () => {
    const { report } = run(SUDDEN, density, { tolerance: 1e-10 });
    expect(report.converged).toBe(true);
    expect(report.stepLengths.some((s) => s < 0.9)).toBe(true);
    for (const s of report.stepLengths) {
      expect(s).toBeGreaterThan(0);
      expect(s).toBeLessThanOrEqual(1);
    }
    expect(report.stepLengths[report.steps - 1]).toBe(1); // near the solution full steps are right
  });

  test('while steps are cut, each goes down in the energy functional', () => {
    const setup = driven(SUDDEN, density);
    const system = systemOf(mesh, setup);
    let before = functionalAt(system, setup, new Float64Array(system.unknowns.count));
    const { report } = solveNewton(system);
    const cut = report.stepLengths.indexOf(1);
    expect(cut).toBeGreaterThan(1);
    for (let maxSteps = 1; maxSteps <= cut; maxSteps++) {
      const now = functionalAt(system, setup, solveNewton(system, { maxSteps }).u);
      expect(now).toBeLessThan(before);
      before = now;
    }
  });
});

describe('deep saturation', () => {
  test.each([
    ['Froehlich steel', STEEL],
    ['TEAM 13 steel', curve(TEAM_13)],
    ['sudden steel', SUDDEN],
  ])('%s converges at tens of teslas', (_, steel) => {
    const field = fieldOf(steel, 3e10);
    expect(field.report.converged).toBe(true);
    expect(exceededIn(field, ['core'], 0.5)).toBeGreaterThan(10);
  });

  test('steel that can add no more fades against the air: ten times the current, a tenth of the difference', () => {
    const steel = curve(TEAM_13);
    const difference = (density: number): number => {
      const [iron, air] = [run(steel, density, { tolerance: 1e-12 }), run(AIR, density, { tolerance: 1e-12 })];
      return largest(iron.potential.map((a, i) => a - air.potential[i])) / largest(air.potential);
    };
    const [once, ten] = [difference(1e10), difference(1e11)];
    expect(once).toBeGreaterThan(1e-4);
    expect(once / ten).toBeCloseTo(10, 0);
  });
});

describe('stopping short is a report', () => {
  test('too few steps: what is reached so far, and why', () => {
    const { report, u, factor } = run(STEEL, 1e7, { maxSteps: 1 });
    expect(report).toMatchObject({ converged: false, steps: 1 });
    expect(report.failure).toMatch(/not converged in 1 steps?/);
    expect(report.residuals[1]).toBeLessThan(1);
    expect(largest(u)).toBeGreaterThan(0);
    expect(factor).toBeDefined();
  });

  test('no step allowed', () => {
    const { report, u } = run(STEEL, 1e7, { maxSteps: 0 });
    expect(report).toMatchObject({ converged: false, steps: 0, residuals: [1] });
    expect(largest(u)).toBe(0);
  });

  test('a material that gives energy back', () => {
    const falling = {
      ...buildBHCurve([
        [100, 1],
        [1000, 2],
      ]),
      h: Float64Array.of(0, -100, -1000),
      slope: Float64Array.of(-100, -100, -900),
    };
    const { report, factor } = run({ kind: 'curve', curve: falling }, 1e6);
    expect(report.converged).toBe(false);
    expect(report.failure).toMatch(/not positive definite \(pivot -/);
    expect(factor).toBeUndefined();
  });

  test('numbers that are none', () => {
    const none = {
      ...buildBHCurve([
        [100, 1],
        [1000, 2],
      ]),
      h: Float64Array.of(0, Number.NaN, Number.NaN),
    };
    expect(run({ kind: 'curve', curve: none }, 1e6).report.converged).toBe(false);
  });

  test('materials of no sense are refused at the door', () => {
    expect(() => run({ kind: 'linear', muR: -3 }, 1e6)).toThrow(InputError);
    expect(() => run({ kind: 'linear', muR: Number.NaN }, 1e6)).toThrow(InputError);
    expect(() => run({ kind: 'magnet', recoil: 1, remanence: [Number.NaN, 0] }, 1e6)).toThrow(InputError);
  });
});

describe('rounding', () => {
  test.each([
    ['linear', { kind: 'linear', muR: 1000 } as const, 1e7],
    ['Froehlich steel', STEEL, 1e6],
    ['sudden steel', SUDDEN, 1e9],
  ])('whatever is asked beyond it ends converged: %s', (_, steel, density) => {
    const { report } = run(steel, density, { tolerance: 1e-30 });
    expect(report.converged).toBe(true);
    expect(report.residuals[report.steps]).toBeLessThan(1e-11);
    expect(report.steps).toBeLessThan(20);
  });

  test('the size of the sources does not matter to a linear problem', () => {
    const steel: Material = { kind: 'linear', muR: 1000 };
    for (const density of [1e-9, 1e12]) expect(run(steel, density).report).toMatchObject({ converged: true, steps: 1 });
  });
});

test('the factor is that of the tangent: it answers adjoint problems', () => {
  const system = systemOf(mesh, driven(STEEL, 1e7));
  const { u: start } = solveNewton(system, { tolerance: 1e-13 });
  const { potential, factor, u } = solveNewton(system, { start }); // no step is taken, so the factor belongs right here
  const tangent = new Float64Array(system.pattern.row.length);
  assemble(system, potential, new Float64Array(u.length), tangent);
  const wanted = Float64Array.from({ length: u.length }, (_, i) => Math.sin(i * i));
  const right = multiply(system.pattern, tangent, wanted, new Float64Array(u.length));
  if (factor === undefined) throw new Error('no factor');
  const got = solve(factor, right, new Float64Array(u.length));
  expect(largest(got.map((value, i) => value - wanted[i]))).toBeLessThan(1e-9);
});

test('the smallest of meshes is solved as well', () => {
  const small = meshSection({
    outline: { kind: 'rectangle', from: [0, 0], to: [1, 1] },
    background: 'air',
    regions: [],
  });
  const setup: Setup = { materials: { air: AIR }, currentDensity: { air: 1e6 } };
  const { count } = numberUnknowns(small, setup);
  const { report, potential } = solveNewton(systemOf(small, setup));
  expect(report).toMatchObject({ converged: true, steps: 1, unknowns: count });
  expect(count).toBeLessThan(nodeCount(small));
  expect(largest(potential)).toBeGreaterThan(0);
});
