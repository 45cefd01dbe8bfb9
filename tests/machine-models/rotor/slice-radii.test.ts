import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  autoRadii,
  FINEST_LEVEL,
  polynomialRadii,
  roundRadii,
  type SliceRadius,
  simpsonRadii,
} from '../../../packages/machine-models/src/rotor/slice-radii.js';
import { faultsOf, readHut } from '../input/hut.js';

const INNER = 0.1005;
const OUTER = 0.1555;

/** Integral of x^power over the magnets, x running from -1 at their inner to 1 at their outer radius. */
function exactMoment(power: number): number {
  return power % 2 === 1 ? 0 : (OUTER - INNER) / (power + 1);
}

function moment(slices: readonly SliceRadius[], power: number): number {
  const x = (radius: number) => (2 * radius - INNER - OUTER) / (OUTER - INNER);
  return slices.reduce((sum, { radius, weight }) => sum + weight * x(radius) ** power, 0);
}

test.each([3, 5, 7, 101])("Simpson's rule on %d radii integrates cubics exactly", (count) => {
  const slices = simpsonRadii(INNER, OUTER, count);
  expect(slices).toHaveLength(count);
  expect([slices[0].radius, slices.at(-1)?.radius]).toEqual([INNER, OUTER]);
  for (const power of [0, 1, 2, 3]) expect(moment(slices, power)).toBeCloseTo(exactMoment(power), 14);
});

test('its error on a smooth function falls with the fourth power of the step', () => {
  const error = (count: number) => {
    const sum = simpsonRadii(INNER, OUTER, count).reduce(
      (total, { radius, weight }) => total + weight * Math.exp(40 * radius),
      0,
    );
    return Math.abs(sum - (Math.exp(40 * OUTER) - Math.exp(40 * INNER)) / 40);
  };
  expect(Math.log2(error(5) / error(9))).toBeCloseTo(4, 1);
});

test('one radius stands for all: the mean one of a count, the given one of a list', () => {
  expect(simpsonRadii(0.1, 0.15, 1)).toEqual([{ radius: 0.125, weight: expect.closeTo(0.05, 15) }]);
  expect(polynomialRadii(0.1, 0.15, [0.11])).toEqual([{ radius: 0.11, weight: expect.closeTo(0.05, 15) }]);
});

test('the weights of any n radii integrate polynomials below degree n exactly', () => {
  // radii apart by 1/60 of the length or more: what a list is for
  const places = fc.uniqueArray(fc.integer({ min: 0, max: 12 }), { minLength: 1, maxLength: 6 });
  fc.assert(
    fc.property(places, (steps) => {
      const radii = [...steps].sort((a, b) => a - b).map((step) => INNER + ((OUTER - INNER) * step) / 12);
      const slices = polynomialRadii(INNER, OUTER, radii);
      const size = slices.reduce((sum, { weight }) => sum + Math.abs(weight), 0);
      for (let power = 0; power < radii.length; power++) {
        expect(Math.abs(moment(slices, power) - exactMoment(power))).toBeLessThan(1e-11 * size);
      }
    }),
  );
});

test('inner, mean and outer radius as a list get the weights of Simpson', () => {
  const weights = (slices: readonly SliceRadius[]) => slices.map(({ weight }) => expect.closeTo(weight, 14));
  const list = polynomialRadii(INNER, OUTER, [INNER, 0.128, OUTER]);
  expect(list.map(({ weight }) => weight)).toEqual(weights(simpsonRadii(INNER, OUTER, 3)));
});

test('fifteen Gauss points get the weights of Gauss: exact up to degree 29', () => {
  // largest three of the fifteen positive-half abscissas and the centre are enough to tell; Abramowitz and Stegun, table 25.4
  const half = [
    0.201194093997435, 0.394151347077563, 0.570972172608539, 0.72441773136017, 0.848206583410427, 0.937273392400706,
    0.987992518020485,
  ];
  const x = [...half.map((value) => -value).reverse(), 0, ...half];
  const slices = polynomialRadii(-1, 1, x);
  expect(slices[7].weight).toBeCloseTo(0.202578241925561, 12);
  expect(slices[14].weight).toBeCloseTo(0.030753241996117, 12);
});

