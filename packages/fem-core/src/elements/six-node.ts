import type { Mesh } from '../mesh/mesh.js';
import { cornerCount } from '../mesh/mesh.js';
import type { TriangleRule } from './quadrature.js';
import { RULE_1, RULE_2, RULE_5 } from './quadrature.js';

/** Reference coordinates (xi, eta) of the six nodes: corners, then the middles opposite them. */
export const NODES: readonly (readonly [xi: number, eta: number])[] = [
  [0, 0],
  [1, 0],
  [0, 1],
  [0.5, 0.5],
  [0, 0.5],
  [0.5, 0],
];

/**
 * Shape functions of the six-node triangle at (xi, eta), with L0 = 1 - xi - eta, L1 = xi, L2 = eta:
 * corner i: Li (2 Li - 1); middle opposite corner i: 4 Lj Lk.
 *
 * @param out  Float64Array(6), overwritten and returned
 */
export function shapeValues(xi: number, eta: number, out: Float64Array): Float64Array {
  const zeta = 1 - xi - eta;
  out[0] = zeta * (2 * zeta - 1);
  out[1] = xi * (2 * xi - 1);
  out[2] = eta * (2 * eta - 1);
  out[3] = 4 * xi * eta;
  out[4] = 4 * eta * zeta;
  out[5] = 4 * zeta * xi;
  return out;
}

/** Derivatives of the shape functions to xi (out[0 ... 5]) and eta (out[6 ... 11]). */
export function shapeSlopes(xi: number, eta: number, out: Float64Array): Float64Array {
  const zeta = 1 - xi - eta;
  out[0] = 1 - 4 * zeta;
  out[1] = 4 * xi - 1;
  out[2] = 0;
  out[3] = 4 * eta;
  out[4] = -4 * eta;
  out[5] = 4 * (zeta - xi);
  out[6] = 1 - 4 * zeta;
  out[7] = 0;
  out[8] = 4 * eta - 1;
  out[9] = 4 * xi;
  out[10] = 4 * (zeta - eta);
  out[11] = -4 * xi;
  return out;
}

/** A quadrature rule with the shape functions tabulated at its points. */
export interface ElementRule {
  readonly count: number;
  readonly weights: Float64Array;
  /** Float64Array(6q): shape functions. */
  readonly values: Float64Array;
  /** Float64Array(12q): slopes to xi, then to eta. */
  readonly slopes: Float64Array;
}

export function tabulate(rule: TriangleRule): ElementRule {
  const count = rule.weights.length;
  const values = new Float64Array(6 * count);
  const slopes = new Float64Array(12 * count);
  for (let q = 0; q < count; q++) {
    shapeValues(rule.points[2 * q], rule.points[2 * q + 1], values.subarray(6 * q, 6 * q + 6));
    shapeSlopes(rule.points[2 * q], rule.points[2 * q + 1], slopes.subarray(12 * q, 12 * q + 12));
  }
  return { count, weights: rule.weights, values, slopes };
}

/** Exact for what is uniform on straight triangles. */
export const CENTRE_RULE = tabulate(RULE_1);
/** Exact for the stiffness of straight triangles with one reluctivity. */
export const STRAIGHT_RULE = tabulate(RULE_2);
/** For curved triangles, varying reluctivity, and integrals of values. */
export const FULL_RULE = tabulate(RULE_5);

/** Where point q of the full rule lies in the triangle of these nodes. */
export function placeOf(coordinates: Float64Array, q: number): readonly [x: number, y: number] {
  let x = 0;
  let y = 0;
  for (let i = 0; i < 6; i++) {
    const n = FULL_RULE.values[6 * q + i];
    x += n * coordinates[2 * i];
    y += n * coordinates[2 * i + 1];
  }
  return [x, y];
}

/** Coordinates of the six nodes of triangle t, written into `out` (Float64Array(12), x y x y ...) and returned. */
export function nodeCoordinates(mesh: Mesh, t: number, out: Float64Array): Float64Array {
  for (let k = 0; k < 3; k++) {
    const v = 2 * mesh.triangles[3 * t + k];
    const e = 2 * mesh.triangleToEdge[3 * t + k];
    out[2 * k] = mesh.xy[v];
    out[2 * k + 1] = mesh.xy[v + 1];
    out[6 + 2 * k] = mesh.middles[e];
    out[7 + 2 * k] = mesh.middles[e + 1];
  }
  return out;
}

/**
 * Gradients of the six shape functions in the plane at one point of a triangle, from their slopes there.
 *
 *   J = [x_xi x_eta; y_xi y_eta],  grad N = J^-T (N_xi, N_eta)
 *
 * @param coordinates  see `nodeCoordinates`
 * @param slopes  table of `shapeSlopes`; `from` is the offset of the point in it
 * @param out  Float64Array(12): d/dx of the six functions, then d/dy, 1/m
 * @returns det J in m^2, positive in a valid triangle
 */
export function gradients(coordinates: Float64Array, slopes: Float64Array, from: number, out: Float64Array): number {
  let xXi = 0;
  let xEta = 0;
  let yXi = 0;
  let yEta = 0;
  for (let i = 0; i < 6; i++) {
    const x = coordinates[2 * i];
    const y = coordinates[2 * i + 1];
    const a = slopes[from + i];
    const b = slopes[from + 6 + i];
    xXi += a * x;
    xEta += b * x;
    yXi += a * y;
    yEta += b * y;
  }
  const det = xXi * yEta - xEta * yXi;
  for (let i = 0; i < 6; i++) {
    const a = slopes[from + i];
    const b = slopes[from + 6 + i];
    out[i] = (yEta * a - yXi * b) / det;
    out[6 + i] = (xXi * b - xEta * a) / det;
  }
  return det;
}

/**
 * Turns tabulated values or slopes of the six functions into those of the three linear functions L0, L1, L2: a potential
 * that is half-way between the ends at each middle node is their sum, Li = Ni + (Nj + Nk)/2 with the middles beside corner i.
 * Holds on curved triangles as well.
 *
 * @param of  six numbers from `from` on; the first three are overwritten
 */
export function foldToCorners(of: Float64Array, from: number): void {
  const [a, b, c] = [0.5 * of[from + 3], 0.5 * of[from + 4], 0.5 * of[from + 5]];
  of[from] += b + c;
  of[from + 1] += c + a;
  of[from + 2] += a + b;
}

/** Global node number of local node k of triangle t. */
export function globalNode(mesh: Mesh, t: number, k: number): number {
  return k < 3 ? mesh.triangles[3 * t + k] : cornerCount(mesh) + mesh.triangleToEdge[3 * t + k - 3];
}
