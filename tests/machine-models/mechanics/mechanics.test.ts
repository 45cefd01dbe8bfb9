import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { plateDeflection } from '../../../packages/machine-models/src/mechanics/annular-plate.js';
import type { Approach } from '../../../packages/machine-models/src/mechanics/approach.js';
import { ringLoads } from '../../../packages/machine-models/src/mechanics/bend-discs.js';
import { elasticityOf } from '../../../packages/machine-models/src/mechanics/elasticity.js';
import { describeMechanics } from '../../../packages/machine-models/src/mechanics/mechanics.js';
import { gaussPoints } from '../../../packages/machine-models/src/rotor/gauss-points.js';
import { simpsonRadii } from '../../../packages/machine-models/src/rotor/slice-radii.js';
import { closedFormSlices, hutHydro, relativeError } from '../../helpers/machines.js';

const hut = hutHydro();
const slices = closedFormSlices(hut);

/** A pull that falls by 7.5 % a millimetre. */
const SLOPE = -75;
const GAPS = [0.95 * 0.019, 0.019, 1.05 * 0.019, 0.03, 0.04];
const falling: Approach = { gaps: GAPS, pulls: GAPS.map((gap) => Math.exp(SLOPE * (gap - 0.019))) };

const withRotor = (parts: Partial<Machine['rotor']>): Machine => ({ ...hut, rotor: { ...hut.rotor, ...parts } });
const withDisc = (parts: Partial<NonNullable<Machine['rotor']['disc']>>): Machine => {
  const { disc } = hut.rotor;
  if (disc === undefined) throw new Error('no disc');
  return withRotor({ disc: { ...disc, ...parts } });
};
const keysOf = (told: readonly { readonly key: string }[]): readonly string[] => told.map(({ key }) => key);

describe('a disc under the pull of the slices', () => {
  const { discs, pull, clearance, stiffness } = describeMechanics(hut, slices, falling);
  const [bent] = discs;

  test('three slices give the bending of the pull spread between the magnets, as many of them do', () => {
    const many = { ...hut, model: { ...hut.model, slices: simpsonRadii(0.1005, 0.1555, 33) } };
    const fine = describeMechanics(many, closedFormSlices(many)).discs[0];
    expect(relativeError(bent.edge, fine.edge)).toBeLessThan(0.002);
    expect(relativeError(bent.stress, fine.stress)).toBeLessThan(0.002);
  });

  test("by the plate equation, load density interpolated and integrated apart from the slices' rule", () => {
    // The parabola through the three slices' pull per metre, at Gauss points.
    const density = slices.map(({ pull: perPole }) => 16 * perPole);
    const { at, weight } = gaussPoints(20);
    const loads = at.map((x, i) => {
      const value = (density[0] * x * (x - 1)) / 2 + density[1] * (1 - x * x) + (density[2] * x * (x + 1)) / 2;
      return { radius: 0.128 + 0.0275 * x, force: value * 0.0275 * weight[i] };
    });
    expect(
      relativeError(
        loads.reduce((sum, { force }) => sum + force, 0),
        pull,
      ),
    ).toBeLessThan(1e-12);
    expect(relativeError(plateDeflection(bent.plate, loads, 0.165), bent.edge)).toBeLessThan(0.002);
  });

  test('the work of the pull is its mean deflection times its sum', () => {
    const loads = ringLoads(hut, slices);
    const work = loads.reduce((sum, { force, radius }) => sum + force * plateDeflection(bent.plate, loads, radius), 0);
    expect(relativeError(bent.overLoad * pull, work)).toBeLessThan(1e-12);
    expect(bent.overLoad).toBeLessThan(bent.edge);
    expect(bent.atMagnets).toBeLessThan(bent.edge);
  });

  test('bending closes the gap from both sides and grows until pull and plate balance', () => {
    const { growth = Number.NaN, flat, left } = clearance ?? {};
    const mean = growth * bent.overLoad;
    expect(relativeError(mean, bent.overLoad * (1 - SLOPE * 2 * mean))).toBeLessThan(1e-12);
    expect(flat).toBeCloseTo(0.002, 12);
    expect(left).toBeCloseTo(0.002 - growth * bent.edge, 12);
  });

  test('the pull weakens by its slope with the gap; tilted discs are drawn further by half of it at the square of the radius', () => {
    expect(relativeError(stiffness?.axial ?? 0, SLOPE * pull)).toBeLessThan(1e-6);
    // Moment of the pull round the disc, the gap smaller on one side by tilt x radius.
    const tilt = 1e-5;
    let moment = 0;
    for (const { radius, force } of ringLoads(hut, slices)) {
      for (let i = 0; i < 360; i++) {
        const arm = radius * Math.cos((Math.PI * i) / 180);
        moment += (force / 360) * Math.exp(-SLOPE * tilt * arm) * arm;
      }
    }
    expect(relativeError(stiffness?.tilting ?? 0, moment / tilt)).toBeLessThan(1e-6);
  });

  test('steel bends with 200 GPa, cast iron with half of it, and what is not known is not guessed', () => {
    expect(bent.plate.young).toBe(200e9);
    expect(elasticityOf('cast iron', undefined)?.young).toBe(100e9);
    expect(elasticityOf('plywood', { kind: 'nonmagnetic', source: 'invented' })).toBeUndefined();
  });

  test('the hut set: no rub, no false alarm; that its hub is narrower than its hole is noted', () => {
    const { warnings, leftOut, notes } = describeMechanics(hut, slices, falling);
    expect(warnings).toEqual([]);
    expect(leftOut).toEqual([]);
    expect(notes.join('\n')).toContain('begins at 90 mm and is held at 60 mm');
    expect(describeMechanics(withDisc({ clampRadius: 0.09 }), slices, falling).notes.join()).not.toContain(
      'is held at',
    );
    expect(notes.join('\n')).toContain('adds nothing to the pull');
  });
});

