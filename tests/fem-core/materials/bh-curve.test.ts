import type { BHCurve } from '@gapwright/fem-core';
import { buildBHCurve, MU0 } from '@gapwright/fem-core';
import type { CurvePoint } from '@gapwright/fem-core/materials';
import { evaluateCurve, findTableFaults } from '@gapwright/fem-core/materials';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Table } from '../../reference/bh-tables.js';
import { SHEET_470, TEAM_13 } from '../../reference/bh-tables.js';

const at = (curve: BHCurve, b: number): CurvePoint => evaluateCurve(curve, b, { h: 0, slope: 0, energy: 0 });

/** Tables that a material could have: B rises by mu0 H and something more, over widely different steps. */
const tables: fc.Arbitrary<Table> = fc
  .array(fc.tuple(fc.double({ min: -1, max: 5, noNaN: true }), fc.double({ min: -4, max: 0.5, noNaN: true })), {
    minLength: 2,
    maxLength: 20,
  })
  .map((steps) => {
    const rows: [number, number][] = [[0, 0]];
    for (const [logH, logB] of steps) {
      const [h, b] = rows[rows.length - 1];
      rows.push([h + 10 ** logH, b + MU0 * 10 ** logH + 10 ** logB]);
    }
    return rows;
  });

/** Places within each piece of the curve and beyond its end, T. */
const placesOn = (curve: BHCurve): number[] => {
  const end = curve.b[curve.b.length - 1];
  const inner = Array.from(curve.b.subarray(1)).flatMap((b, i) =>
    [0.03, 0.25, 0.5, 0.8, 0.99].map((s) => curve.b[i] + s * (b - curve.b[i])),
  );
  return [...inner, end, 1.5 * end, 20 * end];
};

describe.each([
  ['TEAM 13 steel', TEAM_13],
  ['sheet of 4.7 W/kg', SHEET_470],
])('%s', (_, table) => {
  const curve = buildBHCurve(table);

  test('passes through its rows', () => {
    for (const [h, b] of table) expect(at(curve, b).h).toBeCloseTo(h, 9);
  });

  test('beyond the last row B rises by mu0 H alone, with neither jump nor kink in H where the table allows', () => {
    const [h, b] = table[table.length - 1];
    expect(at(curve, b + 0.5).h).toBeCloseTo(h + 0.5 / MU0, 6);
    expect(at(curve, b + 0.5).slope).toBeCloseTo(1 / MU0, 6);
    expect(Math.abs(at(curve, b * (1 - 1e-12)).h / h - 1)).toBeLessThan(1e-9);
  });
});

test('every curve passes through its rows and starts at H = 0 with no energy', () => {
  fc.assert(
    fc.property(tables, (table) => {
      const curve = buildBHCurve(table);
      for (const [h, b] of table) expect(Math.abs(at(curve, b).h - h)).toBeLessThanOrEqual(1e-9 * h);
      expect(at(curve, 0)).toMatchObject({ h: 0, energy: 0 });
      expect(at(curve, 0).slope).toBeGreaterThan(0);
    }),
  );
});

test('H and the energy rise with B everywhere, and H never leaves the rows it lies between', () => {
  fc.assert(
    fc.property(tables, (table) => {
      const curve = buildBHCurve(table);
      let [h, energy] = [0, 0];
      for (const b of placesOn(curve)) {
        const point = at(curve, b);
        const slack = 1e-12 * Math.abs(point.h);
        expect(point.h).toBeGreaterThanOrEqual(h - slack);
        expect(point.energy).toBeGreaterThanOrEqual(energy * (1 - 1e-12));
        expect(point.slope).toBeGreaterThanOrEqual(-1e-9 * Math.abs(point.h / b));
        const above = curve.b.findIndex((row) => row > b);
        if (above > 0) {
          expect(point.h).toBeGreaterThanOrEqual(curve.h[above - 1] - slack);
          expect(point.h).toBeLessThanOrEqual(curve.h[above] + 1e-12 * curve.h[above]);
        }
        [h, energy] = [point.h, point.energy];
      }
    }),
  );
});

