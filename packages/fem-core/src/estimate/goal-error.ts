import { currentDensities } from '../assembly/currents.js';
import { materialOf } from '../assembly/setup.js';
import type { System } from '../assembly/system.js';
import { gatherToUnknowns, potentialOf } from '../assembly/unknowns.js';
import { FULL_RULE, globalNode, gradients, nodeCoordinates, placeOf } from '../elements/six-node.js';
import type { Field } from '../field/field.js';
import type { Functional } from '../field/functionals.js';
import { evaluateMaterial, newLaw } from '../materials/constitutive.js';
import type { Material } from '../materials/material.js';
import { isNonlinear } from '../materials/material.js';
import type { Mesh } from '../mesh/mesh.js';
import { triangleCount } from '../mesh/mesh.js';
import type { Tangent } from '../solve/tangent.js';
import { solveTangents } from '../solve/tangent.js';
import type { RecoveredGradient } from './recovery.js';
import { recoverGradients } from './recovery.js';

/** Margin of the bounds over the summed shares. */
const MARGIN = 1.25;

/** Estimated errors of a field. */
export interface ErrorEstimate {
  /** Per goal, per triangle: Float64Array(m), its share of the goal's error, in the goal's unit, not negative. */
  readonly goals: readonly Float64Array[];
  /**
   * Per goal: sum of the shares with a margin, a bound in practice. Shares of either sign would cancel, so the sum is
   * usually several times the error; where the goal is its own dual (an inductance, the mean field of a body in a uniform
   * one) none do, and the sum tends to the error itself, from below as often as from above.
   */
  readonly bounds: readonly number[];
  /**
   * Energy norm of the error squared, halved, J/m: estimate of the error of the energy functional, which is that of the
   * stored energy where there are no currents, or where all materials are linear.
   */
  readonly energy: number;
  /** The gradient of A as recovered, better than the elements' own. */
  readonly recovered: RecoveredGradient;
}

/**
 * Dual-weighted error estimate of linear functionals of a solved field. With z the solution of the adjoint problem
 * K z = g under the tangent K at the solution, J(A) - J(A_h) = K(e_A, e_z) for the errors of both (Galerkin orthogonality),
 * and both errors are read off the gap between recovered and element gradients. Where H bends within the error of B there is
 * more, as large as that product, both being squares of errors. The recovered dual is smooth, that of the tangent at A, and
 * to second order dH/dB(A) curl e_A is the difference H(curl A) - H(curl A_h), to which every z_h is orthogonal, and again
 * what of it is beyond the tangent at A_h, Q = H(curl A) - H(curl A_h) - dH/dB curl e_A. Hence
 *
 *   share of triangle T = | integral over T of  curl e_z . dH/dB curl e_A + curl z_h . Q |.
 *
 * Becker, Rannacher, An optimal control approach to a posteriori error estimation, Acta Numerica 10, 2001, whose remainder of
 * the linearisation Q is; gradients by `recoverGradients`.
 */
