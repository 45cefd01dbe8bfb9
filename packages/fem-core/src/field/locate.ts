import { nodeCoordinates, shapeSlopes, shapeValues } from '../elements/six-node.js';
import type { Mesh } from '../mesh/mesh.js';
import { triangleCount } from '../mesh/mesh.js';

/** A place in a triangle by its reference coordinates. */
export interface Spot {
  /** Its number in the mesh. */
  readonly triangle: number;
  /** From 0 at corner 0 to 1 at corner 1. */
  readonly xi: number;
  /** From 0 at corner 0 to 1 at corner 2. */
  readonly eta: number;
}

/** Finds the triangle that holds a point: candidates from a grid of cells, one a triangle on average. */
export interface Locator {
  /** The triangle at (x, y) in metres, and where in it; undefined outside the mesh. On edges the triangle of lowest number is taken. */
  find(x: number, y: number): Spot | undefined;
}

/** A locator of a mesh, which serves all fields on it. */
export function buildLocator(mesh: Mesh): Locator {
  const m = triangleCount(mesh);
  const boxes = boxesOf(mesh);
  const [x0, y0, x1, y1] = boxes.all;
  const cell = Math.sqrt(((x1 - x0) * (y1 - y0)) / m) || 1;
  const nx = Math.max(1, Math.ceil((x1 - x0) / cell));
  const ny = Math.max(1, Math.ceil((y1 - y0) / cell));
  const clampX = (x: number): number => Math.min(nx - 1, Math.max(0, Math.floor((x - x0) / cell)));
  const clampY = (y: number): number => Math.min(ny - 1, Math.max(0, Math.floor((y - y0) / cell)));
  const start = new Int32Array(nx * ny + 1);
  const cover = (t: number, visit: (c: number) => void): void => {
    const i1 = clampX(boxes.of[4 * t + 2]);
    const j1 = clampY(boxes.of[4 * t + 3]);
    for (let j = clampY(boxes.of[4 * t + 1]); j <= j1; j++) {
      for (let i = clampX(boxes.of[4 * t]); i <= i1; i++) visit(j * nx + i);
    }
  };
  for (let t = 0; t < m; t++) cover(t, (c) => start[c + 1]++);
  for (let c = 0; c < nx * ny; c++) start[c + 1] += start[c];
  const list = new Int32Array(start[nx * ny]);
  const next = start.slice();
  for (let t = 0; t < m; t++) {
    cover(t, (c) => {
      list[next[c]++] = t;
    });
  }
  const slack = 1e-9 * Math.hypot(x1 - x0, y1 - y0);
  const search = newSearch();
  return {
    find(x, y) {
      if (!(x >= x0 - slack && x <= x1 + slack && y >= y0 - slack && y <= y1 + slack)) return undefined;
      const c = clampY(y) * nx + clampX(x);
      let best: Spot | undefined;
      let outside = Infinity;
      for (let p = start[c]; p < start[c + 1]; p++) {
        const spot = spotIn(mesh, list[p], x, y, search);
        const miss = -Math.min(spot.xi, spot.eta, 1 - spot.xi - spot.eta);
        if (miss <= 0) return spot;
        if (miss < outside && miss < slackOf(mesh, list[p])) [best, outside] = [spot, miss];
      }
      return best;
    },
  };
}

/**
 * How far beyond its border, in reference coordinates, a triangle still takes a point: one on an edge may miss every
 * triangle by rounding, one on a drawn circle lies beyond the quadratic edge that follows it. Where that edge bulges by the
 * share q of its chord the circle is q^3 chords farther out, and no triangle is less than a fifth of its edge high.
 */
function slackOf(mesh: Mesh, t: number): number {
  if (mesh.curved[t] === 0) return ROUNDING;
  const { xy, middles, triangles, triangleToEdge } = mesh;
  let slack = ROUNDING;
  for (let k = 0; k < 3; k++) {
    const m = 2 * triangleToEdge[3 * t + k];
    const a = 2 * triangles[3 * t + ((k + 1) % 3)];
    const b = 2 * triangles[3 * t + ((k + 2) % 3)];
    const bulge = Math.hypot(middles[m] - 0.5 * (xy[a] + xy[b]), middles[m + 1] - 0.5 * (xy[a + 1] + xy[b + 1]));
    slack += 5 * (bulge / Math.hypot(xy[b] - xy[a], xy[b + 1] - xy[a + 1])) ** 3;
  }
  return slack;
}

