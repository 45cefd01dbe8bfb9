import type { Section, Setup } from '@gapwright/fem-core';
import { buildLocator, energiesOf } from '@gapwright/fem-core';
import type { Functional } from '@gapwright/fem-core/goals';
import {
  applyFunctional,
  estimateGoalErrors,
  pointPotential,
  weightedFlux,
  weightedIntegral,
} from '@gapwright/fem-core/goals';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { meshSection, refineMesh, solveOnMesh, triangleCount } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { saturableRing } from '../../../packages/fem-core/src/verify/saturable.js';
import { box, STEEL } from '../../laws/sections.js';
import { AIR } from '../field/made-fields.js';

type GoalOn = (mesh: Mesh) => Functional;

function estimateOn(mesh: Mesh, setup: Setup, goals: readonly GoalOn[]) {
  const { field, system, factor } = solveOnMesh(mesh, setup, { tolerance: 1e-11 });
  if (factor === undefined) throw new Error(field.report.failure);
  const functionals = goals.map((goal) => goal(mesh));
  const values = functionals.map((functional) => applyFunctional(functional, field.potential));
  return { field, values, estimate: estimateGoalErrors(system, field, factor, functionals) };
}

/** Every edge longer than the given length is wanted no longer. */
const refineTo = (mesh: Mesh, edge: number): Mesh => refineMesh(mesh, new Float64Array(triangleCount(mesh)).fill(edge));

describe('a smooth field: a square closed at the sides, current all over it', () => {
  const section = (maxEdge: number): Section => ({
    outline: { kind: 'rectangle', from: [0, 0], to: [0.04, 0.04] },
    background: 'coil',
    maxEdge,
    regions: [{ name: 'patch', shape: { kind: 'rectangle', from: [0.005, 0.01], to: [0.015, 0.025] } }],
  });
  const setup: Setup = { materials: { coil: AIR, patch: AIR }, currentDensity: { coil: 1e6, patch: 1e6 } };
  const goals: readonly GoalOn[] = [
    (mesh) => weightedIntegral(mesh, ['patch'], () => 1),
    (mesh) => weightedFlux(mesh, ['patch'], () => [0, 1]),
  ];
  const levels = [0.01, 0.005, 0.0025].map((edge) => {
    const mesh = meshSection(section(edge));
    return { triangles: triangleCount(mesh), ...estimateOn(mesh, setup, goals) };
  });
  const orderOf = (read: (level: (typeof levels)[number]) => number): number =>
    Math.log(read(levels[0]) / read(levels[2])) / Math.log(Math.sqrt(levels[2].triangles / levels[0].triangles));

  test('the bound of a mean potential falls with about the fourth power of size, as the error does', () => {
    const order = orderOf(({ estimate }) => estimate.bounds[0]);
    expect(order).toBeGreaterThan(3.3);
    expect(order).toBeLessThan(4.7);
  });

  test('the bound of a flux over a part of the smooth field falls slower: the dual gradient jumps at its border, and is smeared there', () => {
    expect(orderOf(({ estimate }) => estimate.bounds[1])).toBeGreaterThan(2);
    for (let i = 1; i < levels.length; i++) {
      expect(levels[i].estimate.bounds[1]).toBeLessThan(levels[i - 1].estimate.bounds[1]);
    }
  });

  test('the estimated error of the energy is its true error: what finer meshes still add', () => {
    // A Galerkin field under given currents stores too little: the error of the energy is the energy of the error.
    const fine = energiesOf(estimateOn(meshSection(section(0.001)), setup, []).field).energy;
    for (const { field, estimate } of levels) {
      const missing = fine - energiesOf(field).energy;
      expect(missing).toBeGreaterThan(0);
      expect(estimate.energy / missing).toBeGreaterThan(0.5);
      expect(estimate.energy / missing).toBeLessThan(2);
    }
  });

  test('shares are not negative, and the bound is their sum with a margin, goal by goal', () => {
    for (const { estimate } of levels) {
      estimate.goals.forEach((shares, k) => {
        expect(shares.every((share) => share >= 0)).toBe(true);
        const sum = shares.reduce((a, b) => a + b, 0);
        expect(estimate.bounds[k]).toBeGreaterThan(sum);
        expect(estimate.bounds[k]).toBeLessThan(1.5 * sum);
      });
    }
  });

  test('the bound goes with the goal: ten times the functional, ten times the bound; nothing asked, no error', () => {
    const mesh = meshSection(section(0.005));
    const { estimate } = estimateOn(mesh, setup, [
      goals[0],
      (on) => goals[0](on).map((g) => -10 * g),
      (on) => goals[0](on).fill(0),
    ]);
    expect(estimate.bounds[1] / estimate.bounds[0]).toBeCloseTo(10, 10);
    expect(estimate.bounds[2]).toBe(0);
  });
});

