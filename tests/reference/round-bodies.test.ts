import type { AdaptiveSolution, Field, Goal, Section, Setup } from '@gapwright/fem-core';
import {
  buildLocator,
  energiesOf,
  forceOn,
  MU0,
  solveAdaptively,
  valueAt,
  weightedFlux,
  weightedIntegral,
} from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import { check } from './table.js';

/** Solved so that each goal's own bound is within the accuracy of its scale. */
function solveFor(
  section: Section,
  setup: Setup,
  goals: readonly Goal[],
  scale: number,
  accuracy: number,
): AdaptiveSolution {
  const weights = (): number[] => goals.map(() => 1 / scale);
  const solution = solveAdaptively(section, setup, { goals, weights, accuracy });
  expect(solution.accurate).toBe(true);
  return solution;
}

const circle = (
  name: string,
  radius: number,
  centre: readonly [number, number] = [0, 0],
): Section['regions'][number] => ({
  name,
  shape: { kind: 'circle', centre, radius },
  maxEdge: radius / 4, // an arc's own error, outside the reported bounds, falls with the fourth power
});

const disc = (radius: number, background: string, regions: Section['regions']): Section => ({
  outline: { kind: 'circle', centre: [0, 0], radius },
  background,
  regions,
});

const air = { kind: 'linear', muR: 1 } as const;

const meanAlong = (name: string, regions: readonly string[], area: number, axis: 'bx' | 'by'): Goal => ({
  name,
  functional: (field) => weightedFlux(field.mesh, regions, () => (axis === 'bx' ? [1 / area, 0] : [0, 1 / area])),
});

function fieldAt(field: Field, x: number, y: number): { a: number; bx: number; by: number } {
  const value = valueAt(field, buildLocator(field.mesh), x, y);
  if (value === undefined) throw new Error(`(${x}, ${y}) lies outside`);
  return value;
}

describe('round conductor with uniform current, A = 0 at ten radii', () => {
  const source = "Ampere's law in a round conductor (any electromagnetics text, calculated)";
  const [a, rim, current] = [0.002, 0.02, 10];
  const density = current / (Math.PI * a * a);
  const setup: Setup = {
    materials: { wire: air, air },
    currentDensity: { wire: density },
    edges: { rim: { kind: 'closed' } },
  };
  const section = disc(rim, 'air', [circle('wire', a)]);
  const mean: Goal = {
    name: 'inductance',
    functional: (field) => weightedIntegral(field.mesh, ['wire'], () => density / current ** 2),
  };
  const solution = solveFor(section, setup, [mean], 5.10517019e-7, 2e-5);
  const { field } = solution;
  const label = 'round conductor, 10 A, 2 mm in 20 mm';

  test('inductance by linkage and by energy, and the internal part mu0/(8 pi)', () => {
    const expected = MU0 / (8 * Math.PI) + (MU0 / (2 * Math.PI)) * Math.log(rim / a);
    const [bound] = solution.bounds;
    const inner = energiesOf(field, ['wire']).energy;
    const outer = energiesOf(field, ['air']).energy;
    const linkage = { case: label, quantity: 'inductance by linkage, H/m', source, expected, bound };
    check({ ...linkage, got: solution.values[0] }, 1e-4);
    const byEnergy = { case: label, quantity: 'inductance by energy, H/m', source, expected };
    check({ ...byEnergy, got: (2 * (inner + outer)) / current ** 2, bound }, 1e-4);
    const internal = { case: label, quantity: 'internal inductance, H/m', source, expected: 5e-8 };
    check({ ...internal, got: (2 * inner) / current ** 2 }, 1e-4);
    const outside = { case: label, quantity: 'energy outside, J/m', source, expected: 2.30258509e-5 };
    check({ ...outside, got: outer }, 1e-4);
  });

  test.each([
    [0, 0, 5.60517019e-6],
    [0.001, 5e-4, 5.35517019e-6],
    [0.002, 1e-3, 4.60517019e-6],
    [0.004, 5e-4, 3.21887582e-6],
    [0.01, 2e-4, 1.38629436e-6],
  ])('B and A at r = %s m', (r, b, potential) => {
    const [x, y] = [r * Math.cos(0.4), r * Math.sin(0.4)];
    const value = fieldAt(field, x, y);
    const where = `at r = ${1000 * r} mm`;
    check({ case: label, quantity: `A ${where}`, source, expected: potential, got: value.a }, 3e-4);
    const got = Math.hypot(value.bx, value.by);
    check({ case: label, quantity: `B ${where}`, source, expected: b, got, scale: 1e-3 }, 5e-3);
  });
});

