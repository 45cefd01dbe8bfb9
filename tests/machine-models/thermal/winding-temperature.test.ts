import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { heatAt } from '../../../packages/machine-models/src/thermal/heat-balance.js';
import { settleTemperature, windingThermal } from '../../../packages/machine-models/src/thermal/winding-temperature.js';
import { phaseResistance } from '../../../packages/machine-models/src/winding/turn.js';
import { hutHydro, relativeError } from '../../helpers/machines.js';

const hut = hutHydro();
const cooled = (h: number, windingTemperature?: number): Machine => ({
  ...hut,
  operation: { ...hut.operation, cooling: { h } },
  limits: windingTemperature === undefined ? {} : { windingTemperature },
});
const service = { phaseCurrent: 7.75, speedRpm: 420, eddyLoss20: 25 };

describe('hut hydro in service', () => {
  const machine = cooled(30, 130);
  const found = windingThermal(machine, service);

  test('rise x h x area = copper hot + eddies hot', () => {
    const { copper, eddy, total } = found.balance.heat;
    const resistance = phaseResistance(machine.winding, 16, found.winding ?? Number.NaN);
    expect(relativeError(copper, 3 * resistance * 7.75 ** 2)).toBeLessThan(1e-9);
    expect(relativeError(copper + eddy, total)).toBeLessThan(1e-12);
    expect(relativeError(((found.winding ?? 0) - 15) * 30 * found.faces.area, total)).toBeLessThan(1e-9);
  });

  test('20 to 27 K at h = 30 over 0.142 m2; its middle a few more', () => {
    const rise = (found.winding ?? 0) - 15;
    expect(rise).toBeGreaterThan(20);
    expect(rise).toBeLessThan(27);
    expect(found.middle).toBeGreaterThan((found.winding ?? 0) + 2);
    expect(found.middle).toBeLessThan((found.winding ?? 0) + 10);
    expect(found.warnings).toEqual([]);
  });

  test('the continuous current brings it to its limit; more of it is borne the shorter', () => {
    const there = windingThermal(machine, { ...service, phaseCurrent: found.continuousCurrent });
    expect(there.winding).toBeCloseTo(130, 6);
    const times = found.overloads.map(({ fromCold }) => fromCold);
    expect(times).toEqual([...times].sort((a, b) => b - a));
    for (const { current, times: over, fromCold, fromService } of found.overloads) {
      expect(relativeError(current, over * found.continuousCurrent)).toBeLessThan(1e-12);
      expect(fromService).toBeLessThan(fromCold);
      const heat = heatAt({ copper20: 3 * phaseResistance(machine.winding, 16, 20) * current ** 2, eddy20: 25 }, 15);
      expect(fromCold).toBeGreaterThan((found.mass * 115) / (2 * heat));
    }
  });

  test('circulating currents heat as any others', () => {
    const more = windingThermal(machine, { ...service, circulationLoss20: 10 });
    expect(more.winding).toBeGreaterThan(found.winding ?? Number.NaN);
    expect(more.continuousCurrent).toBeLessThan(found.continuousCurrent);
  });

  test('cooled by its own discs unless told otherwise', () => {
    const own = windingThermal(hut, service);
    expect(own.cooling).toMatch(/disc that turns in still air/);
    expect(windingThermal(hut, { ...service, speedRpm: 840 }).winding).toBeLessThan(own.winding ?? Number.NaN);
  });
});

describe('what is told', () => {
  const texts = (machine: Machine, changed: Partial<typeof service>): string =>
    windingThermal(machine, { ...service, ...changed })
      .warnings.map(({ text }) => text)
      .join('\n');

  test('a limit that is passed, by the faces or in the middle alone', () => {
    expect(texts(cooled(30), {})).toBe('');
    expect(texts(cooled(30, 60), { phaseCurrent: 16 })).toMatch(/above its limit of 60 degC/);
    expect(texts(cooled(30, 40), {})).toMatch(/its middle to about/);
  });

  test('a winding that burns, and one that bears no current', () => {
    const burning = windingThermal(cooled(10, 130), { ...service, phaseCurrent: 40 });
    expect(burning.winding).toBeUndefined();
    expect(burning.overloads.every(({ fromService }) => fromService === 0)).toBe(true);
    expect(texts(cooled(10, 130), { phaseCurrent: 40 })).toMatch(/burns/);
    const none = windingThermal(cooled(10, 130), { ...service, eddyLoss20: 5000 });
    expect([none.continuousCurrent, none.overloads.length]).toEqual([0, 0]);
    expect(texts(cooled(10, 130), { eddyLoss20: 5000 })).toMatch(/no current is borne/);
  });
});

describe('a load that depends on the temperature', () => {
  test('comes to rest where the balance gives back the temperature it was asked at', () => {
    // A bridge on a stiff voltage: the current falls as the copper warms.
    const machine = cooled(15, 130);
    const next = (temperature: number): number | undefined => {
      const resistance = phaseResistance(machine.winding, 16, temperature);
      return windingThermal(machine, { ...service, phaseCurrent: 4.5 / resistance }).winding;
    };
    const { temperature, settled } = settleTemperature(20, next);
    expect(settled).toBe(true);
    expect(Math.abs((temperature ?? 0) - (next(temperature ?? 0) ?? 0))).toBeLessThan(0.01);
  });

  test('runaway is handed on, and what swings without end is told', () => {
    expect(settleTemperature(20, () => undefined)).toEqual({ temperature: undefined, settled: true });
    expect(settleTemperature(20, (temperature) => 100 - temperature).settled).toBe(false);
  });
});
