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

/** Samples a patch needs for a quadratic fit of six coefficients. */
const ENOUGH = 12;

/**
 * Superconvergent patch recovery: round each corner, part by part, the gradient is fitted by a quadratic through its values
 * at three inner points of each triangle by least squares; middle nodes take the mean of the fits of their edge's ends.
 * Zienkiewicz, Zhu, The superconvergent patch recovery and a posteriori error estimates, Int. J. Numer. Meth. Engng 33, 1992.
 *
 * @param part  Int32Array(m): smooth part each triangle belongs to; the gradient may jump between parts
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
  const hits = new Float64Array(3 * m); // fits that have reached each middle node
  for (let v = 0; v < cornerCount(mesh); v++) {
    const ring = Array.from(around.list.subarray(around.start[v], around.start[v + 1]));
    for (const p of new Set(ring.map((t) => part[t]))) {
      const core = ring.filter((t) => part[t] === p);
      const patch = widened(mesh, part, core);
      spreadFit(mesh, v, core, fitPatch(mesh, v, patch, samples), out, hits);
    }
  }
  for (let t = 0; t < m; t++) {
    for (let k = 0; k < 3; k++) {
      for (const gradient of out) {
        gradient[12 * t + 3 + k] /= hits[3 * t + k];
        gradient[12 * t + 9 + k] /= hits[3 * t + k];
      }
    }
  }
  return out;
}

function trianglesAround(mesh: Mesh): { readonly start: Int32Array; readonly list: Int32Array } {
  const start = new Int32Array(cornerCount(mesh) + 1);
  for (const v of mesh.triangles) start[v + 1]++;
  for (let v = 0; v < cornerCount(mesh); v++) start[v + 1] += start[v];
  const next = start.slice();
  const list = new Int32Array(mesh.triangles.length);
  mesh.triangles.forEach((v, i) => {
    list[next[v]++] = (i / 3) | 0;
  });
  return { start, list };
}

/** The patch with neighbours of its own part added until it has samples enough, or no more are to be had. */
function widened(mesh: Mesh, part: Int32Array, core: readonly number[]): number[] {
  const patch = [...core];
  const within = new Set(patch);
  for (let from = 0; 3 * patch.length < ENOUGH && from < patch.length; ) {
    const until = patch.length;
    for (; from < until; from++) {
      for (let k = 0; k < 3; k++) {
        const u = mesh.neighbours[3 * patch[from] + k];
        if (u < 0 || within.has(u) || part[u] !== part[core[0]]) continue;
        within.add(u);
        patch.push(u);
      }
    }
  }
  return patch;
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

/** A fit round a corner: coefficients (terms x 2 functions) of monomials in coordinates scaled to the patch. */
interface Fit {
  readonly terms: number;
  readonly size: number;
  readonly coefficients: Matrix;
}

const monomials = (x: number, y: number): readonly number[] => [1, x, y, x * x, x * y, y * y];

function fitPatch(mesh: Mesh, v: number, patch: readonly number[], samples: Samples): Fit {
  const x0 = mesh.xy[2 * v];
  const y0 = mesh.xy[2 * v + 1];
  let size = 0;
  for (const t of patch) {
    for (let k = 0; k < 3; k++) {
      const w = mesh.triangles[3 * t + k];
      size = Math.max(size, Math.abs(mesh.xy[2 * w] - x0), Math.abs(mesh.xy[2 * w + 1] - y0));
    }
  }
  const columns = 2 * samples.gradients.length;
  for (let terms = 3 * patch.length >= 9 ? 6 : 3; ; terms = terms === 6 ? 3 : 1) {
    const normal = Matrix.zeros(terms, terms);
    const right = Matrix.zeros(terms, columns);
    for (const t of patch) {
      for (let p = 6 * t; p < 6 * t + 6; p += 2) {
        const basis = monomials((samples.places[p] - x0) / size, (samples.places[p + 1] - y0) / size);
        for (let i = 0; i < terms; i++) {
          for (let j = 0; j <= i; j++) normal.set(i, j, normal.get(i, j) + basis[i] * basis[j]);
          for (let f = 0; f < samples.gradients.length; f++) {
            right.set(i, 2 * f, right.get(i, 2 * f) + basis[i] * samples.gradients[f][p]);
            right.set(i, 2 * f + 1, right.get(i, 2 * f + 1) + basis[i] * samples.gradients[f][p + 1]);
          }
        }
      }
    }
    for (let i = 0; i < terms; i++) for (let j = 0; j < i; j++) normal.set(j, i, normal.get(i, j));
    const decomposition = new CholeskyDecomposition(normal);
    // Points on one conic leave the quadratic undetermined: fall back to the linear fit, then to the mean.
    if (terms === 1 || (decomposition.isPositiveDefinite() && wellPosed(decomposition.lowerTriangularMatrix))) {
      return { terms, size, coefficients: decomposition.solve(right) };
    }
  }
}

function wellPosed(lower: Matrix): boolean {
  let least = Infinity;
  let most = 0;
  for (let i = 0; i < lower.rows; i++) {
    least = Math.min(least, lower.get(i, i));
    most = Math.max(most, lower.get(i, i));
  }
  return least > 1e-4 * most;
}

/** Writes the fit's value at the corner, and adds its values at the middles of the edges that end there. */
function spreadFit(
  mesh: Mesh,
  v: number,
  core: readonly number[],
  fit: Fit,
  out: readonly Float64Array[],
  hits: Float64Array,
): void {
  const { terms, size, coefficients } = fit;
  const x0 = mesh.xy[2 * v];
  const y0 = mesh.xy[2 * v + 1];
  for (const t of core) {
    for (let k = 0; k < 3; k++) {
      if (mesh.triangles[3 * t + k] === v) {
        out.forEach((gradient, f) => {
          gradient[12 * t + k] = coefficients.get(0, 2 * f);
          gradient[12 * t + 6 + k] = coefficients.get(0, 2 * f + 1);
        });
        continue;
      }
      // The middle opposite another corner of this triangle lies on an edge that ends at v.
      const e = mesh.triangleToEdge[3 * t + k];
      const basis = monomials((mesh.middles[2 * e] - x0) / size, (mesh.middles[2 * e + 1] - y0) / size);
      hits[3 * t + k]++;
      for (let i = 0; i < terms; i++) {
        out.forEach((gradient, f) => {
          gradient[12 * t + 3 + k] += basis[i] * coefficients.get(i, 2 * f);
          gradient[12 * t + 9 + k] += basis[i] * coefficients.get(i, 2 * f + 1);
        });
      }
    }
  }
}
