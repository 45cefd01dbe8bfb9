import type { Point, Section, Shape } from '@gapwright/fem-core';
import { checkMesh, measureMesh, meshSection } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import {
  circle,
  circles,
  drawing,
  faultCodes,
  moved,
  polar,
  polygon,
  polygons,
  rectangle,
  rectangles,
  SQUARE,
} from '../geometry/drawings.js';
import { overlayAreas } from '../geometry/overlay-areas.js';

/** Random sections of every kind, and what must hold of each. */

const unit = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });

/** Bars from a tenth down to a hundredth of a percent of the section in width, at any angle. */
const slivers: fc.Arbitrary<Shape> = fc
  .tuple(unit(0.1, 0.9), unit(0.1, 0.9), unit(0, 360), unit(0.05, 0.5), unit(-4, -1))
  .map(([x, y, angle, length, power]) => {
    const far = polar(x, y, angle, length);
    const [dx, dy] = polar(0, 0, angle + 90, 10 ** power);
    return polygon([x, y], far, [far[0] + dx, far[1] + dy], [x + dx, y + dy]);
  });

/** Details down to a ten-thousandth of the section. */
const tiny: fc.Arbitrary<Shape> = fc
  .tuple(unit(0.1, 0.9), unit(0.1, 0.9), unit(-4, -1.3), fc.boolean())
  .map(([x, y, power, round]) =>
    round ? circle(x, y, 10 ** power) : rectangle(x, y, x + 10 ** power, y + 0.6 * 10 ** power),
  );

/** A shape of its own within, beside or along another: nested, touching, sharing a part of an edge. */
const companies: fc.Arbitrary<readonly Shape[]> = fc
  .tuple(fc.integer({ min: 0, max: 5 }), unit(0.15, 0.6), unit(0.15, 0.6), unit(0.05, 0.25), unit(0.1, 0.9))
  .map(([kind, x, y, r, share]) => {
    const box = rectangle(x, y, x + r, y + r);
    const all: readonly (readonly Shape[])[] = [
      [circle(x, y, r), circle(x, y, share * r)],
      [box, rectangle(x + r, y + share * r, x + 1.5 * r, y + 2 * r)],
      [box, polygon([x + share * r, y + r], [x + r, y + r], [x + r, y + 1.4 * r])],
      [circle(x, y, r), circle(x + r + share * r, y, share * r)],
      [box, circle(x + 0.5 * r, y + 0.5 * r, 0.5 * r)],
      [box, rectangle(x, y, x + share * r, y + r), box],
    ];
    return all[kind];
  });

const outlines: fc.Arbitrary<Shape> = fc.constantFrom(
  SQUARE,
  SQUARE,
  circle(0.5, 0.5, 0.55),
  polygon([0, 0.1], [0.7, -0.1], [1.1, 0.4], [0.6, 1.1], [0.3, 0.7], [-0.1, 0.9]),
);

const shapes = (most: number): fc.Arbitrary<readonly Shape[]> =>
  fc
    .array(
      fc.oneof(
        fc.oneof(circles, rectangles, polygons, slivers, tiny).map((shape) => [shape]),
        companies,
      ),
      { minLength: 1, maxLength: most },
    )
    .map((lists) => lists.flat());

export interface RandomSection {
  readonly section: Section;
  readonly scale: number;
  readonly angle: number;
  readonly shift: Point;
}

/** One shape, or company, to `most` of them, one over the other; sides matched or not; of any size, anywhere. */
const sections = (most: number): fc.Arbitrary<RandomSection> =>
  fc.record({
    section: fc.tuple(outlines, shapes(most), fc.boolean()).map(([outline, list, matched]) =>
      drawing(
        list,
        outline === SQUARE && matched
          ? {
              outline,
              matched: [
                ['left', 'right'],
                ['top', 'bottom'],
              ],
            }
          : { outline },
      ),
    ),
    scale: fc.constantFrom(1, 1, 1e-6, 1e6),
    angle: fc.oneof(fc.constant(0), unit(0, 6)),
    shift: fc.constantFrom<Point>([0, 0], [0, 0], [3, -5], [1000, 300]),
  });

export const randomSections = sections(5);

/** Of two shapes at the most: where shapes meet, two of them do. */
export const smallSections = sections(2);

/** A mesh of this many triangles is not asked for by anything drawn here. */
const LIMITS = { minAngle: (25 * Math.PI) / 180, maxTriangles: 300_000 };

/**
 * Either meshed, checkMesh holding with the areas of the overlay region by region, Delaunay, and 25 degrees away from sharp
 * corners; or refused because a region lies wholly outside, as the areas say too; or, rarely, because lines are too near.
 * @returns 'meshed' or the code of the fault
 */
export function proveSection({ section, scale, angle, shift }: RandomSection): string {
  const wanted = overlayAreas(section).map((area) => area * scale * scale);
  const there = moved(section, scale, angle, shift);
  const codes = faultCodes(() => {
    const mesh = meshSection(there, LIMITS);
    checkMesh(mesh, { regionAreas: wanted, minFreeAngleDeg: 25 });
    if (measureMesh(mesh).notDelaunay > 0) throw new Error('not Delaunay');
  });
  if (codes[0] === 'not refused') return 'meshed';
  if (codes[0].startsWith('not an')) throw new Error(codes[0]);
  if (codes[0] === 'outside-outline' && !wanted.slice(1).some((area) => area <= 1e-12 * scale * scale))
    throw new Error('refused as outside, but every region has area');
  return codes[0];
}

/** Drawings in unbounded air, in a round outline or a rectangular one. */
export const openSections: fc.Arbitrary<Section> = fc
  .tuple(fc.array(fc.oneof(circles, rectangles), { minLength: 1, maxLength: 4 }), fc.boolean())
  .map(([list, round]) =>
    drawing(list, { outline: round ? circle(0.5, 0.5, 1.5) : rectangle(-0.5, -0.5, 2, 1.6), open: true }),
  );

/** Both discs have the area of the circle the mesh tells, and all drawn regions theirs. */
export function proveOpenSection(section: Section): void {
  const mesh = meshSection(section);
  const areas = overlayAreas(section);
  const disc = Math.PI * (mesh.beyond?.radius ?? Number.NaN) ** 2;
  const around = disc - areas.reduce((sum, area) => sum + area, 0);
  checkMesh(mesh, { regionAreas: [...areas, ...(section.outline.kind === 'circle' ? [] : [around]), disc] });
}
