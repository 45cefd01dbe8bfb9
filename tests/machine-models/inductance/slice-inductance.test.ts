import { energiesOf, solveSection } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import { coilProducts } from '../../../packages/machine-models/src/inductance/current-waves.js';
import { sliceInductance } from '../../../packages/machine-models/src/inductance/slice-inductance.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { buildPoleSection } from '../../../packages/machine-models/src/slices/pole-section.js';
import { solveSlice } from '../../../packages/machine-models/src/slices/solve-slice.js';
import { coilPlaces, STARS } from '../../../packages/machine-models/src/winding/coil-places.js';
import { legCut } from '../../../packages/machine-models/src/winding/leg-cut.js';
import { hutHydro, overlappedHydro, relativeError, withWinding } from '../../helpers/machines.js';
import { TEAM_13 } from '../../reference/bh-tables.js';
import { halbachHydro, interpoled, ironless, keeperHydro, roundHydro } from '../slices/variants.js';
import type { Leg } from './direct.js';
import { directInductances } from './direct.js';

const RADIUS = 0.128;

/** Thin plates of mild steel: they carry some 2 T midway between poles. */
function saturated<M extends Machine>(machine: M): M {
  const { disc } = machine.rotor;
  if (disc === undefined) throw new Error('no disc');
  return {
    ...machine,
    materials: { ...machine.materials, plate: { kind: 'steel-curve', bh: TEAM_13, source: 'TEAM problem 13' } },
    rotor: { ...machine.rotor, disc: { ...disc, thickness: 0.005 } },
  };
}

const sliceOf = (machine: Machine, radius = RADIUS) =>
  sliceInductance(machine, solveSlice(machine, { radius, weight: 1 }));

describe.each([
  ['plates of constant permeability', (machine: Machine) => machine],
  ['saturated plates', saturated],
])('legs drawn as they are, mean over the rotor at several positions: %s', (_, change) => {
  test('overlapped: one leg of each phase in one pole', () => {
    const machine = change(overlappedHydro());
    const { width } = legCut(machine.winding, 16, RADIUS, RADIUS);
    const positions = [0, 1, 2].map((i) => i / 3 - 0.4);
    let [self, mutual] = [0, 0];
    for (const at of positions) {
      const legs = [0, 1, 2].map((k): Leg[] => [{ at: at + (2 * k) / 3 - (k === 2 ? 1 : 0), turns: k === 2 ? -1 : 1 }]);
      const matrix = directInductances(machine, RADIUS, 1, legs, width);
      self += (matrix[0][0] + matrix[1][1] + matrix[2][2]) / 3 / positions.length;
      mutual += (matrix[0][1] + matrix[1][2] + matrix[2][0]) / 3 / positions.length;
    }
    const { leg } = sliceOf(machine);
    if (leg === undefined) throw new Error('not overlapped');
    expect(relativeError(leg.self.value, self)).toBeLessThan(5e-4);
    expect(relativeError(leg.mutual.value, mutual)).toBeLessThan(5e-4);
  });

  test('side by side: three coils on four poles', () => {
    const machine = change(hutHydro());
    const { halfSpan, width } = legCut(machine.winding, 16, RADIUS, RADIUS);
    const places = coilPlaces(machine.winding, 16).slice(0, 3);
    const positions = [0, 1, 2].map((i) => i / 3 + 0.1);
    const inPitches = (angle: number): number => (angle * 16) / (2 * Math.PI);
    let [self, mutual] = [0, 0];
    for (const position of positions) {
      const coils = places.map(({ axis, sense }): Leg[] => [
        { at: inPitches(axis - halfSpan) + position, turns: sense },
        { at: inPitches(axis + halfSpan) + position, turns: -sense },
      ]);
      const matrix = directInductances(machine, RADIUS, 4, coils, width);
      self += (matrix[0][0] + matrix[1][1] + matrix[2][2]) / 3 / positions.length;
      mutual += (matrix[0][1] + matrix[1][2] + matrix[2][0]) / 3 / positions.length;
    }
    const units = 4 * 58 ** 2;
    const slice = sliceOf(machine);
    expect(relativeError(slice.self.value, units * self)).toBeLessThan(5e-4);
    expect(relativeError(slice.mutual.value, units * mutual)).toBeLessThan(5e-4);
  });
});

test('energy: half of L I^2 is what the field of one phase stores', () => {
  // Magnets that fill the pole pitch: the rotor is the same at every position.
  const machine: Machine = { ...overlappedHydro(), rotor: halbachHydro(2).rotor };
  const pole = buildPoleSection(machine, RADIUS, { magnetAxis: false, midPlane: false });
  const { width } = legCut(machine.winding, 16, RADIUS, RADIUS);
  const thickness = machine.winding.thickness;
  const leg = {
    name: 'leg',
    shape: { kind: 'rectangle', from: [-width / 2, -thickness / 2], to: [width / 2, thickness / 2] },
    maxEdge: width / 8,
  } as const;
  const materials = Object.fromEntries(
    Object.entries(pole.setup.materials).map(([name, material]) => [
      name,
      material.kind === 'magnet' ? ({ kind: 'linear', muR: material.recoil } as const) : material,
    ]),
  );
  const field = solveSection(
    { ...pole.section, maxEdge: 0.004, regions: [...pole.section.regions, leg] },
    { ...pole.setup, materials: { ...materials, leg: { kind: 'linear', muR: 1 } }, current: { leg: 1 } },
  );
  const slice = sliceOf(machine);
  expect(relativeError(slice.leg?.self.value ?? 0, 2 * energiesOf(field).energy)).toBeLessThan(5e-4);
});

