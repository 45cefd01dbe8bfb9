import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { gaussPoints } from '../../../packages/machine-models/src/rotor/gauss-points.js';
import {
  coilWindow,
  legsFundamental,
  windowFundamental,
  windowWave,
} from '../../../packages/machine-models/src/winding/coil-window.js';
import { hutHydro, overlappedHydro, withWinding } from '../../helpers/machines.js';
import { withRotor } from '../end-effect/made-machines.js';

/** Where the window changes, and its fundamental. */
function windowOf(machine: Machine) {
  const window = coilWindow(machine);
  return {
    radii: window.radii,
    fundamental: (radius: number) => windowFundamental(window, machine.rotor.poles, radius),
  };
}

/** Integral over the radius of r f, piece by piece. */
function overRadius(radii: readonly number[], f: (radius: number) => number): number {
  const ends = [...radii].sort((a, b) => a - b);
  const { at, weight } = gaussPoints(16);
  let sum = 0;
  for (let i = 0; i + 1 < ends.length; i++) {
    const half = (ends[i + 1] - ends[i]) / 2;
    at.forEach((x, j) => {
      const radius = ends[i] + half * (1 + x);
      sum += weight[j] * half * radius * f(radius);
    });
  }
  return sum;
}

describe('coils side by side', () => {
  test('an even field links each turn by the area it goes round: A + P b/2 + pi b^2/3 in the mean', () => {
    const machine = hutHydro();
    const { opening, legWidth: b } = machine.winding;
    const height = opening.outerRadius - opening.innerRadius;
    const area = (height * (opening.innerWidth + opening.outerWidth)) / 2;
    const side = Math.hypot(height, (opening.outerWidth - opening.innerWidth) / 2);
    const perimeter = opening.innerWidth + opening.outerWidth + 2 * side;
    // So few poles that the cosine is 1 all over the coil. Beside the opening the turns lie evenly along the circumference,
    // as in the slices, not across the leg.
    const { radii, fundamental } = windowOf(withRotor(machine, { poles: 2e-3 }));
    const got = overRadius(radii, fundamental);
    expect(Math.abs(got / (area + (perimeter * b) / 2 + (Math.PI * b * b) / 3) - 1)).toBeLessThan(5e-4);
  });

  test.each(['parallel', 'tapered'] as const)(
    'beside the middle of the opening the turns are the legs of the slices, %s',
    (legShape) => {
      const machine = withWinding(hutHydro(), { legShape });
      const { fundamental } = windowOf(machine);
      // The slices spread the turns evenly along the circumference, here they lie evenly across the leg.
      expect(Math.abs(fundamental(0.128) / legsFundamental(machine, 0.128) - 1)).toBeLessThan(2e-3);
    },
  );

  test('it shrinks to nothing at its ends and is nothing beyond', () => {
    const { radii, fundamental } = windowOf(hutHydro());
    const [first, last] = [Math.min(...radii), Math.max(...radii)];
    expect(first).toBeCloseTo(0.1045 - 0.0205, 12);
    expect(last).toBeCloseTo(Math.hypot(0.1515, 0.015) + 0.0205, 12);
    expect(fundamental(first - 1e-4)).toBe(0);
    expect(fundamental(last + 1e-4)).toBe(0);
    expect(fundamental(first + 1e-3)).toBeGreaterThan(0);
    expect(fundamental(0.09)).toBeGreaterThan(fundamental(0.086));
    expect(fundamental(0.17)).toBeLessThan(fundamental(0.165));
  });

  test('a coil no wider than its opening goes round just that', () => {
    const machine = withWinding(hutHydro(), { legWidth: 1e-7 });
    const { fundamental } = windowOf(machine);
    expect(Math.abs(fundamental(0.128) / legsFundamental(machine, 0.128) - 1)).toBeLessThan(3e-3);
  });
});

describe('overlapped coils', () => {
  const machine = overlappedHydro();
  const { fundamental } = windowOf(machine);

  test('between the ends of the legs the turns are the legs of the slices', () => {
    for (const radius of [0.101, 0.128, 0.155]) {
      expect(Math.abs(fundamental(radius) / legsFundamental(machine, radius) - 1)).toBeLessThan(1e-12);
    }
  });

  test('across the end bundles the turns are nested: summed turn by turn', () => {
    const { legWidth, legs } = machine.winding;
    const pairs = machine.rotor.poles / 2;
    const count = 4000;
    for (const [radius, end] of [
      [legs.outerRadius + 0.3 * legWidth, legs.outerRadius],
      [legs.innerRadius - 0.8 * legWidth, legs.innerRadius],
    ]) {
      const spread = 2 * Math.asin(legWidth / 2 / end);
      let sum = 0;
      for (let i = 0; i < count; i++) {
        const share = (i + 0.5) / count;
        const angle = Math.PI / machine.rotor.poles + (share - 0.5) * spread;
        if (share * legWidth > Math.abs(radius - end)) sum += ((2 / pairs) * Math.sin(pairs * angle)) / count;
      }
      expect(Math.abs(fundamental(radius) - sum)).toBeLessThan(1e-3 * fundamental(legs.outerRadius));
    }
    expect(fundamental(legs.outerRadius + 1.01 * legWidth)).toBe(0);
    expect(fundamental(legs.innerRadius - 1.01 * legWidth)).toBe(0);
  });

  test('full-pitch legs without width link (2/p) of the amplitude', () => {
    const thin: Machine = withWinding(machine, { legWidth: 1e-9 });
    expect(Math.abs(windowOf(thin).fundamental(0.128) / (2 / 8) - 1)).toBeLessThan(1e-6);
  });
});

describe.each([
  ['side by side', hutHydro()],
  ['side by side, tapered', withWinding(hutHydro(), { legShape: 'tapered' })],
  ['overlapped', overlappedHydro()],
])('%s', (_, machine) => {
  const window = coilWindow(machine);

  test('the waves of the window add up to it', () => {
    const profile = window.profile(0.13);
    let [axis, outside] = [windowWave(profile, 0), windowWave(profile, 0)];
    for (let m = 1; m < 4000; m++) {
      axis += 2 * windowWave(profile, m);
      outside += 2 * windowWave(profile, m) * Math.cos(m * Math.PI);
    }
    expect(axis).toBeCloseTo(1, 3);
    expect(outside).toBeCloseTo(0, 3);
  });

  test('it vanishes at both ends', () => {
    for (const radius of [window.radii[0] ?? 0, window.radii[window.radii.length - 1] ?? 0]) {
      expect(windowWave(window.profile(radius), 0)).toBeLessThan(1e-3 * windowWave(window.profile(0.128), 0));
    }
  });
});
