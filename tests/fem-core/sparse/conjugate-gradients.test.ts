import type { SymmetricPattern } from '@gapwright/fem-core/sparse';
import { multiply } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import type { Matrix } from 'ml-matrix';
import { describe, expect, test } from 'vitest';
import type { GradientOptions } from '../../../packages/fem-core/src/sparse/conjugate-gradients.js';
import { solveByConjugateGradients } from '../../../packages/fem-core/src/sparse/conjugate-gradients.js';
import {
  incompleteCholesky,
  incompletePreconditioner,
} from '../../../packages/fem-core/src/sparse/incomplete-cholesky.js';
import type { Preconditioner } from '../../../packages/fem-core/src/sparse/preconditioner.js';
import { buildCoarseLevel, twoLevelPreconditioner } from '../../../packages/fem-core/src/sparse/two-level.js';
import type { QuadraticSquare, SquareOptions } from './quadratic-square.js';
import { quadraticSquare } from './quadratic-square.js';
import type { SparseMatrix } from './systems.js';
import { definiteMatrices, gridLaplacian, irregular, largest, patternFrom, solveSystem, toDense } from './systems.js';

const dot = (a: Float64Array, b: Float64Array): number => a.reduce((sum, value, i) => sum + value * b[i], 0);
const length = (a: Float64Array): number => Math.sqrt(dot(a, a));

function run({ pattern, values }: SparseMatrix, options: GradientOptions = {}, b = irregular(pattern.n)) {
  const x = new Float64Array(pattern.n);
  const report = solveByConjugateGradients(pattern, values, b, x, options);
  const product = multiply(pattern, values, x, new Float64Array(pattern.n));
  return { x, report, residual: length(b.map((value, i) => value - product[i])) / length(b) };
}

const runSquare = (square: QuadraticSquare, options: GradientOptions = {}) =>
  run(square, { level: buildCoarseLevel(square.pattern, square.placement), ...options });

/** Air and iron side by side, in a disc and in single triangles. */
const iron = (mu: number) => (x: number, y: number) =>
  (x - 0.4) ** 2 + (y - 0.5) ** 2 < 0.06 || Math.sin(40 * x) * Math.sin(37 * y) > 0.7 ? 1 / mu : 1;

describe('the answer is that of Cholesky', () => {
  test('for definite matrices of any kind, with the incomplete factor', () => {
    fc.assert(
      fc.property(definiteMatrices, (matrix) => {
        const { x, report } = run(matrix, { tolerance: 1e-13 });
        if (report.outcome === 'stalled') expect(report.residual).toBeLessThan(1e-10);
        else expect(report.outcome).toBe('converged');
        const direct = solveSystem(matrix, irregular(matrix.pattern.n));
        // The condition number is up to some 1e6.
        expect(largest(x.map((value, i) => value - direct[i]))).toBeLessThan(1e-5 * largest(direct));
      }),
    );
  });

  test.each<SquareOptions>([
    {},
    { sides: 'repeating' },
    { sides: 'reversing' },
    { coefficient: iron(1e5) },
    { coefficient: iron(1e-5), sides: 'reversing' },
  ])('for quadratic elements, with two levels: %o', (options) => {
    const square = quadraticSquare(12, options);
    const { x, report } = runSquare(square, { tolerance: 1e-12 });
    expect(report.preconditioner).toBe('two-level');
    expect(report.outcome).toBe('converged');
    const direct = solveSystem(square, irregular(square.pattern.n));
    expect(largest(x.map((value, i) => value - direct[i]))).toBeLessThan(1e-8 * largest(direct));
  });
});

