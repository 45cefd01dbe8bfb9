import { buildLocator, solveSection, valueAt } from '@gapwright/fem-core';
import { recoverGradients, smoothParts } from '@gapwright/fem-core/goals';
import type { Machine, SolvedSlice } from '@gapwright/machine-models';
import { buildPoleSection, solveSlice } from '@gapwright/machine-models';
import { describe, expect, test } from 'vitest';
import { hutHydro } from '../helpers/machines.js';
import { halbachHydro, interpoled, keeperHydro, withRotor } from '../machine-models/slices/variants.js';
import { check } from './table.js';

const HALBACH =
  'closed form of rectangular blocks in a wave: Mallinson 1973 and Halbach 1980, titles from memory; calculated, confirmed by summing 3200 blocks';

/** Rises to 1.6 T, then flattens: H in A/m, B in T. */
const STEEL = {
  kind: 'steel-curve',
  bh: [
    [0, 0],
    [150, 0.6],
    [400, 1.2],
    [1000, 1.5],
    [3000, 1.65],
    [10000, 1.8],
    [30000, 2.0],
    [100000, 2.2],
  ],
  source: 'invented',
} as const;

/** Magnets of recoil 1, so that air and magnet are alike. */
function recoilOne(machine: Machine, remanence = 1.2): Machine {
  const magnet = machine.materials.magnet_42;
  if (magnet.kind !== 'magnet') throw new Error('not a magnet');
  const steel = { kind: 'steel', muR: 1e6, source: 'all but ideal' } as const;
  return { ...machine, materials: { plate: steel, magnet_42: { ...magnet, remanence, recoil: 1 } } };
}

/** One array by itself, 80 mm a wave, 20 mm thick, its strong face 5 mm above the mid-plane. */
function singleArray(segments: number): Machine {
  const machine = recoilOne(halbachHydro(segments, { arrangement: 'keeper', disc: undefined, gap: 0.01 }));
  const thick = { ...machine.rotor.magnets, thickness: 0.02 };
  const thin = { ...machine.winding, thickness: 0.006, clearance: 0.002 };
  return { ...machine, rotor: { ...machine.rotor, magnets: thick }, winding: thin };
}

/** The radius at which the pole pitch is so long. */
const radiusOf = ({ rotor }: Machine, polePitch: number): number => (polePitch * rotor.poles) / (2 * Math.PI);

const solveAt = (machine: Machine, radius: number, accuracy = 2e-4): SolvedSlice =>
  solveSlice(machine, { radius, weight: 1 }, { accuracy });

/** Amplitudes of By along y over one pole pair from the magnet's axis, T; cosines. Half a pole is drawn. */
function harmonicAt({ field, pole }: SolvedSlice, y: number, order: number): number {
  const locator = buildLocator(field.mesh);
  const k = (order * Math.PI) / pole.polePitch;
  const steps = 512;
  let sum = 0;
  for (let i = 0; i < steps; i++) {
    const x = (pole.to * (i + 0.5)) / steps;
    sum += (valueAt(field, locator, x, y)?.a ?? Number.NaN) * Math.sin(k * x);
  }
  return (-2 * k * sum) / steps; // A = -(b/k) sin(k x)
}

describe('a Halbach array by itself', () => {
  test.each([
    [2, 4, 0.577857206],
    [3, 6, 0.612910124],
    [4, 8, 0.625468133],
    [6, 12, 0.634531252],
    [8, 16, 0.637721778],
  ])(
    'of %i pieces a pole, %i a wave: the fundamental 5 mm above its strong face is that of the closed form',
    (n, wave, expected) => {
      const machine = singleArray(n);
      const { answer } = solveAt(machine, radiusOf(machine, 0.04));
      const got = answer.midB.amplitude[0];
      check(
        {
          case: `${wave} pieces a wave`,
          quantity: 'B_1 5 mm above, T',
          source: HALBACH,
          expected,
          got,
          bound: answer.windingBErr[0],
        },
        1e-3,
      );
    },
  );

  test('four pieces a wave: the strong side has orders 1, 5, 9, the weak side 3, 7, 11', () => {
    const machine = singleArray(2);
    const { answer } = solveAt(machine, radiusOf(machine, 0.04));
    const [b1, b3, b5, b7] = answer.midB.amplitude;
    check(
      {
        case: 'four pieces a wave',
        quantity: 'B_5 5 mm above, T',
        source: HALBACH,
        expected: 0.0303181372,
        got: Math.abs(b5),
        scale: b1,
      },
      1e-3,
    );
    expect(Math.abs(b3)).toBeLessThan(1e-3 * b1);
    expect(Math.abs(b7)).toBeLessThan(1e-3 * b1);
  });
});

