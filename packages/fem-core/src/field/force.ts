import { MU0 } from '../base/constants.js';
import { FULL_RULE, globalNode } from '../elements/six-node.js';
import { nodeCount, triangleCount } from '../mesh/mesh.js';
import { airLayer, airRegions, cutsAcross } from './air-layer.js';
import type { Field } from './field.js';
import type { Functional } from './functionals.js';
import type { FieldSample } from './integrals.js';
import { forEachSample } from './integrals.js';

/** Force and torque per metre of depth. */
export interface Force {
  /** Along x, N/m. */
  readonly fx: number;
  /** Along y, N/m. */
  readonly fy: number;
  /** N m per metre, about the origin or the given point; counter-clockwise positive. */
  readonly torque: number;
}

/**
 * Force on the named regions by Maxwell's stress averaged over the air round them:
 *
 *   F_i = - integral T_ij dw/dx_j,   T_ij = (B_i B_j - delta_ij B^2/2)/mu0,
 *
 * with w = 1 on the body and 0 on all else (`airLayer`); no path enters. Coulomb, A methodology for the determination of
 * global electromechanical quantities, IEEE Trans. Magn. 19, 1983.
 *
 * A body that a side of the outline cuts in two is taken for one half of a symmetric one: the force along the side is that on
 * the half; across it, and the torque, are NaN, for the stress in the cut is not known.
 *
 * @param about  point the torque is about, m
 * @param layer  `airLayer(field, regions)`, where it is known already
 * @throws InputError where the body is not surrounded by air (linear, mu_r = 1, no current) or touches another body
 */
export function forceOn(
  field: Field,
  regions: readonly string[],
  about: readonly [number, number] = [0, 0],
  layer: Float64Array = airLayer(field, regions),
): Force {
  let fx = 0;
  let fy = 0;
  let torque = 0;
  forEachLayerSample(field, layer, (s, wx, wy) => {
    const half = 0.5 * (s.bx * s.bx + s.by * s.by);
    const px = (-s.area * ((s.bx * s.bx - half) * wx + s.bx * s.by * wy)) / MU0;
    const py = (-s.area * (s.bx * s.by * wx + (s.by * s.by - half) * wy)) / MU0;
    fx += px;
    fy += py;
    torque += (s.x - about[0]) * py - (s.y - about[1]) * px;
  });
  const cut = cutsAcross(field, regions);
  return {
    fx: cut.x ? Number.NaN : fx,
    fy: cut.y ? Number.NaN : fy,
    torque: cut.x || cut.y ? Number.NaN : torque,
  };
}

/** Visits the samples of air where the layer's function changes, with its gradient, 1/m. */
function forEachLayerSample(
  field: Field,
  layer: Float64Array,
  visit: (sample: FieldSample, wx: number, wy: number) => void,
): void {
  const { mesh } = field;
  forEachSample(field, airRegions(field), (s) => {
    let wx = 0;
    let wy = 0;
    for (let i = 0; i < 6; i++) {
      const w = layer[globalNode(mesh, s.triangle, i)];
      wx += w * s.grad[i];
      wy += w * s.grad[6 + i];
    }
    if (wx !== 0 || wy !== 0) visit(s, wx, wy);
  });
}

/** Sum of the stress all round, whichever way it pulls: what forces that balance are nought beside, N/m and N. */
export function stressSize(
  field: Field,
  layer: Float64Array,
  about: readonly [number, number],
): { readonly force: number; readonly torque: number; readonly length: number } {
  let [force, torque, length] = [0, 0, 0];
  forEachLayerSample(field, layer, (s, wx, wy) => {
    const along = s.area * Math.hypot(wx, wy);
    const pull = (along * (s.bx * s.bx + s.by * s.by)) / (2 * MU0);
    length += along;
    force += pull;
    torque += pull * Math.hypot(s.x - about[0], s.y - about[1]);
  });
  return { force, torque, length };
}

