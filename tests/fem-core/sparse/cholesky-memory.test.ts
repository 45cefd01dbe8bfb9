import type { Analysis, Factor } from '@gapwright/fem-core/sparse';
import { analyse, factor, solve, unfusedKernels } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { bytes as fusedBytes } from '../../../packages/fem-core/src/kernels/cholesky-fused.wasm.js';
import { compileKernels } from '../../../packages/fem-core/src/kernels/instantiate.js';
import { solveMany } from '../../../packages/fem-core/src/sparse/cholesky.js';
import type { SparseMatrix } from './systems.js';
import {
  backwardError,
  definiteMatrices,
  dominant,
  gridCouplings,
  gridLaplacian,
  irregular,
  patternFrom,
} from './systems.js';

type Options = Parameters<typeof factor>[2];

function made(analysis: Analysis, values: Float64Array, options?: Options): Factor {
  const result = factor(analysis, values, options);
  if (!('blocks' in result)) throw new Error(`not positive definite at ${result.unknown}`);
  return result;
}

const solved = (factored: Factor, right: Float64Array): Float64Array =>
  solve(factored, right, new Float64Array(right.length));

/** Links to the `reach` next ones; dense where the reach is n. */
const banded = (n: number, reach: number): SparseMatrix =>
  dominant(
    patternFrom(
      n,
      Array.from({ length: n }, (_, i) => i).flatMap((i) =>
        Array.from({ length: Math.min(reach, n - 1 - i) }, (_, k): [number, number] => [i, i + k + 1]),
      ),
    ),
    (entry) => Math.sin(entry) + 0.3,
  );

/** Two grids that do not touch, and unknowns that nothing couples. */
const apart = dominant(
  patternFrom(400, [
    ...gridCouplings(13, 13),
    ...gridCouplings(12, 15).map(([i, j]): [number, number] => [i + 200, j + 200]),
  ]),
  () => 1,
);

const systems: readonly (readonly [string, SparseMatrix])[] = [
  ...[1, 2, 3, 4, 5, 6, 7, 8, 9, 12, 13, 31, 64, 131].map((n) => [`dense, ${n}`, banded(n, n)] as const),
  ...[1, 2, 3, 4, 5, 11].map((reach) => [`a band of ${reach}`, banded(157, reach)] as const),
  ['a long chain', banded(20_000, 1)],
  ['nothing coupled', banded(50, 0)],
  ['parts that do not touch', apart],
  ['a grid', gridLaplacian(61, 47)],
  ['a grid of nine-point stars', dominant(patternFrom(900, starCouplings(30)), (entry) => 1 + Math.sin(entry))],
];

function starCouplings(side: number): [number, number][] {
  const diagonals = gridCouplings(side - 1, side - 1).flatMap(([i]): [number, number][] => {
    const at = i + Math.floor(i / (side - 1));
    return [
      [at, at + side + 1],
      [at + 1, at + side],
    ];
  });
  return [...gridCouplings(side, side), ...diagonals];
}

const unfused = unfusedKernels();

describe('with WebAssembly and without, the factor and the solution are the same to the last bit', () => {
  test.each(systems)('%s', (_, { pattern, values }) => {
    const analysis = analyse(pattern);
    const [plain, fast] = [true, false].map((choice) => made(analysis, values, { plain: choice, kernels: unfused }));
    expect(sameBits(fast.blocks, plain.blocks)).toBe(true);
    const right = irregular(pattern.n);
    const x = solved(fast, right);
    expect(sameBits(x, solved(plain, right))).toBe(true);
    expect(backwardError({ pattern, values }, x, right)).toBeLessThan(1e-13);
  });

  test('whatever the couplings', () => {
    fc.assert(
      fc.property(definiteMatrices, ({ pattern, values }) => {
        const analysis = analyse(pattern);
        const [plain, fast] = [true, false].map((choice) =>
          made(analysis, values, { plain: choice, kernels: unfused }),
        );
        expect(sameBits(fast.blocks, plain.blocks)).toBe(true);
        const right = irregular(pattern.n);
        expect(sameBits(solved(fast, right), solved(plain, right))).toBe(true);
      }),
    );
  });

  test('and so is the unknown at fault', () => {
    fc.assert(
      fc.property(definiteMatrices, fc.nat(), ({ pattern, values }, draw) => {
        const broken = values.slice();
        broken[pattern.start[draw % pattern.n]] = -1;
        const analysis = analyse(pattern);
        const [plain, fast] = [true, false].map((choice) =>
          factor(analysis, broken, { plain: choice, kernels: unfused }),
        );
        expect('blocks' in fast).toBe(false);
        expect(fast).toEqual(plain);
      }),
    );
  });
});