test.each([2, 3, 4])('two Halbach arrays without steel, %i pieces a pole: twice the field of one', (n) => {
  const machine = recoilOne(halbachHydro(n, { disc: undefined }));
  const { answer } = solveAt(machine, 0.128);
  const { gap, magnets } = machine.rotor;
  const k = Math.PI / answer.polePitch;
  const share = Math.sin(Math.PI / (2 * n)) / (Math.PI / (2 * n));
  const expected = 2 * 1.2 * share * (1 - Math.exp(-k * magnets.thickness)) * Math.exp((-k * gap) / 2);
  check(
    {
      case: `twin Halbach, ${2 * n} a wave`,
      quantity: 'B_1 mid-gap, T',
      source: HALBACH,
      expected,
      got: answer.midB.amplitude[0],
      bound: answer.windingBErr[0],
    },
    1e-3,
  );
});

describe('a keeper is the mirror of its magnet disc', () => {
  const gap = 0.0095;
  const ideal = (machine: Machine): Machine => ({
    ...machine,
    materials: { ...machine.materials, plate: { kind: 'steel', muR: 1e5, source: 'all but ideal' } },
  });
  const thin = { ...hutHydro().winding, thickness: 0.0055 };
  const keeper = ideal({ ...keeperHydro({ gap }), winding: thin });
  const twin = ideal({ ...withRotor({ gap: 2 * gap }), winding: thin });

  test('at gap g its face sees what the mid-plane of two magnet discs at 2 g sees', () => {
    const solved = solveAt(keeper, 0.128);
    const { answer } = solveAt(twin, 0.128);
    for (const [i, order] of [1, 3, 5].entries()) {
      const expected = answer.midB.amplitude[i];
      check(
        {
          case: 'keeper at 9.5 mm, twin at 19 mm',
          quantity: `B_${order} at the keeper, T`,
          source: 'image argument',
          expected,
          got: harmonicAt(solved, -gap / 2, order),
          scale: answer.midB.amplitude[0],
        },
        1e-3,
      );
    }
  });

  test('and it is pulled as hard as one of them', () => {
    const [one, other] = [keeper, twin].map((machine) => solveAt(machine, 0.128).answer);
    check(
      {
        case: 'keeper at 9.5 mm, twin at 19 mm',
        quantity: 'pull, N/m',
        source: 'image argument',
        expected: other.pull,
        got: one.pull,
        bound: one.pull * one.pullRelErr + other.pull * other.pullRelErr,
      },
      2e-3,
    );
  });
});

