import { nodeCoordinates, shapeValues } from '../elements/six-node.js';
import { cornerCount, edgeCount, type Mesh, triangleCount, triangleNodes } from '../mesh/mesh.js';

/**
 * Six-node triangles cut into linear ones for drawing: p x p pieces each, so that lines drawn through a coarse mesh are
 * as smooth as its quadratic elements. N points: the mesh's corners, then p - 1 on each edge, then those inside.
 */
export interface DrawingMesh {
  readonly mesh: Mesh;
  /** p, pieces along an edge. */
  readonly pieces: number;
  /** Float64Array(2N), metres. */
  readonly xy: Float64Array;
  /** Int32Array(3 p^2 m): points of each linear triangle, counter-clockwise; those of six-node triangle t from p^2 t on. */
  readonly corners: Int32Array;
  /** Uint8Array(3 p^2 m): 1 + k where the side from that point to the next lies on the edge opposite corner k, else 0. */
  readonly onEdge: Uint8Array;
  /** Int32Array(6N), Float64Array(6N): nodes of the mesh, and shape functions, that give a value at each point. */
  readonly sources: Int32Array;
  readonly weights: Float64Array;
}

/** About this many linear triangles make a smooth picture. */
const wantedTriangles = 12_000;

/** @param pieces  along an edge; by default as many as a smooth picture needs, 2 to 8 */
export function buildDrawingMesh(mesh: Mesh, pieces = usualPieces(mesh)): DrawingMesh {
  const p = pieces;
  const inside = ((p - 1) * (p - 2)) / 2;
  const points = cornerCount(mesh) + (p - 1) * edgeCount(mesh) + inside * triangleCount(mesh);
  const drawing = {
    mesh,
    pieces,
    xy: new Float64Array(2 * points),
    corners: new Int32Array(3 * p * p * triangleCount(mesh)),
    onEdge: new Uint8Array(3 * p * p * triangleCount(mesh)),
    sources: new Int32Array(6 * points),
    weights: new Float64Array(6 * points),
  };
  const lattice = new Int32Array((p + 1) * (p + 1));
  const place = newPlace();
  for (let t = 0; t < triangleCount(mesh); t++) {
    numberLattice(mesh, t, p, lattice);
    placePoints(drawing, t, lattice, place);
    cutTriangle(drawing, t, lattice);
  }
  return drawing;
}

function usualPieces(mesh: Mesh): number {
  return Math.max(2, Math.min(8, Math.round(Math.sqrt(wantedTriangles / triangleCount(mesh)))));
}

/** Values at the N points from values at the nodes of the mesh (corners, then edge middles), quadratically. */
export function valuesAtPoints(drawing: DrawingMesh, nodal: Float64Array): Float64Array {
  const { sources, weights } = drawing;
  return Float64Array.from({ length: drawing.xy.length / 2 }, (_, point) => {
    let value = 0;
    for (let i = 6 * point; i < 6 * point + 6; i++) value += weights[i] * nodal[sources[i]];
    return value;
  });
}

/** Points along the edge of triangle t opposite corner k, from corner k + 1 to corner k + 2. */
export function pointsAlongEdge({ mesh, pieces }: DrawingMesh, t: number, k: number): number[] {
  return Array.from({ length: pieces + 1 }, (_, place) => edgePoint(mesh, t, k, place, pieces));
}

/** The point `place` of p pieces along that edge. Points of an edge are numbered from its first stored end. */
function edgePoint(mesh: Mesh, t: number, k: number, place: number, p: number): number {
  const start = mesh.triangles[3 * t + ((k + 1) % 3)];
  if (place === 0) return start;
  if (place === p) return mesh.triangles[3 * t + ((k + 2) % 3)];
  const edge = mesh.triangleToEdge[3 * t + k];
  const fromFirst = mesh.edges[2 * edge] === start ? place : p - place;
  return cornerCount(mesh) + edge * (p - 1) + fromFirst - 1;
}

/** Numbers of the points (a, b) of triangle t, a steps of p towards corner 1 and b towards corner 2, at a (p + 1) + b. */
function numberLattice(mesh: Mesh, t: number, p: number, out: Int32Array): void {
  let next = cornerCount(mesh) + (p - 1) * edgeCount(mesh) + (t * (p - 1) * (p - 2)) / 2;
  for (let a = 0; a <= p; a++) {
    for (let b = 0; b <= p - a; b++) {
      const at = a * (p + 1) + b;
      if (a + b === p) out[at] = edgePoint(mesh, t, 0, b, p);
      else if (a === 0) out[at] = edgePoint(mesh, t, 1, p - b, p);
      else if (b === 0) out[at] = edgePoint(mesh, t, 2, a, p);
      else out[at] = next++;
    }
  }
}

/** Nodes of one triangle, their coordinates, and the shape functions at one point of it. */
const newPlace = () => ({ six: new Int32Array(6), at: new Float64Array(12), shape: new Float64Array(6) });

function placePoints(
  { mesh, pieces: p, xy, sources, weights }: DrawingMesh,
  t: number,
  lattice: Int32Array,
  { six, at, shape }: ReturnType<typeof newPlace>,
): void {
  nodeCoordinates(mesh, t, at);
  triangleNodes(mesh, t, six);
  for (let a = 0; a <= p; a++) {
    for (let b = 0; b <= p - a; b++) {
      const point = lattice[a * (p + 1) + b];
      shapeValues(a / p, b / p, shape);
      let [x, y] = [0, 0];
      for (let i = 0; i < 6; i++) {
        x += shape[i] * at[2 * i];
        y += shape[i] * at[2 * i + 1];
      }
      xy[2 * point] = x;
      xy[2 * point + 1] = y;
      sources.set(six, 6 * point);
      weights.set(shape, 6 * point);
    }
  }
}

function cutTriangle({ pieces: p, corners, onEdge }: DrawingMesh, t: number, lattice: Int32Array): void {
  let q = 3 * p * p * t;
  const put = (a: number, b: number, edge: number): void => {
    corners[q] = lattice[a * (p + 1) + b];
    onEdge[q++] = edge;
  };
  for (let a = 0; a < p; a++) {
    for (let b = 0; a + b < p; b++) {
      put(a, b, b === 0 ? 3 : 0);
      put(a + 1, b, a + b === p - 1 ? 1 : 0);
      put(a, b + 1, a === 0 ? 2 : 0);
      if (a + b === p - 1) continue;
      put(a + 1, b, 0);
      put(a + 1, b + 1, 0);
      put(a, b + 1, 0);
    }
  }
}
