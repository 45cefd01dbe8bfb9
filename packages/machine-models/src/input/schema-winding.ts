import * as z from 'zod';
import type { Winding } from '../machine.js';
import { field, group, optional, usually, variants } from './fields.js';
import { problem } from './problem.js';
import { choice, orWord, type Reader, whole } from './readers.js';
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

const anyCount = whole(1, 1000, '2, 3, 5 or 6, 3 as a rule');

function phaseCount(value: unknown): ReturnType<Reader<Winding['phases']>> {
  const reading = anyCount(value);
  if ('problems' in reading) return reading;
  // NaN stands in for what has been told already, as for every number
  if (Number.isNaN(reading.value)) return { value: reading.value as Winding['phases'] };
  const count = ([2, 3, 5, 6] as const).find((known) => known === reading.value);
  if (count !== undefined) return { value: count };
  return { problems: [problem('out-of-range', `must be 2, 3, 5 or 6, got ${reading.value}`, 'give 3 as a rule')] };
}

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
  phases: usually(3, phaseCount),
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
