import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Winding } from '../../../packages/machine-models/src/machine.js';
import {
  type CoilPlace,
  coilPlaces,
  isBalanced,
  nearestCoils,
  nearestPoles,
  overlappedCoils,
  pathsAreAlike,
  phaseLags,
  STARS,
  starOfSlots,
} from '../../../packages/machine-models/src/winding/coil-places.js';
import { coilSum, phaseAxis } from '../../../packages/machine-models/src/winding/factors.js';

/** Capital = sense +1, small = reversed. */
function letters(places: readonly Pick<CoilPlace, 'phase' | 'sense'>[]): string {
  return places.map(({ phase, sense }) => (sense > 0 ? 'ABCDEF' : 'abcdef')[phase - 1]).join('');
}

function swapCase(text: string): string {
  return [...text].map((c) => (c === c.toUpperCase() ? c.toLowerCase() : c.toUpperCase())).join('');
}

/** Everything that is the same winding: begun at another coil, phases renamed in a ring, all senses reversed. */
function sameWinding(layout: string): Set<string> {
  const all = new Set<string>();
  for (let start = 0; start < layout.length; start++) {
    let turned = layout.slice(start) + layout.slice(0, start);
    for (let name = 0; name < 3; name++) {
      turned = [...turned].map((c) => ({ A: 'B', B: 'C', C: 'A', a: 'b', b: 'c', c: 'a' })[c]).join('');
      all.add(turned).add(swapCase(turned));
    }
  }
  return all;
}

type Phases = Winding['phases'];
const PHASES: readonly Phases[] = [2, 3, 5, 6];

interface CoilSet {
  readonly phases: Phases;
  readonly coils: number;
  readonly poles: number;
}

/** Coils and poles of balanced sets: odd phases want coils by the phase, even ones by twice that. */
const balancedSets = fc
  .tuple(fc.constantFrom(...PHASES), fc.integer({ min: 1, max: 12 }), fc.integer({ min: 1, max: 30 }))
  .map(
    ([phases, parts, pairs]): CoilSet => ({
      phases,
      coils: (phases % 2 === 0 ? 2 : 1) * phases * parts,
      poles: 2 * pairs,
    }),
  )
  .filter(({ coils, poles, phases }) => isBalanced(coils, poles, phases));

const overlappedSets = fc
  .tuple(fc.constantFrom(...PHASES), fc.integer({ min: 1, max: 20 }))
  .map(([phases, pairs]): CoilSet => ({ phases, coils: phases * pairs, poles: 2 * pairs }));

/** Electrical degrees from phase 1 to every phase, as the trade has them. */
const DEGREES: Readonly<Record<Phases, readonly number[]>> = {
  2: [0, 90],
  3: [0, 120, 240],
  5: [0, 72, 144, 216, 288],
  6: [0, 120, 240, 30, 150, 270],
};

/** Phase 1's sum turned to where each phase should have its own, at one order; and what it has. */
function sumsAndWanted(places: readonly CoilPlace[], { phases, poles }: CoilSet, order: number) {
  const first = coilSum(places, poles, 1, order, 0);
  return DEGREES[phases].map((degrees, k) => {
    const [c, s] = [Math.cos, Math.sin].map((f) => f((order * degrees * Math.PI) / 180));
    const wanted = { re: first.re * c - first.im * s, im: first.re * s + first.im * c };
    return { got: coilSum(places, poles, k + 1, order, 0), wanted };
  });
}

function isPhaseSet(places: readonly CoilPlace[], set: CoilSet): boolean {
  const alike = sumsAndWanted(places, set, 1).every(
    ({ got, wanted }) => Math.hypot(got.re - wanted.re, got.im - wanted.im) < 1e-9,
  );
  const { re, im } = coilSum(places, set.poles, 1, 1, 0);
  return alike && Math.hypot(re, im) > 1e-9;
}

