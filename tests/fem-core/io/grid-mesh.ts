import type { Mesh } from '../../../packages/fem-core/src/mesh/mesh.js';

/** What `gridMesh` builds: columns x rows squares of the rectangle, each cut in two. */
export interface GridPlan {
  readonly from: readonly [number, number];
  readonly to: readonly [number, number];
  readonly columns: number;
  readonly rows: number;
  readonly regionNames: readonly string[];
  /** Region number at the middle of a square. */
  readonly regionAt: (x: number, y: number) => number;
}

/** A structured mesh of straight six-node triangles over a rectangle. */
export function gridMesh(plan: GridPlan): Mesh {
  const { columns, rows } = plan;
  const x = (i: number) => plan.from[0] + ((plan.to[0] - plan.from[0]) * i) / columns;
  const y = (j: number) => plan.from[1] + ((plan.to[1] - plan.from[1]) * j) / rows;
  const corner = (i: number, j: number) => j * (columns + 1) + i;
  const xy: number[] = [];
  for (let j = 0; j <= rows; j++) for (let i = 0; i <= columns; i++) xy.push(x(i), y(j));
  const triangles: number[] = [];
  const triangleToRegion: number[] = [];
  for (let j = 0; j < rows; j++) {
    for (let i = 0; i < columns; i++) {
      const [a, b, c, d] = [corner(i, j), corner(i + 1, j), corner(i + 1, j + 1), corner(i, j + 1)];
      // Diagonals alternate, so that nothing lines up by accident.
      triangles.push(...((i + j) % 2 === 0 ? [a, b, c, a, c, d] : [a, b, d, b, c, d]));
      const region = plan.regionAt((x(i) + x(i + 1)) / 2, (y(j) + y(j + 1)) / 2);
      triangleToRegion.push(region, region);
    }
  }
  return connect(
    Float64Array.from(xy),
    Int32Array.from(triangles),
    Int32Array.from(triangleToRegion),
    plan.regionNames,
  );
}

function connect(
  xy: Float64Array,
  triangles: Int32Array,
  triangleToRegion: Int32Array,
  regionNames: readonly string[],
): Mesh {
  const edgeOf = new Map<string, number>();
  const edges: number[] = [];
  const middles: number[] = [];
  const triangleToEdge = new Int32Array(triangles.length);
  const neighbours = new Int32Array(triangles.length).fill(-1);
  const firstSide: number[] = [];
  for (let s = 0; s < triangles.length; s++) {
    const t = Math.floor(s / 3);
    const a = triangles[3 * t + ((s + 1) % 3)];
    const b = triangles[3 * t + ((s + 2) % 3)];
    const key = a < b ? `${a},${b}` : `${b},${a}`;
    const known = edgeOf.get(key);
    if (known === undefined) {
      edgeOf.set(key, edges.length / 2);
      triangleToEdge[s] = edges.length / 2;
      firstSide.push(s);
      edges.push(a, b);
      middles.push((xy[2 * a] + xy[2 * b]) / 2, (xy[2 * a + 1] + xy[2 * b + 1]) / 2);
    } else {
      triangleToEdge[s] = known;
      neighbours[s] = Math.floor(firstSide[known] / 3);
      neighbours[firstSide[known]] = t;
    }
  }
  const none = new Int32Array(edges.length / 2).fill(-1);
  return {
    xy,
    triangles,
    triangleToEdge,
    neighbours,
    triangleToRegion,
    regionNames,
    edges: Int32Array.from(edges),
    middles: Float64Array.from(middles),
    edgeToCurve: none,
    curves: [],
    edgeToSide: none,
    sideNames: [],
    edgeToMatch: none,
    curved: new Uint8Array(triangleToRegion.length),
  };
}

/** Values of `f` at all nodes, corners first. */
export function atNodes(mesh: Mesh, f: (x: number, y: number) => number): Float64Array {
  const values: number[] = [];
  for (const points of [mesh.xy, mesh.middles]) {
    for (let i = 0; i < points.length; i += 2) values.push(f(points[i], points[i + 1]));
  }
  return Float64Array.from(values);
}
