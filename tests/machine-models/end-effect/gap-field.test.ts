import { describe, expect, test } from 'vitest';
import { fundamentalOf, gapField } from '../../../packages/machine-models/src/end-effect/gap-field.js';
import { type GapModel, gapModel } from '../../../packages/machine-models/src/end-effect/gap-model.js';
import { stationsFor } from '../../../packages/machine-models/src/end-effect/linkage.js';
import { planeFundamental, planeSources } from '../../../packages/machine-models/src/end-effect/plane-field.js';
import { CHORD, poleFaces } from '../../../packages/machine-models/src/end-effect/pole-faces.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { gaussPoints } from '../../../packages/machine-models/src/rotor/gauss-points.js';
import { magnetReach } from '../../../packages/machine-models/src/rotor/magnet-shape.js';
import { hutHydro } from '../../helpers/machines.js';
import {
  halbachMachine,
  interpoleMachine,
  KINDS,
  keeperMachine,
  readAt,
  roundMachine,
  withRotor,
} from './made-machines.js';

const ONE_DISC = { arrangement: 'keeper', keeper: undefined } as const;

/** Poles of the pitch of the machine's mean radius on a ring so large that it looks straight. */
function straightened(machine: Machine, length: number, poles = 480): Machine {
  const { magnets } = machine.rotor;
  if (magnets.shape === 'round') throw new Error('a round magnet has no length');
  const meanRadius = (magnets.meanRadius * poles) / machine.rotor.poles;
  return withRotor(machine, { poles, magnets: { ...magnets, meanRadius, length } });
}

function fieldOf(machine: Machine, model: GapModel, chord = CHORD) {
  return gapField(poleFaces(machine, model, chord), model, 1.5 * machine.rotor.magnets.meanRadius);
}

const meanPlane = (machine: Machine, model: GapModel): number => {
  const radius = machine.rotor.magnets.meanRadius;
  return planeFundamental(planeSources(machine, model, radius), model, machine.rotor.poles / (2 * radius));
};

describe('long magnets on a wide ring give the two-dimensional field', () => {
  const kinds = KINDS.filter(([, make]) => make().rotor.magnets.shape !== 'round');
  test.each([
    ...kinds,
    ['a keeper and nothing behind', () => withRotor(keeperMachine(), { disc: undefined })] as const,
    ['magnets alone', () => withRotor(keeperMachine(), { disc: undefined, keeper: undefined })] as const,
    ['one disc', () => withRotor(keeperMachine(), { keeper: undefined })] as const,
    ['one disc, half-deep interpoles', () => withRotor(interpoleMachine(0.006), ONE_DISC)] as const,
    [
      'one disc, Halbach array',
      () => withRotor(halbachMachine(), { ...ONE_DISC, disc: hutHydro().rotor.disc }),
    ] as const,
    ['half-deep interpoles', () => interpoleMachine(0.006)] as const,
    ['deep interpoles, no steel', () => withRotor(interpoleMachine(0.016), { disc: undefined })] as const,
    ['half-deep interpoles, no steel', () => withRotor(interpoleMachine(0.006), { disc: undefined })] as const,
  ])('%s', (_, make) => {
    const machine = straightened(make(), 0.36);
    const model = gapModel(machine);
    const { meanRadius } = machine.rotor.magnets;
    const got = fundamentalOf(fieldOf(machine, model), meanRadius, stationsFor(model, meanRadius));
    expect(Math.abs(got / meanPlane(machine, model) - 1)).toBeLessThan(1e-4);
  });
});

