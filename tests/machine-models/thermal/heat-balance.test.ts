import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  HOTTEST,
  heatAt,
  heatGivenOff,
  insideRise,
  resistanceRatio,
  thermalBalance,
} from '../../../packages/machine-models/src/thermal/heat-balance.js';
import {
  continuousCurrent,
  temperatureLimit,
  thermalMass,
  timeToReach,
} from '../../../packages/machine-models/src/thermal/limits.js';
import { windingFaces, windingTransfer } from '../../../packages/machine-models/src/thermal/winding-cooling.js';
import { hutHydro, relativeError } from '../../helpers/machines.js';

const SLOPE = 0.00393;
const sinkOf = (h: number, area: number, ambient: number) => ({
  transfer: () => ({ h, kind: 'given' }) as const,
  area,
  ambient,
});

test('hut hydro: 97 W of copper and 16 W of eddies, hot, on 0.142 m2 at 30 W/(m2 K): 27 K (practice, 6.2)', () => {
  const hot = resistanceRatio(41.5);
  const heat = { copper20: 97 / hot, eddy20: 16 * hot };
  const { winding, heat: found, resistance } = thermalBalance(heat, sinkOf(30, 0.142, 15));
  expect(Math.abs((winding ?? 0) - 15 - 26.5)).toBeLessThan(0.1);
  expect(found.copper).toBeCloseTo(97, 1);
  expect(found.eddy).toBeCloseTo(16, 1);
  expect(relativeError(resistance, 1 / (30 * 0.142))).toBeLessThan(1e-12);
});

describe('balance of heat', () => {
  const positive = (max: number) => fc.double({ min: 0.01, max, noNaN: true });

  test('what arises is given off, to rounding, by any of the ways to cool', () => {
    const faces = windingFaces(hutHydro().winding);
    const cooling = fc.oneof(
      fc.record({ airSpeed: fc.double({ min: 0, max: 20, noNaN: true }) }),
      fc.record({ h: fc.double({ min: 5, max: 200, noNaN: true }) }),
      fc.constant(undefined),
    );
    fc.assert(
      fc.property(positive(300), positive(100), positive(50), cooling, (copper20, eddy20, constant, how) => {
        const sink = { transfer: windingTransfer(faces, 40, how), area: faces.area, ambient: 15 };
        const heat = { copper20, eddy20, constant };
        const { winding, heat: found } = thermalBalance(heat, sink);
        if (winding === undefined) return;
        expect(relativeError(heatGivenOff(sink, winding), found.total)).toBeLessThan(1e-9);
        expect(relativeError(found.copper + found.eddy + constant, heatAt(heat, winding))).toBeLessThan(1e-12);
      }),
      { seed: 11, numRuns: 200 },
    );
  });

  test('copper alone at constant h: rise = P(ambient)/(h A - slope P20)', () => {
    const [p20, h, area, ambient] = [200, 20, 0.15, 40];
    const expected = (p20 * (1 + SLOPE * (ambient - 20))) / (h * area - SLOPE * p20);
    const { winding } = thermalBalance({ copper20: p20, eddy20: 0 }, sinkOf(h, area, ambient));
    expect(relativeError((winding ?? 0) - ambient, expected)).toBeLessThan(1e-9);
  });

  test('runs away where each kelvin brings more than it carries off, and not before', () => {
    const sink = sinkOf(10, 0.1, 20);
    const limit = 1 / SLOPE; // h A = slope P20
    expect(thermalBalance({ copper20: 1.01 * limit, eddy20: 0 }, sink).winding).toBeUndefined();
    const near = (limit * (HOTTEST - 20)) / (HOTTEST - 20 + 1 / SLOPE); // rise = P20/(h A - slope P20) = HOTTEST - 20
    expect(thermalBalance({ copper20: 0.999 * near, eddy20: 0 }, sink).winding).toBeLessThan(HOTTEST);
  });

  test('more heat is hotter, better cooling colder; eddies fall as the copper warms', () => {
    fc.assert(
      fc.property(
        positive(150),
        positive(60),
        fc.double({ min: 1.01, max: 1.5, noNaN: true }),
        (copper, eddy, times) => {
          const at = (c: number, e: number, h: number): number =>
            thermalBalance({ copper20: c, eddy20: e }, sinkOf(h, 0.14, 15)).winding ?? Number.POSITIVE_INFINITY;
          const base = at(copper, eddy, 25);
          expect(at(copper * times, eddy, 25)).toBeGreaterThan(base);
          expect(at(copper, eddy * times, 25)).toBeGreaterThan(base);
          expect(at(copper, eddy, 25 * times)).toBeLessThan(base);
        },
      ),
      { seed: 13, numRuns: 100 },
    );
    const { heat } = thermalBalance({ copper20: 0, eddy20: 50 }, sinkOf(10, 0.1, 20));
    expect(heat.eddy).toBeLessThan(50);
  });

  test('no heat: as warm as the air', () => {
    expect(thermalBalance({ copper20: 0, eddy20: 0 }, sinkOf(10, 0.1, 33)).winding).toBeCloseTo(33, 9);
  });

  test('the middle of an evenly heated plate: q t^2/(8 k) above its faces', () => {
    const [area, thickness, heat] = [0.14, 0.015, 100];
    const q = heat / ((area / 2) * thickness);
    expect(relativeError(insideRise(heat, thickness, area), (q * thickness ** 2) / (8 * 0.5))).toBeLessThan(1e-12);
  });
});