describe('fused products round once in place of twice: the same factor and solution to rounding', () => {
  test.each(systems)('%s', (_, { pattern, values }) => {
    const analysis = analyse(pattern);
    const [fused, exact] = [undefined, unfused].map((kernels) => made(analysis, values, { plain: false, kernels }));
    const apart = exact.blocks.map((value, i) => Math.abs(fused.blocks[i] - value) / Math.max(1, Math.abs(value)));
    expect(apart.reduce((a, b) => Math.max(a, b), 0)).toBeLessThan(1e-12);
    const right = irregular(pattern.n);
    expect(backwardError({ pattern, values }, solved(fused, right), right)).toBeLessThan(1e-13);
  });

  const hasThem = compileKernels(fusedBytes) !== undefined;

  // Hosts whose processor has no fused operations may round twice all the same; this one is told by the command's flag.
  test.runIf(hasThem)('where the host has them, some factor differs in its last bits', () => {
    const { pattern, values } = gridLaplacian(61, 47);
    const analysis = analyse(pattern);
    const [fused, exact] = [undefined, unfused].map((kernels) => made(analysis, values, { plain: false, kernels }));
    expect(sameBits(fused.blocks, exact.blocks)).toBe(false);
  });

  test('memory of the one kind is not taken by the other', () => {
    const { pattern, values } = gridLaplacian(31, 17);
    const analysis = analyse(pattern);
    const right = irregular(pattern.n);
    const old = made(analysis, values, { plain: false });
    const exact = made(analysis, values, { kernels: unfused, reuse: old });
    const x = solved(exact, right);
    expect(sameBits(x, solved(made(analysis, values, { plain: true }), right))).toBe(true);
    expect(() => solved(old, right)).toThrow('given to another');
  });
});

const sameBits = (a: Float64Array, b: Float64Array): boolean => {
  const [p, q] = [a, b].map((v) => new BigInt64Array(v.slice().buffer));
  return p.length === q.length && p.every((bits, i) => bits === q[i]);
};

