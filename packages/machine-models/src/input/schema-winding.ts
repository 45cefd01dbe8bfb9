import * as z from 'zod';
import { field, group, optional, usually, variants } from './fields.js';
import { choice, orWord, whole } from './readers.js';
import { length, size, temperature } from './schema-common.js';

/** Exactly one of diameter, awg, or width with height; the checks see to it. */
const wire = group({
  diameter: optional(size('the bare diameter, for example 1.18 mm')),
  awg: optional(whole(0, 56, 'the wire gauge, for example 18')),
  width: optional(size('the bare width, for example 4 mm')),
  height: optional(size('the bare height, for example 1 mm')),
  strands: usually(1, whole(1, 10_000, 'the number of wires in hand, for example 2')),
  enamel: optional(choice(['grade 1', 'grade 2', 'grade 3'])),
});

/** `fit`: the radii of the magnets, and the widths that the legs leave. */
const opening = group({
  inner_radius: field(orWord('fit', size("the hole's inner end, for example 104.5 mm"))),
  outer_radius: field(orWord('fit', size("the hole's outer end, for example 151.5 mm"))),
  inner_width: field(orWord('fit', length("the hole's width at its inner end, for example 12 mm"))),
  outer_width: field(orWord('fit', length("the hole's width at its outer end, for example 30 mm"))),
});
const allFit = { inner_radius: 'fit', outer_radius: 'fit', inner_width: 'fit', outer_width: 'fit' };

const legEnds = group({
  inner_radius: optional(size("the legs' inner end, for example 100 mm")),
  outer_radius: optional(size("the legs' outer end, for example 155 mm")),
});

const windingKeys = {
  phases: usually(3, whole(1, 12, 'the number of phases, 3 as a rule')),
  coils: field(whole(1, 10_000, 'the number of all coils, for example 12')),
  turns: field(whole(1, 100_000, 'the number of turns per coil, for example 58')),
  leg_width: field(orWord('fill', size("the width at right angles to the leg's side, for example 20.5 mm"))),
  leg_shape: usually('parallel', choice(['parallel', 'tapered'])),
  clearance: usually(0.001, length('the air between winding and magnets on each side, for example 2 mm')),
  thickness: optional(size('the size along the shaft, for example 15 mm')),
  wire,
  connection: usually('star', choice(['star', 'delta'])),
  paths: usually(1, whole(1, 1000, 'the number of parallel paths per phase, 1 as a rule')),
  temperature: temperature('the temperature of the winding, for example 90 degC'),
};

export const winding = variants('layout', [
  group({
    layout: z.literal('concentrated'),
    opening: z.preprocess((value) => (value === 'fit' ? allFit : value), opening),
    ...windingKeys,
  }),
  group({ layout: z.literal('overlapped'), opening: legEnds.optional(), ...windingKeys }),
]);
export type WindingFile = z.infer<typeof winding>;
export type WireFile = z.infer<typeof wire>;