describe('star of slots', () => {
  // Layouts of the star-of-slots method, Bianchi and Dai Pre 2006; published tables of Cros and Viarouge 2002 and of
  // Magnussen and Sadarangani 2003. [CALC by the method; titles from memory]
  test.each([
    [3, 2, 'ABC'],
    [6, 4, 'ABC'],
    [9, 6, 'ABC'],
    [12, 8, 'ABC'],
    [3, 4, 'ACB'],
    [6, 8, 'ACB'],
    [9, 12, 'ACB'],
    [12, 16, 'ACB'],
    [15, 20, 'ACB'],
    [18, 24, 'ACB'],
    [9, 8, 'ABbBCcCAa'],
    [18, 16, 'ABbBCcCAa'],
    [9, 10, 'AaACcCBbB'],
    [18, 20, 'AaACcCBbB'],
    [12, 10, 'ABbcCAabBCca'],
    [24, 20, 'ABbcCAabBCca'],
    [12, 14, 'AacCBbaACcbB'],
    [24, 28, 'AacCBbaACcbB'],
  ])('%i coils on %i poles are laid out as published', (coils, poles, layout) => {
    const whole = layout.repeat(coils / layout.length);
    expect(sameWinding(whole)).toContain(letters(starOfSlots(coils, poles, 3)));
  });

  test('3 coils to 4 poles: neighbours go to phases A, C, B, none reversed, so the wiring map is as built', () => {
    expect(letters(starOfSlots(12, 16, 3))).toBe('ACBACBACBACB');
  });

  test('every coil of a phase adds to its fundamental: one turned about would weaken it', () => {
    fc.assert(
      fc.property(balancedSets, ({ coils, poles, phases }) => {
        const places = starOfSlots(coils, poles, phases);
        const axes = DEGREES[phases].map((_, k) => phaseAxis(places, poles, k + 1));
        for (const { phase, sense, axis } of places) {
          const fromPhaseAxis = (poles / 2) * axis - axes[phase - 1];
          expect(sense * Math.cos(fromPhaseAxis)).toBeGreaterThan(Math.cos(Math.PI / (2 * phases) + 1e-9));
        }
      }),
    );
  });

  test('the winding looks alike from every phase: some coils on, each belongs to the phase that lags one belt more', () => {
    fc.assert(
      fc.property(balancedSets, ({ coils, poles, phases }) => {
        // one belt of 180/phases degrees on; odd phases and coils know only the angle between phases, two belts
        const places = starOfSlots(coils, poles, phases);
        const belts = phases % 2 === 0 ? 1 : 2;
        const on = places.findIndex((_, k) => (k * poles * phases - belts * coils) % (2 * phases * coils) === 0);
        expect(on).toBeGreaterThan(0);
        const direction = ({ phase, sense }: CoilPlace) => DEGREES[phases][phase - 1] + (sense < 0 ? 180 : 0);
        for (const [k, place] of places.entries()) {
          const turned = direction(places[(k + on) % coils]) - direction(place);
          expect((turned + 720) % 360).toBe((180 * belts) / phases);
        }
      }),
    );
  });

  test('one coil pitch is as good a start as another: turned about the shaft, no sum changes its size at any odd order', () => {
    fc.assert(
      fc.property(balancedSets, fc.integer({ min: 0, max: 100 }), ({ coils, poles, phases }, turn) => {
        const places = starOfSlots(coils, poles, phases);
        const turned = places.map((place) => ({ ...place, axis: place.axis + (2 * Math.PI * turn) / coils }));
        for (const order of [1, 3, 5, 7, 11]) {
          const [a, b] = [places, turned].map((list) => coilSum(list, poles, 1, order, 0));
          expect(Math.hypot(b.re, b.im)).toBeCloseTo(Math.hypot(a.re, a.im), 9);
        }
      }),
    );
  });
});

describe('any balanced set of 2, 3, 5 or 6 phases', () => {
  test.each([
    ['side by side', balancedSets, (set: CoilSet) => starOfSlots(set.coils, set.poles, set.phases)],
    ['overlapped', overlappedSets, (set: CoilSet) => overlappedCoils(set.poles, set.phases)],
  ])(
    'coils %s: as many a phase, sums equal in size and at the right angles at all odd orders to 25',
    (_, sets, lay) => {
      fc.assert(
        fc.property(sets, (set) => {
          const places = lay(set);
          expect(places).toHaveLength(set.coils);
          for (const k of DEGREES[set.phases].keys()) {
            expect(places.filter(({ phase }) => phase === k + 1)).toHaveLength(set.coils / set.phases);
          }
          for (let order = 1; order <= 25; order += 2) {
            for (const { got, wanted } of sumsAndWanted(places, set, order)) {
              expect(got.re).toBeCloseTo(wanted.re, 8);
              expect(got.im).toBeCloseTo(wanted.im, 8);
            }
          }
        }),
        { numRuns: 60 },
      );
    },
  );

  test('phases lag as told: 90 degrees; 360 over their number; two stars 30 degrees apart, each with its own neutral', () => {
    for (const phases of PHASES) {
      const degrees = phaseLags(phases).map((lag) => (lag * 180) / Math.PI);
      for (const [k, wanted] of DEGREES[phases].entries()) expect(degrees[k]).toBeCloseTo(wanted, 10);
      expect(STARS[phases].flat()).toEqual(degrees.map((_, k) => k));
    }
    const [one, other] = STARS[6].map((star) => star.map((k) => DEGREES[6][k]));
    expect(one).toEqual(DEGREES[3]);
    expect(other).toEqual(DEGREES[3].map((degrees) => degrees + 30));
  });

  test('small sets as read off the star by hand', () => {
    expect(letters(starOfSlots(4, 2, 2))).toBe('ABab');
    // 225 electrical degrees on from coil to coil
    expect(letters(starOfSlots(8, 10, 2))).toBe('AaBbaAbB');
    expect(letters(starOfSlots(5, 2, 5))).toBe('ABCDE');
    expect(letters(starOfSlots(5, 4, 5))).toBe('ACEBD');
    expect(letters(starOfSlots(12, 2, 6))).toBe('ADcfBEadCFbe');
  });
});