export function estimateGoalErrors(
  system: System,
  field: Field,
  tangent: Tangent,
  goals: readonly Functional[],
): ErrorEstimate {
  const { mesh } = field;
  const duals = solveAdjoints(system, tangent, goals);
  const [recovered, ...recoveredDuals] = recoverGradients(mesh, smoothParts(field), [field.potential, ...duals]);
  const m = triangleCount(mesh);
  const shares = goals.map(() => new Float64Array(m));
  const at = new Float64Array(12);
  const grad = new Float64Array(12);
  const gap: Gap = { gx: 0, gy: 0, ex: 0, ey: 0 };
  const law = newLaw();
  let energy = 0;
  for (let t = 0; t < m; t++) {
    const material = system.materials[mesh.triangleToRegion[t]];
    const placed = material.kind === 'directed-magnet';
    const bent = isNonlinear(material);
    nodeCoordinates(mesh, t, at);
    for (let q = 0; q < FULL_RULE.count; q++) {
      const weight = FULL_RULE.weights[q] * gradients(at, FULL_RULE.slopes, 12 * q, grad);
      measureGap(mesh, field.potential, recovered, t, q, grad, gap);
      const [x, y] = placed ? placeOf(at, q) : ORIGIN;
      evaluateMaterial(material, gap.gy, -gap.gx, x, y, law);
      // dH of the error: dB = (ey, -ex), and the same for the duals.
      const hx = law.xx * gap.ey - law.xy * gap.ex;
      const hy = law.xy * gap.ey - law.yy * gap.ex;
      let [qx, qy] = [0, 0];
      if (bent) {
        const { hx: hx0, hy: hy0 } = law;
        evaluateMaterial(material, gap.gy + gap.ey, -gap.gx - gap.ex, x, y, law);
        [qx, qy] = [law.hx - hx0 - hx, law.hy - hy0 - hy];
      }
      energy += 0.5 * weight * (hx * gap.ey - hy * gap.ex);
      for (let k = 0; k < goals.length; k++) {
        measureGap(mesh, duals[k], recoveredDuals[k], t, q, grad, gap);
        shares[k][t] += weight * (hx * gap.ey - hy * gap.ex + qx * gap.gy - qy * gap.gx);
      }
    }
    for (let k = 0; k < goals.length; k++) shares[k][t] = Math.abs(shares[k][t]);
  }
  const bounds = shares.map((share) => MARGIN * share.reduce((a, b) => a + b, 0));
  return { goals: shares, bounds, energy, recovered };
}

const ORIGIN = [0, 0] as const;

function solveAdjoints(system: System, tangent: Tangent, goals: readonly Functional[]): Float64Array[] {
  const { unknowns } = system;
  const n = unknowns.count;
  const right = new Float64Array(n * goals.length);
  goals.forEach((goal, k) => {
    gatherToUnknowns(unknowns, goal, right.subarray(k * n, (k + 1) * n));
  });
  solveTangents(tangent, right, right, goals.length);
  const free = { ...unknowns, fixed: new Float64Array(unknowns.fixed.length) };
  return goals.map((goal, k) => potentialOf(free, right.subarray(k * n, (k + 1) * n), new Float64Array(goal.length)));
}

/** Element gradient of a nodal function at a quadrature point, and recovered less element gradient. */
interface Gap {
  gx: number;
  gy: number;
  ex: number;
  ey: number;
}

function measureGap(
  mesh: Mesh,
  nodal: Float64Array,
  recovered: RecoveredGradient,
  t: number,
  q: number,
  grad: Float64Array,
  out: Gap,
): void {
  let gx = 0;
  let gy = 0;
  let rx = 0;
  let ry = 0;
  for (let i = 0; i < 6; i++) {
    const value = nodal[globalNode(mesh, t, i)];
    gx += value * grad[i];
    gy += value * grad[6 + i];
    const n = FULL_RULE.values[6 * q + i];
    rx += n * recovered[12 * t + i];
    ry += n * recovered[12 * t + 6 + i];
  }
  out.gx = gx;
  out.gy = gy;
  out.ex = rx - gx;
  out.ey = ry - gy;
}

/**
 * The smooth part each triangle belongs to, Int32Array(m): regions of one law and one current density are one part, within
 * which the gradient is smooth, such as air and a winding without current. Where the density jumps, the gradient has a kink.
 */
export function smoothParts({ mesh, setup }: Field): Int32Array {
  const density = currentDensities(mesh, setup);
  const seen: { readonly material: Material; readonly density: number }[] = [];
  const partOf = mesh.regionNames.map((name, region) => {
    const material = materialOf(setup, name);
    if (material === undefined) return -1;
    const known = seen.findIndex((other) => other.density === density[region] && sameLaw(other.material, material));
    return known >= 0 ? known : seen.push({ material, density: density[region] }) - 1;
  });
  return Int32Array.from(mesh.triangleToRegion, (region) => partOf[region]);
}

function sameLaw(a: Material, b: Material): boolean {
  if (a.kind === 'linear' && b.kind === 'linear') return a.muR === b.muR;
  if (a.kind === 'curve' && b.kind === 'curve') return a.curve === b.curve;
  if (a.kind === 'magnet' && b.kind === 'magnet') {
    return a.recoil === b.recoil && a.remanence[0] === b.remanence[0] && a.remanence[1] === b.remanence[1];
  }
  return a === b;
}