describe('steps', () => {
  const steps = (cells: number, options: SquareOptions = {}): number =>
    runSquare(quadraticSquare(cells, options)).report.steps;

  test('with two levels do not grow with the number of unknowns', () => {
    expect(steps(48)).toBeLessThanOrEqual(steps(6) + 2);
  });

  test('nor with the contrast of the materials', () => {
    const plain = steps(20);
    for (const mu of [1e-5, 1e5]) expect(steps(20, { coefficient: iron(mu) })).toBeLessThanOrEqual(plain + 4);
  });

  test('nor do signs across a reversing side cost any, if the weights tell them', () => {
    const square = quadraticSquare(16, { sides: 'reversing' });
    const { points, ends } = square.placement;
    const known = runSquare(square).report.steps;
    expect(known).toBeLessThanOrEqual(steps(16) + 2);
    expect(
      runSquare(square, { level: buildCoarseLevel(square.pattern, { points, ends }) }).report.steps,
    ).toBeGreaterThan(known);
  });

  test('with the incomplete factor stay below those with the diagonal alone, and grow as the number along a side', () => {
    const count = (side: number): number => run(gridLaplacian(side, side)).report.steps;
    expect(count(80) / count(20)).toBeLessThan(4.5);
    expect(count(80)).toBeLessThan(100); // the diagonal alone needs about twice as many
  });

  test('no more than one for a matrix whose factor has no fill', () => {
    const chain = patternFrom(
      200,
      Array.from({ length: 199 }, (_, i): [number, number] => [i, i + 1]),
    );
    const values = Float64Array.from(chain.row, (i, p) => (chain.start.includes(p) ? 2 + i / 100 : -1));
    expect(run({ pattern: chain, values }).report.steps).toBe(1);
  });

  test('none where x solves the system from the start, or the right-hand side is zero', () => {
    const { pattern, values } = gridLaplacian(9, 8);
    const x = irregular(72);
    const b = multiply(pattern, values, x, new Float64Array(72));
    expect(solveByConjugateGradients(pattern, values, b, x)).toMatchObject({ outcome: 'converged', steps: 0 });
    expect(x).toEqual(irregular(72));
    expect(solveByConjugateGradients(pattern, values, new Float64Array(72), x).outcome).toBe('converged');
    expect(largest(x)).toBe(0);
  });

  test('few where no corner is free, so that the coarse level is empty', () => {
    const { report } = runSquare(quadraticSquare(1));
    expect(report.outcome).toBe('converged');
    expect(report.steps).toBe(1);
  });

  test('none without unknowns', () => {
    const none = new Float64Array(0);
    expect(solveByConjugateGradients(patternFrom(0, []), none, none, none).outcome).toBe('converged');
  });
});

describe('the report', () => {
  test('gives the residual of the answer', () => {
    for (const tolerance of [1e-3, 1e-8, 1e-11]) {
      const { report, residual } = run(gridLaplacian(30, 20), { tolerance });
      expect(residual).toBeLessThanOrEqual(tolerance);
      expect(report.residual).toBeCloseTo(residual, 14);
    }
  });

  test('says so when the steps allowed do not suffice, and keeps what was reached', () => {
    const { report, residual } = run(gridLaplacian(40, 40), { mostSteps: 10 });
    expect(report).toMatchObject({ outcome: 'too-many-steps', steps: 10 });
    expect(report.residual).toBeCloseTo(residual, 12);
    expect(residual).toBeLessThan(1);
  });

  test('says so when rounding keeps the residual up', () => {
    const { report, residual } = run(gridLaplacian(30, 30), { tolerance: 1e-30 });
    expect(report.outcome).toBe('stalled');
    expect(residual).toBeLessThan(1e-13);
  });

  test('says so when the matrix is not positive definite', () => {
    const { pattern, values } = gridLaplacian(5, 5);
    const indefinite = values.map((value) => (value > 0 ? 1.5 : value));
    const negative = values.map((value, p) => (p === pattern.start[7] ? -1 : value));
    const unknown = values.map((value, p) => (p === 3 ? Number.NaN : value));
    for (const bad of [indefinite, negative, unknown]) {
      expect(run({ pattern, values: bad }).report.outcome).toBe('not-positive');
    }
    const square = quadraticSquare(4);
    const flipped = { ...square, values: square.values.map((value) => -value) };
    expect(runSquare(flipped).report.outcome).toBe('not-positive');
  });

  test('is the same whether the coarse level is new or has served another matrix', () => {
    const square = quadraticSquare(10, { coefficient: iron(1000) });
    const level = buildCoarseLevel(square.pattern, square.placement);
    run({ ...square, values: quadraticSquare(10).values }, { level });
    expect(run(square, { level })).toEqual(runSquare(square));
  });

  test('is the same each time, and the answer to the last bit', () => {
    const square = quadraticSquare(10, { coefficient: iron(1000) });
    expect(runSquare(square)).toEqual(runSquare(square));
    expect(run(square)).toEqual(run(square));
  });
});

