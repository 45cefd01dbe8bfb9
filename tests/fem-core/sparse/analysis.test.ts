import type { Analysis, SymmetricPattern } from '@gapwright/fem-core/sparse';
import { analyse, factor, minimumDegreeOrder, solve } from '@gapwright/fem-core/sparse';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { plainAnalyse } from '../../../packages/fem-core/src/sparse/analysis.js';
import { blockSize, rowStartInBlock, updateSize } from '../../../packages/fem-core/src/sparse/front-layout.js';
import { backwardError, gridCouplings, gridLaplacian, irregular, patternFrom, patterns } from './systems.js';

const natural = (n: number): Int32Array => Int32Array.from({ length: n }, (_, i) => i);

/** Rows below the diagonal of each column of the factor, by eliminating one unknown after the other. */
function fillOf({ n, start, row }: SymmetricPattern, place: Int32Array): Set<number>[] {
  const columns = Array.from({ length: n }, () => new Set<number>());
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      columns[Math.min(place[j], place[row[p]])].add(Math.max(place[j], place[row[p]]));
    }
  }
  for (const column of columns) {
    const [next, ...rest] = [...column].sort((a, b) => a - b);
    for (const i of rest) columns[next].add(i);
  }
  return columns;
}

const frontRows = ({ first, below, rowStart, rows }: Analysis, s: number): number[] => [
  ...Array.from({ length: first[s + 1] - first[s] }, (_, c) => first[s] + c),
  ...rows.subarray(rowStart[s], rowStart[s] + below[s]),
];

function expectFronts(analysis: Analysis): void {
  const { pattern, order, place, first, below, rowStart, rows, child, sibling, relative, blockStart } = analysis;
  expect(order.slice().sort()).toEqual(natural(pattern.n));
  order.forEach((i, k) => {
    expect(place[i]).toBe(k);
  });
  expect([first[0], first[below.length]]).toEqual([0, pattern.n]);
  let children = 0;
  for (let s = 0; s < below.length; s++) {
    const own = frontRows(analysis, s);
    expect(own).toEqual([...new Set(own)].sort((a, b) => a - b));
    expect(Array.from(rows.subarray(rowStart[s] + below[s], rowStart[s + 1])).every((i) => i === pattern.n)).toBe(true);
    expect(blockStart[s + 1] - blockStart[s]).toBe(blockSize(first[s + 1] - first[s], below[s]));
    for (let c = child[s]; c >= 0; c = sibling[c], children++) {
      expect(c).toBeLessThan(s);
      for (let i = 0; i < below[c]; i++) expect(own[relative[rowStart[c] + i]]).toBe(rows[rowStart[c] + i]);
    }
  }
  // All fronts with rows below have a parent that takes their update.
  expect(children).toBe(below.filter((count) => count > 0).length);
}

/** Every entry lands on a place of its own: in the column of the one that comes first, at the row of the other. */
function expectTargets(analysis: Analysis): void {
  const { pattern, place, first, below, blockStart, entryStart, source, target } = analysis;
  expect(source.slice().sort()).toEqual(natural(pattern.row.length));
  const columnOf = pattern.row.slice();
  for (let j = 0; j < pattern.n; j++) columnOf.fill(j, pattern.start[j], pattern.start[j + 1]);
  for (let s = 0; s < below.length; s++) {
    const own = frontRows(analysis, s);
    for (let e = entryStart[s]; e < entryStart[s + 1]; e++) {
      const [column, row] = [place[columnOf[source[e]]], place[pattern.row[source[e]]]].sort((a, b) => a - b);
      const at = rowStartInBlock(own.indexOf(row), first[s + 1] - first[s]) + 4 * (column - first[s]);
      expect(target[e]).toBe(blockStart[s] + at);
    }
  }
}

/** Updates that live at the same time do not overlap. */
function expectUpdatesApart({ below, child, sibling, updateStart, updateSize: room }: Analysis): void {
  const living = new Set<number>();
  for (let s = 0; s < below.length; s++) {
    const [from, end] = [updateStart[s], updateStart[s] + updateSize(below[s])];
    expect(end).toBeLessThanOrEqual(room);
    for (const t of living) expect(end <= updateStart[t] || updateStart[t] + updateSize(below[t]) <= from).toBe(true);
    for (let c = child[s]; c >= 0; c = sibling[c]) living.delete(c);
    if (below[s] > 0) living.add(s);
  }
  expect(living.size).toBe(0);
}

/** Counts are those of elimination by hand, and the fronts hold all of its entries. */
function expectFill(analysis: Analysis): void {
  const { pattern, place, first, below, factorEntries, flops } = analysis;
  const columns = fillOf(pattern, place);
  expect(factorEntries).toBe(columns.reduce((sum, column) => sum + column.size + 1, 0));
  expect(flops).toBe(columns.reduce((sum, column) => sum + (column.size + 1) ** 2, 0));
  for (let s = 0; s < below.length; s++) {
    const own = new Set(frontRows(analysis, s));
    const last = columns[first[s + 1] - 1];
    expect(below[s]).toBe(last.size); // no row that the last column does not have: zeros arise by merging alone
    for (let j = first[s]; j < first[s + 1]; j++) expect([...columns[j]].every((i) => own.has(i))).toBe(true);
  }
}

