import { numberUnknowns } from '@gapwright/fem-core/equations';
import { checkMesh, meshSection, regionAreas } from '@gapwright/fem-core/mesh';
import { describe, expect, test } from 'vitest';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { remanenceAt } from '../../../packages/machine-models/src/materials/at-temperature.js';
import { interpoleWidth } from '../../../packages/machine-models/src/rotor/interpole-shape.js';
import { magnetWidth } from '../../../packages/machine-models/src/rotor/magnet-shape.js';
import { imagesOfPolePair } from '../../../packages/machine-models/src/slices/images.js';
import type { PoleSection } from '../../../packages/machine-models/src/slices/pole-section.js';
import { buildPoleSection, symmetryCuts } from '../../../packages/machine-models/src/slices/pole-section.js';
import { hutHydro } from '../../helpers/machines.js';
import {
  ALL_CUTS,
  halbachHydro,
  interpoled,
  ironless,
  keeperHydro,
  nameOf,
  roundHydro,
  sectorHydro,
} from './variants.js';

const off = (got: number, expected: number): number => Math.abs(got / expected - 1);

const MACHINES: readonly [name: string, machine: Machine][] = [
  ['block magnets', hutHydro()],
  ['sector magnets', sectorHydro(0.7)],
  ['sector magnets that fill the pole', sectorHydro(1)],
  ['ironless', ironless()],
  ['keeper', keeperHydro()],
  ['round magnets', roundHydro()],
  ...[2, 3, 4].map((n): [string, Machine] => [`Halbach array of ${n} pieces a pole`, halbachHydro(n)]),
  ['ironless Halbach array', halbachHydro(2, { disc: undefined })],
  ['interpoles on the disc', interpoled(0.012)],
  ['interpoles of 6 mm partly into the disc', interpoled(0.017, 0.006)],
  ['interpoles through the disc', interpoled(0.022)],
  ['interpoles facing a keeper', interpoled(0.012, 'fill', keeperHydro().rotor)],
];

/** Discs that are not alike have no mid-plane to cut along. */
const cutsOf = ({ rotor }: Machine) => ALL_CUTS.filter(({ midPlane }) => !midPlane || rotor.arrangement === 'twin');

describe.each(MACHINES)('%s', (_, machine) => {
  const { rotor, winding } = machine;
  const { thickness, meanRadius } = rotor.magnets;
  for (const radius of [meanRadius - 0.015, meanRadius, meanRadius + 0.0175]) {
    describe.each(cutsOf(machine).map((cuts) => [nameOf(cuts), cuts] as const))(
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
          const near = (got: number, expected: number): void => {
            expect(Math.abs(got - expected)).toBeLessThan(1e-12 * pitch * (rotor.gap + 4 * pitch));
          };
          expect(off(pole.polePitch, pitch)).toBeLessThan(1e-14);
          near(whole(['winding']), pitch * winding.thickness);
          const discs = rotor.arrangement === 'twin' ? 2 : 1;
          const width = magnetWidth(rotor.magnets, rotor.poles, radius);
          const between = rotor.interpoles && interpoleWidth(rotor.interpoles, rotor.magnets, rotor.poles, radius);
          const deep = (between ?? 0) * (rotor.interpoles?.depth ?? 0);
          near(whole(pole.magnetRegions), discs * (width * thickness + deep));
          const disc = rotor.disc?.thickness ?? 0;
          const cutAway = (between ?? 0) * Math.max(0, (rotor.interpoles?.depth ?? 0) - thickness);
          const keeper = (rotor.keeper?.thickness ?? 0) * pitch;
          near(whole(pole.steelRegions), discs * (disc * pitch - cutAway) + keeper);
          const behind = (rotor.disc === undefined || rotor.interpoles?.through ? 2.5 : 1.5) * pitch;
          const height = rotor.gap + discs * (thickness + disc) + (rotor.keeper?.thickness ?? 0) + 2 * behind;
          near(whole(mesh.regionNames), pitch * height);
        });

        test('copies, steel and faces are those drawn', () => {
          expect(pole.copies).toBe((cuts.magnetAxis ? 2 : 1) * (cuts.midPlane ? 2 : 1));
          expect(pole.from).toBe(cuts.magnetAxis ? 0 : -pole.to);
          expect(off(pole.to, pole.polePitch / 2)).toBeLessThan(1e-14);
          expect(pole.windingTo).toBe(winding.thickness / 2);
          expect(pole.windingFrom).toBe(cuts.midPlane ? 0 : -winding.thickness / 2);
          const discs = rotor.disc === undefined ? 0 : cuts.midPlane || rotor.arrangement === 'keeper' ? 1 : 2;
          expect(pole.steelRegions).toHaveLength(discs + (rotor.keeper === undefined ? 0 : 1));
          for (const name of pole.steelRegions) expect(areas.get(name)).toBeGreaterThan(0);
          if (rotor.disc === undefined || rotor.interpoles?.through) expect(pole.discCuts).toEqual([]);
          else {
            const [[face, back]] = pole.discCuts;
            expect(off(face, rotor.gap / 2 + thickness)).toBeLessThan(1e-14);
            expect(off(back - face, rotor.disc.thickness)).toBeLessThan(1e-12);
            expect(pole.discCuts).toHaveLength(rotor.keeper === undefined ? 1 : 2);
          }
        });

        test('every part is filled, and the edges bind the sides that are there', () => {
          for (const name of mesh.regionNames) expect(pole.setup.materials[name]).toBeDefined();
          const unknowns = numberUnknowns(mesh, pole.setup);
          expect(unknowns.count).toBeGreaterThan(0);
          for (const [name, material] of Object.entries(pole.setup.materials)) {
            expect(material.kind === 'magnet').toBe(pole.magnetRegions.includes(name));
          }
        });
      },
    );
  }
});

test('blocks are as wide at every radius, sectors are the same share of every pole pitch', () => {
  for (const radius of [0.1, 0.128, 0.155]) {
    const widthOf = ({ rotor }: Machine): number => magnetWidth(rotor.magnets, rotor.poles, radius);
    expect(widthOf(hutHydro())).toBe(0.028);
    expect(off(widthOf(sectorHydro(0.7)), (0.7 * 2 * Math.PI * radius) / 16)).toBeLessThan(1e-14);
  }
});

test('twin discs are cut along both planes, others along the magnet alone', () => {
  const machine = hutHydro();
  expect(symmetryCuts(machine)).toEqual({ magnetAxis: true, midPlane: true });
  expect(symmetryCuts(keeperHydro())).toEqual({
    magnetAxis: true,
    midPlane: false,
  });
  expect(() => buildPoleSection(keeperHydro(), 0.128, symmetryCuts(machine))).toThrow('mirror');
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