describe('permeable cylinder in a uniform field along x', () => {
  const source = 'separation of variables in the plane (any electromagnetics text, calculated)';
  const [b0, radius, rim] = [0.1, 0.01, 0.025];
  test.each([
    [1.05, 0.102439024, 0.100609756, 0.0993902439],
    [10, 0.181818182, 0.120454545, 0.0795454545],
    [1000, 0.1998002, 0.12495005, 0.07504995],
  ])('mu_r = %s', (muR, inside, onAxis, acrossAxis) => {
    const k = (muR - 1) / (muR + 1);
    const setup: Setup = {
      materials: { cylinder: { kind: 'linear', muR }, air },
      edges: { rim: { kind: 'potential', value: (x, y) => b0 * y * (1 + (k * radius ** 2) / (x * x + y * y)) } },
    };
    const goals = [meanAlong('inside', ['cylinder'], Math.PI * radius ** 2, 'bx')];
    const { field, values, bounds } = solveFor(disc(rim, 'air', [circle('cylinder', radius)]), setup, goals, b0, 1e-4);
    const label = `cylinder of mu_r ${muR} in 0.1 T`;
    const [got, bound] = [values[0], bounds[0]];
    check({ case: label, quantity: 'mean B inside', source, expected: inside, got, bound }, 2e-4);
    const axis = fieldAt(field, 2 * radius, 0).bx;
    const across = fieldAt(field, 0, 2 * radius).bx;
    check({ case: label, quantity: 'B at 2 R on the axis', source, expected: onAxis, got: axis }, 5e-3);
    check({ case: label, quantity: 'B at 2 R across it', source, expected: acrossAxis, got: across }, 5e-3);
  });
});

test.each([
  [100, 0.0101823662],
  [1000, 0.00110107797],
])('permeable shell of mu_r %s in a uniform field: what is left in the hole', (muR, expected) => {
  const source = 'separation of variables in the plane (any electromagnetics text, calculated)';
  const [b0, a, b, rim] = [0.1, 0.04, 0.05, 0.1];
  // Outside A = y (b0 + d/r^2); the dipole d follows from continuity of A and H at both faces.
  const d = (b0 * b * b * (muR * muR - 1) * (1 - (a / b) ** 2)) / ((muR + 1) ** 2 - ((muR - 1) * a) ** 2 / b ** 2);
  const setup: Setup = {
    materials: { shell: { kind: 'linear', muR }, hole: air, air },
    edges: { rim: { kind: 'potential', value: (x, y) => y * (b0 + d / (x * x + y * y)) } },
  };
  const section = disc(rim, 'air', [circle('shell', b), circle('hole', a)]);
  const goals = [meanAlong('hole', ['hole'], Math.PI * a * a, 'bx')];
  const { values, bounds } = solveFor(section, setup, goals, expected, 2e-4);
  const label = `shell of mu_r ${muR} in 0.1 T`;
  check({ case: label, quantity: 'mean B in the hole', source, expected, got: values[0], bound: bounds[0] }, 5e-4);
});

