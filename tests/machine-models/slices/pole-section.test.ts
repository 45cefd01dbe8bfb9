import { checkMesh, meshSection, numberUnknowns, regionAreas } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { imagesOfPolePair } from '../../../packages/machine-models/src/slices/images.js';
import type { PoleSection } from '../../../packages/machine-models/src/slices/pole-section.js';
import {
  buildPoleSection,
  magnetWidth,
  remanenceAt,
  symmetryCuts,
} from '../../../packages/machine-models/src/slices/pole-section.js';
import { hutHydro } from '../../helpers/machines.js';
import { ALL_CUTS, ironless, nameOf, sectorHydro } from './variants.js';

const off = (got: number, expected: number): number => Math.abs(got / expected - 1);

const MACHINES: readonly [name: string, machine: Machine][] = [
  ['block magnets', hutHydro()],
  ['sector magnets', sectorHydro(0.7)],
  ['sector magnets that fill the pole', sectorHydro(1)],
  ['ironless', ironless()],
];

describe.each(MACHINES)('%s', (_, machine) => {
  const { rotor, winding } = machine;
  const { thickness, meanRadius } = rotor.magnets;
  for (const radius of [meanRadius - 0.02, meanRadius, meanRadius + 0.0275]) {
    describe.each(ALL_CUTS.map((cuts) => [nameOf(cuts), cuts] as const))(
      `at ${radius} m, cut along %s`,
      (_name, cuts) => {
        const pole = buildPoleSection(machine, radius, cuts);
        const mesh = meshSection(pole.section);
        const areas = new Map(regionAreas(mesh).map((area, i) => [mesh.regionNames[i], pole.copies * area]));
        const whole = (names: readonly string[]): number =>
          names.reduce((sum, name) => sum + (areas.get(name) ?? 0), 0);

        test('the parts have the areas of a whole pole, taken as often as the cuts say', () => {
          checkMesh(mesh);
          const pitch = (2 * Math.PI * radius) / rotor.poles;
          expect(off(pole.polePitch, pitch)).toBeLessThan(1e-14);
          expect(off(whole(['winding']), pitch * winding.thickness)).toBeLessThan(1e-12);
          const magnets = 2 * magnetWidth(machine, radius) * thickness;
          expect(off(whole(['upper magnet', 'lower magnet']), magnets)).toBeLessThan(1e-12);
          const disc = rotor.disc?.thickness ?? 0;
          expect(Math.abs(whole(['upper disc', 'lower disc']) - 2 * disc * pitch)).toBeLessThan(1e-12 * pitch);
          const behind = 1.5 * pitch; // air kept behind each disc
          const height = rotor.gap + 2 * (thickness + disc + behind);
          expect(off(whole(mesh.regionNames), pitch * height)).toBeLessThan(1e-12);
        });

        test('copies, steel and faces are those drawn', () => {
          expect(pole.copies).toBe((cuts.magnetAxis ? 2 : 1) * (cuts.midPlane ? 2 : 1));
          expect(pole.from).toBe(cuts.magnetAxis ? 0 : -pole.to);
          expect(off(pole.to, pole.polePitch / 2)).toBeLessThan(1e-14);
          expect(pole.windingTo).toBe(winding.thickness / 2);
          expect(pole.windingFrom).toBe(cuts.midPlane ? 0 : -winding.thickness / 2);
          expect(pole.steelRegions).toHaveLength(rotor.disc === undefined ? 0 : cuts.midPlane ? 1 : 2);
          for (const name of pole.steelRegions) expect(areas.get(name)).toBeGreaterThan(0);
          if (rotor.disc === undefined) expect(pole.discFaces).toBeUndefined();
          else {
            const [face, back] = pole.discFaces ?? [Number.NaN, Number.NaN];
            expect(off(face, rotor.gap / 2 + thickness)).toBeLessThan(1e-14);
            expect(off(back - face, rotor.disc.thickness)).toBeLessThan(1e-12);
          }
        });

        test('every part is filled, and the edges bind the sides that are there', () => {
          for (const name of mesh.regionNames) expect(pole.setup.materials[name]).toBeDefined();
          const unknowns = numberUnknowns(mesh, pole.setup);
          expect(unknowns.count).toBeGreaterThan(0);
          for (const [name, material] of Object.entries(pole.setup.materials)) {
            expect(material.kind === 'magnet').toBe(name.endsWith('magnet'));
          }
        });
      },
    );
  }
});

