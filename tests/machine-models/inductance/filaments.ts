import { MU0 } from '../../helpers/machines.js';

type Place = readonly [x: number, y: number];
interface Opening {
  readonly innerRadius: number;
  readonly outerRadius: number;
  readonly innerWidth: number;
  readonly outerWidth: number;
}

/** A line so far outside a trapezium, round its corners, as so many equal pieces; y along the coil's axis. */
function lineAround({ innerRadius, outerRadius, innerWidth, outerWidth }: Opening, apart: number, pieces: number) {
  const corners: Place[] = [
    [-innerWidth / 2, innerRadius],
    [innerWidth / 2, innerRadius],
    [outerWidth / 2, outerRadius],
    [-outerWidth / 2, outerRadius],
  ];
  const at = (i: number): Place => corners[(i + 4) % 4] ?? [0, 0];
  const outwards = (a: Place, b: Place): number => Math.atan2(-(b[0] - a[0]), b[1] - a[1]);
  const line: Place[] = [];
  for (let i = 0; i < 4; i++) {
    const from = outwards(at(i - 1), at(i));
    let to = outwards(at(i), at(i + 1));
    while (to < from) to += 2 * Math.PI;
    for (let j = 0; j <= 10; j++) {
      const angle = from + ((to - from) * j) / 10;
      line.push([at(i)[0] + apart * Math.cos(angle), at(i)[1] + apart * Math.sin(angle)]);
    }
  }
  line.push(line[0] ?? [0, 0]);
  return evenly(line, pieces);
}

function evenly(line: readonly Place[], pieces: number): readonly Place[] {
  const lengths = line.slice(1).map((b, i) => Math.hypot(b[0] - (line[i]?.[0] ?? 0), b[1] - (line[i]?.[1] ?? 0)));
  const step = lengths.reduce((sum, l) => sum + l, 0) / pieces;
  const points: Place[] = [line[0] ?? [0, 0]];
  let along = 0;
  lengths.forEach((length, i) => {
    const [a, b] = [line[i] ?? [0, 0], line[i + 1] ?? [0, 0]];
    while (points.length < pieces && points.length * step <= along + length) {
      const share = (points.length * step - along) / length;
      points.push([a[0] + share * (b[0] - a[0]), a[1] + share * (b[1] - a[1])]);
    }
    along += length;
  });
  points.push(line[0] ?? [0, 0]);
  return points;
}

const rotated = (line: readonly Place[], angle: number): readonly Place[] =>
  line.map(([x, y]) => [x * Math.cos(angle) - y * Math.sin(angle), x * Math.sin(angle) + y * Math.cos(angle)]);

/** Neumann's double sum for two lines in planes so far apart. */
function neumann(p: readonly Place[], q: readonly Place[], apart: number): number {
  let sum = 0;
  for (let i = 0; i + 1 < p.length; i++) {
    const [[ax, ay], [bx, by]] = [p[i] ?? [0, 0], p[i + 1] ?? [0, 0]];
    for (let j = 0; j + 1 < q.length; j++) {
      const [[cx, cy], [dx, dy]] = [q[j] ?? [0, 0], q[j + 1] ?? [0, 0]];
      const distance = Math.sqrt(((ax + bx - cx - dx) / 2) ** 2 + ((ay + by - cy - dy) / 2) ** 2 + apart * apart);
      sum += ((bx - ax) * (dx - cx) + (by - ay) * (dy - cy)) / distance;
    }
  }
  return (MU0 * sum) / (4 * Math.PI);
}

/**
 * Mutual inductance in air of two coils of one turn, alike, the second turned by an angle round the shaft (0: the coil with
 * itself), as bundles of cells x cells filaments; a filament's cell with itself by its mean distance 0.2235 (width + height).
 */
export function airInductance(opening: Opening, legWidth: number, thickness: number, angle: number): number {
  const cells = 4;
  const [width, height] = [legWidth / cells, thickness / cells];
  const lines = Array.from({ length: cells }, (_, i) => lineAround(opening, (i + 0.5) * width, 240));
  let sum = 0;
  lines.forEach((line, i) => {
    lines.forEach((second, j) => {
      const other = rotated(second, angle);
      for (let apart = 0; apart < cells; apart++) {
        const own = apart === 0 && i === j && angle === 0;
        const distance = own ? 0.2235 * (width + height) : apart * height;
        sum += (apart === 0 ? 1 : 2) * (cells - apart) * neumann(line, other, distance);
      }
    });
  });
  return sum / cells ** 4;
}