describe('the two-dimensional field', () => {
  test('two discs: the series of the gap between ideal discs, recoil 1', () => {
    const machine = hutHydro();
    const model = gapModel(machine);
    const k = 62.5;
    const [g, h, t, tau] = [0.019, 0.012, 0.015, Math.PI / k];
    const source = ((4 * 1.3) / Math.PI) * Math.sin((Math.PI * 0.028) / (2 * tau));
    const mid = source / (Math.cosh((k * g) / 2) + Math.sinh((k * g) / 2) / Math.tanh(k * h));
    const got = planeFundamental({ axial: source, tangential: 0, interpoles: 0 }, model, k);
    expect(Math.abs((got * ((k * t) / 2)) / Math.sinh((k * t) / 2) / mid - 1)).toBeLessThan(1e-13);
  });

  test('facing Halbach arrays of four pieces a wavelength: 2 Br (1 - exp(-k d)) sin(pi/4)/(pi/4) exp(-k g/2)', () => {
    const k = (2 * Math.PI) / 0.08;
    const thick = halbachMachine(2);
    const machine = withRotor(thick, { gap: 0.012, magnets: { ...thick.rotor.magnets, thickness: 0.02 } });
    const model = { ...readAt(gapModel(machine), 0), windingFrom: 0 };
    const strength = (1.2 * Math.sin(Math.PI / 4)) / (Math.PI / 4);
    const got = planeFundamental({ axial: strength, tangential: strength, interpoles: 0 }, model, k);
    expect(Math.abs(got / 1.06841781 - 1)).toBeLessThan(1e-6); // checked by summing blocks
  });

  test('interpoles as deep as the magnets are tangential magnets of the same strength', () => {
    for (const disc of [hutHydro().rotor.disc, undefined]) {
      const model = gapModel(withRotor(interpoleMachine(), { disc }));
      const as = (tangential: number, interpoles: number): number =>
        planeFundamental({ axial: 0.3, tangential, interpoles }, model, 60);
      expect(Math.abs(as(0.5, 0) / as(0, 0.5) - 1)).toBeLessThan(1e-13);
    }
  });

  test('thin pitches and thick magnets do not overflow', () => {
    const model = gapModel(hutHydro());
    const got = planeFundamental({ axial: 1, tangential: 0, interpoles: 0 }, model, 1e6);
    expect(got).toBeGreaterThanOrEqual(0);
  });
});

/** Tau 50, w 36, h 10, g 16 mm, Br 1.25 T, on a ring so wide that it looks straight. */
function shortRow(length: number): Machine {
  const machine = straightened(withRotor(hutHydro(), { gap: 0.016 }), length);
  const meanRadius = (0.05 * 480) / (2 * Math.PI);
  const steel = machine.materials.magnet_42;
  if (steel.kind !== 'magnet') throw new Error('not a magnet');
  return {
    ...withRotor(machine, {
      magnets: { ...machine.rotor.magnets, shape: 'block', width: 0.036, length, thickness: 0.01, meanRadius },
    }),
    materials: { ...machine.materials, magnet_42: { ...steel, remanence: 1.25 } },
  };
}

describe('a straight row of short magnets between endless plates', () => {
  const machine = shortRow(0.046);
  const model = readAt(gapModel(machine), 0);
  const field = fieldOf(machine, { ...model, windingFrom: 0 });
  const radius = machine.rotor.magnets.meanRadius;

  // By another summation, of charged rectangles and of the series (m = 1, all harmonics).
  test.each([
    [0, 0.646261],
    [0.015, 0.567276],
    [0.023, 0.328624],
    [0.03, 0.107665],
  ])('By at mid-gap, %s m from the middle of a magnet along its radial length', (z, expected) => {
    const mean = (field(radius + z, 0) + field(radius - z, 0)) / 2;
    expect(Math.abs(mean - expected)).toBeLessThan(1e-4 * 0.646261);
  });

  test('the fundamental is half as much over the magnets ends, and all its flux together is that of the slices', () => {
    const plane = planeFundamental(planeSources(machine, model, radius), { ...model, windingFrom: 0 }, Math.PI / 0.05);
    const at = (z: number): number =>
      (fundamentalOf(field, radius + z, 6) + fundamentalOf(field, radius - z, 6)) / (2 * plane);
    // Recoil 1.05 in the table; here 1.
    expect(Math.abs(at(0) - 0.983687)).toBeLessThan(2e-3);
    expect(Math.abs(at(0.023) - 0.5)).toBeLessThan(5e-4);
    const { at: points, weight } = gaussPoints(4);
    const integral = (half: number): number => {
      const pieces = Math.ceil(half / 0.01);
      let sum = 0;
      for (let piece = 0; piece < pieces; piece++) {
        for (let i = 0; i < points.length; i++) {
          sum += (weight[i] * half * at((half * (piece + (1 + points[i]) / 2)) / pieces)) / pieces;
        }
      }
      return sum / 0.046;
    };
    expect(Math.abs(integral(0.08) - 1)).toBeLessThan(5e-4);
    expect(Math.abs(integral(0.023) - 0.868172)).toBeLessThan(3e-3);
    expect(Math.abs(integral(0.031) - 0.968814)).toBeLessThan(3e-3);
  });
});

