import type { Point, Section, Shape } from './section.js';

/** Points nearer than this share of the section's size are one point. */
export const SNAP = 1e-9;

/** Distance in metres within which points of the section are one. */
export function snapOf(section: Section): number {
  const box = boundsOf(section.outline);
  return SNAP * Math.max(box.x1 - box.x0, box.y1 - box.y0);
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
      return shape.corners.map((_, i) => `edge ${i + 1}`);
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

/** Corners of a rectangle or polygon, counter-clockwise from the first for rectangles, as drawn for polygons. */
export function cornersOf(shape: Exclude<Shape, { kind: 'circle' }>): readonly Point[] {
  if (shape.kind === 'polygon') return shape.corners;
  const { x0, y0, x1, y1 } = boundsOf(shape);
  return [
    [x0, y0],
    [x1, y0],
    [x1, y1],
    [x0, y1],
  ];
}

/** Offset that carries side `from` onto side `to`, or undefined where they are not parallel and equal. */
export function offsetBetween(section: Section, from: string, to: string): Point | undefined {
  if (section.outline.kind === 'circle') return undefined;
  const corners = cornersOf(section.outline);
  const names = sidesOf(section.outline);
  const i = names.indexOf(from);
  const j = names.indexOf(to);
  if (i < 0 || j < 0) return undefined;
  const [a, b] = [corners[i], corners[(i + 1) % corners.length]];
  const [c, d] = [corners[j], corners[(j + 1) % corners.length]];
  const size = Math.hypot(b[0] - a[0], b[1] - a[1]);
  const near = (p: Point, q: Point): boolean => Math.hypot(p[0] - q[0], p[1] - q[1]) <= 1e-9 * size;
  const shift: Point = [d[0] - a[0], d[1] - a[1]]; // outlines run round, so the start of one meets the end of the other
  if (near([b[0] + shift[0], b[1] + shift[1]], c)) return shift;
  const straight: Point = [c[0] - a[0], c[1] - a[1]];
  return near([b[0] + straight[0], b[1] + straight[1]], d) ? straight : undefined;
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
        const [xi, yi] = corners[i];
        const [xj, yj] = corners[j];
        if (yi > y !== yj > y && x < xi + ((y - yi) / (yj - yi)) * (xj - xi)) inside = !inside;
      }
      return inside;
    }
  }
}