describe.each([
  ['with WebAssembly', false],
  ['without', true],
])('memory, %s', (_, plain) => {
  const pattern = patternFrom(480, gridCouplings(24, 20));
  const analysis = analyse(pattern);
  const matrixOf = (seed: number): SparseMatrix => dominant(pattern, (entry) => 2 + Math.sin(seed * entry));
  const right = irregular(480);

  test('given on, it serves other values as if fresh, and the factor that held it is void', () => {
    let last: Factor | undefined;
    for (const seed of [1, 2, 3]) {
      const { values } = matrixOf(seed);
      const next = made(analysis, values, { reuse: last, plain });
      expect(solved(next, right)).toEqual(solved(made(analysis, values, { plain }), right));
      const before = last;
      if (before !== undefined) {
        expect(next.blocks.buffer).toBe(before.blocks.buffer);
        expect(() => solved(before, right)).toThrow('the memory of this factor was given to another');
        expect(() => solveMany(before, right, right, 1)).toThrow('the memory of this factor was given to another');
        expect(() => factor(analysis, values, { reuse: before, plain })).toThrow('given to another');
      }
      last = next;
    }
  });

  test('given on to systems larger and smaller, it serves them all', () => {
    let last = made(analysis, matrixOf(1).values, { plain });
    for (const side of [40, 3, 25, 1]) {
      const { pattern: other, values } = gridLaplacian(side, side);
      last = made(analyse(other), values, { reuse: last, plain });
      const b = irregular(side * side);
      expect(backwardError({ pattern: other, values }, solved(last, b), b)).toBeLessThan(1e-14);
    }
  });

  test('given on to the other kind of host, the old factor is void all the same', () => {
    const old = made(analysis, matrixOf(1).values, { plain });
    const next = made(analysis, matrixOf(2).values, { reuse: old, plain: !plain });
    expect(solved(next, right)).toEqual(solved(made(analysis, matrixOf(2).values, { plain: !plain }), right));
    expect(() => solved(old, right)).toThrow('given to another');
  });

  test('where the new matrix is not definite, the old factor is void and the memory lost', () => {
    const old = made(analysis, matrixOf(1).values, { plain });
    expect('blocks' in factor(analysis, new Float64Array(pattern.row.length), { reuse: old, plain })).toBe(false);
    expect(() => solved(old, right)).toThrow('given to another');
  });

  test('two factors do not disturb each other', () => {
    const [a, b] = [matrixOf(1), matrixOf(2)];
    const [xa, xb] = [a, b].map(({ values }) => solved(made(analysis, values, { plain }), right));
    const first = made(analysis, a.values, { plain });
    const second = made(analysis, b.values, { plain });
    for (let times = 0; times < 2; times++) {
      expect(solved(first, right)).toEqual(xa);
      expect(solved(second, right)).toEqual(xb);
    }
  });

  test.each([0, 1, 2, 3, 4, 5, 6, 9])('%i right-hand sides at once have the solutions of each alone', (count) => {
    const { values } = matrixOf(5);
    const factored = made(analysis, values, { plain });
    const b = irregular(480 * count);
    const x = solveMany(factored, b, new Float64Array(480 * count), count);
    for (let r = 0; r < count; r++) {
      const alone = solved(factored, b.slice(480 * r, 480 * (r + 1)));
      x.subarray(480 * r, 480 * (r + 1)).forEach((value, i) => {
        expect(Math.abs(value - alone[i])).toBeLessThan(1e-14);
      });
    }
    expect(solveMany(factored, b, b, count)).toEqual(x);
  });
});

test('the memory foretold is the memory taken, to a page of 64 KiB', () => {
  const { pattern, values } = gridLaplacian(60, 60);
  const analysis = analyse(pattern);
  const spare = made(analysis, values, { plain: false }).blocks.buffer.byteLength - analysis.peakBytes;
  expect(spare).toBeGreaterThanOrEqual(0);
  expect(spare).toBeLessThan(65_536);
});

test('what 32-bit addresses cannot reach is refused, with the size', () => {
  const { pattern, values } = gridLaplacian(5, 5);
  const analysis = { ...analyse(pattern), peakBytes: 6.5 * 2 ** 30 };
  expect(() => factor(analysis, values)).toThrow(RangeError);
  expect(() => factor(analysis, values)).toThrow('the factor of 25 unknowns takes 6.5 GiB of memory');
});

test('several right-hand sides, whatever the couplings', () => {
  fc.assert(
    fc.property(definiteMatrices, (matrix) => {
      const { n } = matrix.pattern;
      const factored = made(analyse(matrix.pattern), matrix.values, { plain: false });
      const b = irregular(3 * n);
      const x = solveMany(factored, b, new Float64Array(3 * n), 3);
      for (let r = 0; r < 3; r++) {
        const [part, right] = [x, b].map((v) => v.slice(n * r, n * (r + 1)));
        expect(backwardError(matrix, part, right)).toBeLessThan(1e-12);
      }
    }),
  );
});