describe.each(KINDS)('%s', (_, make) => {
  const machine = make();
  const model = gapModel(machine);
  const field = fieldOf(machine, model);
  const { inner, outer } = magnetReach(machine.rotor.magnets);

  test('the field changes sign from pole to pole and is even about a magnet', () => {
    for (const radius of [0.8 * inner, inner, 0.4 * inner + 0.6 * outer, 1.1 * outer]) {
      for (const angle of [0.2, 0.9, 1.4]) {
        const here = field(radius, angle);
        expect(Math.abs(field(radius, angle + 5 * Math.PI) + here)).toBeLessThan(2e-5);
        expect(Math.abs(field(radius, -angle) - here)).toBeLessThan(2e-5);
      }
    }
  });

  test('arcs cut twice as finely change nothing', () => {
    const finer = fieldOf(machine, model, CHORD / 2);
    for (const radius of [0.9 * inner, inner, (inner + outer) / 2, outer, 1.1 * outer]) {
      expect(Math.abs(fundamentalOf(field, radius, 8) - fundamentalOf(finer, radius, 8))).toBeLessThan(
        1e-4 * model.remanence,
      );
    }
  });
});

describe.each(KINDS.filter(([, make]) => make().rotor.disc !== undefined))('%s', (_, make) => {
  test('there is no potential between the planes', () => {
    // Along a line that passes no magnet the integral of By from plane to plane is a difference of potentials.
    const machine = make();
    const model = gapModel(machine);
    const [from, to] = [model.facing ?? Number.NaN, model.behind ?? Number.NaN];
    const across = fieldOf(machine, { ...model, windingFrom: from, windingTo: to - 1e-9 });
    const { inner, outer } = magnetReach(machine.rotor.magnets);
    for (const radius of [0.7 * inner, 1.3 * outer]) expect(Math.abs(across(radius, 0.3))).toBeLessThan(1e-6);
  });
});

/** The fundamental at a radius of what magnets of 1 T cover of the circle. */
function covered({ magnets, poles }: Machine['rotor'], radius: number): number {
  const pairs = poles / 2;
  const { inner, outer } = magnetReach(magnets);
  switch (magnets.shape) {
    case 'round': {
      const cosine =
        (radius ** 2 + magnets.meanRadius ** 2 - magnets.diameter ** 2 / 4) / (2 * radius * magnets.meanRadius);
      return (4 / Math.PI) * Math.sin(pairs * Math.acos(Math.min(1, cosine)));
    }
    case 'block': {
      const side = Math.asin(magnets.width / 2 / radius);
      // The straight ends cut the circle near the inner and the outer radius.
      const low = inner < radius ? Math.acos(inner / radius) : 0;
      const high = outer < radius ? Math.acos(outer / radius) : 0;
      return (
        (4 / Math.PI) * Math.max(0, Math.sin(pairs * Math.min(side, low)) - Math.sin(pairs * Math.min(side, high)))
      );
    }
    case 'sector':
      return radius > inner && radius < outer ? (4 / Math.PI) * Math.sin((Math.PI / 2) * magnets.arc) : 0;
  }
}

/**
 * A second method, without images or closed forms: the fundamental alone, in modes sin(j pi (y - facing)/P) between two
 * planes P apart, each an ordinary equation along the radius, solved by differences; a the height of the magnets' face:
 *
 *   v'' + v'/r - (p^2/r^2 + (j pi/P)^2) v = -(2/P) sin(j pi a/P) (fundamental of the face's charge)
 */
test.each(KINDS.filter(([name]) => /^(blocks|round|sectors)/.test(name)))(
  '%s: agrees with modes between the planes',
  (_, make) => {
    const machine = make();
    const model = gapModel(machine);
    const { inner, outer } = magnetReach(machine.rotor.magnets);
    const radii = [0.9 * inner, inner, 0.7 * inner + 0.3 * outer, (inner + outer) / 2, outer, 1.08 * outer];
    const field = fieldOf(machine, model);
    const modes = inModes(machine, model, radii);
    radii.forEach((radius, i) => {
      expect(Math.abs(fundamentalOf(field, radius, 12) - modes[i])).toBeLessThan(5e-4 * model.remanence);
    });
  },
);