describe('interpoles', () => {
  const disc = hutHydro().rotor.disc;
  const thin = { disc: disc && { ...disc, thickness: 0.004 } };
  const behind = ({ field, pole }: SolvedSlice): number => {
    // Field 2 mm behind the disc, the most over the pole.
    const y = pole.section.outline.kind === 'rectangle' ? 0.0095 + 0.012 + 0.004 + 0.002 : Number.NaN;
    const locator = buildLocator(field.mesh);
    const sizes = Array.from({ length: 41 }, (_, i) => {
      const value = valueAt(field, locator, (pole.to * i) / 40, y);
      return Math.hypot(value?.bx ?? 0, value?.by ?? 0);
    });
    return Math.max(...sizes);
  };
  /** Of steel that saturates, so that there is a field behind it. */
  const saturable = (machine: Machine): Machine => ({ ...machine, materials: { ...machine.materials, plate: STEEL } });
  const plain = solveAt(saturable(withRotor(thin)), 0.128);

  test.each([
    ['on the disc', interpoled(0.012, 'fill', thin)],
    ['partly into the disc', interpoled(0.014, 'fill', thin)],
    ['of 8 mm on the disc', interpoled(0.012, 0.008, thin)],
    ['facing a keeper', interpoled(0.012, 'fill', { ...keeperHydro().rotor, ...thin })],
  ])('%s: the gap gains, and the field behind the disc falls', (_, linear) => {
    const machine = saturable(linear);
    const rotor = { ...machine.rotor, interpoles: undefined };
    const without = machine.rotor.arrangement === 'twin' ? plain : solveAt({ ...machine, rotor }, 0.128);
    const solved = solveAt(machine, 0.128);
    expect(solved.answer.midB.amplitude[0]).toBeGreaterThan(1.08 * without.answer.midB.amplitude[0]);
    expect(behind(solved)).toBeLessThan(0.8 * behind(without));
  });

  test('through the disc the gap gains most', () => {
    const on = solveAt(saturable(interpoled(0.012, 'fill', thin)), 0.128).answer.midB.amplitude[0];
    const through = solveAt(saturable(interpoled(0.016, 'fill', thin)), 0.128);
    expect(through.answer.midB.amplitude[0]).toBeGreaterThan(1.05 * on);
    expect(behind(through)).toBeLessThan(behind(plain));
    expect(through.answer.discB).toBeUndefined();
  });

  test('the other way round the gap loses', () => {
    const machine = saturable(interpoled(0.012, 'fill', thin));
    const magnet = machine.materials.magnet_42;
    if (magnet.kind !== 'magnet') throw new Error('not a magnet');
    const reversed = {
      ...machine,
      materials: { ...machine.materials, turned: { ...magnet, remanence: -magnet.remanence } },
    };
    const interpoles = machine.rotor.interpoles && { ...machine.rotor.interpoles, material: 'turned' };
    const { answer } = solveAt({ ...reversed, rotor: { ...reversed.rotor, interpoles } }, 0.128);
    expect(answer.midB.amplitude[0]).toBeLessThan(0.9 * plain.answer.midB.amplitude[0]);
  });
});

describe('a disc that saturates', () => {
  /** Mean of f over x or y from one end to the other by Gauss's rule of three points in many pieces. */
  function integrate(f: (at: number) => number, from: number, to: number, pieces = 4000): number {
    const h = (to - from) / pieces;
    const d = Math.sqrt(0.6) / 2;
    let sum = 0;
    for (let i = 0; i < pieces; i++) {
      const m = from + (i + 0.5) * h;
      sum += (h * (5 * f(m - d * h) + 8 * f(m) + 5 * f(m + d * h))) / 18;
    }
    return sum;
  }

  test.each([0.0025, 0.004, 0.006])(
    '%f m thick: what enters its face goes along it or leaves its back',
    (thickness) => {
      const machine = hutHydro();
      const disc = machine.rotor.disc && { ...machine.rotor.disc, thickness };
      const materials = { ...machine.materials, plate: STEEL };
      const pole = buildPoleSection({ ...machine, materials, rotor: { ...machine.rotor, disc } }, 0.128);
      const fine = pole.section.regions.map((region) =>
        pole.steelRegions.includes(region.name) ? { ...region, maxEdge: 2e-4 } : region,
      );
      const field = solveSection({ ...pole.section, regions: fine }, pole.setup);
      const [recovered] = recoverGradients(field.mesh, smoothParts(field), [field.potential]);
      const [[face, back]] = pole.discCuts;
      const locator = buildLocator(field.mesh);
      const inside = 1e-9; // just within the steel
      /** What leaves over what enters, and the mean along the disc midway between poles, T. */
      const balance = (smooth?: typeof recovered): readonly [share: number, mean: number] => {
        const at = (x: number, y: number) =>
          valueAt(field, locator, x, y, smooth) ?? { bx: Number.NaN, by: Number.NaN };
        const enters = integrate((x) => at(x, face + inside).by, 0, pole.to);
        const leaves = integrate((x) => at(x, back - inside).by, 0, pole.to);
        const along = integrate((y) => at(pole.to - inside, y).bx, face, back);
        return [(along + leaves) / enters, along / thickness];
      };
      const [share, mean] = balance();
      expect(mean).toBeGreaterThan(1.3);
      const quantity = 'flux along and out over flux in';
      const source = 'conservation of flux, from B integrated';
      check({ case: `disc of ${1000 * thickness} mm`, quantity, source, expected: 1, got: share }, 5e-4);
      const smooth = balance(recovered)[0]; // its normal part is not one across the corner of the magnet, where B is singular
      check({ case: `disc of ${1000 * thickness} mm, recovered B`, quantity, source, expected: 1, got: smooth }, 4e-3);
    },
  );
});
