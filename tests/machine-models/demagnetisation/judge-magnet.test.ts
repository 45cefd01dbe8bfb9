import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  gradesThatHold,
  KEEP,
  marginOf,
  temperatureLimit,
} from '../../../packages/machine-models/src/demagnetisation/judge-magnet.js';
import type { Magnet } from '../../../packages/machine-models/src/materials/at-temperature.js';
import { remanenceAt } from '../../../packages/machine-models/src/materials/at-temperature.js';
import { MATERIAL_LIBRARY } from '../../../packages/machine-models/src/materials/library.js';

const neodymium: Magnet = {
  kind: 'magnet',
  remanence: 1.3,
  recoil: 1.05,
  remanenceSlope: -0.0012,
  coercivityIntrinsic: 955e3,
  coercivitySlope: -0.006,
  source: 'invented',
};
const ferrite: Magnet = {
  ...neodymium,
  remanence: 0.39,
  recoil: 1.1,
  remanenceSlope: -0.002,
  coercivityIntrinsic: 245e3,
  coercivitySlope: 0.0027,
};

function libraryMagnet(name: string): Magnet {
  const material = MATERIAL_LIBRARY[name];
  if (material?.kind !== 'magnet') throw new Error(name);
  return material;
}

describe('margin', () => {
  test('1 - |H|/HcJ: at 80 degC 432 kA/m of 611.2 kA/m', () => {
    expect(marginOf(neodymium, { celsius: 80, h: -432486.258 })).toBeCloseTo(1 - 432486.258 / 611200, 9);
    expect(marginOf(neodymium, { celsius: 20, h: -955e3 })).toBeCloseTo(0, 12);
    expect(marginOf(neodymium, { celsius: 20, h: 5000 })).toBe(1);
  });

  test('on a curve of its own it counts to where that bends', () => {
    const bent: Magnet = {
      ...neodymium,
      demagnetisation: [
        [0, 1.3],
        [-500e3, 1.3 - 4e-7 * Math.PI * 1.05 * 500e3],
        [-520e3, 0],
      ],
    };
    expect(marginOf(bent, { celsius: 20, h: -250e3 })).toBeCloseTo(0.5, 9);
  });

  test('unknown without coercivity, and away from 20 degC without its slope', () => {
    const { coercivityIntrinsic: _i, coercivitySlope: _s, ...plain } = neodymium;
    const { coercivitySlope: _t, ...fixed } = neodymium;
    expect(marginOf(plain, { celsius: 20, h: -4e5 })).toBeUndefined();
    expect(marginOf(fixed, { celsius: 20, h: -4e5 })).toBeDefined();
    expect(marginOf(fixed, { celsius: 60, h: -4e5 })).toBeUndefined();
  });

  test('heat takes it from NdFeB, cold from ferrite, the field going with the remanence', () => {
    const field = fc.double({ min: 0.05, max: 0.9, noNaN: true });
    const celsius = fc.double({ min: -40, max: 110, noNaN: true });
    fc.assert(
      fc.property(field, celsius, celsius, (share, one, two) => {
        const [cold, hot] = [Math.min(one, two), Math.max(one, two)];
        const at = (magnet: Magnet, t: number): number => {
          const h = (-share * 955e3 * remanenceAt(magnet, t)) / magnet.remanence;
          return marginOf(magnet, { celsius: t, h }) ?? Number.NaN;
        };
        expect(at(neodymium, hot)).toBeLessThanOrEqual(at(neodymium, cold));
        expect(at(ferrite, cold)).toBeLessThanOrEqual(at(ferrite, hot));
      }),
      { seed: 8 },
    );
  });
});

describe('temperature that leaves a tenth', () => {
  test('is where the straight laws meet, whatever the temperature the field is known at', () => {
    // 0.9 HcJ (1 + b u) = H (1 + a u), u = T - 20
    const h = 463e3;
    const u = (0.9 * 955e3 - h) / (0.006 * 0.9 * 955e3 - 0.0012 * h);
    for (const celsius of [20, 60, 90]) {
      const known = -h * (1 - 0.0012 * (celsius - 20));
      const limit = temperatureLimit(neodymium, { celsius, h: known });
      expect(limit?.by).toBe('heat');
      expect(limit?.celsius).toBeCloseTo(20 + u, 1);
    }
  });

  test('ferrite: counted down into the cold', () => {
    const h = 200e3;
    const u = (0.9 * 245e3 - h) / (-0.002 * h - 0.0027 * 0.9 * 245e3);
    expect(temperatureLimit(ferrite, { celsius: 20, h: -h })).toMatchObject({ by: 'cold' });
    expect(temperatureLimit(ferrite, { celsius: 20, h: -h })?.celsius).toBeCloseTo(20 + u, 1);
    expect(temperatureLimit(ferrite, { celsius: 20, h: -50e3 })).toBeUndefined(); // at all temperatures
  });

  test('none where the coercivity or its slope is not known', () => {
    const { coercivitySlope: _s, ...fixed } = neodymium;
    expect(temperatureLimit(fixed, { celsius: 20, h: -4e5 })).toBeUndefined();
  });
});

describe('grades that would hold', () => {
  const demands = [{ celsius: 80, h: -700e3 }];

  test('all keep a tenth, by rising coercivity, from the same family; the first is the least class that does', () => {
    const names = gradesThatHold('invented', neodymium, demands);
    expect(names.length).toBeGreaterThan(1);
    const kept = names.map((name) => {
      const grade = libraryMagnet(name);
      const h = (-700e3 * remanenceAt(grade, 80)) / remanenceAt(neodymium, 80);
      expect(marginOf(grade, { celsius: 80, h })).toBeGreaterThanOrEqual(KEEP);
      return grade.coercivityIntrinsic ?? 0;
    });
    expect([...kept].sort((a, b) => a - b)).toEqual(kept);
    expect(kept[0]).toBeGreaterThan(955e3);
    for (const name of ['N42M', 'N48M']) expect(names).not.toContain(name); // 713 kA/m at 80 degC
  });

  test('ferrite is offered ferrite, SmCo SmCo', () => {
    expect(gradesThatHold('Y30', libraryMagnet('Y30'), [{ celsius: 20, h: -190e3 }])).toEqual(['Y30BH', 'C8']);
    const weak = { ...libraryMagnet('SmCo5-18'), coercivityIntrinsic: 700e3 };
    for (const name of gradesThatHold('weak', weak, [{ celsius: 20, h: -650e3 }])) expect(name).toMatch(/Sm/);
  });

  test('none where none would', () => {
    expect(gradesThatHold('Y30', libraryMagnet('Y30'), [{ celsius: 20, h: -400e3 }])).toEqual([]);
  });
});
