import type { SymmetricPattern } from '@gapwright/fem-core/sparse';
import { minimumDegreeOrder } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { plainMinimumDegreeOrder } from '../../../packages/fem-core/src/sparse/minimum-degree.js';
import { quadraticSquare } from './quadratic-square.js';
import { gridCouplings, patternFrom, patterns } from './systems.js';

/** Entries below the diagonal of the factor in the given order, by playing the elimination through on the graph. */
function fillOf({ n, start, row }: SymmetricPattern, order: Int32Array): number {
  const neighbours = Array.from({ length: n }, () => new Set<number>());
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      neighbours[j].add(row[p]);
      neighbours[row[p]].add(j);
    }
  }
  let entries = 0;
  for (const pivot of order) {
    const left = [...neighbours[pivot]];
    entries += left.length;
    for (const i of left) {
      neighbours[i].delete(pivot);
      for (const j of left) if (i !== j) neighbours[i].add(j);
    }
  }
  return entries;
}

const natural = (n: number): Int32Array => Int32Array.from({ length: n }, (_, i) => i);
const expectPermutation = (order: Int32Array, n: number): void => {
  expect(order.slice().sort()).toEqual(natural(n));
};
const lower = ({ n, row }: SymmetricPattern): number => row.length - n;

const all = Array.from({ length: 25 }, (_, i) => i);
const pairs = (some: readonly number[]): [number, number][] =>
  some.flatMap((i) => some.filter((j) => j < i).map((j): [number, number] => [i, j]));
const shapes: readonly (readonly [string, SymmetricPattern])[] = [
  ['no unknown at all', patternFrom(0, [])],
  ['one unknown', patternFrom(1, [])],
  ['nothing coupled', patternFrom(25, [])],
  [
    'a chain',
    patternFrom(
      25,
      all.slice(1).map((i) => [i, i - 1]),
    ),
  ],
  [
    'a ring',
    patternFrom(
      25,
      all.map((i) => [i, (i + 1) % 25]),
    ),
  ],
  [
    'a star round the first',
    patternFrom(
      25,
      all.map((i) => [0, i]),
    ),
  ],
  [
    'a star round the last',
    patternFrom(
      25,
      all.map((i) => [24, i]),
    ),
  ],
  ['all coupled with all', patternFrom(25, pairs(all))],
  ['two cliques apart', patternFrom(25, [...pairs(all.slice(0, 9)), ...pairs(all.slice(9))])],
  ['two cliques that share one unknown', patternFrom(25, [...pairs(all.slice(0, 10)), ...pairs(all.slice(9))])],
  [
    'all of one half with all of the other',
    patternFrom(
      24,
      all.slice(0, 12).flatMap((i) => all.slice(12, 24).map((j): [number, number] => [i, j])),
    ),
  ],
  ['a grid and a single unknown apart', patternFrom(25, gridCouplings(6, 4))],
];

test.each(shapes)('every unknown comes once: %s', (_, pattern) => {
  expectPermutation(minimumDegreeOrder(pattern), pattern.n);
});

test('every unknown comes once, whatever the couplings', () => {
  fc.assert(
    fc.property(patterns, (pattern) => expectPermutation(minimumDegreeOrder(pattern), pattern.n)),
    { numRuns: 300 },
  );
});

describe('where an order without fill exists, one is found', () => {
  test.each([
    'nothing coupled',
    'a chain',
    'a star round the first',
    'a star round the last',
    'all coupled with all',
    'two cliques apart',
    'two cliques that share one unknown',
  ])('%s', (name) => {
    const pattern = shapes.find(([shape]) => shape === name)?.[1] as SymmetricPattern;
    expect(fillOf(pattern, minimumDegreeOrder(pattern))).toBe(lower(pattern));
  });

  test('trees of any shape', () => {
    const trees = fc
      .array(fc.double({ min: 0, max: 1, noNaN: true, maxExcluded: true }), { minLength: 1, maxLength: 60 })
      .map((draws) =>
        patternFrom(
          draws.length + 1,
          draws.map((draw, i) => [i + 1, Math.floor(draw * (i + 1))]),
        ),
      );
    fc.assert(
      fc.property(trees, (tree) => {
        expect(fillOf(tree, minimumDegreeOrder(tree))).toBe(lower(tree));
      }),
    );
  });

  test('a ring costs one entry for all but three of its unknowns', () => {
    const ring = patternFrom(
      25,
      all.map((i) => [i, (i + 1) % 25]),
    );
    expect(fillOf(ring, minimumDegreeOrder(ring))).toBe(25 + 22);
  });
});

describe('the kernel and its plain twin give the same order', () => {
  test('whatever the couplings', () => {
    fc.assert(
      fc.property(patterns, (pattern) => {
        expect(minimumDegreeOrder(pattern)).toEqual(plainMinimumDegreeOrder(pattern));
      }),
      { numRuns: 300 },
    );
  });

  test('on grids and on quadratic elements', () => {
    const grid = patternFrom(2500, gridCouplings(50, 50));
    for (const pattern of [grid, quadraticSquare(24).pattern]) {
      expect(minimumDegreeOrder(pattern)).toEqual(plainMinimumDegreeOrder(pattern));
    }
  });
});

test('unknowns coupled with nearly all others come last, and the others without fill', () => {
  // A chain of 3000 whose unknowns are all coupled with two hubs besides.
  const [n, hubs] = [3002, [0, 1001]];
  const others = Array.from({ length: n }, (_, i) => i).filter((i) => !hubs.includes(i));
  const couplings = others.flatMap((i, k): [number, number][] => [
    ...hubs.map((h): [number, number] => [i, h]),
    ...others.slice(k + 1, k + 2).map((j): [number, number] => [i, j]),
  ]);
  const pattern = patternFrom(n, couplings);
  const order = minimumDegreeOrder(pattern);
  expectPermutation(order, n);
  expect([...order.slice(-2)].sort((a, b) => a - b)).toEqual(hubs);
  expect(fillOf(pattern, order)).toBe(lower(pattern) + 1); // the hubs become coupled with each other
});

test('a grid of 40 x 40 fills in a fraction of its natural order, about as n log n', () => {
  const grid = patternFrom(1600, gridCouplings(40, 40));
  const fill = fillOf(grid, minimumDegreeOrder(grid));
  const banded = fillOf(grid, natural(1600));
  expect(banded).toBeGreaterThan(60_000); // a band of 40 throughout
  expect(fill).toBeLessThan(banded / 3);
  // Nested dissection of a square grid needs some 7.75 n log2(sqrt n) entries (George, 1973; from memory).
  expect(fill).toBeLessThan(7.75 * 1600 * Math.log2(40));
});

test('the fill does not hang on how the unknowns happen to be numbered', () => {
  const couplings = gridCouplings(25, 25);
  const base = fillOf(patternFrom(625, couplings), minimumDegreeOrder(patternFrom(625, couplings)));
  for (const stride of [7, 132, 311]) {
    const name = (i: number): number => (i * stride + 13) % 625; // strides without a factor in common with 625
    const renamed = patternFrom(
      625,
      couplings.map(([i, j]) => [name(i), name(j)]),
    );
    expect(fillOf(renamed, minimumDegreeOrder(renamed))).toBeLessThan(1.25 * base);
  }
});
