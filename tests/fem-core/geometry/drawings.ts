import type { InputError, Point, Section, Shape } from '@gapwright/fem-core';
import fc from 'fast-check';

export const rectangle = (x0: number, y0: number, x1: number, y1: number): Shape => ({
  kind: 'rectangle',
  from: [x0, y0],
  to: [x1, y1],
});
export const circle = (x: number, y: number, radius: number): Shape => ({ kind: 'circle', centre: [x, y], radius });
export const polygon = (...corners: readonly Point[]): Shape => ({ kind: 'polygon', corners });

export const SQUARE = rectangle(0, 0, 1, 1);

/** Shapes in order, named r0, r1, ... over `air`, in the unit square unless said otherwise. */
export function drawing(shapes: readonly Shape[], more: Partial<Section> = {}): Section {
  const regions = shapes.map((shape, i) => ({ name: `r${i}`, shape }));
  return { outline: SQUARE, background: 'air', regions, ...more };
}

/** The corner of a polygon at an angle (degrees) and distance from (x, y). */
export function polar(x: number, y: number, degrees: number, distance: number): Point {
  const angle = (degrees * Math.PI) / 180;
  return [x + distance * Math.cos(angle), y + distance * Math.sin(angle)];
}

/** Turned by `angle` (radians), then scaled, then shifted by shares of the new size. Rectangles become polygons. */
export function moved(section: Section, scale: number, angle: number, shift: Point): Section {
  const [c, s] = [Math.cos(angle), Math.sin(angle)];
  const at = ([x, y]: Point): Point => [scale * (c * x - s * y + shift[0]), scale * (s * x + c * y + shift[1])];
  const shapeAt = (shape: Shape): Shape => {
    if (shape.kind === 'circle') return { ...shape, centre: at(shape.centre), radius: scale * shape.radius };
    if (shape.kind === 'polygon') return polygon(...shape.corners.map(at));
    const [x0, x1] = [Math.min(shape.from[0], shape.to[0]), Math.max(shape.from[0], shape.to[0])];
    const [y0, y1] = [Math.min(shape.from[1], shape.to[1]), Math.max(shape.from[1], shape.to[1])];
    return polygon(at([x0, y0]), at([x1, y0]), at([x1, y1]), at([x0, y1]));
  };
  const side: Readonly<Record<string, string>> = { bottom: 'edge 1', right: 'edge 2', top: 'edge 3', left: 'edge 4' };
  const renamed = (chain: string | readonly string[]) =>
    typeof chain === 'string' ? (side[chain] ?? chain) : chain.map((name) => side[name] ?? name);
  return {
    ...section,
    outline: shapeAt(section.outline),
    regions: section.regions.map((region) => ({ ...region, shape: shapeAt(region.shape) })),
    matched: (section.matched ?? []).map(([from, to]) => [renamed(from), renamed(to)] as const),
  };
}

const share = (steps: number): fc.Arbitrary<number> => fc.integer({ min: 0, max: steps }).map((i) => i / steps);

/** Rectangles with corners on a grid, so that they share corners and borders, overlap and stick out of the unit square. */
export const rectangles: fc.Arbitrary<Shape> = fc
  .tuple(share(24), share(24), fc.integer({ min: 1, max: 14 }), fc.integer({ min: 1, max: 14 }))
  .filter(([x, y]) => x < 1 && y < 1)
  .map(([x, y, w, h]) => rectangle(x, y, x + w / 24, y + h / 24));

/** Numbers some thousandths apart or equal; what lies a hair apart is drawn in close-calls.test.ts. */
const between = (min: number, max: number): fc.Arbitrary<number> =>
  fc.integer({ min: 0, max: 419 }).map((i) => min + ((max - min) * i) / 419);

/** Star-shaped polygons of three to eight corners at any place. */
export const polygons: fc.Arbitrary<Shape> = fc
  .tuple(
    between(0.2, 0.8),
    between(0.2, 0.8),
    fc.array(fc.tuple(between(0.2, 1), between(0.1, 0.4)), { minLength: 3, maxLength: 8 }),
  )
  .map(([x, y, spokes]) => {
    const round = spokes.reduce((sum, [step]) => sum + step, 0);
    let turned = 0;
    return polygon(
      ...spokes.map(([step, length]) => {
        turned += step / round;
        return polar(x, y, 360 * turned, length);
      }),
    );
  })
  // Less than half a turn from corner to corner: the centre lies within and the border does not meet itself.
  .filter((shape) => shape.kind === 'polygon' && widestTurn(shape.corners) < 0.9 * Math.PI);

function widestTurn(corners: readonly Point[]): number {
  const [x, y] = [0, 1].map((k) => corners.reduce((sum, corner) => sum + corner[k], 0) / corners.length);
  const angles = corners.map((corner) => Math.atan2(corner[1] - y, corner[0] - x));
  const turns = angles.map((angle, i) => angles[(i + 1) % angles.length] - angle);
  return Math.max(...turns.map((turn) => (turn < 0 ? turn + 2 * Math.PI : turn)));
}

export const circles: fc.Arbitrary<Shape> = fc
  .tuple(between(0.1, 0.9), between(0.1, 0.9), between(0.03, 0.45))
  .map(([x, y, radius]) => circle(x, y, radius));

/** Codes of the faults a call is refused with; a message where it is not refused, or by another error. */
export function faultCodes(call: () => unknown): string[] {
  try {
    call();
  } catch (error) {
    if (error instanceof Error && error.name === 'InputError') return (error as InputError).faults.map((f) => f.code);
    return [`not an InputError: ${String(error)}`];
  }
  return ['not refused'];
}
