import type { Region, Section, Setup } from '@gapwright/fem-core';
import { buildLocator, solveSection, valueAt } from '@gapwright/fem-core';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import {
  lowestReaction,
  outermost,
  waveResponses,
} from '../../../packages/machine-models/src/demagnetisation/armature-reaction.js';
import { solveFineSlice } from '../../../packages/machine-models/src/demagnetisation/fine-slice.js';
import { magnetSamples } from '../../../packages/machine-models/src/demagnetisation/magnet-samples.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { coilPlaces, phaseLags } from '../../../packages/machine-models/src/winding/coil-places.js';
import { phaseAxis } from '../../../packages/machine-models/src/winding/factors.js';
import { legCut } from '../../../packages/machine-models/src/winding/leg-cut.js';
import { hutHydro, MU0 } from '../../helpers/machines.js';

const RADIUS = 0.128;

/** Endlessly permeable discs, magnets like air: to currents there is nothing but two plates. */
function plates(): Machine & Pick<ReturnType<typeof hutHydro>, 'winding'> {
  const machine = hutHydro();
  const magnet = machine.materials.magnet_42;
  if (magnet?.kind !== 'magnet') throw new Error('a magnet');
  return {
    ...machine,
    materials: { plate: { kind: 'steel', muR: 1e8, source: 'ideal' }, magnet_42: { ...magnet, recoil: 1 } },
  };
}

test('a wave between plates: By = mu0 sinh(k t/2)/(k sinh(k D/2)) cosh(k (D/2 - y)), of sin(k x) against the magnets', () => {
  const slice = solveFineSlice(plates(), RADIUS);
  const samples = magnetSamples(slice.field, 'upper magnet');
  const orders = [1, 2, 4, 7, 8, 12, 16, 20];
  const responses = waveResponses(slice, orders, 16).get('upper magnet');
  const [half, plate] = [0.0075, 0.0095 + 0.012];
  orders.forEach((order, m) => {
    const k = order / RADIUS;
    const response = responses?.[m];
    if (response === undefined) throw new Error('a response');
    const scale = (MU0 * Math.sinh(k * half) * Math.cosh(k * (plate - 0.0095))) / (k * Math.sinh(k * plate));
    samples.x.forEach((x, i) => {
      const size = (scale * Math.cosh(k * (plate - (samples.y[i] ?? 0)))) / Math.cosh(k * (plate - 0.0095));
      expect(Math.abs((response.odd[i] ?? 0) + size * Math.cos(k * x)), `order ${order}`).toBeLessThan(0.02 * scale);
      expect(Math.abs((response.even[i] ?? 0) - size * Math.sin(k * x)), `order ${order}`).toBeLessThan(0.02 * scale);
    });
  });
});

test('all positions of the rotor before coils drawn leg by leg, with the currents of each position', () => {
  const machine = plates();
  const { winding, rotor } = machine;
  const slice = solveFineSlice(machine, RADIUS);
  const current = { direct: 40, quadrature: 25 };
  const lowest = lowestReaction(machine, slice, [current]).get('upper magnet');
  const samples = magnetSamples(slice.field, 'upper magnet');
  if (lowest === undefined) throw new Error('a reaction');

  // Three coils stand over four poles; phase by phase at 1 A between the mid-plane and a plate.
  const places = coilPlaces(winding, rotor.poles);
  const { halfSpan, width } = legCut(winding, rotor.poles, rotor.magnets.meanRadius, RADIUS);
  const length = (2 * Math.PI * RADIUS) / 4;
  const regions: Region[] = [];
  const density: Record<string, number>[] = [{}, {}, {}];
  const materials: Record<string, Setup['materials'][string]> = { air: { kind: 'linear', muR: 1 } };
  places.slice(0, 3).forEach(({ phase, sense, axis }, c) => {
    for (const way of [-1, 1]) {
      for (const image of [-1, 0, 1]) {
        const middle = RADIUS * (axis + way * halfSpan) + image * length;
        const [a, b] = [Math.max(0, middle - width / 2), Math.min(length, middle + width / 2)];
        if (b <= a) continue;
        const name = `${c} ${way} ${image}`;
        regions.push({ name, shape: { kind: 'rectangle', from: [a, 0], to: [b, 0.0075] }, maxEdge: 0.003 });
        materials[name] = { kind: 'linear', muR: 1 };
        const all = density[phase - 1];
        if (all !== undefined) all[name] = (-way * sense * winding.turns) / (width * winding.thickness);
      }
    }
  });
  const section: Section = {
    outline: { kind: 'rectangle', from: [0, 0], to: [length, 0.0095 + 0.012] },
    background: 'air',
    maxEdge: 0.003,
    regions,
    matched: [['left', 'right']],
  };
  const edges: Setup['edges'] = {
    top: { kind: 'crossing' },
    bottom: { kind: 'crossing' },
    left: { kind: 'repeating' },
    right: { kind: 'repeating' },
  };
  const fields = density.map((currentDensity) => solveSection(section, { materials, currentDensity, edges }));
  const locators = fields.map(({ mesh }) => buildLocator(mesh));
  const by = (x: number, y: number, currents: readonly number[]): number => {
    const inside = ((x % length) + length) % length;
    return fields.reduce((sum, field, k) => {
      const locator = locators[k];
      const value = locator === undefined ? undefined : valueAt(field, locator, inside, y);
      return sum + (currents[k] ?? 0) * (value?.by ?? Number.NaN);
    }, 0);
  };
  const start = phaseAxis(places, rotor.poles, 1) / 8;
  const worst = Math.min(...lowest);
  for (let i = 0; i < samples.x.length; i += 71) {
    let least = 0;
    for (let step = 0; step < 72; step++) {
      const theta = (2 * Math.PI * step) / 36;
      const currents = phaseLags(3).map(
        (lag) => -current.direct * Math.cos(theta - lag) + current.quadrature * Math.sin(theta - lag),
      );
      for (const side of [-1, 1]) {
        const x = RADIUS * (theta / 8 + start) + side * (samples.x[i] ?? 0);
        least = Math.min(least, by(x, samples.y[i] ?? 0, currents));
      }
    }
    expect(Math.abs((lowest[i] ?? 0) - least)).toBeLessThan(0.02 * Math.abs(worst));
  }
});

test('every point of a path lies within the corners that are kept', () => {
  const point = fc.record({
    direct: fc.double({ min: -9, max: 9, noNaN: true }),
    quadrature: fc.double({ min: -9, max: 9, noNaN: true }),
  });
  fc.assert(
    fc.property(
      fc.array(point, { minLength: 1, maxLength: 30 }),
      fc.double({ min: 0, max: 7, noNaN: true }),
      (path, angle) => {
        const least = (points: typeof path): number =>
          Math.min(...points.map((p) => p.direct * Math.cos(angle) + p.quadrature * Math.sin(angle)));
        expect(least([...outermost(path)])).toBeCloseTo(least(path), 9);
      },
    ),
    { seed: 3 },
  );
});
