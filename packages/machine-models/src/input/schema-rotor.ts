import * as z from 'zod';
import { field, group, optional, usually, variants } from './fields.js';
import { choice, orWord, quantity, text, whole } from './readers.js';
import { length, size, temperature } from './schema-common.js';

const disc = group({
  /** `none`: ironless, takes no sizes; else all but the clamp radius must be there. */
  material: usually('AISI 1008', text('the name of a steel, or none')),
  thickness: optional(size("the disc's thickness, for example 10 mm")),
  inner_radius: optional(length("the radius of the disc's hole, for example 90 mm")),
  outer_radius: optional(size("the disc's outer radius, for example 165 mm")),
  clamp_radius: optional(size('the radius up to which the disc is held, for example 60 mm')),
});

const keeper = group({
  material: optional(text('the name of a steel')),
  thickness: optional(size("the keeper's thickness, for example 10 mm")),
});

const magnetKeys = {
  material: field(text('the name of a magnet material, for example N42')),
  thickness: field(size('the size along the shaft, for example 10 mm')),
  mean_radius: field(size("the radius of the magnets' middle, for example 128 mm")),
  temperature: temperature('the temperature of the magnets, for example 20 degC'),
  segments: usually(1, whole(1, 32, 'the pieces per pole, 1 for plain magnets')),
};
const magnetLength = field(size('the size along the radius, for example 55 mm'));

const magnets = variants(
  'shape',
  [
    group({
      shape: z.literal('block'),
      width: field(size('the size along the circumference, for example 28 mm')),
      length: magnetLength,
      ...magnetKeys,
    }),
    group({
      shape: z.literal('sector'),
      /** Ignored where segments fill the pole pitch. */
      arc: optional(quantity('ratio', { above: '0', to: '1' }, 'the share of the pole pitch, for example 0.75')),
      length: magnetLength,
      ...magnetKeys,
    }),
    group({
      shape: z.literal('round'),
      diameter: field(size('the diameter, for example 30 mm')),
      ...magnetKeys,
    }),
  ],
  'block',
);

const interpoles = group({
  width: usually('fill', orWord('fill', size('the width, for example 8 mm'))),
  depth: field(orWord('through', size('the size from the magnet face backwards, for example 12 mm'))),
  material: field(text('the name of a magnet material, for example N42')),
});

export const rotor = group({
  poles: field(whole(2, 1000, 'the number of magnets on a disc, for example 16')),
  arrangement: usually('twin', choice(['twin', 'keeper'])),
  gap: field(size('the distance from magnet face to magnet face, for example 19 mm')),
  disc,
  keeper: keeper.optional(),
  magnets,
  interpoles: interpoles.optional(),
});
export type RotorFile = z.infer<typeof rotor>;
