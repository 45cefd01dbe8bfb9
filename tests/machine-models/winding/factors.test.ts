import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  type CoilPlace,
  isBalanced,
  overlappedCoils,
  starOfSlots,
} from '../../../packages/machine-models/src/winding/coil-places.js';
import {
  coilSum,
  distributionFactor,
  legSpreadFactor,
  pitchFactor,
} from '../../../packages/machine-models/src/winding/factors.js';
import { singleToothWindingFactor } from '../../helpers/single-tooth.js';

describe('single-tooth winding factors', () => {
  // Star of slots: Bianchi and Dai Pre, IEE Proc. EPA 2006 [title second-hand]; tables of Cros and Viarouge 2002 and of
  // Magnussen and Sadarangani 2003 [from memory]; the digits by the method itself [CALC].
  const twoToThree = [1, 0.866025, 0.866025, 0, 0.866025, 0.866025];
  const rows: readonly (readonly [coilsPoles: string, figures: readonly number[]])[] = [
    ['3/2 6/4 9/6 12/8', twoToThree],
    ['3/4 6/8 9/12 12/16 15/20 18/24', twoToThree],
    ['9/8 18/16 9/10 18/20', [0.959795, 0.984808, 0.945214, 0.57735, 0.13985, 0.060662]],
    ['12/10 24/20 12/14 24/28', [0.965926, 0.965926, 0.933013, 0.5, 0.066987, 0.066987]],
    ['15/14 15/16', [0.956677, 0.994522, 0.951436, 0.615537, 0.173205, 0.111061]],
    ['18/14 18/22', [0.959795, 0.939693, 0.901912, 0.333333, 0.03778, 0.135868]],
    ['21/20 21/22', [0.955821, 0.997204, 0.953148, 0.625898, 0.181997, 0.123718]],
    ['24/22 24/26', [0.957662, 0.991445, 0.949469, 0.603553, 0.162903, 0.095916]],
  ];
  const cases = rows.flatMap(([sets, figures]) =>
    sets.split(' ').map((set) => [...set.split('/').map(Number), figures] as [number, number, readonly number[]]),
  );

  test.each(cases)('%i coils on %i poles', (coils, poles, [kd, kp, ...kw]) => {
    expect(distributionFactor(starOfSlots(coils, poles, 3), poles, 1)).toBeCloseTo(kd, 6);
    expect(Math.abs(pitchFactor((Math.PI * poles) / (2 * coils), 1))).toBeCloseTo(kp, 6);
    for (const [i, expected] of kw.entries()) {
      expect(singleToothWindingFactor(coils, poles, 2 * i + 1)).toBeCloseTo(expected, 6);
    }
  });

  test('12 coils on 14 poles: 0.933, as a public page of builders quotes', () => {
    expect(singleToothWindingFactor(12, 14, 1)).toBeCloseTo(0.933, 3);
  });

  test('12 coils on 10 poles: pairs 15 degrees to either side cost about 3.5 % of voltage (Piggott, 2012 [READ])', () => {
    expect(1 - distributionFactor(starOfSlots(12, 10, 3), 10, 1)).toBeCloseTo(0.035, 2);
  });
});

describe('distribution factors against the textbook form kd = sin(q b/2) / (q sin(b/2)), b between neighbouring slots', () => {
  const oddOrders = Array.from({ length: 13 }, (_, i) => 2 * i + 1);
  const closedForm = (q: number, b: number): number => Math.sin((q * b) / 2) / (q * Math.sin(b / 2));

  test('coils side by side, any balanced set of 2, 3, 5 or 6 phases: q directions spread evenly over a belt', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(2, 3, 5, 6),
        fc.integer({ min: 1, max: 12 }),
        fc.integer({ min: 1, max: 30 }),
        (phases, parts, pairs) => {
          const coils = (phases % 2 === 0 ? 2 : 1) * phases * parts;
          fc.pre(isBalanced(coils, 2 * pairs, phases));
          const places = starOfSlots(coils, 2 * pairs, phases);
          // directions of a phase, a reversed coil counted half a turn on; q of them share a belt of pi/phases
          const steps = places.flatMap(({ phase, sense }, k) =>
            phase === 1 ? [(2 * pairs * k + (sense < 0 ? coils : 0)) % (2 * coils)] : [],
          );
          const q = new Set(steps).size;
          for (const order of oddOrders) {
            const expected = closedForm(q, (order * Math.PI) / (phases * q));
            expect(distributionFactor(places, 2 * pairs, order)).toBeCloseTo(expected, 9);
          }
        },
      ),
    );
  });

  // Full-pitch windings of q slots a pole and phase, three phases: every textbook's table [from memory], digits [CALC]
  test.each([
    [2, [0.9659, Math.SQRT1_2, 0.2588, -0.2588]],
    [3, [0.9598, 0.6667, 0.2176, -0.1774]],
    [4, [0.9577, 0.6533, 0.2053, -0.1576]],
    [5, [0.9567, 0.6472, 0.2, -0.1494]],
  ])('%i slots a pole and phase, orders 1, 3, 5, 7', (q, table) => {
    const step = Math.PI / (3 * q);
    const belt = Array.from({ length: q }, (_, i): CoilPlace => ({ phase: 1, sense: 1, axis: i * step }));
    for (const [i, expected] of table.entries()) {
      expect(distributionFactor(belt, 2, 2 * i + 1)).toBeCloseTo(expected, 4);
      expect(distributionFactor(belt, 2, 2 * i + 1)).toBeCloseTo(closedForm(q, (2 * i + 1) * step), 12);
    }
  });

  test('overlapped coils of any number of phases are in step at every order: kd = 1, signed with the order', () => {
    for (const phases of [2, 3, 5, 6] as const) {
      for (const order of oddOrders) {
        expect(distributionFactor(overlappedCoils(10, phases), 10, order)).toBeCloseTo(1, 12);
      }
    }
  });
});

