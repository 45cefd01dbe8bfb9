import type { Mesh } from '@gapwright/fem-core/mesh';
import { cornerCount, meshSection, nodeCount, triangleCount, triangleNodes } from '@gapwright/fem-core/mesh';
import type { SymmetricPattern } from '@gapwright/fem-core/sparse';
import { minimumDegreeOrder } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { chooseOrder } from '../../../packages/fem-core/src/sparse/choose-order.js';
import type { Placement, SeparatorTree } from '../../../packages/fem-core/src/sparse/nested-dissection.js';
import {
  dissectionOrder,
  plainDissectionOrder,
  separatorTree,
} from '../../../packages/fem-core/src/sparse/nested-dissection.js';
import { fillUnder } from './fill.js';
import type { SquareOptions } from './quadratic-square.js';
import { quadraticSquare } from './quadratic-square.js';
import { gridCouplings, patternFrom, patterns } from './systems.js';

const natural = (n: number): Int32Array => Int32Array.from({ length: n }, (_, i) => i);
const expectPermutation = (order: Int32Array, n: number): void => {
  expect(order.slice().sort()).toEqual(natural(n));
};
const isBelow = ({ last }: SeparatorTree, low: number, high: number): boolean => low >= high && low <= last[high];

/** No coupling between unknowns of nodes of which neither is below the other. */
function expectSeparation({ n, start, row }: SymmetricPattern, tree: SeparatorTree): void {
  for (let j = 0; j < n; j++) {
    for (let p = start[j]; p < start[j + 1]; p++) {
      const [a, b] = [tree.nodeOf[j], tree.nodeOf[row[p]]];
      if (!isBelow(tree, a, b) && !isBelow(tree, b, a)) throw new Error(`${j} and ${row[p]} are coupled across`);
    }
  }
}

const squares: readonly SquareOptions[] = [{ sides: 'fixed' }, { sides: 'repeating' }, { sides: 'reversing' }];

/** A graph with points anywhere (in heaps too) and ends that need mean nothing. */
const placed: fc.Arbitrary<[SymmetricPattern, Placement]> = patterns.chain((pattern) => {
  const { n } = pattern;
  const coordinate = fc.oneof(fc.integer({ min: 0, max: 3 }), fc.double({ min: -1, max: 1, noNaN: true }));
  return fc
    .tuple(
      fc.array(coordinate, { minLength: 2 * n, maxLength: 2 * n }),
      fc.array(fc.tuple(fc.integer({ min: -1, max: n - 1 }), fc.integer({ min: -1, max: n - 1 }), fc.boolean()), {
        minLength: n,
        maxLength: n,
      }),
      fc.boolean(),
    )
    .map(([xy, drawn, told]): [SymmetricPattern, Placement] => {
      const points = Float64Array.from(xy);
      if (!told) return [pattern, { points }];
      return [
        pattern,
        { points, ends: Int32Array.from(drawn.flatMap(([a, b, corner], i) => (corner ? [i, i] : [a, b]))) },
      ];
    });
});

describe('every unknown comes once', () => {
  test('whatever the couplings, the points and the ends', () => {
    fc.assert(
      fc.property(placed, ([pattern, placement]) => expectPermutation(dissectionOrder(pattern, placement), pattern.n)),
      { numRuns: 300 },
    );
  });

  test.each(squares)('on squares of quadratic elements, sides %o', (options) => {
    const { pattern, placement } = quadraticSquare(9, options);
    expectPermutation(dissectionOrder(pattern, placement), pattern.n);
  });

  test.each([0, 1, 2])('with %i unknowns', (n) => {
    expectPermutation(
      dissectionOrder(patternFrom(n, [[0, n - 1] as const].slice(n > 1 ? 0 : 1)), { points: new Float64Array(2 * n) }),
      n,
    );
  });

  test.each([
    ['all in one point', () => [0.3, 0.3]],
    ['on a line', (i: number) => [i, 0]],
    ['nowhere', () => [Number.NaN, Number.POSITIVE_INFINITY]],
    ['at distances of all magnitudes', (i: number) => [10 ** (i % 300), -(10 ** (i % 7))]],
  ] as const)('with points %s', (_, point) => {
    const points = new Float64Array(800);
    for (let i = 0; i < 400; i++) points.set(point(i), 2 * i);
    const pattern = patternFrom(400, gridCouplings(20, 20));
    expectPermutation(dissectionOrder(pattern, { points }), 400);
  });
});

