import { describe, expect, test } from 'vitest';
import { loadCutIn, loadPoint } from '../../../packages/machine-models/src/load/load-table.js';
import { operatingPoints } from '../../../packages/machine-models/src/load/operating-points.js';
import type { Load, PrimeMover } from '../../../packages/machine-models/src/machine.js';
import { hydro } from './sources.js';

const turbine: PrimeMover = {
  kind: 'table',
  points: [
    [300, 400],
    [420, 1160],
    [756, 0],
  ],
};

describe('closed forms', () => {
  test('a square law against a falling line: the root of the quadratic', () => {
    const line: PrimeMover = {
      kind: 'table',
      points: [
        [0, 1000],
        [1000, 0],
      ],
    };
    const { points, outcome } = operatingPoints(line, (rpm) => rpm ** 2 / 500);
    expect(points).toHaveLength(1);
    // n^2/500 = 1000 - n
    expect(points[0].speed_rpm).toBeCloseTo((-500 + Math.sqrt(500 ** 2 + 4 * 500 * 1000)) / 2, 6);
    expect(points[0].stable).toBe(true);
    expect(outcome).toBe('settles');
  });

  test('a demand that bends: three crossings, the middle one unstable', () => {
    const hill: PrimeMover = {
      kind: 'table',
      points: [
        [100, 0],
        [500, 400],
        [1000, 400],
      ],
    };
    // 50 W up to 300 rpm, then steeply more than is offered, and suddenly less from 700 on
    const demand = (rpm: number): number =>
      rpm < 300 ? 50 : rpm < 350 ? 50 + 10 * (rpm - 300) : rpm < 700 ? 550 : 350;
    const { points, outcome, notes } = operatingPoints(hill, demand, [300, 350, 700]);
    expect(points.map(({ stable }) => stable)).toEqual([false, true, false]);
    expect(points[0].speed_rpm).toBeCloseTo(150, 6);
    expect(points[1].speed_rpm).toBeCloseTo(2850 / 9, 6); // rpm - 100 = 50 + 10 (rpm - 300)
    expect(outcome).toBe('settles');
    expect(notes.join('\n')).toMatch(/stall: below 150 rpm/);
    expect(notes.join('\n')).toMatch(/runaway: above 700 rpm/);
  });
});

describe('a hydro turbine on the machine', () => {
  const load: Load = { kind: 'bridge', voltage: 106, diodeDrop: 0.9 };
  const drag = (rpm: number): number => 0.15 * ((2 * Math.PI * rpm) / 60);
  const demand = (rpm: number): number => loadPoint(hydro, load, rpm).electromagnetic_W + drag(rpm);
  const cutIn = loadCutIn(hydro, load);

  test('it settles where shaft power is what the turbine offers', () => {
    const { points, outcome } = operatingPoints(turbine, demand, [cutIn], 756);
    expect(outcome).toBe('settles');
    expect(points).toHaveLength(1);
    const [{ speed_rpm, shaft_W, stable }] = points;
    expect(stable).toBe(true);
    expect(speed_rpm).toBeGreaterThan(cutIn);
    expect(demand(speed_rpm) / shaft_W).toBeCloseTo(1, 8);
  });

  test('without load it runs away to where drag takes what is left, near the end of its table', () => {
    const { points } = operatingPoints(turbine, drag);
    expect(points[0].speed_rpm).toBeGreaterThan(750);
    expect(points[0].speed_rpm).toBeLessThan(756);
    expect(operatingPoints(turbine, drag, [], 600).notes.join()).toMatch(/above the 600 rpm it is built for/);
  });

  test('a load too heavy stalls it, one too light lets it run away past the table', () => {
    const heavy = operatingPoints(turbine, (rpm) => 2000 + rpm);
    expect(heavy).toMatchObject({ points: [], outcome: 'stalls' });
    expect(heavy.notes.join()).toMatch(/^stall/);
    const rising: PrimeMover = {
      kind: 'table',
      points: [
        [100, 50],
        [500, 3000],
      ],
    };
    const light = operatingPoints(rising, (rpm) => rpm / 100);
    expect(light).toMatchObject({ points: [], outcome: 'runs away' });
    expect(light.notes.join()).toMatch(/^runaway/);
  });
});
