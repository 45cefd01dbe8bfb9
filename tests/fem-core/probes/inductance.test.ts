import type { Coil, Section, Setup } from '@gapwright/fem-core';
import { buildBHCurve, inductancesAt, MU0, meanOver, solveProbes } from '@gapwright/fem-core';
import { meshSection, solveOnMesh } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import { TEAM_13 } from '../../reference/bh-tables.js';

const AIR = { kind: 'linear', muR: 1 } as const;
const round = (name: string, radius: number) => ({ name, shape: { kind: 'circle', centre: [0, 0], radius } }) as const;

describe('coaxial conductors: textbook inductances', () => {
  // Inner wire of radius a, return tube from b to c, A = 0 at c (no flux beyond the return).
  const [a, b, c] = [0.002, 0.01, 0.012];
  const section: Section = {
    outline: { kind: 'circle', centre: [0, 0], radius: c },
    background: 'tube',
    regions: [round('air', b), round('wire', a)],
  };
  const setup: Setup = { materials: { tube: AIR, air: AIR, wire: AIR }, current: { wire: 1, tube: -1 } };
  const coil: Coil = {
    name: 'line',
    sides: [
      { region: 'wire', turns: 1 },
      { region: 'tube', turns: -1 },
    ],
  };

  test('wire 1/4 + ln b/a, and the tube its own part', () => {
    const answer = solveProbes(section, setup, [], { accuracy: 1e-4 });
    const { incremental, apparent, error } = inductancesAt(answer, [coil]);
    const tube = (c ** 4 / (c * c - b * b) ** 2) * Math.log(c / b) - (3 * c * c - b * b) / (4 * (c * c - b * b));
    const expected = (MU0 / (2 * Math.PI)) * (0.25 + Math.log(b / a) + tube);
    expect(Math.abs(incremental[0][0] / expected - 1)).toBeLessThan(2e-4);
    expect(Math.abs(incremental[0][0] - expected)).toBeLessThan(2 * error[0][0] + 1e-9 * expected);
    expect(apparent[0][0]).toBeCloseTo(incremental[0][0], 15);
    expect(2 * answer.energy).toBeCloseTo(incremental[0][0], 12);
  });
});

describe('two coils on one closed core', () => {
  const side = (name: string, x: number) =>
    ({ name, shape: { kind: 'rectangle', from: [x, 0.02], to: [x + 0.005, 0.04] } }) as const;
  const section: Section = {
    outline: { kind: 'rectangle', from: [0, 0], to: [0.08, 0.06] },
    background: 'air',
    maxEdge: 0.01,
    regions: [
      { name: 'core', shape: { kind: 'rectangle', from: [0.015, 0.008], to: [0.065, 0.052] } },
      { name: 'window', shape: { kind: 'rectangle', from: [0.025, 0.018], to: [0.055, 0.042] } },
      side('a out', 0.009),
      side('a in', 0.026),
      side('b in', 0.049),
      side('b out', 0.066),
    ],
  };
  const coils: Coil[] = [
    {
      name: 'a',
      sides: [
        { region: 'a out', turns: -30 },
        { region: 'a in', turns: 30 },
      ],
    },
    {
      name: 'b',
      sides: [
        { region: 'b in', turns: -20 },
        { region: 'b out', turns: 20 },
      ],
    },
  ];
  const regions = ['air', 'window', 'a out', 'a in', 'b in', 'b out'];
  const air = Object.fromEntries(regions.map((name) => [name, AIR]));
  const at = (amperes: number) => {
    const setup: Setup = {
      materials: { ...air, core: { kind: 'curve', curve: buildBHCurve(TEAM_13) } },
      current: { 'a out': -30 * amperes, 'a in': 30 * amperes },
    };
    return solveOnMesh(meshSection(section), setup, { tolerance: 1e-12 });
  };
  /** Straight from the solved potential: turns times the mean of A, side by side. */
  const linkage = (amperes: number, coil: Coil): number => {
    const { field } = at(amperes);
    return coil.sides.reduce((sum, { region, turns }) => sum + turns * meanOver(field, [region]).a, 0);
  };

  test('are coupled, reciprocally, by less than all of their flux', () => {
    const { incremental, coupling } = inductancesAt(at(0.5), coils);
    expect(incremental[0][1]).toBe(incremental[1][0]);
    expect(Math.abs(coupling)).toBeGreaterThan(0.9);
    expect(Math.abs(coupling)).toBeLessThan(1);
    expect(incremental[0][0] / incremental[1][1]).toBeCloseTo((30 / 20) ** 2, 0);
  });

  test('apparent is the chord and incremental the slope of linkage over current', () => {
    for (const current of [0.2, 2, 20]) {
      const step = 1e-3 * current;
      const solved = at(current);
      const { incremental, apparent } = inductancesAt(solved, coils);
      for (const k of [0, 1]) {
        const slope = (linkage(current + step, coils[k]) - linkage(current - step, coils[k])) / (2 * step);
        expect(Math.abs(incremental[0][k] / slope - 1)).toBeLessThan(2e-3);
        expect(Math.abs((apparent[0][k] * current) / linkage(current, coils[k]) - 1)).toBeLessThan(1e-9);
      }
    }
    const saturated = inductancesAt(at(20), coils);
    expect(saturated.incremental[0][0]).toBeLessThan(0.7 * saturated.apparent[0][0]);
  });

  test('a coil of nothing is refused by name', () => {
    const nowhere = { name: 'c', sides: [{ region: 'nowhere', turns: 1 }] };
    expect(() => inductancesAt(at(1), [nowhere])).toThrow('coils.c: nowhere covers no area');
  });
});