describe('the criterion of balance', () => {
  const sets = PHASES.flatMap((phases) =>
    Array.from({ length: 48 }, (_, i) => i + 1).flatMap((coils) =>
      Array.from({ length: 12 }, (_, i): CoilSet => ({ phases, coils, poles: 2 * (i + 1) })),
    ),
  );

  test('the star of slots makes equal sums at the right angles, and as many coils a phase, where it says so and only there', () => {
    let balanced = 0;
    for (const set of sets) {
      const places = starOfSlots(set.coils, set.poles, set.phases);
      const equalShares = DEGREES[set.phases].every(
        (_, k) => places.filter(({ phase }) => phase === k + 1).length === set.coils / set.phases,
      );
      expect(isPhaseSet(places, set) && equalShares, JSON.stringify(set)).toBe(
        isBalanced(set.coils, set.poles, set.phases),
      );
      if (isBalanced(set.coils, set.poles, set.phases)) balanced++;
    }
    expect(balanced).toBeGreaterThan(300);
    expect(balanced).toBeLessThan(sets.length / 2);
  });

  test('where it says no, no other way of sharing out and turning about the coils would do either (all ways tried)', () => {
    const tried: Record<string, boolean> = {};
    for (const [phases, coils, pairs] of [
      [2, 2, 2],
      [2, 4, 4],
      [2, 6, 3],
      [3, 3, 3],
      [3, 6, 6],
      [5, 5, 5],
      [6, 6, 3],
    ] as const) {
      for (let p = 1; p <= pairs; p++) {
        const set: CoilSet = { phases, coils, poles: 2 * p };
        const found = everyWay(set).some((places) => isPhaseSet(places, set));
        expect(found, JSON.stringify(set)).toBe(isBalanced(coils, 2 * p, phases));
        tried[`${phases} ${found}`] = true;
      }
    }
    expect(Object.keys(tried).sort()).toEqual([
      '2 false',
      '2 true',
      '3 false',
      '3 true',
      '5 false',
      '5 true',
      '6 false',
    ]);
  });

  test('known sets of three phases', () => {
    expect(isBalanced(12, 16, 3)).toBe(true);
    expect(isBalanced(12, 10, 3)).toBe(true);
    expect(isBalanced(12, 18, 3)).toBe(false); // coils 9 electrical steps of 270 degrees: four directions, three phases
    expect(isBalanced(15, 12, 3)).toBe(false); // five directions
    expect(isBalanced(10, 8, 3)).toBe(false); // ten coils for three phases
  });

  test('the nearest balanced counts are balanced, and none lies nearer', () => {
    fc.assert(
      fc.property(
        fc.constantFrom(...PHASES),
        fc.integer({ min: 1, max: 80 }),
        fc.integer({ min: 1, max: 30 }),
        (phases, coils, pairs) => {
          const poles = 2 * pairs;
          const fitting = Array.from({ length: 1200 }, (_, i) => i + 1);
          const byCoils = fitting.filter((count) => isBalanced(count, poles, phases));
          const byPoles = fitting.filter((count) => count % 2 === 0 && isBalanced(coils, count, phases));
          const around = (list: readonly number[], from: number) =>
            [list.filter((count) => count < from).at(-1), list.find((count) => count > from)].filter(
              (x) => x !== undefined,
            );
          expect(nearestCoils(coils, poles, phases)).toEqual(around(byCoils, coils));
          expect(nearestPoles(coils, poles, phases)).toEqual(around(byPoles, poles));
        },
      ),
    );
  });
});