describe('where the method ends', () => {
  test('a disc of 6 mm: more than a tenth of the clearance is told', () => {
    const { warnings } = describeMechanics(
      withDisc({ thickness: 0.006, clampRadius: 0.09, innerRadius: 0.06 }),
      slices,
      falling,
    );
    const { warnings: thinner } = describeMechanics(withDisc({ thickness: 0.004, innerRadius: 0.06 }), slices, falling);
    expect(warnings).toEqual([]);
    expect(thinner[0].text).toContain('more than a tenth of the clearance');
  });

  test('ever thinner discs rub, snap together, and leave small-deflection theory', () => {
    const told = (thickness: number): string =>
      describeMechanics(withDisc({ thickness, innerRadius: 0.06 }), slices, falling)
        .warnings.map(({ text }) => text)
        .join('\n');
    expect(told(0.002)).toContain('rubs');
    const thinnest = describeMechanics(withDisc({ thickness: 0.001, innerRadius: 0.06 }), slices, falling);
    expect(thinnest.clearance?.growth).toBe(Infinity);
    expect(told(0.001)).toContain('until they touch');
    expect(told(0.001)).toContain('half its thickness');
    expect(told(0.001)).toContain('MPa');
  });

  test('cut through, ironless, of unknown clamp or stuff: left out and named', () => {
    const interpoles = { width: 0.01, depth: 0.022, through: true, material: 'magnet_42' } as const;
    const cut = describeMechanics(withRotor({ interpoles }), slices, falling);
    expect(cut.discs).toEqual([]);
    expect(cut.clearance).toBeUndefined();
    expect(cut.turning).toBeUndefined();
    expect(keysOf(cut.leftOut)).toEqual(['rotor.interpoles.depth']);
    expect(keysOf(describeMechanics(withRotor({ disc: undefined }), slices).leftOut)).toEqual(['rotor.disc']);
    const { clampRadius: _clamp, ...loose } = hut.rotor.disc ?? {};
    const free = describeMechanics(withRotor({ disc: loose as NonNullable<Machine['rotor']['disc']> }), slices);
    expect(keysOf(free.leftOut)).toEqual(['rotor.disc.clamp_radius']);
    const wood = {
      ...withDisc({ material: 'wood' }),
      materials: { ...hut.materials, wood: { kind: 'nonmagnetic', source: '' } },
    } as const;
    expect(keysOf(describeMechanics(wood, slices).leftOut)).toEqual(['rotor.disc.material']);
  });

  test('interpoles sunk into the disc leave it the thickness behind them', () => {
    const sunk = { width: 0.01, depth: 0.016, through: false, material: 'magnet_42' } as const;
    expect(describeMechanics(withRotor({ interpoles: sunk }), slices).discs[0].plate.thickness).toBeCloseTo(0.006, 12);
    const shallow = { ...sunk, depth: 0.012 };
    expect(describeMechanics(withRotor({ interpoles: shallow }), slices).discs[0].plate.thickness).toBe(0.01);
  });

  test('a keeper bends as the disc does, by its own thickness', () => {
    const keeper = withRotor({ arrangement: 'keeper', keeper: { material: 'plate', thickness: 0.005 } });
    const { discs, clearance } = describeMechanics(keeper, slices, falling);
    expect(discs.map(({ part }) => part)).toEqual(['disc', 'keeper']);
    expect(relativeError(discs[1].edge, 8 * discs[0].edge)).toBeLessThan(1e-12);
    expect(clearance?.left).toBeCloseTo(0.002 - (clearance?.growth ?? 0) * discs[1].edge, 12);
  });
});

test('copper and resin fill the coils: 12 times the ring round the opening, with round corners, times the thickness', () => {
  const { resin } = describeMechanics(hut, slices);
  const perimeter = 0.012 + 0.03 + 2 * Math.hypot(0.047, 0.009);
  const ring = perimeter * 0.0205 + Math.PI * 0.0205 ** 2;
  expect(relativeError(resin.windingVolume, 12 * ring * 0.015)).toBeLessThan(1e-12);
  const fill = (58 * 2 * (Math.PI / 4) * 0.00118 ** 2) / (0.0205 * 0.015);
  expect(relativeError(resin.volume, (1 - fill) * resin.windingVolume)).toBeLessThan(1e-12);
  expect(relativeError(resin.mass, 1150 * resin.volume)).toBeLessThan(1e-12);
});