describe('the kernel and its plain twin give the same order', () => {
  test('on graphs of any kind', () => {
    fc.assert(
      fc.property(placed, ([pattern, placement]) => {
        expect(dissectionOrder(pattern, placement)).toEqual(plainDissectionOrder(pattern, placement));
      }),
    );
  });

  test.each(squares)('on squares of quadratic elements, sides %o', (options) => {
    const { pattern, placement } = quadraticSquare(20, options);
    expect(dissectionOrder(pattern, placement)).toEqual(plainDissectionOrder(pattern, placement));
  });
});

describe('separators separate', () => {
  test('in graphs of any kind, whatever the ends say', () => {
    fc.assert(
      fc.property(placed, ([pattern, placement]) => expectSeparation(pattern, separatorTree(pattern, placement))),
      { numRuns: 300 },
    );
  });

  test.each(squares)('on squares of quadratic elements, sides %o', (options) => {
    const { pattern, placement } = quadraticSquare(12, options);
    expectSeparation(pattern, separatorTree(pattern, placement));
  });

  test('without the first one the square falls into two sides, neither with more than four fifths', () => {
    const { pattern, placement } = quadraticSquare(16);
    const { nodeOf } = separatorTree(pattern, placement);
    const sizes = componentsWithout(pattern, (i) => nodeOf[i] === 0);
    expect(sizes.length).toBe(2);
    expect(Math.max(...sizes)).toBeLessThan(0.8 * pattern.n);
  });
});

/** Sizes of the connected parts of the graph without some unknowns. */
function componentsWithout({ n, start, row }: SymmetricPattern, gone: (i: number) => boolean): number[] {
  const root = natural(n);
  const find = (i: number): number => {
    let at = i;
    while (root[at] !== at) at = root[at];
    return at;
  };
  for (let j = 0; j < n; j++) {
    for (let p = start[j]; p < start[j + 1]; p++) if (!gone(j) && !gone(row[p])) root[find(row[p])] = find(j);
  }
  const size = new Map<number, number>();
  for (let i = 0; i < n; i++) if (!gone(i)) size.set(find(i), (size.get(find(i)) ?? 0) + 1);
  return [...size.values()];
}

describe('separators are small', () => {
  test('a grid of k x k points is cut by at most k of them', () => {
    for (const k of [5, 12, 25]) {
      const points = new Float64Array(2 * k * k);
      for (let i = 0; i < k * k; i++) points.set([i % k, Math.floor(i / k)], 2 * i);
      const { nodeOf } = separatorTree(patternFrom(k * k, gridCouplings(k, k)), { points });
      expect(nodeOf.filter((node) => node === 0).length).toBeLessThanOrEqual(k);
    }
  });

  test('a square of quadratic elements is cut along one line: k - 1 corners and the k middles between them', () => {
    const cells = 16;
    const { pattern, placement } = quadraticSquare(cells);
    const { nodeOf } = separatorTree(pattern, placement);
    expect(nodeOf.filter((node) => node === 0).length).toBeLessThanOrEqual(2 * cells - 1);
  });

  test('the cover is a minimum: where all links cross at few hubs, the hubs are the separator', () => {
    // Points in a row; the three hubs, spread among them, are linked with all the others.
    const hubs = [10, 50, 90];
    const others = [...natural(100)].filter((i) => !hubs.includes(i));
    const pattern = patternFrom(
      100,
      hubs.flatMap((h) => others.map((i): [number, number] => [h, i])),
    );
    const points = Float64Array.from({ length: 200 }, (_, k) => (k % 2 === 0 ? k / 2 : 0));
    const order = dissectionOrder(pattern, { points });
    // Each of the others leaves without fill if the hubs come after it; the hubs then are coupled pairwise.
    expect(fillUnder(pattern, order).entries).toBeLessThanOrEqual(pattern.row.length + 3);
  });
});

