import { CholeskyDecomposition, Matrix } from 'ml-matrix';
import { RULE_2 } from '../elements/quadrature.js';
import { globalNode, gradients, nodeCoordinates, shapeSlopes, shapeValues } from '../elements/six-node.js';
import type { Mesh } from '../mesh/mesh.js';
import { cornerCount, triangleCount } from '../mesh/mesh.js';

/**
 * Gradients of nodal functions, recovered to one order more than the elements give: Float64Array(12 m) each, d/dx at the
 * six nodes of triangle t at 12 t, d/dy at 12 t + 6. Continuous within a smooth part, free to jump between parts.
 */
export type RecoveredGradient = Float64Array;

/** Triangles a patch should have, three samples each, for a quadratic fit of six coefficients that is not shaky. */
const ENOUGH = 5;

/**
 * Superconvergent patch recovery: round each corner, part by part, the gradient is fitted by a quadratic through its values
 * at three inner points of each triangle by least squares; middle nodes take the mean of the fits of their edge's ends.
 * Zienkiewicz, Zhu, The superconvergent patch recovery and a posteriori error estimates, Int. J. Numer. Meth. Engng 33, 1992.
 *
 * @param part  Int32Array(m): smooth part each triangle belongs to, of a field by `smoothParts`; the gradient may jump between
 * parts
 * @param functions  nodal vectors, Float64Array(nodes) each
 */
export function recoverGradients(
  mesh: Mesh,
  part: Int32Array,
  functions: readonly Float64Array[],
): RecoveredGradient[] {
  const m = triangleCount(mesh);
  const around = trianglesAround(mesh);
  const samples = sampleGradients(mesh, functions);
  const out = functions.map(() => new Float64Array(12 * m));
  const patch = newPatch(m, functions.length);
  for (let v = 0; v < cornerCount(mesh); v++) {
    const round = ++patch.epoch;
    for (let p = around.start[v]; p < around.start[v + 1]; p++) {
      if (patch.stamp[around.list[p]] >= round) continue; // its part has been fitted round v
      gatherPatch(mesh, part, around, v, part[around.list[p]], patch);
      fitPatch(mesh, v, samples, patch);
      spreadFit(mesh, v, patch, out);
    }
  }
  return out;
}

interface Around {
  /** Triangles at corner v: list[start[v]] ... list[start[v + 1] - 1]. */
  readonly start: Int32Array;
  readonly list: Int32Array;
}

function trianglesAround(mesh: Mesh): Around {
  const start = new Int32Array(cornerCount(mesh) + 1);
  for (let i = 0; i < mesh.triangles.length; i++) start[mesh.triangles[i] + 1]++;
  for (let v = 0; v < cornerCount(mesh); v++) start[v + 1] += start[v];
  const next = start.slice();
  const list = new Int32Array(mesh.triangles.length);
  for (let i = 0; i < mesh.triangles.length; i++) list[next[mesh.triangles[i]]++] = (i / 3) | 0;
  return { start, list };
}

/** The triangles of one fit, and the fit; used again for every patch. */
interface Patch {
  triangles: number[];
  /** So many of the first lie at the corner itself. */
  core: number;
  /** Int32Array(m): epoch in which a triangle was taken into a patch. */
  readonly stamp: Int32Array;
  epoch: number;
  /** Functions times two: columns of the fit. */
  readonly columns: number;
  /** Coefficients that were determined: 6, 3 or 1. */
  terms: number;
  /** Length the coordinates are scaled by, m. */
  size: number;
  /** Float64Array(36): normal matrix, lower triangle by rows of six, and its Cholesky factor. */
  readonly normal: Float64Array;
  readonly root: Float64Array;
  /** Float64Array(6 columns): right-hand sides, then coefficients, by terms. */
  readonly fit: Float64Array;
  readonly basis: Float64Array;
}

const newPatch = (triangles: number, functions: number): Patch => ({
  triangles: [],
  core: 0,
  stamp: new Int32Array(triangles),
  epoch: 0,
  columns: 2 * functions,
  terms: 6,
  size: 1,
  normal: new Float64Array(36),
  root: new Float64Array(36),
  fit: new Float64Array(12 * functions),
  basis: new Float64Array(6),
});