describe('continuous current', () => {
  test('brings the winding just to the limit', () => {
    const faces = windingFaces(hutHydro().winding);
    for (const cooling of [undefined, { h: 30 }, { airSpeed: 4 }]) {
      const sink = { transfer: windingTransfer(faces, 44, cooling), area: faces.area, ambient: 15 };
      const current = continuousCurrent(130, { copper20: 0, eddy20: 25 }, sink, { phases: 3, resistance20: 0.37 });
      const { winding } = thermalBalance({ copper20: 3 * 0.37 * current ** 2, eddy20: 25 }, sink);
      expect(winding).toBeCloseTo(130, 6);
    }
  });

  test('is nothing where eddies alone bring more than that, or the air is too hot', () => {
    const copper = { phases: 3, resistance20: 0.4 };
    expect(continuousCurrent(130, { copper20: 0, eddy20: 1e4 }, sinkOf(20, 0.1, 20), copper)).toBe(0);
    expect(continuousCurrent(60, { copper20: 0, eddy20: 0 }, sinkOf(20, 0.1, 70), copper)).toBe(0);
  });

  test('goes with the root of the cooling without other losses', () => {
    const at = (h: number): number =>
      continuousCurrent(130, { copper20: 0, eddy20: 0 }, sinkOf(h, 0.1, 20), { phases: 3, resistance20: 0.4 });
    expect(relativeError(at(40), 2 * at(10))).toBeLessThan(1e-12);
  });

  test("the machine's limit is taken, else class B, which is told", () => {
    expect(temperatureLimit({ windingTemperature: 155 })).toEqual({ temperature: 155 });
    expect(temperatureLimit({})).toMatchObject({ temperature: 130 });
    expect(temperatureLimit({}).assumed).toMatch(/limits.winding_temperature/);
  });
});

describe('time to a limit', () => {
  const [mass, h, area, ambient] = [1500, 20, 0.15, 20];

  test('constant heat: the exponential of first order, rise (1 - exp(-t h A/C))', () => {
    const heat = { copper20: 0, eddy20: 0, constant: 600 };
    const rise = 600 / (h * area);
    const expected = (-mass / (h * area)) * Math.log(1 - 80 / rise);
    expect(relativeError(timeToReach(100, ambient, heat, sinkOf(h, area, ambient), mass), expected)).toBeLessThan(1e-9);
  });

  test('copper: the same with h A less slope x P20', () => {
    const p20 = 500;
    const s = h * area - SLOPE * p20;
    const start = p20 * (1 + SLOPE * (ambient - 20));
    const expected = (-mass / s) * Math.log(1 - (80 * s) / start);
    const heat = { copper20: p20, eddy20: 0 };
    expect(relativeError(timeToReach(100, ambient, heat, sinkOf(h, area, ambient), mass), expected)).toBeLessThan(1e-9);
  });

  test('without cooling: heat capacity x rise over the mean of the heat', () => {
    const heat = { copper20: 0, eddy20: 0, constant: 300 };
    expect(relativeError(timeToReach(90, 20, heat, sinkOf(0, 0.1, 20), mass), (mass * 70) / 300)).toBeLessThan(1e-9);
  });

  test('is that of small steps in time, eddies and natural convection and all', () => {
    const sink = { transfer: windingTransfer(windingFaces(hutHydro().winding), 0, undefined), area: 0.14, ambient: 15 };
    const heat = { copper20: 250, eddy20: 30 };
    let [temperature, time] = [15, 0];
    const step = 0.02;
    const slope = (t: number): number => (heatAt(heat, t) - heatGivenOff(sink, t)) / mass;
    while (temperature < 120) {
      const middle = temperature + (step / 2) * slope(temperature);
      temperature += step * slope(middle);
      time += step;
    }
    expect(relativeError(timeToReach(120, 15, heat, sink, mass), time)).toBeLessThan(1e-3);
  });

  test('never, where the balance lies below; at once, where it is there already', () => {
    const heat = { copper20: 50, eddy20: 0 };
    expect(timeToReach(130, 20, heat, sinkOf(h, area, ambient), mass)).toBe(Number.POSITIVE_INFINITY);
    expect(timeToReach(130, 131, heat, sinkOf(h, area, ambient), mass)).toBe(0);
  });

  test('shorter at more current, longer with more mass', () => {
    const at = (p: number, m: number): number =>
      timeToReach(130, 20, { copper20: p, eddy20: 0 }, sinkOf(h, area, ambient), m);
    expect(at(800, mass)).toBeLessThan(at(600, mass));
    expect(relativeError(at(600, 2 * mass), 2 * at(600, mass))).toBeLessThan(1e-12);
    expect(thermalMass(2, 0)).toBe(770);
    expect(thermalMass(2, 1e-3)).toBeGreaterThan(1500);
  });
});
