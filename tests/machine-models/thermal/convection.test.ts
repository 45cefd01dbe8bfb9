import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { forcedPlate, naturalPlate, rotatingDisc } from '../../../packages/machine-models/src/thermal/convection.js';
import {
  describeCooling,
  windingFaces,
  windingTransfer,
} from '../../../packages/machine-models/src/thermal/winding-cooling.js';
import { hutHydro, overlappedHydro, relativeError } from '../../helpers/machines.js';

const rpm = (speed: number): number => (2 * Math.PI * speed) / 60;

describe('worked values [CALC, I]', () => {
  test('disc of 0.15 m in still air: 13.3129 at 300 rpm, laminar; 76.947 at 3000 rpm, mixed', () => {
    expect(relativeError(rotatingDisc(0.15, rpm(300)), 13.3129)).toBeLessThan(1e-5);
    expect(relativeError(rotatingDisc(0.15, rpm(3000)), 76.947)).toBeLessThan(1e-5);
  });

  test('plate: 27.5965 for 5 m/s over 0.1 m, 39.0273 for 10 m/s, 63.650 for 30 m/s over 0.5 m', () => {
    expect(relativeError(forcedPlate(0.1, 5), 27.5965)).toBeLessThan(1e-5);
    expect(relativeError(forcedPlate(0.1, 10), 39.0273)).toBeLessThan(1e-5);
    expect(relativeError(forcedPlate(0.5, 30), 63.65)).toBeLessThan(1e-5);
  });

  test('natural convection from an upright plate of 0.1 m, 50 K warmer: 6 to 7 (1.42 (rise/L)^0.25 by McAdams)', () => {
    const simple = 1.42 * (50 / 0.1) ** 0.25;
    expect(relativeError(naturalPlate(0.1, 50), simple)).toBeLessThan(0.1);
  });
});

describe('correlations', () => {
  test('no jump where laminar gives way: disc within the step of speed, plate within a thousandth', () => {
    let before = rotatingDisc(0.15, 100);
    for (let omega = 101; omega < 400; omega++) {
      const now = rotatingDisc(0.15, omega);
      expect(now).toBeGreaterThan(before);
      expect(now / before).toBeLessThan(1.02);
      before = now;
    }
    const speed = (5e5 * 1.589e-5) / 0.5;
    expect(relativeError(forcedPlate(0.5, speed * 1.000001), forcedPlate(0.5, speed))).toBeLessThan(2e-3);
  });

  test('the disc gives way near Re = 2.4e5, where transition is seen', () => {
    const laminar = (re: number): boolean => {
      const omega = (re * 1.589e-5) / 0.15 ** 2;
      return relativeError(rotatingDisc(0.15, omega), (0.36 * Math.sqrt(re) * 0.0263) / 0.15) < 1e-9;
    };
    expect(laminar(2.1e5)).toBe(true);
    expect(laminar(2.4e5)).toBe(false);
  });

  test('nothing moves, nothing is carried; a plate no warmer than the air only conducts', () => {
    expect(rotatingDisc(0.15, 0)).toBe(0);
    expect(forcedPlate(0.1, 0)).toBe(0);
    expect(relativeError(naturalPlate(0.1, 0), (0.68 * 0.0263) / 0.1)).toBeLessThan(1e-12);
    expect(naturalPlate(0.1, -20)).toBe(naturalPlate(0.1, 0));
  });

  test('all grow with what drives them', () => {
    const positive = fc.double({ min: 0.1, max: 300, noNaN: true });
    fc.assert(
      fc.property(positive, fc.double({ min: 1.01, max: 4, noNaN: true }), (drive, times) => {
        expect(rotatingDisc(0.2, drive * times)).toBeGreaterThan(rotatingDisc(0.2, drive));
        expect(forcedPlate(0.2, drive * times)).toBeGreaterThan(forcedPlate(0.2, drive));
        expect(naturalPlate(0.2, drive * times)).toBeGreaterThan(naturalPlate(0.2, drive));
      }),
      { seed: 7, numRuns: 200 },
    );
  });
});

describe("the winding's cooling", () => {
  const faces = windingFaces(hutHydro().winding);

  test('both faces of hut hydro: 0.142 m2 (practice, 6.2)', () => {
    expect(relativeError(faces.area, 0.142)).toBeLessThan(0.005);
    expect(faces.innerRadius).toBeCloseTo(0.084, 9);
    expect(faces.outerRadius).toBeCloseTo(0.172, 9);
  });

  test('overlapped: one leg width beyond the ends of the legs', () => {
    const { innerRadius, outerRadius } = windingFaces(overlappedHydro().winding);
    expect([innerRadius, outerRadius]).toEqual([0.1005 - 0.013, 0.1555 + 0.013]);
  });

  test('as given; else the greatest of turning discs, blown air and natural convection', () => {
    expect(windingTransfer(faces, rpm(420), { h: 30 })(25)).toEqual({ h: 30, kind: 'given' });
    const stirred = windingTransfer(faces, rpm(420), undefined)(25);
    expect(stirred.kind).toBe('rotating disc');
    expect(stirred.h).toBe(rotatingDisc(faces.outerRadius, rpm(420)));
    expect(windingTransfer(faces, rpm(420), { airSpeed: 0 })(25)).toEqual(stirred);
    expect(windingTransfer(faces, rpm(420), { airSpeed: 10 })(25).kind).toBe('forced air');
    const still = windingTransfer(faces, 0, undefined);
    expect(still(25).kind).toBe('natural');
    expect(still(50).h).toBeGreaterThan(still(25).h);
    expect(windingTransfer(faces, rpm(-420), undefined)(25)).toEqual(stirred);
  });

  test('is said in words with its band', () => {
    expect(describeCooling({ h: 30, kind: 'given' }, faces)).toBe(
      '30.0 W/(m2 K) as given, from both faces of the ring 84.0 to 172.0 mm, 0.1415 m2',
    );
    for (const kind of ['natural', 'rotating disc', 'forced air'] as const) {
      expect(describeCooling({ h: 15.75, kind }, faces)).toMatch(/good to about 30 %/);
    }
  });
});