test('the energy is the integral of H dB, and the slope the derivative of H', () => {
  fc.assert(
    fc.property(tables, (table) => {
      const curve = buildBHCurve(table);
      const end = curve.b[curve.b.length - 1];
      for (const b of placesOn(curve)) {
        if (b === end) continue; // the slope may jump at the last row
        const above = curve.b.findIndex((row) => row > b);
        const room = above < 0 ? b - end : Math.min(b - curve.b[above - 1], curve.b[above] - b);
        const step = 1e-2 * room; // H is cubic here, so a central difference errs by step^2 H'''/6
        const [low, high] = [at(curve, b - step), at(curve, b + step)];
        const { h, slope } = at(curve, b);
        const climb = above < 0 ? h : curve.h[above] - curve.h[above - 1];
        expect(Math.abs((high.energy - low.energy) / (2 * step) - h)).toBeLessThan(1e-3 * climb + 1e-6 * h);
        expect(Math.abs((high.h - low.h) / (2 * step) - slope)).toBeLessThan((1e-2 * climb) / room);
      }
    }),
    { numRuns: 50 },
  );
});

test('the energy at the rows is that of Simpson on each cubic piece, which is exact', () => {
  const curve = buildBHCurve(TEAM_13);
  let sum = 0;
  for (let i = 1; i < curve.b.length; i++) {
    const [a, b] = [curve.b[i - 1], curve.b[i]];
    sum += ((b - a) / 6) * (at(curve, a).h + 4 * at(curve, (a + b) / 2).h + at(curve, b).h);
    expect(Math.abs(curve.energy[i] / sum - 1)).toBeLessThan(1e-12);
  }
});

test.each([
  ['of 800 mu0, up to its last row', 800, 9],
  ['of mu0, the end and all beyond included', 1, 0.02],
])('a straight table is straight, whatever its rows: %s', (_, muR, end) => {
  const permeability = muR * MU0;
  const curve = buildBHCurve([3, 10, 11, 400, 5000, 9000].map((h) => [h, permeability * h]));
  for (let b = 0; b < end; b += 0.074 * end) {
    expect(at(curve, b).h).toBeCloseTo(b / permeability, 6);
    expect(at(curve, b).slope).toBeCloseTo(1 / permeability, 6);
    expect(at(curve, b).energy).toBeCloseTo((b * b) / (2 * permeability), 6);
  }
});

test('the first row [0, 0] may be left out', () => {
  expect(buildBHCurve(TEAM_13.slice(1))).toEqual(buildBHCurve(TEAM_13));
});

test('one row beyond the origin is a straight piece', () => {
  expect(at(buildBHCurve([[100, 0.5]]), 0.25).slope).toBeGreaterThan(0);
  expect(at(buildBHCurve([[100, 0.5]]), 0.5).h).toBeCloseTo(100, 9);
});

describe('bad tables are refused, row by row', () => {
  const good: Table = TEAM_13.slice(0, 10);
  const broken = (row: number, by: readonly [number, number]): Table => good.map((r, i) => (i === row - 1 ? by : r));
  test.each<readonly [string, Table, string, RegExp]>([
    ['empty', [], 'row 1', /too few/],
    ['the origin alone', [[0, 0]], 'row 1', /too few/],
    ['H falls', broken(5, [10, 0.025]), 'row 5', /does not rise/],
    ['H stands still', broken(5, [54, 0.025]), 'row 5', /does not rise/],
    ['B falls', broken(8, [210, 0.05]), 'row 8', /does not rise/],
    ['the origin comes again', broken(3, [0, 0]), 'row 3', /does not rise/],
    ['negative', broken(4, [-54, 0.0125]), 'row 4', /negative/],
    ['not a number', broken(6, [Number.NaN, 0.05]), 'row 6', /not finite/],
    ['infinite', broken(6, [143, Infinity]), 'row 6', /not finite/],
    ['flatter than vacuum', [...good, [233 + 1e6, 1.1]], 'row 11', /vacuum/],
  ])('%s', (_, table, key, wrong) => {
    const faults = findTableFaults(table);
    expect(faults[0].key).toBe(key);
    expect(faults[0].wrong).toMatch(wrong);
    expect(() => buildBHCurve(table)).toThrow(new RegExp(`^${key}: .*${wrong.source}`));
  });

  test('H a thousand times too large and B a thousand times too small rises less than vacuum would', () => {
    expect(() => buildBHCurve(TEAM_13.map(([h, b]) => [h * 1000, b / 1000]))).toThrow(/check the units/);
  });

  test('all bad rows are told at once', () => {
    const table: Table = [
      [0, 0],
      [10, -1],
      [20, 0.5],
      [15, 0.6],
      [30, Number.NaN],
      [40, 0.9],
      [50, 0.8],
    ];
    expect(findTableFaults(table).map(({ key }) => key)).toEqual(['row 2', 'row 4', 'row 5', 'row 7']);
  });

  test('a good table has no faults', () => {
    expect(findTableFaults(TEAM_13)).toEqual([]);
    expect(findTableFaults(SHEET_470)).toEqual([]);
  });
});
