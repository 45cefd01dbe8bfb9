import * as z from 'zod';
import { group, optional, variants } from './fields.js';
import { list, pair, quantity, text } from './readers.js';

const number = (value: unknown) => quantity('ratio', {}, 'a bare number')(value);

const density = optional(
  quantity('density', { above: '0 kg/m3', to: '1e5 kg/m3' }, 'the mass per volume, for example 7500 kg/m3'),
);

const nonmagnetic = group({ kind: z.literal('nonmagnetic'), density });

const rows = list(
  pair(number, number, 'H in A/m and B in T, for example [200, 0.5]'),
  1,
  10_000,
  'rows [H in A/m, B in T]',
);

const steel = group({
  kind: z.literal('steel'),
  mu_r: optional(quantity('ratio', { from: '1', to: '1e7' }, 'the relative permeability, for example 2000')),
  bh: optional(rows),
  bh_file: optional(text('the name of a CSV file beside this one')),
  stacking_factor: optional(
    quantity('ratio', { above: '0', to: '1' }, 'the share of the depth that the sheets fill, for example 0.96'),
  ),
  density,
});

const magnet = group({
  kind: z.literal('magnet'),
  remanence: optional(
    quantity('fluxDensity', { above: '0 T', to: '2 T' }, 'the remanence at 20 degC, for example 1.30 T'),
  ),
  demagnetisation: optional(
    list(pair(number, number, 'H in A/m and B in T, for example [-800e3, 0.3]'), 2, 10_000, 'rows [H in A/m, B in T]'),
  ),
  demagnetisation_file: optional(text('the name of a CSV file beside this one')),
  recoil: optional(quantity('ratio', { from: '1', to: '2' }, 'the relative recoil permeability, for example 1.05')),
  remanence_slope: optional(
    quantity('perKelvin', { from: '-2 %/K', to: '2 %/K' }, "the remanence's change, for example -0.12 %/K"),
  ),
  coercivity_intrinsic: optional(
    quantity(
      'fieldStrength',
      { above: '0 A/m', to: '1e7 A/m' },
      'the intrinsic coercivity at 20 degC, for example 955 kA/m',
    ),
  ),
  coercivity_slope: optional(
    quantity('perKelvin', { from: '-2 %/K', to: '2 %/K' }, "the coercivity's change, for example -0.6 %/K"),
  ),
  highest_temperature: optional(
    quantity(
      'temperature',
      { above: '-273.15 degC', to: '1000 degC' },
      'the usual limit of the grade, for example 80 degC',
    ),
  ),
  density,
});

export const materials = z.record(z.string(), variants('kind', [steel, magnet, nonmagnetic]));
export type UserMaterial = z.infer<typeof materials>[string];
