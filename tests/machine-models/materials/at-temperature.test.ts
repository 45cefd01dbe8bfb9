import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { buildDemagnetisationCurve } from '../../../packages/fem-core/src/materials/demagnetisation.js';
import {
  coercivityAt,
  demagnetisationAt,
  energyProductAt,
  kneeAt,
  lostAt,
  type Magnet,
  normalCoercivityAt,
  remanenceAt,
  temperatureWarning,
} from '../../../packages/machine-models/src/materials/at-temperature.js';
import { MATERIAL_LIBRARY } from '../../../packages/machine-models/src/materials/library.js';

const MU0 = 4e-7 * Math.PI;

function grade(name: string): Magnet {
  const material = MATERIAL_LIBRARY[name];
  if (material?.kind !== 'magnet') throw new Error(`${name} is no magnet`);
  return material;
}

const magnets = Object.values(MATERIAL_LIBRARY).filter((material) => material.kind === 'magnet');
/** A grade with -0.12 %/K and -0.6 %/K. */
const n42: Magnet = { ...grade('N42'), remanence: 1.3 };
/** With a curve that bends at -4e5 A/m, B = 0.67 T. */
const bent: Magnet = {
  kind: 'magnet',
  remanence: 1.2,
  recoil: 1.05,
  demagnetisation: [
    [0, 1.2],
    [-4e5, 0.67],
    [-4.2e5, 0.2],
    [-4.3e5, -0.5],
  ],
  remanenceSlope: -0.001,
  coercivitySlope: -0.005,
  source: 'a test',
};

test('at 80 degC 1.30 T and 955 kA/m are 1.2064 T and 611.2 kA/m (-0.12 and -0.6 %/K)', () => {
  expect(remanenceAt(n42, 80)).toBeCloseTo(1.2064, 12);
  expect(coercivityAt(n42, 80)).toBeCloseTo(611200, 6);
});

test('at 20 degC all magnets are as they are listed', () => {
  for (const magnet of magnets) {
    expect(remanenceAt(magnet, 20)).toBe(magnet.remanence);
    expect(coercivityAt(magnet, 20)).toBe(magnet.coercivityIntrinsic);
  }
});

test('the working point of a circuit, 432 kA/m, bears 80 degC but not 120 degC', () => {
  const margin = (celsius: number): number => 1 - 432486.258 / -(kneeAt(n42, celsius)?.h ?? 0);
  expect(margin(80)).toBeCloseTo(1 - 432486.258 / 611200, 9);
  expect(margin(120)).toBeLessThan(0);
});

test('the knee of a straight grade lies on the recoil line at the intrinsic coercivity, where the polarisation is all but whole', () => {
  fc.assert(
    fc.property(fc.constantFrom(...magnets), fc.double({ min: -60, max: 150, noNaN: true }), (magnet, celsius) => {
      fc.pre(lostAt(magnet, celsius) === undefined);
      const knee = kneeAt(magnet, celsius);
      const [remanence, coercivity] = [remanenceAt(magnet, celsius), coercivityAt(magnet, celsius) ?? Number.NaN];
      expect(knee?.h).toBe(-coercivity);
      expect(knee?.b).toBeCloseTo(remanence - MU0 * magnet.recoil * coercivity, 12);
      // J = B - mu0 H has lost no more than the recoil line takes.
      expect((knee?.b ?? 0) + MU0 * coercivity).toBeCloseTo(remanence - MU0 * (magnet.recoil - 1) * coercivity, 12);
    }),
    { seed: 4 },
  );
});

test('NdFeB and samarium cobalt bear less when hot, ferrite when cold', () => {
  for (const [name, worse] of [
    ['N42', 80],
    ['SmCo5-18', 80],
    ['Y30', -20],
  ] as const) {
    expect(kneeAt(grade(name), worse)?.h ?? 0).toBeGreaterThan(kneeAt(grade(name), 20)?.h ?? 0);
  }
});

test('where the coercivity is unknown there is no knee, and away from 20 degC none where its slope is unknown', () => {
  const { coercivitySlope: _slope, ...slopeless } = n42;
  const { coercivityIntrinsic: _coercivity, ...soft } = n42;
  expect(coercivityAt(slopeless, 20)).toBe(955e3);
  expect(kneeAt(slopeless, 20)).toBeDefined();
  expect(coercivityAt(slopeless, 60)).toBeUndefined();
  expect(kneeAt(slopeless, 60)).toBeUndefined();
  expect(kneeAt(soft, 20)).toBeUndefined();
  expect(demagnetisationAt(soft, 20).at(-1)?.[1]).toBeCloseTo(0, 12);
});

