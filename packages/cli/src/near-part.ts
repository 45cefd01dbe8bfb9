import { cornerCount, edgeCount, type Mesh, triangleCount } from '@gapwright/fem-core/mesh';

/** The part of a mesh that shows the plane as it is, and where its nodes and triangles come from. */
export interface NearPart {
  readonly mesh: Mesh;
  /** Int32Array(nodes of the part): node of the whole mesh. */
  readonly nodes: Int32Array;
  /** Int32Array(triangles of the part): triangle of the whole mesh. */
  readonly triangles: Int32Array;
}

/** A mesh of unbounded space without the image of what lies far away, which would stand beside it in a picture. */
export function nearPart(mesh: Mesh): NearPart | undefined {
  const { beyond } = mesh;
  if (beyond === undefined) return undefined;
  const triangles = Int32Array.from(
    Array.from({ length: triangleCount(mesh) }, (_, t) => t).filter((t) => mesh.triangleToRegion[t] !== beyond.region),
  );
  const [keptCorners, newCorner] = keep(cornerCount(mesh), triangles, mesh.triangles);
  const [keptEdges, newEdge] = keep(edgeCount(mesh), triangles, mesh.triangleToEdge);
  const newTriangle = new Int32Array(triangleCount(mesh)).fill(-1);
  triangles.forEach((t, k) => {
    newTriangle[t] = k;
  });
  const threes = (from: Int32Array, renumber: Int32Array): Int32Array =>
    gather(from, triangles, 3).map((value) => (value < 0 ? -1 : renumber[value]));
  const { beyond: _, ...whole } = mesh;
  const part: Mesh = {
    ...whole,
    xy: gather(mesh.xy, keptCorners, 2),
    triangles: threes(mesh.triangles, newCorner),
    triangleToEdge: threes(mesh.triangleToEdge, newEdge),
    neighbours: threes(mesh.neighbours, newTriangle),
    triangleToRegion: gather(mesh.triangleToRegion, triangles, 1),
    edges: gather(mesh.edges, keptEdges, 2).map((corner) => newCorner[corner]),
    middles: gather(mesh.middles, keptEdges, 2),
    edgeToCurve: gather(mesh.edgeToCurve, keptEdges, 1),
    edgeToSide: gather(mesh.edgeToSide, keptEdges, 1),
    edgeToMatch: new Int32Array(keptEdges.length).fill(-1),
    curved: gather(mesh.curved, triangles, 1),
  };
  const corners = cornerCount(mesh);
  const nodes = Int32Array.from([...keptCorners, ...keptEdges.map((edge) => corners + edge)]);
  return { mesh: part, nodes, triangles };
}

/** Those of `count` things that the triangles have, in order, and the new number of each (-1 for the others). */
function keep(count: number, triangles: Int32Array, ofTriangle: Int32Array): readonly [Int32Array, Int32Array] {
  const used = new Uint8Array(count);
  for (const t of triangles) for (let k = 0; k < 3; k++) used[ofTriangle[3 * t + k]] = 1;
  const renumber = new Int32Array(count).fill(-1);
  const kept: number[] = [];
  for (let i = 0; i < count; i++) if (used[i] === 1) renumber[i] = kept.push(i) - 1;
  return [Int32Array.from(kept), renumber];
}

/** Groups of `size` values, picked. */
export function gather<T extends Float64Array | Int32Array | Uint8Array>(from: T, picked: Int32Array, size: number): T {
  const out = from.slice(0, picked.length * size) as T; // of the same kind and the length wanted
  picked.forEach((i, k) => {
    for (let j = 0; j < size; j++) out[size * k + j] = from[size * i + j];
  });
  return out;
}