const ROUNDING = 1e-6;

function boxesOf(mesh: Mesh): { readonly of: Float64Array; readonly all: [number, number, number, number] } {
  const m = triangleCount(mesh);
  const of = new Float64Array(4 * m);
  const all: [number, number, number, number] = [Infinity, Infinity, -Infinity, -Infinity];
  const at = new Float64Array(12);
  for (let t = 0; t < m; t++) {
    nodeCoordinates(mesh, t, at);
    const xs = [at[0], at[2], at[4]];
    const ys = [at[1], at[3], at[5]];
    if (mesh.curved[t] === 1) {
      // A quadratic edge stays within the box of its ends and twice the way to its middle.
      for (let k = 0; k < 3; k++) {
        const i = (k + 1) % 3;
        const j = (k + 2) % 3;
        xs.push(2 * at[6 + 2 * k] - 0.5 * (at[2 * i] + at[2 * j]));
        ys.push(2 * at[7 + 2 * k] - 0.5 * (at[2 * i + 1] + at[2 * j + 1]));
      }
    }
    const box = [Math.min(...xs), Math.min(...ys), Math.max(...xs), Math.max(...ys)];
    of.set(box, 4 * t);
    for (let k = 0; k < 2; k++) {
      all[k] = Math.min(all[k], box[k]);
      all[k + 2] = Math.max(all[k + 2], box[k + 2]);
    }
  }
  return { of, all };
}

/** What a search works with, overwritten in every triangle: nodes, and shape functions and their slopes at one place. */
export interface Search {
  readonly coordinates: Float64Array;
  readonly values: Float64Array;
  readonly slopes: Float64Array;
}

export const newSearch = (): Search => ({
  coordinates: new Float64Array(12),
  values: new Float64Array(6),
  slopes: new Float64Array(12),
});

/** Reference coordinates of (x, y) in triangle t, inside or not; by Newton's method where the triangle is curved. */
export function spotIn(mesh: Mesh, t: number, x: number, y: number, search: Search): Spot {
  const { coordinates: at, values, slopes } = search;
  nodeCoordinates(mesh, t, at);
  const ux = at[2] - at[0];
  const uy = at[3] - at[1];
  const vx = at[4] - at[0];
  const vy = at[5] - at[1];
  const det = ux * vy - uy * vx;
  let xi = ((x - at[0]) * vy - (y - at[1]) * vx) / det;
  let eta = (ux * (y - at[1]) - uy * (x - at[0])) / det;
  for (let step = 0; step < 20 && mesh.curved[t] === 1; step++) {
    shapeValues(xi, eta, values);
    shapeSlopes(xi, eta, slopes);
    let px = x;
    let py = y;
    for (let i = 0; i < 6; i++) {
      px -= values[i] * at[2 * i];
      py -= values[i] * at[2 * i + 1];
    }
    const [dXi, dEta] = referenceStep(search, px, py);
    xi += dXi;
    eta += dEta;
    if (Math.abs(dXi) + Math.abs(dEta) < 1e-14) break;
  }
  return { triangle: t, xi, eta };
}

/** J^-1 (px, py), with J from the slopes just tabulated. */
function referenceStep({ coordinates: at, slopes }: Search, px: number, py: number): [number, number] {
  let xXi = 0;
  let xEta = 0;
  let yXi = 0;
  let yEta = 0;
  for (let i = 0; i < 6; i++) {
    xXi += slopes[i] * at[2 * i];
    xEta += slopes[6 + i] * at[2 * i];
    yXi += slopes[i] * at[2 * i + 1];
    yEta += slopes[6 + i] * at[2 * i + 1];
  }
  const det = xXi * yEta - xEta * yXi;
  return [(px * yEta - py * xEta) / det, (xXi * py - yXi * px) / det];
}