function inModes(machine: Machine, model: GapModel, radii: readonly number[]): readonly number[] {
  const { magnets, poles } = machine.rotor;
  const pairs = poles / 2;
  const [facing, behind] = [model.facing ?? 0, model.behind ?? 0];
  const span = behind - facing;
  const { inner, outer } = magnetReach(magnets);
  const [from, to, count] = [inner - 0.6 * (outer - inner), outer + 0.6 * (outer - inner), 2400];
  const step = (to - from) / count;
  // Mean over each cell, so that the ends do not fall between points.
  const charge = Array.from({ length: count + 1 }, (_, i) => {
    let sum = 0;
    for (let s = 0; s < 8; s++) sum += covered(machine.rotor, from + (i + (s + 0.5) / 8 - 0.5) * step) / 8;
    return -model.remanence * sum;
  });
  const sums = radii.map(() => 0);
  for (let j = 1; j <= 60; j++) {
    const kappa = (j * Math.PI) / span;
    const drive = (2 / span) * Math.sin(kappa * (model.face - facing));
    // Thomas's elimination, v = 0 at both far ends.
    const [c, d] = [new Float64Array(count + 1), new Float64Array(count + 1)];
    for (let i = 1; i < count; i++) {
      const r = from + i * step;
      const [lower, upper] = [1 / step ** 2 - 1 / (2 * r * step), 1 / step ** 2 + 1 / (2 * r * step)];
      const middle = -2 / step ** 2 - (pairs / r) ** 2 - kappa ** 2 - lower * c[i - 1];
      c[i] = upper / middle;
      d[i] = (-drive * charge[i] - lower * d[i - 1]) / middle;
    }
    const v = new Float64Array(count + 1);
    for (let i = count - 1; i > 0; i--) v[i] = d[i] - c[i] * v[i + 1];
    const reading =
      (Math.sin(kappa * (model.windingTo - facing)) - Math.sin(kappa * (model.windingFrom - facing))) /
      (model.windingTo - model.windingFrom);
    radii.forEach((radius, i) => {
      const at = (radius - from) / step;
      const low = Math.floor(at);
      sums[i] -= reading * (v[low] + (at - low) * (v[low + 1] - v[low]));
    });
  }
  return sums;
}

test('two discs without steel are each disc by itself, added', () => {
  const machine = halbachMachine();
  const model = gapModel(machine);
  const alone = fieldOf(machine, { ...model, facing: undefined, windingFrom: -model.windingTo });
  const both = fieldOf(machine, model);
  // The lower disc's field over the winding is the upper one's, mirrored: both have the same mean.
  for (const angle of [0.1, 1])
    expect(Math.abs(both(0.116, angle) / (2 * alone(0.116, angle)) - 1)).toBeLessThan(1e-12);
});

test('a keeper at a gap is two discs at twice the gap, at the face of the keeper', () => {
  const keeper = keeperMachine();
  const twin = withRotor(keeper, { arrangement: 'twin', keeper: undefined, gap: 2 * keeper.rotor.gap });
  const near = 1e-3;
  const atKeeper = gapModel(keeper);
  const face = atKeeper.facing ?? Number.NaN;
  const one = fieldOf(keeper, { ...atKeeper, windingFrom: face, windingTo: face + near });
  const two = fieldOf(twin, { ...gapModel(twin), windingFrom: 0, windingTo: near });
  for (const radius of [0.1, 0.128, 0.16]) expect(Math.abs(one(radius, 0.3) / two(radius, 0.3) - 1)).toBeLessThan(1e-9);
});

test('interpoles add to the gap field, and so does turning pieces against steel', () => {
  const at = (machine: Machine): number =>
    fundamentalOf(fieldOf(machine, gapModel(machine)), machine.rotor.magnets.meanRadius, 8);
  expect(at(interpoleMachine())).toBeGreaterThan(1.05 * at(hutHydro()));
  expect(at(halbachMachine(2))).toBeGreaterThan(at(halbachMachine(1)));
});

test('interpoles between round magnets fill the room up to them', () => {
  const machine = withRotor(roundMachine(), {
    interpoles: { width: 'fill', depth: 0.008, through: false, material: 'magnet_42' },
  });
  const { upright } = poleFaces(machine, gapModel(machine));
  const magnetic = upright.reduce(
    (sum, { from, to, low, high, density }) =>
      sum + density * (high - low) * Math.hypot(to[0] - from[0], to[1] - from[1]),
    0,
  );
  expect(Math.abs(magnetic)).toBeLessThan(1e-12); // no charge in all
  const { meanRadius, diameter } = machine.rotor.magnets as { meanRadius: number; diameter: number };
  const nearest = Math.min(...upright.map(({ from }) => Math.hypot(from[0], from[1] - meanRadius)));
  expect(Math.abs(nearest / (diameter / 2) - 1)).toBeLessThan(1e-9);
});

test('points of Gauss and Legendre integrate powers below twice their number', () => {
  for (const count of [1, 2, 3, 8, 24]) {
    const { at, weight } = gaussPoints(count);
    for (let power = 0; power < Math.min(2 * count, 30); power++) {
      const got = at.reduce((sum, x, i) => sum + weight[i] * x ** power, 0);
      expect(Math.abs(got - (power % 2 === 0 ? 2 / (power + 1) : 0))).toBeLessThan(1e-13);
    }
  }
});