describe('a magnet, a coil and saturating steel', () => {
  const section: Section = {
    outline: { kind: 'rectangle', from: [-0.05, -0.04], to: [0.05, 0.04] },
    background: 'air',
    maxEdge: 0.016,
    regions: [
      box('plate', -0.03, -0.018, 0.06, 0.01),
      box('magnet', -0.018, -0.003, 0.012, 0.008),
      box('coil', 0.004, -0.004, 0.012, 0.01),
    ],
  };
  const setup: Setup = {
    materials: { air: AIR, plate: STEEL, magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.2] }, coil: AIR },
    currentDensity: { coil: 4e6 },
  };
  const goals: readonly GoalOn[] = [
    (mesh) => weightedIntegral(mesh, ['coil'], (x) => 1 + 40 * x),
    (mesh) => weightedFlux(mesh, ['plate'], () => [1, 0.2]),
    (mesh) => {
      const spot = buildLocator(mesh).find(-0.002, 0.011);
      if (spot === undefined) throw new Error('the point is not found');
      return pointPotential(mesh, spot);
    },
  ];
  const coarse = meshSection(section);
  const levels = [coarse, refineTo(coarse, 0.008), refineTo(coarse, 0.005)].map((mesh) =>
    estimateOn(mesh, setup, goals),
  );
  const truth = estimateOn(refineTo(refineTo(coarse, 0.004), 0.0014), setup, goals);

  test.each([
    [0, 'linkage of the coil, weighted'],
    [1, 'mean flux density in the steel'],
    [2, 'potential at a point'],
  ])('goal %i, %s: the bound covers the true error and is of its size', (k) => {
    for (const { values, estimate } of levels) {
      const error = Math.abs(values[k] - truth.values[k]);
      expect(error).toBeLessThan(estimate.bounds[k]);
      expect(truth.estimate.bounds[k]).toBeLessThan(0.2 * estimate.bounds[k]); // the truth is truer than what it judges
    }
    // Not idle: on the coarsest mesh the bound is no more than some tens of times the error.
    expect(levels[0].estimate.bounds[k]).toBeLessThan(100 * Math.abs(levels[0].values[k] - truth.values[k]));
  });

  test('the shares are largest where the goal is felt: by the point and at the corners of the bodies, not far off', () => {
    const { field, estimate } = levels[2];
    const { xy, triangles } = field.mesh;
    let [near, all] = [0, 0];
    estimate.goals[2].forEach((share, t) => {
      const x = [0, 1, 2].reduce((sum, k) => sum + xy[2 * triangles[3 * t + k]], 0) / 3;
      const y = [0, 1, 2].reduce((sum, k) => sum + xy[2 * triangles[3 * t + k] + 1], 0) / 3;
      all += share;
      if (Math.abs(x) < 0.035 && y > -0.023 && y < 0.02) near += share;
    });
    expect(near).toBeGreaterThan(0.9 * all);
  });
});

describe('steel whose H bends within the error of B', () => {
  // Ampere's law alone gives H in a ring round a conductor, so its flux is known to the last digit.
  const levels = [20, 200, 2000].flatMap((current) => {
    const { section, setup, figures } = saturableRing(current);
    return [0.02, 0.01, 0.005].map((maxEdge) => {
      const { values, estimate } = estimateOn(meshSection({ ...section, maxEdge }), setup, [ringFlux]);
      return { current, maxEdge, share: Math.abs(values[0] - figures[0].expected) / estimate.bounds[0] };
    });
  });

  test.each(levels)(
    '$current A, edges up to $maxEdge m: the flux is within its bound, and not far within',
    ({ share }) => {
      expect(share).toBeLessThan(1);
      expect(share).toBeGreaterThan(0.1);
    },
  );
});

/** A where the steel of `saturableRing` begins, less A where it ends. */
function ringFlux(mesh: Mesh): Functional {
  const [begin, end] = [0.02, 0.05].map((x) => {
    const spot = buildLocator(mesh).find(x, 0);
    if (spot === undefined) throw new Error('the point is not found');
    return pointPotential(mesh, spot);
  });
  return begin.map((weight, node) => weight - end[node]);
}