/** All nodes of a mesh, none fixed. */
function ofMesh(mesh: Mesh): { pattern: SymmetricPattern; placement: Placement } {
  const corners = cornerCount(mesh);
  const nodes = new Int32Array(6);
  const couplings: [number, number][] = [];
  for (let t = 0; t < triangleCount(mesh); t++) {
    triangleNodes(mesh, t, nodes);
    for (const i of nodes) for (const j of nodes) if (j < i) couplings.push([i, j]);
  }
  const own = Array.from({ length: corners }, (_, i) => [i, i]).flat();
  return {
    pattern: patternFrom(nodeCount(mesh), couplings),
    placement: {
      points: Float64Array.from([...mesh.xy, ...mesh.middles]),
      ends: Int32Array.from([...own, ...mesh.edges]),
    },
  };
}

describe('fill of quadratic elements', () => {
  const sizes = [8, 16, 32, 64];
  const fills = sizes.map((cells) => {
    const { pattern, placement } = quadraticSquare(cells);
    return { pattern, n: pattern.n, ...fillUnder(pattern, dissectionOrder(pattern, placement)) };
  });

  test('entries grow as n log n: with each doubling of the side, by no more than 31/4 n (George, 1973)', () => {
    const share = fills.map(({ n, entries }) => entries / n);
    for (let k = 1; k < share.length; k++) {
      expect(share[k] - share[k - 1]).toBeGreaterThan(5);
      expect(share[k] - share[k - 1]).toBeLessThanOrEqual(31 / 4);
    }
  });

  test('work grows as n^(3/2)', () => {
    const share = fills.map(({ n, work }) => work / n ** 1.5);
    for (let k = 2; k < share.length; k++) expect(share[k]).toBeLessThan(share[k - 1]);
  });

  test('on a regular grid, where minimum degree does well, the work is not a fifth more', () => {
    const { pattern, work } = fills[3];
    expect(work).toBeLessThan(1.2 * fillUnder(pattern, minimumDegreeOrder(pattern)).work);
  });

  test('on triangles of uneven sizes the work is less than under minimum degree', () => {
    const mesh = meshSection({
      outline: { kind: 'rectangle', from: [0, 0], to: [1, 1] },
      background: 'air',
      maxEdge: 0.06,
      regions: [{ name: 'round', shape: { kind: 'circle', centre: [0.35, 0.4], radius: 0.2 }, maxEdge: 0.012 }],
    });
    const { pattern, placement } = ofMesh(mesh);
    expect(pattern.n).toBeGreaterThan(8000);
    const ours = fillUnder(pattern, dissectionOrder(pattern, placement));
    expect(ours.work).toBeLessThan(fillUnder(pattern, minimumDegreeOrder(pattern)).work);
  });
});

describe('the order chosen', () => {
  const large = quadraticSquare(40);
  const order = (p: SymmetricPattern, placement?: Placement): Int32Array => chooseOrder(p, placement);

  test('dissects large systems whose corners are known', () => {
    expect(order(large.pattern, large.placement)).toEqual(dissectionOrder(large.pattern, large.placement));
  });

  test('is minimum degree for small systems and where no placement is known', () => {
    const small = quadraticSquare(5);
    expect(order(small.pattern, small.placement)).toEqual(minimumDegreeOrder(small.pattern));
    expect(order(large.pattern)).toEqual(minimumDegreeOrder(large.pattern));
  });

  test('is minimum degree where hardly any unknown is a corner', () => {
    const ends = new Int32Array(2 * large.pattern.n).fill(-1);
    expect(order(large.pattern, { ...large.placement, ends })).toEqual(minimumDegreeOrder(large.pattern));
  });
});