describe('laws', () => {
  const machine = hutHydro();
  const slice = sliceOf(machine);

  test('as the square of the turns, and of the paths downwards', () => {
    const solved = solveSlice(machine, { radius: RADIUS, weight: 1 });
    const doubled = sliceInductance(withWinding(machine, { turns: 116 }), solved);
    const halved = sliceInductance(withWinding(machine, { paths: 2 }), solved);
    expect(relativeError(doubled.self.value, 4 * slice.self.value)).toBeLessThan(1e-12);
    expect(relativeError(halved.mutual.value, slice.mutual.value / 4)).toBeLessThan(1e-12);
  });

  test('phase is self less mutual; the errors told are small', () => {
    expect(relativeError(slice.phase.value, slice.self.value - slice.mutual.value)).toBeLessThan(1e-12);
    expect(slice.phase.error / slice.phase.value).toBeGreaterThan(0);
    expect(slice.phase.error / slice.phase.value).toBeLessThan(1e-3);
  });

  test('the leg of overlapped windings times legs and turns is the phase', () => {
    const overlapped = overlappedHydro();
    const { leg, self, mutual } = sliceOf(overlapped);
    expect(relativeError(16 * 400 * (leg?.self.value ?? 0), self.value)).toBeLessThan(1e-12);
    // The coils of one phase in three are reversed, so that all pairs are alike.
    expect(relativeError(16 * 400 * (leg?.mutual.value ?? 0), mutual.value)).toBeLessThan(1e-9);
    expect(leg?.mutual.value).toBeLessThan(0);
  });

  test('thinner windings and narrower legs keep their flux closer: more inductance, to a limit of their own', () => {
    const of = (thickness: number, legWidth: number): number =>
      sliceOf(withWinding(overlappedHydro(), { thickness, legWidth })).self.value;
    const figures = [of(0.015, 0.013), of(0.0075, 0.013), of(0.004, 0.013)];
    expect(figures[1]).toBeGreaterThan(figures[0] ?? 0);
    expect(figures[2]).toBeGreaterThan(figures[1] ?? 0);
    expect(figures[2]).toBeLessThan(1.5 * (figures[0] ?? 0));
    expect(of(0.015, 0.006)).toBeGreaterThan(figures[0] ?? 0);
  });

  test('steel adds, a keeper near the winding adds most; without steel nearly all is that of free space', () => {
    const [none, keeper] = [sliceOf(ironless()), sliceOf(keeperHydro())];
    expect(none.phase.value).toBeLessThan(slice.phase.value);
    expect(keeper.phase.value).toBeGreaterThan(slice.phase.value);
    expect(none.freeShare).toBeGreaterThan(0.98);
    expect(keeper.freeShare).toBeLessThan(slice.freeShare);
  });

  test.each([
    ['interpoles on the disc', interpoled(0.012)],
    ['interpoles through it', interpoled(0.022)],
    ['round magnets', roundHydro()],
    ['a Halbach array without steel', halbachHydro(4, { disc: undefined })],
  ])('every rotor lies between free space and a keeper of steel: %s', (_, other) => {
    const { phase } = sliceOf(other);
    expect(phase.value).toBeGreaterThan(sliceOf(ironless()).phase.value * 0.98);
    expect(phase.value).toBeLessThan(sliceOf(keeperHydro()).phase.value);
    expect(phase.error).toBeLessThan(3e-3 * phase.value);
  });
});

describe.each([2, 3, 5, 6] as const)('%i phases: sums of coils', (phases) => {
  const windings = [
    [{ layout: 'overlapped', coils: 5 * phases, phases } as const, 10],
    [{ layout: 'concentrated', coils: 12 * phases, phases } as const, 14 * (phases === 5 ? 3 : 1)],
  ] as const;

  test.each(windings)(
    'self - mutual is the mean over the currents that sum to nothing: %o on %i poles',
    (part, poles) => {
      const winding = { ...hutHydro().winding, ...part } as Machine['winding'];
      const products = coilProducts(winding, poles);
      const places = coilPlaces(winding, poles);
      for (let m = 0; m < 3 * poles; m++) {
        const found = products[m % products.length];
        // Orthonormal currents of each star that sum to nothing: the Helmert contrasts.
        const powers = STARS[phases].flatMap((star) =>
          star.slice(1).map((_, row) => {
            let [re, im] = [0, 0];
            for (const { phase, sense, axis } of places) {
              const index = star.indexOf(phase - 1);
              if (index < 0 || index > row + 1) continue;
              const current = (index <= row ? 1 : -(row + 1)) / Math.sqrt((row + 1) * (row + 2));
              re += current * sense * Math.cos(m * axis);
              im -= current * sense * Math.sin(m * axis);
            }
            return re * re + im * im;
          }),
        );
        const mean = powers.reduce((sum, power) => sum + power, 0) / powers.length;
        expect((found?.self ?? 0) - (found?.mutual ?? 0)).toBeCloseTo(mean, 8);
      }
    },
  );
});
