import * as z from 'zod';
import { field, group, optional } from '../input/fields.js';
import { choice, quantity, whole } from '../input/readers.js';
import { point } from './schema-shapes.js';

const angle = quantity('angle', { from: '-1e4 deg', to: '1e4 deg' }, 'an angle from +x, for example 90 deg');

/**
 * Which way a magnet points, from place to place; theta is the angle of the place seen from `centre`, which for circles
 * is their own where it is left out.
 *
 *   90 deg                                      everywhere
 *   { radial: outward }                         away from the centre, or towards it: inward
 *   { turning: N, angle: 0 deg }                angle + N theta: 1 and 90 deg along circles, 1 + p a round Halbach array
 *   { wavelength: 80 mm, along: 0 deg, angle: 90 deg, sense: clockwise }
 *                                               angle at the centre, one whole turn for every wavelength on the way along
 */
const directed = group({
  radial: optional(choice(['outward', 'inward'])),
  turning: optional(whole(-1000, 1000, 'the turns of the magnetisation in one turn of the place, for example 3')),
  wavelength: optional(quantity('length', { above: '0 mm', to: '1e6 m' }, 'the length of one turn, for example 80 mm')),
  angle: optional(angle),
  along: optional(angle),
  sense: optional(choice(['anticlockwise', 'clockwise'])),
  centre: point.optional(),
});

const everywhere = field(angle);

export type MagnetisedFile = number | z.infer<typeof directed>;

const isGroup = (value: unknown): boolean => typeof value === 'object' && value !== null && !Array.isArray(value);

/** An angle, or a group that tells more. */
export const magnetised = z.unknown().transform((value, context): MagnetisedFile => {
  const reading = (isGroup(value) ? directed : everywhere).safeParse(value);
  if (reading.success) return reading.data;
  for (const issue of reading.error.issues) context.issues.push({ ...issue, input: value } as z.core.$ZodRawIssue);
  return z.NEVER;
});
