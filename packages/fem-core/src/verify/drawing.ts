import type { EdgeCondition } from '../assembly/setup.js';
import type { Point, Region, Section } from '../geometry/section.js';
import type { Material } from '../materials/material.js';

export const AIR: Material = { kind: 'linear', muR: 1 };

export const disc = (name: string, radius: number, centre: Point = [0, 0]): Region => ({
  name,
  shape: { kind: 'circle', centre, radius },
});

/** A rectangle by its middle. */
export const box = (name: string, [x, y]: Point, width: number, height: number): Region => ({
  name,
  shape: {
    kind: 'rectangle',
    from: [x - width / 2, y - height / 2],
    to: [x + width / 2, y + height / 2],
  },
});

/** A round section about the origin. */
export const roundSection = (radius: number, background: string, regions: readonly Region[]): Section => ({
  outline: { kind: 'circle', centre: [0, 0], radius },
  background,
  regions,
});

export const rectangularSection = (
  from: Point,
  to: Point,
  background: string,
  regions: readonly Region[],
): Section => ({ outline: { kind: 'rectangle', from, to }, background, regions });

/** The same condition on all four sides of a rectangle. */
export const allSides = (condition: EdgeCondition): Readonly<Record<string, EdgeCondition>> => ({
  left: condition,
  right: condition,
  top: condition,
  bottom: condition,
});

/** A known potential held on the outline: what lies beyond is then taken into account exactly. */
export const held = (value: (x: number, y: number) => number): EdgeCondition => ({ kind: 'potential', value });

/** Millimetres of a length in metres, as a short text. */
export const mm = (metres: number): string => String(Number((1000 * metres).toPrecision(6)));
