import type { Point, Shape } from '@gapwright/fem-core';

/** Share of the outline's size within which a point counts as on its border. */
const HAIR = 1e-9;

/** Whether a point lies outside a shape, its border counting as inside; false where a coordinate is NaN. */
export function liesOutside(shape: Shape, [x, y]: Point): boolean {
  switch (shape.kind) {
    case 'rectangle': {
      const [x0, x1] = sorted(shape.from[0], shape.to[0]);
      const [y0, y1] = sorted(shape.from[1], shape.to[1]);
      const hair = HAIR * Math.max(x1 - x0, y1 - y0);
      return x < x0 - hair || x > x1 + hair || y < y0 - hair || y > y1 + hair;
    }
    case 'circle':
      return Math.hypot(x - shape.centre[0], y - shape.centre[1]) > (1 + HAIR) * shape.radius;
    case 'polygon':
      return !Number.isNaN(x + y) && liesOutsidePolygon(shape.corners, x, y);
  }
}

const sorted = (a: number, b: number): readonly [number, number] => (a < b ? [a, b] : [b, a]);

/** Even-odd rule on a ray towards +x, but a point within a hair of a side is inside. */
function liesOutsidePolygon(corners: readonly Point[], x: number, y: number): boolean {
  const reach = corners.reduce(
    (most, [cx, cy]) => Math.max(most, Math.hypot(cx - corners[0][0], cy - corners[0][1])),
    0,
  );
  let outside = true;
  for (let i = 0, j = corners.length - 1; i < corners.length; j = i++) {
    const [[px, py], [qx, qy]] = [corners[j], corners[i]];
    const [dx, dy] = [qx - px, qy - py];
    const share = Math.min(1, Math.max(0, ((x - px) * dx + (y - py) * dy) / (dx * dx + dy * dy || 1)));
    if (Math.hypot(px + share * dx - x, py + share * dy - y) <= HAIR * reach) return false;
    if (py > y !== qy > y && x < px + ((y - py) / dy) * dx) outside = !outside;
  }
  return outside;
}