function expectSound(analysis: Analysis): void {
  expectFronts(analysis);
  expectTargets(analysis);
  expectUpdatesApart(analysis);
  expectFill(analysis);
}

describe('fronts, maps and counts keep their promises', () => {
  test('whatever the couplings and the order', () => {
    fc.assert(
      fc.property(patterns, fc.infiniteStream(fc.nat()), (pattern, draws) => {
        expectSound(analyse(pattern));
        const keys = Array.from({ length: pattern.n }, () => draws.next().value as number);
        expectSound(
          analyse(
            pattern,
            natural(pattern.n).sort((a, b) => keys[a] - keys[b]),
          ),
        );
      }),
    );
  });

  test.each([
    [12, 12],
    [31, 3],
    [200, 1],
  ])('on a grid of %i x %i', (columns, rows) => {
    const pattern = patternFrom(columns * rows, gridCouplings(columns, rows));
    expectSound(analyse(pattern));
    expectSound(analyse(pattern, natural(columns * rows)));
  });

  test('without unknowns', () => {
    const analysis = analyse(patternFrom(0, []));
    expect([analysis.blockSize, analysis.updateSize, analysis.factorEntries, analysis.flops]).toEqual([0, 0, 0, 0]);
  });
});

/** So many unknowns that couple to each of a few hubs, and to nothing else. */
function hubs(unknowns: number, count: number): SymmetricPattern {
  const couplings = Array.from({ length: unknowns }, (_, i) =>
    Array.from({ length: count }, (_hub, h): [number, number] => [i, unknowns + h]),
  );
  return patternFrom(unknowns + count, couplings.flat());
}

test('rows that outnumber the unknowns many times over keep the promises too, with WebAssembly and without', () => {
  const pattern = hubs(90, 30);
  const order = natural(120);
  const analysis = analyse(pattern, order);
  expect(analysis.rows.length).toBeGreaterThan(10 * pattern.n);
  expectSound(analysis);
  expect(analysis).toEqual(plainAnalyse(pattern, order));
});

test('with WebAssembly and without, every number of an analysis is the same', () => {
  fc.assert(
    fc.property(patterns, fc.infiniteStream(fc.nat()), (pattern, draws) => {
      const keys = Array.from({ length: pattern.n }, () => draws.next().value as number);
      const order = natural(pattern.n).sort((a, b) => keys[a] - keys[b]);
      expect(analyse(pattern, order)).toEqual(plainAnalyse(pattern, order));
    }),
  );
  for (const [columns, rows] of [
    [64, 50],
    [3000, 1],
    [1, 1],
  ]) {
    const pattern = patternFrom(columns * rows, gridCouplings(columns, rows));
    const order = minimumDegreeOrder(pattern);
    expect(analyse(pattern, order)).toEqual(plainAnalyse(pattern, order));
  }
  expect(analyse(patternFrom(0, []))).toEqual(plainAnalyse(patternFrom(0, []), new Int32Array(0)));
});

test('an order of the caller is taken, but for moves within the elimination tree: entries and operations are its own', () => {
  const { pattern, values } = gridLaplacian(7, 5);
  const reversed = natural(35).reverse();
  const analysis = analyse(pattern, reversed);
  const columns = fillOf(pattern, reversed); // place of i is 34 - i, as the order reversed is its own inverse
  expect(analysis.factorEntries).toBe(columns.reduce((sum, column) => sum + column.size + 1, 0));
  const result = factor(analysis, values);
  if (!('blocks' in result)) throw new Error('not positive definite');
  const right = irregular(35);
  expect(backwardError({ pattern, values }, solve(result, right, new Float64Array(35)), right)).toBeLessThan(1e-15);
});

test('a fill-reducing order pays: a grid of 40 x 40 takes far fewer entries and operations than its natural order', () => {
  const pattern = patternFrom(1600, gridCouplings(40, 40));
  const plain = analyse(pattern, natural(1600));
  const ordered = analyse(pattern, minimumDegreeOrder(pattern));
  expect(ordered.factorEntries).toBeLessThan(0.6 * plain.factorEntries);
  expect(ordered.flops).toBeLessThan(0.4 * plain.flops);
});

test('an analysis is plain data: a copy, as another thread would get it, serves as well', () => {
  const { pattern, values } = gridLaplacian(20, 20);
  const analysis = analyse(pattern);
  const [here, there] = [analysis, structuredClone(analysis)].map((a) => factor(a, values));
  if (!('blocks' in here && 'blocks' in there)) throw new Error('not positive definite');
  expect(there.blocks).toEqual(here.blocks);
});
