import type { Shape } from '@gapwright/fem-core';
import type { Path } from '@gapwright/fem-core/text';
import type { Report } from '../input/report.js';
import type { ShapeFile } from './schema-shapes.js';

/** Stands for a shape that was found wrong and has been told. */
const NO_SHAPE: Shape = { kind: 'circle', centre: [Number.NaN, Number.NaN], radius: Number.NaN };

/** The one shape that a group gives; tells where it gives none or several. */
export function buildShape({ rectangle, polygon, circle }: ShapeFile, path: Path, report: Report): Shape {
  const given = [rectangle, polygon, circle].filter((one) => one !== undefined);
  if (given.length !== 1) {
    const wrong = given.length === 0 ? 'draws nothing' : 'draws several shapes at once';
    report.fault(path, 'one-of', wrong, 'give exactly one of rectangle, polygon and circle');
    return NO_SHAPE;
  }
  if (rectangle !== undefined) return { kind: 'rectangle', ...rectangle };
  if (polygon !== undefined) return { kind: 'polygon', corners: polygon };
  return circle === undefined ? NO_SHAPE : { kind: 'circle', ...circle };
}
