import type { Point, Section } from '../../../packages/fem-core/src/geometry/section.js';

/** A straight piece of the border of a shape, by the shape's number. */
interface Line {
  readonly shape: number;
  readonly p: Point;
  readonly q: Point;
}

/** A circle, by the shape's number. */
interface Round {
  readonly shape: number;
  readonly centre: Point;
  readonly radius: number;
}

/**
 * Area of each region of a section, the background first, by a method of its own: the plane is cut into slabs at every x
 * where borders begin, end or cross, and in each the lengths of the vertical lines are integrated with Gauss points after
 * x = a + (b - a) u^2 (3 - 2 u), which takes away the square roots where circles turn. Exact but for rounding.
 */
export function overlayAreas(section: Section): number[] {
  const shapes = [section.outline, ...section.regions.map((region) => region.shape)];
  const lines: Line[] = [];
  const rounds: Round[] = [];
  shapes.forEach((shape, i) => {
    if (shape.kind === 'circle') rounds.push({ shape: i, centre: shape.centre, radius: shape.radius });
    else {
      const corners = shape.kind === 'polygon' ? shape.corners : cornersBetween(shape.from, shape.to);
      corners.forEach((p, k) => {
        lines.push({ shape: i, p, q: corners[(k + 1) % corners.length] });
      });
    }
  });
  const cuts = slabEnds(lines, rounds);
  const areas = shapes.map(() => 0);
  for (let k = 0; k + 1 < cuts.length; k++) {
    const [a, width] = [cuts[k], cuts[k + 1] - cuts[k]];
    for (const [u, weight] of GAUSS) {
      const at = verticalLengths(lines, rounds, a + width * u * u * (3 - 2 * u), shapes.length);
      for (let i = 0; i < areas.length; i++) areas[i] += weight * width * 6 * u * (1 - u) * at[i];
    }
  }
  return areas;
}

const cornersBetween = (from: Point, to: Point): readonly Point[] => [from, [to[0], from[1]], to, [from[0], to[1]]];

/** Lengths of the vertical line at x in each region. */
function verticalLengths(lines: readonly Line[], rounds: readonly Round[], x: number, shapeCount: number): number[] {
  const hits: [y: number, shape: number][] = [];
  for (const { shape, p, q } of lines) {
    if (p[0] < x === q[0] < x) continue;
    hits.push([p[1] + ((x - p[0]) / (q[0] - p[0])) * (q[1] - p[1]), shape]);
  }
  for (const { shape, centre, radius } of rounds) {
    const half2 = radius * radius - (x - centre[0]) ** 2;
    if (half2 > 0) for (const sign of [-1, 1]) hits.push([centre[1] + sign * Math.sqrt(half2), shape]);
  }
  hits.sort((a, b) => a[0] - b[0]);
  const within = Array.from({ length: shapeCount }, () => false);
  const lengths = within.map(() => 0);
  for (let n = 0; n + 1 < hits.length; n++) {
    const [y, shape] = hits[n];
    within[shape] = !within[shape];
    if (within[0]) lengths[Math.max(0, within.lastIndexOf(true))] += hits[n + 1][0] - y;
  }
  return lengths;
}

/** Every x at which something changes on the vertical line, rising. */
function slabEnds(lines: readonly Line[], rounds: readonly Round[]): number[] {
  const xs: number[] = [];
  lines.forEach(({ p, q }, i) => {
    xs.push(p[0]);
    const [ux, uy] = [q[0] - p[0], q[1] - p[1]];
    for (const other of lines.slice(i + 1)) {
      const [vx, vy] = [other.q[0] - other.p[0], other.q[1] - other.p[1]];
      const cross = ux * vy - uy * vx;
      const share = ((other.p[0] - p[0]) * vy - (other.p[1] - p[1]) * vx) / cross;
      if (share > 0 && share < 1) xs.push(p[0] + share * ux);
    }
    for (const { centre, radius } of rounds) {
      const [fx, fy] = [p[0] - centre[0], p[1] - centre[1]];
      const [a, b] = [ux * ux + uy * uy, fx * ux + fy * uy];
      const root = Math.sqrt(b * b - a * (fx * fx + fy * fy - radius * radius));
      if (root >= 0) xs.push(p[0] + ((-b - root) / a) * ux, p[0] + ((-b + root) / a) * ux);
    }
  });
  rounds.forEach(({ centre, radius }, i) => {
    xs.push(centre[0] - radius, centre[0] + radius);
    for (const other of rounds.slice(i + 1)) {
      const [dx, dy] = [other.centre[0] - centre[0], other.centre[1] - centre[1]];
      const d2 = dx * dx + dy * dy;
      const s = 0.5 * (1 + (radius ** 2 - other.radius ** 2) / d2);
      const h = Math.sqrt((radius ** 2 - s * s * d2) / d2);
      if (h >= 0) xs.push(centre[0] + s * dx - h * dy, centre[0] + s * dx + h * dy);
    }
  });
  return [...new Set(xs)].sort((a, b) => a - b);
}

/** Eight-point Gauss-Legendre rule on [0, 1]; Abramowitz, Stegun, Handbook of Mathematical Functions, table 25.4. */
const GAUSS: readonly (readonly [u: number, weight: number])[] = [
  [0.1834346424956498, 0.362683783378362],
  [0.525532409916329, 0.3137066458778873],
  [0.7966664774136267, 0.2223810344533745],
  [0.9602898564975363, 0.1012285362903763],
].flatMap(([x, w]) => [[0.5 * (1 - x), 0.5 * w] as const, [0.5 * (1 + x), 0.5 * w] as const]);
