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
 * where borders begin, end or cross, so that in each the borders keep their order, and the area under each border is the
 * closed form of a line's or a circle's. Exact but for rounding.
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
  for (let k = 0; k + 1 < cuts.length; k++) addSlab(lines, rounds, cuts[k], cuts[k + 1], areas);
  return areas;
}

const cornersBetween = (from: Point, to: Point): readonly Point[] => [from, [to[0], from[1]], to, [from[0], to[1]]];

/** Adds the areas of each region between two x, where no border begins, ends or crosses another. */
function addSlab(lines: readonly Line[], rounds: readonly Round[], a: number, b: number, areas: number[]): void {
  const middle = 0.5 * (a + b);
  const x = a + 0.414 * (b - a); // where the order is taken: off the middle, in which a circle may touch a line
  const hits: { readonly y: number; readonly under: number; readonly shape: number }[] = [];
  for (const { shape, p, q } of lines) {
    if (p[0] < x === q[0] < x) continue;
    const at = (place: number): number => p[1] + ((place - p[0]) / (q[0] - p[0])) * (q[1] - p[1]);
    hits.push({ y: at(x), under: at(middle) * (b - a), shape });
  }
  for (const { shape, centre, radius } of rounds) {
    const half2 = radius * radius - (x - centre[0]) ** 2;
    if (!(half2 > 0)) continue;
    const cap = underCircle(b - centre[0], radius) - underCircle(a - centre[0], radius);
    for (const sign of [-1, 1])
      hits.push({ y: centre[1] + sign * Math.sqrt(half2), under: centre[1] * (b - a) + sign * cap, shape });
  }
  hits.sort((p, q) => p.y - q.y);
  const within = areas.map(() => false);
  for (let n = 0; n + 1 < hits.length; n++) {
    const { shape, under } = hits[n];
    within[shape] = !within[shape];
    if (within[0]) areas[Math.max(0, within.lastIndexOf(true))] += hits[n + 1].under - under;
  }
}

/** Integral of sqrt(r^2 - x^2). */
function underCircle(x: number, r: number): number {
  const at = Math.min(r, Math.max(-r, x));
  return 0.5 * (at * Math.sqrt(r * r - at * at) + r * r * Math.asin(at / r));
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