/** Derivatives of `forceOn` with respect to the potential, as functionals. */
export function forceFunctionals(
  field: Field,
  about: readonly [number, number],
  layer: Float64Array,
): { readonly fx: Functional; readonly fy: Functional; readonly torque: Functional } {
  const [fx, fy, torque] = [0, 1, 2].map(() => new Float64Array(nodeCount(field.mesh)));
  forEachLayerSample(field, layer, (s, wx, wy) => {
    const weight = -s.area / MU0;
    // d(T w)_x = (Bx wx + By wy) dBx + (Bx wy - By wx) dBy,  d(T w)_y = (By wx - Bx wy) dBx + (Bx wx + By wy) dBy
    const along = weight * (s.bx * wx + s.by * wy);
    const across = weight * (s.bx * wy - s.by * wx);
    const [rx, ry] = [s.x - about[0], s.y - about[1]];
    for (let i = 0; i < 6; i++) {
      const node = globalNode(field.mesh, s.triangle, i);
      const [dBx, dBy] = [s.grad[6 + i], -s.grad[i]];
      const px = along * dBx + across * dBy;
      const py = along * dBy - across * dBx;
      fx[node] += px;
      fy[node] += py;
      torque[node] += rx * py - ry * px;
    }
  });
  return { fx, fy, torque };
}

/**
 * What the error of B adds to a force beyond its derivative, by triangle: integral of |grad w| |e|^2/(2 mu0), the stress of
 * the error alone, N/m; times the distance from `about` for the torque, N.
 * @param recovered  gradient of A as `recoverGradients` gives it
 */
export function forceRemainder(
  field: Field,
  layer: Float64Array,
  recovered: Float64Array,
  about?: readonly [number, number],
): Float64Array {
  const out = new Float64Array(triangleCount(field.mesh));
  forEachSample(field, airRegions(field), (s) => {
    let [wx, wy] = [0, 0];
    let [ex, ey] = [s.by, -s.bx]; // less the elements' gradient of A, which is (-By, Bx)
    for (let i = 0; i < 6; i++) {
      const w = layer[globalNode(field.mesh, s.triangle, i)];
      wx += w * s.grad[i];
      wy += w * s.grad[6 + i];
      const shape = FULL_RULE.values[6 * s.point + i];
      ex += shape * recovered[12 * s.triangle + i];
      ey += shape * recovered[12 * s.triangle + 6 + i];
    }
    const arm = about === undefined ? 1 : Math.hypot(s.x - about[0], s.y - about[1]);
    out[s.triangle] += (arm * s.area * Math.hypot(wx, wy) * (ex * ex + ey * ey)) / (2 * MU0);
  });
  return out;
}

/**
 * Maxwell's stress averaged through given regions of air: F = - integral T grad w, with grad w given by place; for layers
 * whose shape is known, such as the gap of a machine.
 * @param slope  grad w at (x, y) in metres, 1/m: of a function that is 1 on the body and falls to 0 through the layer
 * @returns the force on the body, N/m
 */
export function stressThrough(
  field: Field,
  regions: readonly string[],
  slope: (x: number, y: number) => readonly [wx: number, wy: number],
): Pick<Force, 'fx' | 'fy'> {
  let fx = 0;
  let fy = 0;
  forEachSample(field, regions, (s) => {
    const [wx, wy] = slope(s.x, s.y);
    const half = 0.5 * (s.bx * s.bx + s.by * s.by);
    fx -= (s.area * ((s.bx * s.bx - half) * wx + s.bx * s.by * wy)) / MU0;
    fy -= (s.area * (s.bx * s.by * wx + (s.by * s.by - half) * wy)) / MU0;
  });
  return { fx, fy };
}

/**
 * Derivative of `stressThrough(field, regions, slope).fy` with respect to the potential, as a functional, N/m per Wb/m: what
 * an adaptive solution needs to bound the error of a pull.
 */
export function stressFunctional(
  field: Field,
  regions: readonly string[],
  slope: (x: number, y: number) => readonly [wx: number, wy: number],
): Functional {
  const { mesh } = field;
  const g = new Float64Array(nodeCount(mesh));
  forEachSample(field, regions, (s) => {
    const [wx, wy] = slope(s.x, s.y);
    // d(-T_yx wx - T_yy wy) = -((Bx wx + By wy) dBy + (By wx - Bx wy) dBx)/mu0
    const toBx = (-s.area * (s.by * wx - s.bx * wy)) / MU0;
    const toBy = (-s.area * (s.bx * wx + s.by * wy)) / MU0;
    for (let i = 0; i < 6; i++) g[globalNode(mesh, s.triangle, i)] += toBx * s.grad[6 + i] - toBy * s.grad[i];
  });
  return g;
}