test('blocks are as wide at every radius, sectors are the same share of every pole pitch', () => {
  for (const radius of [0.1, 0.128, 0.155]) {
    expect(magnetWidth(hutHydro(), radius)).toBe(0.028);
    const sector = sectorHydro(0.7);
    expect(off(magnetWidth(sector, radius), (0.7 * 2 * Math.PI * radius) / sector.rotor.poles)).toBeLessThan(1e-14);
  }
});

test('twin discs are cut along both planes, others along the magnet alone', () => {
  const machine = hutHydro();
  expect(symmetryCuts(machine)).toEqual({ magnetAxis: true, midPlane: true });
  expect(symmetryCuts({ ...machine, rotor: { ...machine.rotor, arrangement: 'keeper' } })).toEqual({
    magnetAxis: true,
    midPlane: false,
  });
  expect(buildPoleSection(machine, 0.128).cuts).toEqual(symmetryCuts(machine));
});

test('remanence is that of the grade at 20 degC and changes by its slope from there', () => {
  const material = hutHydro().materials.magnet_42;
  if (material.kind !== 'magnet') throw new Error('not a magnet');
  expect(remanenceAt(material, 20)).toBe(1.3);
  expect(remanenceAt(material, 120)).toBeCloseTo(1.3 * (1 - 0.12), 14);
  expect(remanenceAt(material, -30)).toBeCloseTo(1.3 * (1 + 0.06), 14);
  const machine = hutHydro();
  const hot = { ...machine, rotor: { ...machine.rotor, magnets: { ...machine.rotor.magnets, temperature: 120 } } };
  const { materials } = buildPoleSection(hot, 0.128).setup;
  expect(materials['upper magnet']).toEqual({
    kind: 'magnet',
    recoil: 1.05,
    remanence: [0, remanenceAt(material, 120)],
  });
});

describe('images of a pole pair', () => {
  /** How many of the part and its images cover a place. */
  function coverings(pole: PoleSection, x: number, y: number): number {
    const { outline } = pole.section;
    if (outline.kind !== 'rectangle') throw new Error('not a rectangle');
    const within = (px: number, py: number): boolean =>
      px > outline.from[0] && px < outline.to[0] && py > outline.from[1] && py < outline.to[1];
    const part = { mirrorX: false, mirrorY: false, dx: 0 };
    return [part, ...imagesOfPolePair(pole)].filter(({ mirrorX, mirrorY, dx }) =>
      // A place of the image goes back to x = place - dx or dx - place of the part.
      within(mirrorX ? dx - x : x - dx, mirrorY ? -y : y),
    ).length;
  }

  test.each(ALL_CUTS.map((cuts) => [nameOf(cuts), cuts] as const))(
    'cut along %s: tile it, each place once',
    (_, cuts) => {
      const pole = buildPoleSection(hutHydro(), 0.12, cuts);
      const { polePitch, section } = pole;
      if (section.outline.kind !== 'rectangle') throw new Error('not a rectangle');
      const end = section.outline.to[1];
      expect(imagesOfPolePair(pole)).toHaveLength(2 * pole.copies - 1);
      const steps = 61; // odd, and off the borders
      for (let i = 0; i < steps; i++) {
        for (let j = 0; j < steps; j++) {
          const x = polePitch * (-0.5 + (2 * (i + 0.43)) / steps);
          expect(coverings(pole, x, end * (-1 + (2 * (j + 0.47)) / steps))).toBe(1);
        }
      }
      for (const x of [-0.501, 1.501]) expect(coverings(pole, x * polePitch, 0.01)).toBe(0);
    },
  );
});