describe('a magnet with a curve of its own', () => {
  test('at 20 degC has that curve', () => {
    demagnetisationAt(bent, 20).forEach(([h, b], i) => {
      expect(h).toBeCloseTo(bent.demagnetisation?.[i][0] ?? Number.NaN, 6);
      expect(b).toBeCloseTo(bent.demagnetisation?.[i][1] ?? Number.NaN, 12);
    });
  });

  test('has its knee where the curve turns steep', () => {
    expect(kneeAt(bent, 20)).toEqual({ h: -4e5, b: expect.closeTo(0.67, 12) });
  });

  test('away from 20 degC its polarisation goes with the remanence, its field with the coercivity', () => {
    const knee = kneeAt(bent, 100) ?? { h: 0, b: 0 };
    expect(knee.h).toBeCloseTo(-4e5 * (1 - 0.005 * 80), 6);
    expect(knee.b - MU0 * knee.h).toBeCloseTo((0.67 + MU0 * 4e5) * (1 - 0.001 * 80), 12);
  });

  test('is a curve that the solver takes, at any temperature that leaves a magnet', () => {
    fc.assert(
      fc.property(fc.double({ min: -200, max: 200, noNaN: true }), (celsius) => {
        fc.pre(lostAt(bent, celsius) === undefined);
        buildDemagnetisationCurve(demagnetisationAt(bent, celsius));
      }),
      { seed: 5 },
    );
  });

  test('that ends before it bends has neither knee nor known coercivity', () => {
    const short: Magnet = {
      ...bent,
      demagnetisation: [
        [-2e5, 0.93],
        [0, 1.2],
      ],
    };
    expect(kneeAt(short, 20)).toBeUndefined();
    expect(normalCoercivityAt(short, 20)).toBeUndefined();
  });
});

test('B is 0 at Br / (mu0 recoil), or where the loop breaks down before', () => {
  const hard = grade('N42SH');
  expect(normalCoercivityAt(hard, 20)).toBeCloseTo(hard.remanence / (MU0 * hard.recoil), 6);
  expect(normalCoercivityAt(n42, 20)).toBe(955e3);
  expect(normalCoercivityAt(bent, 20)).toBeCloseTo(4.2e5 + (1e4 * 0.2) / 0.7, 6);
});

test('the energy product is Br^2 / (4 mu0 recoil) while the middle of the line lies above the knee, less after', () => {
  const straight = (celsius: number): number => remanenceAt(n42, celsius) ** 2 / (4 * MU0 * n42.recoil);
  expect(energyProductAt(n42, 20)).toBeCloseTo(straight(20), 4);
  expect(energyProductAt({ ...n42, remanence: 1.3 }, 20)).toBeCloseTo(320205, 0);
  const knee = kneeAt(n42, 130) ?? { h: 0, b: 0 };
  expect(energyProductAt(n42, 130)).toBeCloseTo(-knee.h * knee.b, 4);
  expect(energyProductAt(n42, 130)).toBeLessThan(straight(130));
});

test('on any curve the energy product is the largest of -B H, by brute force', () => {
  for (const magnet of [bent, n42, grade('C8')]) {
    const rows = demagnetisationAt(magnet, 20);
    let most = 0;
    for (let i = 1; i < rows.length; i++) {
      for (let k = 0; k <= 1000; k++) {
        const at = (column: 0 | 1): number =>
          rows[i - 1][column] + (k / 1000) * (rows[i][column] - rows[i - 1][column]);
        most = Math.max(most, -at(0) * at(1));
      }
    }
    expect(energyProductAt(magnet, 20) / most - 1).toBeGreaterThanOrEqual(0);
    expect(energyProductAt(magnet, 20) / most - 1).toBeLessThan(1e-5);
  }
});

test('what a temperature leaves nothing of is told', () => {
  expect(lostAt(n42, 20 + 1 / 0.006 + 1)).toBe('coercivity');
  expect(lostAt(n42, 20 + 1 / 0.0012 + 1)).toBe('remanence');
  expect(lostAt(n42, 180)).toBeUndefined();
  expect(lostAt(grade('Y30'), 20 - 1 / 0.0027 - 1)).toBe('coercivity');
});

test('a warning above the grade’s usual limit, and below freezing with ferrite alone', () => {
  expect(temperatureWarning(n42, 80)).toBeUndefined();
  expect(temperatureWarning(n42, 81)).toContain('above the usual limit of 80 degC');
  expect(temperatureWarning(n42, -40)).toBeUndefined();
  expect(temperatureWarning(grade('N42SH'), 150)).toBeUndefined();
  expect(temperatureWarning(grade('Y30'), 20)).toBeUndefined();
  expect(temperatureWarning(grade('Y30'), -20)).toContain('89 % of the coercivity is left');
});