describe('Gauss points in the angle u of r = mean + (D/2) sin u', () => {
  const D = 0.036;
  const over = (count: number, f: (radius: number) => number): number =>
    roundRadii(0.128, D, count).reduce((sum, { radius, weight }) => sum + weight * f(radius), 0);
  const width = (radius: number): number => 2 * Math.sqrt(Math.max(0, (D / 2) ** 2 - (radius - 0.128) ** 2));

  test("the area of the magnet, and what vanishes like its width, faster than any power of their number's inverse", () => {
    const off = [3, 5, 7, 9].map((count) => Math.abs(over(count, width) / ((Math.PI / 4) * D ** 2) - 1));
    expect(off[0]).toBeLessThan(3e-2);
    expect(off[1]).toBeLessThan(5e-5);
    expect(off[2]).toBeLessThan(2e-8);
    expect(off[3]).toBeLessThan(2e-12);
  });

  test('smooth functions of the radius likewise: length and moment', () => {
    expect(Math.abs(over(5, () => 1) / D - 1)).toBeLessThan(1e-6);
    expect(Math.abs(over(5, (radius) => radius) / (0.128 * D) - 1)).toBeLessThan(1e-6);
  });

  test('evenly spaced radii by Simpson are percents off where there are few', () => {
    const simpson = (count: number): number =>
      simpsonRadii(0.128 - D / 2, 0.128 + D / 2, count).reduce(
        (sum, { radius, weight }) => sum + weight * width(radius),
        0,
      ) /
      ((Math.PI / 4) * D ** 2);
    expect(simpson(3)).toBeLessThan(0.9);
    expect(simpson(15)).toBeLessThan(0.995);
  });

  test('points and weights are those of the tables', () => {
    // Abramowitz and Stegun, table 25.4, n = 5: abscissas 0, 0.538469310105683, 0.906179845938664
    const x = roundRadii(0, 2, 5).map(({ radius }) => Math.asin(radius) / (Math.PI / 2));
    const table = [-0.906179845938664, -0.538469310105683, 0, 0.538469310105683, 0.906179845938664];
    x.forEach((value, i) => {
      expect(value).toBeCloseTo(table[i], 13);
    });
  });
});

describe('radii: auto', () => {
  const block = { shape: 'block', width: 0.028, length: 0.055, meanRadius: 0.128 } as const;

  test('of blocks and sectors each level takes up the radii of the one before, to the bit', () => {
    for (let level = 0; level < FINEST_LEVEL; level++) {
      const finer = autoRadii(block, level + 1).map(({ radius }) => radius);
      for (const { radius } of autoRadii(block, level)) expect(finer).toContain(radius);
      expect(finer).toHaveLength(2 ** (level + 2) + 1);
    }
    expect(autoRadii(block, 0)).toEqual(simpsonRadii(0.1005, 0.1555, 3));
  });

  test('round magnets get points in the angle, none at the ends', () => {
    const round = { shape: 'round', diameter: 0.03, meanRadius: 0.052 } as const;
    expect(autoRadii(round, 0)).toEqual(roundRadii(0.052, 0.03, 5));
    for (const { radius } of autoRadii(round, 2)) expect(Math.abs(radius - 0.052)).toBeLessThan(0.015);
  });
});

describe('model.radii', () => {
  const radiiOf = (setting: string) =>
    readHut(`model.radii=${setting}`).machine.model.slices.map(({ radius }) => radius);

  test('auto begins with the first choice', () => {
    const { machine, warnings } = readHut('model.radii=auto');
    expect(machine.model.slices).toEqual(simpsonRadii(INNER, OUTER, 3));
    expect(machine.model.auto).toBe(true);
    expect(warnings.map(({ key }) => key)).not.toContain('model.radii');
    expect(readHut('model.radii=3').machine.model.auto).toBe(false);
  });

  test('evenly spaced radii are warned of where magnets are round', () => {
    const round = 'rotor.magnets={shape: round, diameter: 36 mm, thickness: 12 mm, mean_radius: 128 mm, material: N42}';
    const keys = (...settings: string[]) => readHut(round, ...settings).warnings.map(({ key }) => key);
    expect(keys('model.radii=7')).toContain('model.radii');
    expect(keys('model.radii=auto')).not.toContain('model.radii');
  });

  test('a count or a list', () => {
    expect(radiiOf('1')).toEqual([0.128]);
    expect(radiiOf('5')).toHaveLength(5);
    expect(radiiOf('[105 mm, 128 mm, 5.9 in]')).toEqual([0.105, 0.128, expect.closeTo(0.14986, 12)]);
  });

  test.each([
    ['4', "model.radii: Simpson's rule needs an odd number, got 4; give 3 or 5, or a list of radii"],
    ['0', 'model.radii: must be at least 1, got 0'],
    ['103', 'model.radii: must be at most 101, got 103'],
    ['2.5', 'model.radii: must be a whole number, got 2.5'],
    ['three', 'model.radii: must start with a number, got three'],
    ['[]', 'model.radii: must have 1 to 15 entries, has 0'],
    ['[128]', 'model.radii.0: needs a unit, got 128'],
    ['[100 mm, 128 mm]', 'model.radii.0: the magnets reach from 100.5 mm to 155.5 mm, got 100 mm'],
    ['[128 mm, 110 mm]', 'model.radii.1: must be more than the radius before, 128 mm, got 110 mm'],
    ['[110 mm, 110 mm]', 'model.radii.1: must be more than the radius before'],
  ])('%s', (setting, message) => {
    expect(faultsOf(() => readHut(`model.radii=${setting}`)).join('\n')).toContain(message);
  });

  test('radii crowded in one place are allowed, with a warning: errors of the slices grow', () => {
    const told = (setting: string) =>
      readHut(`model.radii=${setting}`)
        .warnings.map(({ text }) => text)
        .join();
    expect(told('[101 mm, 102 mm, 103 mm]')).toContain('errors of the slices count');
    expect(told('[101 mm, 128 mm, 155 mm]')).not.toContain('errors of the slices count');
  });
});
