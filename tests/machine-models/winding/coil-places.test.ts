import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  type CoilPlace,
  coilPlaces,
  isBalanced,
  overlappedCoils,
  pathsAreAlike,
  starOfSlots,
} from '../../../packages/machine-models/src/winding/coil-places.js';
import { coilSum, phaseAxis } from '../../../packages/machine-models/src/winding/factors.js';

/** Capital = sense +1, small = reversed. */
function letters(places: readonly Pick<CoilPlace, 'phase' | 'sense'>[]): string {
  return places.map(({ phase, sense }) => (sense > 0 ? 'ABC' : 'abc')[phase - 1]).join('');
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

/** Coils and poles of balanced three-phase sets. */
const balancedSets = fc
  .tuple(fc.integer({ min: 1, max: 16 }), fc.integer({ min: 1, max: 24 }))
  .map(([thirds, pairs]) => ({ coils: 3 * thirds, poles: 2 * pairs }))
  .filter(({ coils, poles }) => isBalanced(coils, poles));

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
    expect(sameWinding(whole)).toContain(letters(starOfSlots(coils, poles)));
  });

  test('3 coils to 4 poles: neighbours go to phases A, C, B, none reversed, so the wiring map is as built', () => {
    expect(letters(starOfSlots(12, 16))).toBe('ACBACBACBACB');
  });

  test('a balanced set gives three equal vectors 120 degrees apart, with as many coils each', () => {
    fc.assert(
      fc.property(balancedSets, ({ coils, poles }) => {
        const places = starOfSlots(coils, poles);
        const vectors = [1, 2, 3].map((phase) => coilSum(places, poles, phase, 1, 0));
        for (const [k, { re, im }] of vectors.entries()) {
          expect(places.filter(({ phase }) => phase === k + 1)).toHaveLength(coils / 3);
          const next = vectors[(k + 1) % 3];
          expect(re * Math.cos((2 * Math.PI) / 3) - im * Math.sin((2 * Math.PI) / 3)).toBeCloseTo(next.re, 9);
          expect(re * Math.sin((2 * Math.PI) / 3) + im * Math.cos((2 * Math.PI) / 3)).toBeCloseTo(next.im, 9);
        }
      }),
    );
  });

  test('every coil of a phase adds to its fundamental: one turned about would weaken it', () => {
    fc.assert(
      fc.property(balancedSets, ({ coils, poles }) => {
        const places = starOfSlots(coils, poles);
        for (const { phase, sense, axis } of places) {
          const fromPhaseAxis = (poles / 2) * axis - phaseAxis(places, poles, phase);
          expect(sense * Math.cos(fromPhaseAxis)).toBeGreaterThan(Math.cos(Math.PI / 6 + 1e-9));
        }
      }),
    );
  });

  test('a set with unlike phases is told from a balanced one', () => {
    expect(isBalanced(12, 16)).toBe(true);
    expect(isBalanced(12, 10)).toBe(true);
    expect(isBalanced(12, 18)).toBe(false); // coils 9 electrical steps of 270 degrees: four directions, three phases
    expect(isBalanced(15, 12)).toBe(false); // five directions
    expect(isBalanced(10, 8)).toBe(false); // ten coils for three phases
  });
});

describe('overlapped coils', () => {
  test('there is one leg per pole and phase, evenly spaced, in the sequence A c B a C b', () => {
    const poles = 8;
    const half = Math.PI / poles;
    const legs = overlappedCoils(poles)
      .flatMap(({ phase, sense, axis }) => [
        { phase, sense, angle: axis - half },
        { phase, sense: sense > 0 ? (-1 as const) : (1 as const), angle: axis + half },
      ])
      .sort((a, b) => a.angle - b.angle);
    expect(letters(legs)).toBe('AcBaCb'.repeat(poles / 2));
    for (const [j, { angle }] of legs.entries()) expect(angle).toBeCloseTo((j * 2 * Math.PI) / (3 * poles), 12);
  });

  test('all coils of a phase are in step', () => {
    for (const poles of [2, 4, 10, 16]) {
      const places = overlappedCoils(poles);
      for (const phase of [1, 2, 3]) {
        const { re, im } = coilSum(places, poles, phase, 1, 0);
        expect(Math.hypot(re, im)).toBeCloseTo(poles / 2, 9);
      }
    }
  });

  test('both layouts have all their coils in order round the shaft', () => {
    for (const [layout, coils] of [
      ['concentrated', 12],
      ['overlapped', 24],
    ] as const) {
      const axes = coilPlaces({ layout, coils }, 16).map(({ axis }) => axis);
      expect(axes).toHaveLength(coils);
      expect(axes).toEqual([...axes].sort((a, b) => a - b));
      expect(axes[coils - 1] - axes[0]).toBeLessThan(2 * Math.PI);
    }
  });
});

test('parallel paths are alike where the coils in step can be shared out evenly', () => {
  const fourInStep = starOfSlots(12, 16);
  expect([1, 2, 3, 4].map((paths) => pathsAreAlike(fourInStep, 16, paths))).toEqual([true, true, false, true]);
  const twoPairs = starOfSlots(12, 10); // 15 degrees to either side of the phase
  expect([1, 2, 4].map((paths) => pathsAreAlike(twoPairs, 10, paths))).toEqual([true, true, false]);
  expect(pathsAreAlike(overlappedCoils(16), 16, 8)).toBe(true);
});