/** All triangles of one part at a corner, and neighbours of the part until there are enough, or no more are to be had. */
function gatherPatch(mesh: Mesh, part: Int32Array, around: Around, v: number, own: number, patch: Patch): void {
  const { triangles, stamp } = patch;
  const epoch = ++patch.epoch;
  triangles.length = 0;
  for (let p = around.start[v]; p < around.start[v + 1]; p++) {
    const t = around.list[p];
    if (part[t] !== own) continue;
    stamp[t] = epoch;
    triangles.push(t);
  }
  patch.core = triangles.length;
  for (let from = 0; triangles.length < ENOUGH && from < triangles.length; ) {
    const until = triangles.length;
    for (; from < until; from++) {
      for (let k = 0; k < 3; k++) {
        const u = mesh.neighbours[3 * triangles[from] + k];
        if (u < 0 || stamp[u] === epoch || part[u] !== own) continue;
        stamp[u] = epoch;
        triangles.push(u);
      }
    }
  }
  // Triangles that only widen a patch may lie at the corner in another part's turn: their stamp must not tell they had it.
  for (let i = patch.core; i < triangles.length; i++) stamp[triangles[i]] = 0;
}

interface Samples {
  /** Float64Array(6 m): places of the three points of each triangle. */
  readonly places: Float64Array;
  /** Per function Float64Array(6 m): gradients there. */
  readonly gradients: readonly Float64Array[];
}

function sampleGradients(mesh: Mesh, functions: readonly Float64Array[]): Samples {
  const m = triangleCount(mesh);
  const places = new Float64Array(6 * m);
  const sampled = functions.map(() => new Float64Array(6 * m));
  const at = new Float64Array(12);
  const grad = new Float64Array(12);
  const shapes = [0, 1, 2].map((q) => shapeValues(RULE_2.points[2 * q], RULE_2.points[2 * q + 1], new Float64Array(6)));
  const slopes = [0, 1, 2].map((q) =>
    shapeSlopes(RULE_2.points[2 * q], RULE_2.points[2 * q + 1], new Float64Array(12)),
  );
  for (let t = 0; t < m; t++) {
    nodeCoordinates(mesh, t, at);
    for (let q = 0; q < 3; q++) {
      gradients(at, slopes[q], 0, grad);
      const p = 6 * t + 2 * q;
      for (let i = 0; i < 6; i++) {
        places[p] += shapes[q][i] * at[2 * i];
        places[p + 1] += shapes[q][i] * at[2 * i + 1];
        const node = globalNode(mesh, t, i);
        for (let f = 0; f < functions.length; f++) {
          sampled[f][p] += grad[i] * functions[f][node];
          sampled[f][p + 1] += grad[6 + i] * functions[f][node];
        }
      }
    }
  }
  return { places, gradients: sampled };
}

/** Fits columns of gradients by monomials in coordinates from the corner, scaled to the patch. */
function fitPatch(mesh: Mesh, v: number, samples: Samples, patch: Patch): void {
  const { triangles } = patch;
  const x0 = mesh.xy[2 * v];
  const y0 = mesh.xy[2 * v + 1];
  patch.size = 0;
  for (let i = 0; i < triangles.length; i++) {
    for (let k = 3 * triangles[i]; k < 3 * triangles[i] + 3; k++) {
      const w = mesh.triangles[k];
      patch.size = Math.max(patch.size, Math.abs(mesh.xy[2 * w] - x0), Math.abs(mesh.xy[2 * w + 1] - y0));
    }
  }
  sumNormalEquations(x0, y0, samples, patch);
  patch.terms = 6;
  if (3 * triangles.length >= 9 && factorNormal(patch)) solveNormal(patch);
  else fitLess(patch);
}

function sumNormalEquations(x0: number, y0: number, samples: Samples, patch: Patch): void {
  const { triangles, normal, fit, basis, columns, size } = patch;
  normal.fill(0);
  fit.fill(0);
  for (let k = 0; k < triangles.length; k++) {
    for (let p = 6 * triangles[k]; p < 6 * triangles[k] + 6; p += 2) {
      monomials((samples.places[p] - x0) / size, (samples.places[p + 1] - y0) / size, basis);
      for (let i = 0; i < 6; i++) {
        const b = basis[i];
        for (let j = 0; j <= i; j++) normal[6 * i + j] += b * basis[j];
        for (let c = 0; c < columns; c++) fit[columns * i + c] += b * samples.gradients[c >> 1][p + (c & 1)];
      }
    }
  }
}

