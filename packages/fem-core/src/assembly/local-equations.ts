import type { ElementRule } from '../elements/six-node.js';
import {
  CENTRE_RULE,
  FULL_RULE,
  foldToCorners,
  globalNode,
  gradients,
  nodeCoordinates,
  placeOf,
  STRAIGHT_RULE,
} from '../elements/six-node.js';
import { referenceTensor, slopeProducts } from '../elements/straight-stiffness.js';
import type { LocalLaw } from '../materials/constitutive.js';
import { evaluateMaterial, newLaw } from '../materials/constitutive.js';
import { directionAt } from '../materials/direction.js';
import type { Material } from '../materials/material.js';
import { isNonlinear } from '../materials/material.js';
import type { Mesh } from '../mesh/mesh.js';

/** Residual and tangent of one triangle, and what it takes to work them out. */
export interface LocalEquations {
  /** Order of the elements: 2 with six local functions, 1 with the three of the corners. */
  readonly order: 1 | 2;
  /** Float64Array(functions), Wb/m: A of the local functions. */
  readonly potential: Float64Array;
  /** Float64Array(functions), A: integral of H . curl N_i. */
  readonly residual: Float64Array;
  /** Float64Array(pairs), m/H: integral of curl N_i . dH/dB curl N_j, i >= j. */
  readonly matrix: Float64Array;
  readonly coordinates: Float64Array;
  readonly grad: Float64Array;
  readonly law: LocalLaw;
  readonly tensor: Float64Array;
  readonly products: Float64Array;
}

export const newLocalEquations = (order: 1 | 2): LocalEquations => ({
  order,
  potential: new Float64Array(3 * order),
  residual: new Float64Array(3 * order),
  matrix: new Float64Array(order === 2 ? 21 : 6),
  coordinates: new Float64Array(12),
  grad: new Float64Array(12),
  law: newLaw(),
  tensor: new Float64Array(3),
  products: slopeProducts(order),
});

/** Which derivative: dH/dB, or the chord reluctivity, H/B of steel, alike in all directions. */
export type Derivative = 'tangent' | 'chord';

/** Works out residual and matrix of triangle t at the potential in `local`, by quadrature. */
export function formEquations(
  mesh: Mesh,
  t: number,
  material: Material,
  derivative: Derivative,
  local: LocalEquations,
): void {
  const { order, potential, residual, matrix, coordinates, grad, law } = local;
  const functions = 3 * order;
  const turning = material.kind === 'directed-magnet';
  const rule = ruleFor(order, mesh.curved[t] === 1, turning, isNonlinear(material));
  nodeCoordinates(mesh, t, coordinates);
  residual.fill(0);
  matrix.fill(0);
  for (let q = 0; q < rule.count; q++) {
    const weight = rule.weights[q] * gradients(coordinates, rule.slopes, 12 * q, grad);
    if (order === 1) {
      foldToCorners(grad, 0);
      foldToCorners(grad, 6);
    }
    let gx = 0;
    let gy = 0;
    for (let i = 0; i < functions; i++) {
      gx += potential[i] * grad[i];
      gy += potential[i] * grad[6 + i];
    }
    const [x, y] = turning ? placeOf(coordinates, q) : ORIGIN;
    evaluateMaterial(material, gy, -gx, x, y, law);
    for (let i = 0; i < functions; i++) residual[i] += weight * (law.hx * grad[6 + i] - law.hy * grad[i]);
    if (derivative === 'tangent') {
      addProducts(grad, functions, weight * law.xx, weight * law.xy, weight * law.yy, matrix);
    } else {
      const [c, s] = law.nu === law.nuAcross ? [1, 0] : axesOf(material, x, y);
      const xx = c * c * law.nu + s * s * law.nuAcross;
      const xy = c * s * (law.nu - law.nuAcross);
      const yy = s * s * law.nu + c * c * law.nuAcross;
      addProducts(grad, functions, weight * xx, weight * xy, weight * yy, matrix);
    }
  }
}

/** Cosine and sine of the direction of magnetisation. */
function axesOf(material: Material, x: number, y: number): readonly [cos: number, sin: number] {
  const angle = material.kind === 'directed-magnet' ? directionAt(material.direction, x, y) : 0;
  return [Math.cos(angle), Math.sin(angle)];
}

const ORIGIN = [0, 0] as const;

/** The fewest points that leave no error where the law is uniform, else the full rule. A linear A is uniform on straight triangles. */
function ruleFor(order: 1 | 2, curved: boolean, turning: boolean, nonlinear: boolean): ElementRule {
  if (curved || turning) return FULL_RULE;
  if (order === 1) return CENTRE_RULE;
  return nonlinear ? FULL_RULE : STRAIGHT_RULE;
}

/** curl N_i . [xx xy; xy yy] curl N_j, curl N = (dN/dy, -dN/dx). */
function addProducts(
  grad: Float64Array,
  functions: number,
  xx: number,
  xy: number,
  yy: number,
  matrix: Float64Array,
): void {
  for (let i = 0, p = 0; i < functions; i++) {
    const cx = xx * grad[6 + i] - xy * grad[i];
    const cy = xy * grad[6 + i] - yy * grad[i];
    for (let j = 0; j <= i; j++) matrix[p++] += cx * grad[6 + j] - cy * grad[j];
  }
}

/**
 * The same for a triangle whose H is an affine function of B, at A = 0: then the residual is minus the source of its
 * remanence, and the matrix is that of any field.
 *
 * @returns whether there may be a residual; where there is none it is left as it was
 */
export function formConstantEquations(mesh: Mesh, t: number, material: Material, local: LocalEquations): boolean {
  const { law, coordinates, tensor, products, matrix } = local;
  if (mesh.curved[t] === 1 || material.kind === 'directed-magnet' || material.kind === 'magnet') {
    local.potential.fill(0);
    formEquations(mesh, t, material, 'tangent', local);
    return material.kind !== 'linear';
  }
  evaluateMaterial(material, 0, 0, 0, 0, law);
  nodeCoordinates(mesh, t, coordinates);
  // Between gradients, not curls: turned by a right angle.
  referenceTensor(coordinates, law.yy, -law.xy, law.xx, tensor);
  for (let p = 0; p < matrix.length; p++) {
    matrix[p] = tensor[0] * products[3 * p] + tensor[1] * products[3 * p + 1] + tensor[2] * products[3 * p + 2];
  }
  return false;
}

/** Adds the integrals of density times N_i over triangle t to a nodal vector. */
export function addCurrent(mesh: Mesh, t: number, density: number, local: LocalEquations, nodal: Float64Array): void {
  const { order, coordinates, grad } = local;
  nodeCoordinates(mesh, t, coordinates);
  if (mesh.curved[t] === 0) {
    // Six functions: a third of the area for each middle, nothing for the corners; three: a third for each corner.
    const share = (density * referenceTensor(coordinates, 1, 0, 1, local.tensor)) / 6;
    for (let k = 0; k < 3; k++) nodal[globalNode(mesh, t, order === 2 ? 3 + k : k)] += share;
    return;
  }
  const values = local.residual.fill(0);
  for (let q = 0; q < FULL_RULE.count; q++) {
    const weight = density * FULL_RULE.weights[q] * gradients(coordinates, FULL_RULE.slopes, 12 * q, grad);
    const functions = FULL_RULE.values.slice(6 * q, 6 * q + 6);
    if (order === 1) foldToCorners(functions, 0);
    for (let i = 0; i < values.length; i++) values[i] += weight * functions[i];
  }
  for (let i = 0; i < values.length; i++) nodal[globalNode(mesh, t, i)] += values[i];
}
