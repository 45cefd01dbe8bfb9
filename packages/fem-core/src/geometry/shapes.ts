import { SNAP } from './limits.js';
import { orientation } from './predicates.js';
import type { Point, Section, Shape } from './section.js';

/** Distance in metres within which points of the section are one. */
export function snapOf(section: Section): number {
  return SNAP * sizeOf(boundsOf(section.outline));
}

export type Circle = Extract<Shape, { kind: 'circle' }>;

/** Circles drawn twice but for rounding; they are cut alike. */
export function sameCircle(p: Pick<Circle, 'centre' | 'radius'>, q: typeof p, snap: number): boolean {
  const apart = Math.hypot(p.centre[0] - q.centre[0], p.centre[1] - q.centre[1]);
  return apart + Math.abs(p.radius - q.radius) <= 4 * snap;
}

/** Names of the sides of an outline, in order. */
export function sidesOf(shape: Shape): string[] {
  switch (shape.kind) {
    case 'rectangle':
      return ['bottom', 'right', 'top', 'left'];
    case 'polygon':
      return cornersOf(shape).map((_, i) => `edge ${i + 1}`);
    case 'circle':
      return ['rim'];
  }
}

export interface Bounds {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
}

/** The longer of width and height. */
export const sizeOf = (box: Bounds): number => Math.max(box.x1 - box.x0, box.y1 - box.y0);

export const centreOf = (box: Bounds): Point => [0.5 * (box.x0 + box.x1), 0.5 * (box.y0 + box.y1)];

export function boundsOf(shape: Shape): Bounds {
  switch (shape.kind) {
    case 'rectangle':
      return {
        x0: Math.min(shape.from[0], shape.to[0]),
        y0: Math.min(shape.from[1], shape.to[1]),
        x1: Math.max(shape.from[0], shape.to[0]),
        y1: Math.max(shape.from[1], shape.to[1]),
      };
    case 'polygon': {
      const bounds = { x0: Infinity, y0: Infinity, x1: -Infinity, y1: -Infinity };
      for (const [x, y] of shape.corners) {
        bounds.x0 = Math.min(bounds.x0, x);
        bounds.x1 = Math.max(bounds.x1, x);
        bounds.y0 = Math.min(bounds.y0, y);
        bounds.y1 = Math.max(bounds.y1, y);
      }
      return bounds;
    }
    case 'circle': {
      const [x, y] = shape.centre;
      return { x0: x - shape.radius, y0: y - shape.radius, x1: x + shape.radius, y1: y + shape.radius };
    }
  }
}

/**
 * Corners of a rectangle or polygon, counter-clockwise from the first for rectangles, as drawn for polygons. Of a polygon
 * closed by its first corner the repetition is left out.
 */
export function cornersOf(shape: Exclude<Shape, Circle>): readonly Point[] {
  if (shape.kind === 'polygon') {
    const { corners } = shape;
    const [first, last] = [corners[0], corners[corners.length - 1]];
    const closed =
      corners.length > 1 && Math.hypot(first[0] - last[0], first[1] - last[1]) <= SNAP * sizeOf(boundsOf(shape)); // but for rounding
    return closed ? corners.slice(0, -1) : corners;
  }
  const { x0, y0, x1, y1 } = boundsOf(shape);
  return [
    [x0, y0],
    [x1, y0],
    [x1, y1],
    [x0, y1],
  ];
}

/** True when the point lies inside the shape (its border counts for neither side reliably). */
export function contains(shape: Shape, x: number, y: number): boolean {
  switch (shape.kind) {
    case 'rectangle': {
      const { x0, y0, x1, y1 } = boundsOf(shape);
      return x > x0 && x < x1 && y > y0 && y < y1;
    }
    case 'circle':
      return Math.hypot(x - shape.centre[0], y - shape.centre[1]) < shape.radius;
    case 'polygon': {
      let inside = false; // ray towards +x, Jordan
      const { corners } = shape;
      for (let i = 0, j = corners.length - 1; i < corners.length; j = i++) {
        const [lower, upper] = corners[i][1] < corners[j][1] ? [corners[i], corners[j]] : [corners[j], corners[i]];
        if (lower[1] > y === upper[1] > y) continue;
        if (orientation(...lower, ...upper, x, y) > 0) inside = !inside;
      }
      return inside;
    }
  }
}
