import { foldToCorners, STRAIGHT_RULE } from './six-node.js';

/**
 * Integrals over the reference triangle that make the stiffness of a straight triangle with one tensor of reluctivity: for the
 * pair p = i (i + 1)/2 + j of local functions, i >= j, with slopes N,xi and N,eta
 *
 *   [3 p]      integral of Ni,xi Nj,xi
 *   [3 p + 1]  integral of Ni,xi Nj,eta + Ni,eta Nj,xi
 *   [3 p + 2]  integral of Ni,eta Nj,eta
 *
 * @param order  2: the six functions, 21 pairs; 1: the three linear ones, 6 pairs
 */
export function slopeProducts(order: 1 | 2): Float64Array {
  const size = 3 * order;
  const products = new Float64Array((3 * size * (size + 1)) / 2);
  for (let q = 0; q < STRAIGHT_RULE.count; q++) {
    const slopes = STRAIGHT_RULE.slopes.slice(12 * q, 12 * q + 12);
    if (order === 1) for (const from of [0, 6]) foldToCorners(slopes, from);
    const weight = STRAIGHT_RULE.weights[q];
    for (let i = 0, p = 0; i < size; i++) {
      for (let j = 0; j <= i; j++, p += 3) {
        products[p] += weight * slopes[i] * slopes[j];
        products[p + 1] += weight * (slopes[i] * slopes[6 + j] + slopes[6 + i] * slopes[j]);
        products[p + 2] += weight * slopes[6 + i] * slopes[6 + j];
      }
    }
  }
  return products;
}

/**
 * The numbers a straight triangle multiplies `slopeProducts` by: det J times J^-1 D J^-T for the tensor D = [xx xy; xy yy] that
 * goes between gradients.
 *
 * @param corners  x y of the three corners, and whatever follows
 * @param out  Float64Array(3): xi xi, xi eta, eta eta; overwritten
 * @returns det J, m^2
 */
export function referenceTensor(corners: Float64Array, xx: number, xy: number, yy: number, out: Float64Array): number {
  const xXi = corners[2] - corners[0];
  const yXi = corners[3] - corners[1];
  const xEta = corners[4] - corners[0];
  const yEta = corners[5] - corners[1];
  const det = xXi * yEta - xEta * yXi;
  // Rows of det J^-1: (yEta, -xEta) and (-yXi, xXi).
  const ax = xx * yEta - xy * xEta;
  const ay = xy * yEta - yy * xEta;
  out[0] = (ax * yEta - ay * xEta) / det;
  out[1] = (ay * xXi - ax * yXi) / det;
  out[2] = (xx * yXi * yXi - 2 * xy * xXi * yXi + yy * xXi * xXi) / det;
  return det;
}