test.each([
  [1, 0.6],
  [1.05, 0.585365854],
])(
  'cylinder magnetised across its axis, recoil %s: B = Br/(1 + recoil) inside, a dipole outside',
  (recoil, expected) => {
    const source = 'uniformly magnetised cylinder (any electromagnetics text, calculated)';
    const [remanence, radius, rim] = [1.2, 0.01, 0.03];
    const setup: Setup = {
      materials: { magnet: { kind: 'magnet', recoil, remanence: [remanence, 0] }, air },
      edges: { rim: { kind: 'potential', value: (x, y) => (expected * radius ** 2 * y) / (x * x + y * y) } },
    };
    const goals = [meanAlong('inside', ['magnet'], Math.PI * radius ** 2, 'bx')];
    const { field, values, bounds } = solveFor(
      disc(rim, 'air', [circle('magnet', radius)]),
      setup,
      goals,
      expected,
      1e-4,
    );
    const label = `magnetised cylinder, 1.2 T, recoil ${recoil}`;
    check({ case: label, quantity: 'mean B inside', source, expected, got: values[0], bound: bounds[0] }, 2e-4);
    const outside = { case: label, quantity: 'B at 2 R on the axis', source, expected: expected / 4 };
    check({ ...outside, got: fieldAt(field, 2 * radius, 0).bx }, 5e-3);
  },
);

describe('two-wire line, exact potential on a far circle', () => {
  const source = 'uniform round conductors act as line currents outside (any electromagnetics text, calculated)';
  const [a, distance, rim] = [0.002, 0.02, 0.05];
  const lineOf = (current: number, at: number): ((x: number, y: number) => number) => {
    return (x, y) => ((-MU0 * current) / (2 * Math.PI)) * Math.log(Math.hypot(x - at, y) / rim);
  };
  const solveWires = (left: number, right: number): AdaptiveSolution => {
    const area = Math.PI * a * a;
    const [first, second] = [lineOf(left, -distance / 2), lineOf(right, distance / 2)];
    const setup: Setup = {
      materials: { left: air, right: air, air },
      currentDensity: { left: left / area, right: right / area },
      edges: { rim: { kind: 'potential', value: (x, y) => first(x, y) + second(x, y) } },
    };
    const section = disc(rim, 'air', [circle('left', a, [-distance / 2, 0]), circle('right', a, [distance / 2, 0])]);
    const linkage: Goal = {
      name: 'linkage',
      functional: ({ mesh }) => {
        const far = weightedIntegral(mesh, ['right'], () => 1 / area);
        return weightedIntegral(mesh, ['left'], () => 1 / area).map((g, i) => g - far[i]);
      },
    };
    // Means of By over each wire: B at its centre, hence the force.
    const goals = [linkage, meanAlong('left', ['left'], area, 'by'), meanAlong('right', ['right'], area, 'by')];
    return solveAdaptively(section, setup, {
      goals,
      weights: () => [1 / (left * 1.02103404e-6), 1 / 1e-4, 1 / 1e-4],
      accuracy: 5e-3,
    });
  };

  test('inductance (mu0/pi) (ln(D/a) + 1/4) of currents out and back', () => {
    const { values, bounds, accurate } = solveWires(10, -10);
    expect(accurate).toBe(true);
    const expected = 1.02103404e-6;
    const [got, bound] = [values[0] / 10, bounds[0] / 10];
    check({ case: 'two wires, 2 mm, 20 mm apart', quantity: 'inductance, H/m', source, expected, got, bound }, 2e-4);
  });

  test.each([
    ['like', 10, 1e-3],
    ['unlike', -10, -1e-3],
  ])(
    'force between %s currents by stress and by J x B: mu0 I1 I2/(2 pi D), like ones attract',
    (kind, other, expected) => {
      const { field, values, bounds } = solveWires(10, other);
      const label = `two wires, 10 A, ${kind} currents`;
      // The force on the left wire along x is -J By summed; the mean of By stands for B at its centre.
      const lorentz = { case: label, quantity: 'force by J x B, N/m', source, expected, scale: 1e-3 };
      check({ ...lorentz, got: -10 * values[1], bound: 10 * bounds[1] }, 1e-3);
      const stress = { case: label, quantity: 'force by stress, N/m', source, expected, scale: 1e-3 };
      check({ ...stress, got: forceOn(field, ['left']).fx }, 2e-3);
      check({ ...stress, got: -forceOn(field, ['right']).fx }, 2e-3);
    },
  );
});
