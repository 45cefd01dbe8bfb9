import type { Region } from '@gapwright/fem-core';
import { solveSection } from '@gapwright/fem-core';
import { expect, test } from 'vitest';
import { waveResponses } from '../../../packages/machine-models/src/demagnetisation/armature-reaction.js';
import { solveFineSlice } from '../../../packages/machine-models/src/demagnetisation/fine-slice.js';
import { magnetSamples, worstPoint } from '../../../packages/machine-models/src/demagnetisation/magnet-samples.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { MATERIAL_LIBRARY } from '../../../packages/machine-models/src/materials/library.js';
import { hutHydro, relativeError } from '../../helpers/machines.js';

const RADIUS = 0.128;
const K = 8 / RADIUS;
/** Crest of the current density, A/m^2: weakens the gap's field by some tenths of a tesla. */
const DENSITY = 2e7;
const STRIPS = 24;

// Against the current the steel recovers some permeability, which the frozen one does not know of: the safe side.
test.each([
  [0.008, 0.005],
  [0.005, 0.025], // far beyond saturation
])("discs of %f m: frozen as the magnets leave them, as with the current in Newton's method", (thickness, bound) => {
  const machine = hutHydro();
  const { disc } = machine.rotor;
  const steel = MATERIAL_LIBRARY['AISI 1008'];
  if (disc === undefined || steel === undefined) throw new Error('a disc of steel');
  const thin: Machine = {
    ...machine,
    materials: { ...machine.materials, plate: steel },
    rotor: { ...machine.rotor, disc: { ...disc, thickness } },
  };
  const slice = solveFineSlice(thin, RADIUS);
  const [response] = waveResponses(slice, [8], 16).get('upper magnet') ?? [];
  const samples = magnetSamples(slice.field, 'upper magnet');
  const superposed = worstPoint(
    samples,
    samples.along.map((b, i) => b + DENSITY * (response?.odd[i] ?? Number.NaN)),
  );

  // The same wave in strips of even current, beside the magnets, all at once.
  const { pole } = slice;
  const step = pole.to / STRIPS;
  const strips = Array.from({ length: STRIPS }, (_, i) => {
    const [a, b] = [i * step, (i + 1) * step];
    const density = (DENSITY * (Math.cos(K * a) - Math.cos(K * b))) / (K * step);
    const shape = { kind: 'rectangle', from: [a, 0], to: [b, pole.windingTo] } as const;
    return { region: { name: `strip ${i}`, shape } satisfies Region, density };
  });
  const all = solveSection(
    {
      ...pole.section,
      regions: [...pole.section.regions, ...strips.map(({ region }) => region)],
      sizeAt: [0.0095, 0.0215].map((y) => ({ at: [0.014, y], maxEdge: 4e-4, growth: 0.5 })),
    },
    {
      ...pole.setup,
      materials: {
        ...pole.setup.materials,
        ...Object.fromEntries(strips.map(({ region }) => [region.name, { kind: 'linear', muR: 1 }])),
      },
      currentDensity: Object.fromEntries(strips.map(({ region, density }) => [region.name, density])),
    },
  );
  const together = worstPoint(magnetSamples(all, 'upper magnet'));
  expect(relativeError(superposed.h, together.h)).toBeLessThan(bound);
  expect(superposed.h).toBeLessThan(together.h);
  expect(superposed.h / worstPoint(samples).h).toBeGreaterThan(1.15);
});