function monomials(x: number, y: number, out: Float64Array): void {
  out[0] = 1;
  out[1] = x;
  out[2] = y;
  out[3] = x * x;
  out[4] = x * y;
  out[5] = y * y;
}

/** Cholesky's factor of the normal matrix; false where points on one conic leave the quadratic all but undetermined. */
function factorNormal({ normal, root: a }: Patch): boolean {
  a.set(normal);
  let least = Infinity;
  let most = 0;
  for (let i = 0; i < 6; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = a[6 * i + j];
      for (let k = 0; k < j; k++) sum -= a[6 * i + k] * a[6 * j + k];
      if (j < i) a[6 * i + j] = sum / a[7 * j];
      else if (sum > 0) a[7 * i] = Math.sqrt(sum);
      else return false;
    }
    least = Math.min(least, a[7 * i]);
    most = Math.max(most, a[7 * i]);
  }
  return least > SHAKY * most;
}

const SHAKY = 1e-4;

function solveNormal({ root, fit, columns }: Patch): void {
  for (let i = 0; i < 6; i++) {
    for (let c = 0; c < columns; c++) {
      let sum = fit[columns * i + c];
      for (let k = 0; k < i; k++) sum -= root[6 * i + k] * fit[columns * k + c];
      fit[columns * i + c] = sum / root[7 * i];
    }
  }
  for (let i = 5; i >= 0; i--) {
    for (let c = 0; c < columns; c++) {
      let sum = fit[columns * i + c];
      for (let k = i + 1; k < 6; k++) sum -= root[6 * k + i] * fit[columns * k + c];
      fit[columns * i + c] = sum / root[7 * i];
    }
  }
}

/** Where the quadratic is not determined, the linear fit, or else the mean. `fit` still holds the right-hand sides. */
function fitLess(patch: Patch): void {
  const { fit, normal, columns } = patch;
  for (patch.terms = 3; ; patch.terms = 1) {
    const { terms } = patch;
    const at = (i: number, j: number): number => normal[6 * Math.max(i, j) + Math.min(i, j)];
    const matrix = new Matrix(
      Array.from({ length: terms }, (_, i) => Array.from({ length: terms }, (_, j) => at(i, j))),
    );
    const decomposition = new CholeskyDecomposition(matrix);
    const diagonal = decomposition.lowerTriangularMatrix.diagonal();
    const shaky = !decomposition.isPositiveDefinite() || Math.min(...diagonal) <= SHAKY * Math.max(...diagonal);
    if (terms > 1 && shaky) continue;
    const right = Matrix.from1DArray(terms, columns, fit.subarray(0, terms * columns));
    fit.set(decomposition.solve(right).to1DArray());
    return;
  }
}

/** Writes the fit's value at the corner, and half its values at the middles of the edges that end there. */
function spreadFit(mesh: Mesh, v: number, patch: Patch, out: readonly Float64Array[]): void {
  const { triangles, core, fit, columns, terms, size, basis } = patch;
  const x0 = mesh.xy[2 * v];
  const y0 = mesh.xy[2 * v + 1];
  for (let n = 0; n < core; n++) {
    const t = triangles[n];
    for (let k = 0; k < 3; k++) {
      if (mesh.triangles[3 * t + k] === v) {
        for (let c = 0; c < columns; c++) out[c >> 1][12 * t + 6 * (c & 1) + k] = fit[c];
        continue;
      }
      // The middle opposite another corner of this triangle lies on an edge that ends at v.
      const e = 2 * mesh.triangleToEdge[3 * t + k];
      monomials((mesh.middles[e] - x0) / size, (mesh.middles[e + 1] - y0) / size, basis);
      for (let c = 0; c < columns; c++) {
        let sum = 0;
        for (let i = 0; i < terms; i++) sum += basis[i] * fit[columns * i + c];
        out[c >> 1][12 * t + 6 * (c & 1) + 3 + k] += 0.5 * sum;
      }
    }
  }
}
