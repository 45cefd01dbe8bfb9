import type { Point } from '@gapwright/fem-core';
import type * as z from 'zod';
import { field, group, usually } from '../input/fields.js';
import { list, pair, quantity, whole } from '../input/readers.js';

/** The solver's own range of sizes, 1e-10 m to 1e10 m, is narrower still. */
const coordinate = quantity('length', { from: '-1e10 m', to: '1e10 m' }, 'a length, for example 12 mm');
const length = quantity('length', { above: '0 mm', to: '1e10 m' }, 'a length, for example 5 mm');

const place = (what: string) => pair(coordinate, coordinate, `${what} as [x, y], for example [0 mm, 20 mm]`);

/** A point that must be there. */
export const end = (what: string): z.ZodType<Point> => field(place(what));
export const point = end('a point');

/** Longest element edge wanted. */
export const edgeLength = quantity(
  'length',
  { above: '0 mm', to: '1e10 m' },
  'the longest element edge, for example 1 mm',
);

/** The solver draws 200 000 pieces of border at most, and tells where there are more. */
const corners = list(
  place('a corner'),
  3,
  200_000,
  'three corners or more, for example [[0 mm, 0 mm], [9 mm, 0 mm], ...]',
);

/** Exactly one of its keys, which is checked where the shape is built. */
export const shape = group({
  rectangle: group({ from: end('a corner'), to: end('the opposite corner') }).optional(),
  polygon: field(corners).optional(),
  circle: group({ centre: end('the centre'), radius: field(length) }).optional(),
});

const ends = { from: end('the start'), to: end('the end') };
export const span = group(ends);
export const line = group({
  ...ends,
  points: usually(101, whole(2, 10_000, 'the number of points, ends included, for example 91')),
});

export type ShapeFile = z.infer<typeof shape>;