test('coils one slot wide, other than three phases [CALC]: kw = kd kp by the closed forms', () => {
  const rad = Math.PI / 180;
  // 4 coils on 2 poles, two phases: half a pole pitch wide, alone in their belts
  expect(singleToothWindingFactor(4, 2, 1, 2)).toBeCloseTo(Math.sin(45 * rad), 12);
  // 8 on 10: pairs of directions 45 degrees apart; span 225 degrees
  expect(singleToothWindingFactor(8, 10, 1, 2)).toBeCloseTo(Math.cos(22.5 * rad) * Math.sin(112.5 * rad), 12);
  // five phases, 10 on 8 and 10 on 12: all in step, spans 144 and 216 degrees; 20 on 18: pairs 18 degrees apart, 162 wide
  expect(singleToothWindingFactor(10, 8, 1, 5)).toBeCloseTo(Math.sin(72 * rad), 12);
  expect(singleToothWindingFactor(10, 12, 1, 5)).toBeCloseTo(Math.sin(72 * rad), 12);
  expect(singleToothWindingFactor(20, 18, 1, 5)).toBeCloseTo(Math.cos(9 * rad) * Math.sin(81 * rad), 12);
  // twelve on ten in two stars instead of one: the pairs part, so 0.9659 where three phases have 0.9330
  expect(singleToothWindingFactor(12, 10, 1, 6)).toBeCloseTo(Math.cos(15 * rad), 12);
  expect(singleToothWindingFactor(12, 10, 1, 6) / singleToothWindingFactor(12, 10, 1)).toBeCloseTo(1.0353, 4);
});

test('two neighbouring slots of 30 degrees, full pitch: 0.9659 (36 slots, 6 poles; a public test quotes it [2ND])', () => {
  const step = (2 * Math.PI) / 36;
  const pair: readonly CoilPlace[] = [0, step].map((axis) => ({ phase: 1, sense: 1, axis }));
  expect(distributionFactor(pair, 6, 1) * pitchFactor(Math.PI / 2, 1)).toBeCloseTo(0.9659, 4);
  // textbook: kd = sin(q b/2) / (q sin(b/2)), b the electrical angle between neighbouring slots
  for (const order of [1, 3, 5, 7]) {
    const b = (order * Math.PI) / 6;
    expect(distributionFactor(pair, 6, order)).toBeCloseTo(Math.sin(b) / (2 * Math.sin(b / 2)), 12);
  }
});

test('factors of an air-cored coil in the unrolled section: hole 24 mm, leg 20 mm, pole pitch 50 mm [CALC]', () => {
  const expected = [
    [1, 0.9822873, 0.9354893],
    [3, -0.8443279, 0.5045512],
    [5, 0.5877853, 0],
    [7, -0.2486899, -0.2162362],
  ];
  for (const [n, kp, ks] of expected) {
    expect(pitchFactor((Math.PI * 44) / (2 * 50), n)).toBeCloseTo(kp, 7);
    expect(legSpreadFactor(0.02, 0.05, n)).toBeCloseTo(ks, 7);
  }
});

test('leg spread is the mean of the harmonic over the leg, and 1 for a thin leg', () => {
  const oddOrder = fc.integer({ min: 0, max: 20 }).map((i) => 2 * i + 1);
  fc.assert(
    fc.property(fc.double({ min: 0.01, max: 1, noNaN: true }), oddOrder, (share, n) => {
      const points = 4000;
      let mean = 0;
      for (let i = 0; i < points; i++) mean += Math.cos(n * Math.PI * share * ((i + 0.5) / points - 0.5)) / points;
      expect(legSpreadFactor(share * 0.05, 0.05, n)).toBeCloseTo(mean, 4);
    }),
    { numRuns: 30 },
  );
  expect(legSpreadFactor(0, 0.05, 7)).toBe(1);
  expect(legSpreadFactor(0.05, 0.05, 1)).toBeCloseTo(2 / Math.PI, 12);
});

test('reversing all coils reverses every vector of the star, at every odd order', () => {
  const places = starOfSlots(12, 10, 3);
  const reversed = places.map((place): CoilPlace => ({ ...place, sense: place.sense > 0 ? -1 : 1 }));
  for (const phase of [1, 2, 3]) {
    for (const order of [1, 3, 5, 11]) {
      const [one, other] = [coilSum(places, 10, phase, order, 0.3), coilSum(reversed, 10, phase, order, 0.3)];
      expect(other.re).toBeCloseTo(-one.re, 12);
      expect(other.im).toBeCloseTo(-one.im, 12);
    }
  }
});