/** Every way of giving as many coils to each phase, each either way round; the first coil's turn is no choice. */
function everyWay({ phases, coils, poles }: CoilSet): readonly CoilPlace[][] {
  const grow = (places: readonly CoilPlace[]): CoilPlace[][] => {
    if (places.length === coils) return [[...places]];
    const axis = (2 * Math.PI * places.length) / coils;
    const open = DEGREES[phases].flatMap((_, k) =>
      places.filter(({ phase }) => phase === k + 1).length < coils / phases ? [k + 1] : [],
    );
    const senses = places.length === 0 ? ([1] as const) : ([1, -1] as const);
    return open.flatMap((phase) => senses.flatMap((sense) => grow([...places, { phase, sense, axis }])));
  };
  return poles > 0 ? grow([]) : [];
}

describe('overlapped coils', () => {
  test('there is one leg per pole and phase, evenly spaced, in the sequence A c B a C b', () => {
    const poles = 8;
    const legs = legsInOrder(poles, 3);
    expect(letters(legs)).toBe('AcBaCb'.repeat(poles / 2));
    for (const [j, { angle }] of legs.entries()) expect(angle).toBeCloseTo((j * 2 * Math.PI) / (3 * poles), 12);
  });

  test('two phases: A B a b; five: A d B e C a D b E c; six: A D c f B E a d C F b e', () => {
    for (const [phases, sequence] of [
      [2, 'ABab'],
      [5, 'AdBeCaDbEc'],
      [6, 'ADcfBEadCFbe'],
    ] as const) {
      const legs = legsInOrder(6, phases);
      expect(letters(legs)).toBe(sequence.repeat(3));
      for (const [j, { angle }] of legs.entries()) expect(angle).toBeCloseTo((j * 2 * Math.PI) / (phases * 6), 12);
    }
  });

  function legsInOrder(poles: number, phases: Phases) {
    const half = Math.PI / poles;
    return overlappedCoils(poles, phases)
      .flatMap(({ phase, sense, axis }) => [
        { phase, sense, angle: axis - half },
        { phase, sense: sense > 0 ? (-1 as const) : (1 as const), angle: axis + half },
      ])
      .sort((a, b) => a.angle - b.angle);
  }

  test('all coils of a phase are in step', () => {
    for (const poles of [2, 4, 10, 16]) {
      for (const phases of PHASES) {
        const places = overlappedCoils(poles, phases);
        for (const k of DEGREES[phases].keys()) {
          const { re, im } = coilSum(places, poles, k + 1, 1, 0);
          expect(Math.hypot(re, im)).toBeCloseTo(poles / 2, 9);
        }
      }
    }
  });

  test('both layouts have all their coils in order round the shaft', () => {
    for (const [layout, coils, phases] of [
      ['concentrated', 12, 3],
      ['overlapped', 24, 3],
      ['overlapped', 40, 5],
    ] as const) {
      const axes = coilPlaces({ layout, coils, phases }, 16).map(({ axis }) => axis);
      expect(axes).toHaveLength(coils);
      expect(axes).toEqual([...axes].sort((a, b) => a - b));
      expect(axes[coils - 1] - axes[0]).toBeLessThan(2 * Math.PI);
    }
  });
});

test('parallel paths are alike where the coils in step can be shared out evenly', () => {
  const fourInStep = starOfSlots(12, 16, 3);
  expect([1, 2, 3, 4].map((paths) => pathsAreAlike(fourInStep, 16, paths))).toEqual([true, true, false, true]);
  const twoPairs = starOfSlots(12, 10, 3); // 15 degrees to either side of the phase
  expect([1, 2, 4].map((paths) => pathsAreAlike(twoPairs, 10, paths))).toEqual([true, true, false]);
  expect(pathsAreAlike(overlappedCoils(16, 3), 16, 8)).toBe(true);
  for (const phases of [2, 5, 6] as const) {
    const places = overlappedCoils(16, phases);
    expect([2, 3, 4, 8].map((paths) => pathsAreAlike(places, 16, paths))).toEqual([true, false, true, true]);
  }
  // four a phase in two opposite pairs, 18 degrees from coil to coil
  expect([1, 2, 4].map((paths) => pathsAreAlike(starOfSlots(20, 18, 5), 18, paths))).toEqual([true, true, false]);
});