describe('the preconditioners are symmetric and positive', () => {
  const square = quadraticSquare(8, { sides: 'reversing', coefficient: iron(1000) });
  const { pattern, values, placement } = square;
  const lower = incompleteCholesky(pattern, values)?.lower as Float64Array;
  test.each<[string, Preconditioner]>([
    ['two levels', twoLevelPreconditioner(pattern, values, buildCoarseLevel(pattern, placement)) as Preconditioner],
    ['incomplete factor', incompletePreconditioner(pattern, lower)],
  ])('%s', (_, precondition) => {
    const apply = (r: Float64Array): Float64Array => {
      const z = new Float64Array(r.length);
      precondition(r, z);
      return z;
    };
    const r = irregular(pattern.n);
    const s = r.map((value, i) => Math.cos(i * value));
    const [mr, ms] = [apply(r), apply(s)];
    expect(Math.abs(dot(r, ms) - dot(s, mr))).toBeLessThan(1e-12 * Math.sqrt(dot(r, mr) * dot(s, ms)));
    expect(dot(r, mr)).toBeGreaterThan(0);
    expect(dot(s, ms)).toBeGreaterThan(0);
  });

  test('two levels leave nothing of an error that is linear in each triangle', () => {
    // Smoothing brings in what is not linear, so the error is followed through the middle step alone: by its energy.
    const plain = quadraticSquare(8);
    const n = plain.pattern.n;
    const corner = Float64Array.from({ length: n }, (_, i) => (plain.placement.ends[2 * i] === i ? Math.sin(i) : 0));
    const error = corner.map((value, i) => {
      const [a, b] = plain.placement.ends.subarray(2 * i, 2 * i + 2);
      return a === i ? value : (a < 0 ? 0 : corner[a] / 2) + (b < 0 ? 0 : corner[b] / 2);
    });
    const right = multiply(plain.pattern, plain.values, error, new Float64Array(n));
    const z = new Float64Array(n);
    const level = buildCoarseLevel(plain.pattern, plain.placement);
    (twoLevelPreconditioner(plain.pattern, plain.values, level) as Preconditioner)(right, z);
    const left = error.map((value, i) => value - z[i]);
    const energy = (v: Float64Array): number => dot(v, multiply(plain.pattern, plain.values, v, new Float64Array(n)));
    expect(energy(left)).toBeLessThan(0.25 * energy(error));
  });
});

describe('the incomplete factor', () => {
  const product = (pattern: SymmetricPattern, lower: Float64Array): Matrix => {
    const dense = toDense({ pattern, values: lower });
    for (let i = 0; i < pattern.n; i++) for (let j = i + 1; j < pattern.n; j++) dense.set(i, j, 0);
    return dense.mmul(dense.transpose());
  };

  test('agrees with the matrix wherever that has an entry', () => {
    fc.assert(
      fc.property(definiteMatrices, ({ pattern, values }) => {
        const factored = incompleteCholesky(pattern, values);
        if (factored === undefined) throw new Error('a definite matrix was refused');
        const dense = product(pattern, factored.lower);
        for (let j = 0; j < pattern.n; j++) {
          for (let p = pattern.start[j]; p < pattern.start[j + 1]; p++) {
            const wanted = p === pattern.start[j] ? values[p] * (1 + factored.shift) : values[p];
            expect(Math.abs(dense.get(pattern.row[p], j) - wanted)).toBeLessThan(1e-12 * largest(values));
          }
        }
      }),
    );
  });

  test('shifts the diagonal where it would break down, though the matrix is positive definite', () => {
    // Kershaw, The incomplete Cholesky-conjugate gradient method, 1978: the fourth pivot is negative.
    const pattern = patternFrom(4, [
      [1, 0],
      [3, 0],
      [2, 1],
      [3, 2],
    ]);
    const values = Float64Array.of(3, -2, 2, 3, -2, 3, -2, 3);
    const { shift } = incompleteCholesky(pattern, values) as { shift: number };
    expect(shift).toBeGreaterThan(0);
    expect(run({ pattern, values }).report.outcome).toBe('converged');
  });
});
