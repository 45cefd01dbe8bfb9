import { materialOf } from '../assembly/setup.js';
import { MU0 } from '../base/constants.js';
import { InputError } from '../base/fault.js';
import { globalNode } from '../elements/six-node.js';
import { BEYOND_REGION } from '../geometry/unbounded.js';
import { cornerCount, nodeCount, triangleCount } from '../mesh/mesh.js';
import type { Field } from './field.js';
import type { Functional } from './functionals.js';
import { forEachSample } from './integrals.js';

/** Per metre of depth. */
export interface Force {
  /** N/m. */
  readonly fx: number;
  readonly fy: number;
  /** N m per metre, about the origin or the given point; counter-clockwise positive. */
  readonly torque: number;
}

/**
 * Force on the named regions by Maxwell's stress averaged over a layer of air round them, three elements deep where there
 * is room:
 *
 *   F_i = - integral T_ij dw/dx_j,   T_ij = (B_i B_j - delta_ij B^2/2)/mu0,
 *
 * with w = 1 on the body and 0 beyond the layer; no path enters. Coulomb, A methodology for the determination of global
 * electromechanical quantities, IEEE Trans. Magn. 19, 1983.
 *
 * @throws InputError where the body is not surrounded by air (linear, mu_r = 1, no current) or touches another body
 */
export function forceOn(field: Field, regions: readonly string[], about: readonly [number, number] = [0, 0]): Force {
  const { mesh } = field;
  const weight = layerWeights(field, regions);
  let fx = 0;
  let fy = 0;
  let torque = 0;
  forEachSample(field, airRegions(field), (s) => {
    // w is quadratic on curved triangles (middle values half-way), so that it is 1 all along a round body.
    const w = [0, 1, 2].map((k) => weight[mesh.triangles[3 * s.triangle + k]]);
    if (w[0] === w[1] && w[1] === w[2]) return;
    let wx = 0;
    let wy = 0;
    for (let i = 0; i < 6; i++) {
      const value = i < 3 ? w[i] : 0.5 * (w[(i + 1) % 3] + w[(i + 2) % 3]);
      wx += value * s.grad[i];
      wy += value * s.grad[6 + i];
    }
    const half = 0.5 * (s.bx * s.bx + s.by * s.by);
    const px = (-s.area * ((s.bx * s.bx - half) * wx + s.bx * s.by * wy)) / MU0;
    const py = (-s.area * (s.bx * s.by * wx + (s.by * s.by - half) * wy)) / MU0;
    fx += px;
    fy += py;
    torque += (s.x - about[0]) * py - (s.y - about[1]) * px;
  });
  return { fx, fy, torque };
}

/** Regions of air: where Maxwell's stress has no divergence. */
function airRegions(field: Field): string[] {
  const { mesh, setup } = field;
  return mesh.regionNames.filter((name) => {
    if (name === BEYOND_REGION) return false; // an image: distances there are not those of space
    const material = materialOf(setup, name);
    const current = (setup.currentDensity?.[name] ?? 0) !== 0 || (setup.current?.[name] ?? 0) !== 0;
    return material?.kind === 'linear' && material.muR === 1 && !current;
  });
}

const DEPTH = 3;

/** w at the corners: 1 on the body, falling by a third a ring of elements, 0 on whatever else is not air and on the outline. */
function layerWeights(field: Field, regions: readonly string[]): Float64Array {
  const { mesh, setup } = field;
  const air = airRegions(field);
  const kind = mesh.regionNames.map((name) => (regions.includes(name) ? 'body' : air.includes(name) ? 'air' : 'other'));
  const n = cornerCount(mesh);
  const ring = new Int32Array(n).fill(DEPTH);
  const other = new Uint8Array(n);
  for (let t = 0; t < triangleCount(mesh); t++) {
    const k = kind[mesh.triangleToRegion[t]];
    for (let i = 3 * t; i < 3 * t + 3; i++) {
      if (k === 'body') ring[mesh.triangles[i]] = 0;
      else if (k === 'other') other[mesh.triangles[i]] = 1;
    }
  }
  if (ring.every((r) => r > 0))
    throw fault('names no region with area', `regions here are: ${mesh.regionNames.join(', ')}`);
  if (ring.some((r, v) => r === 0 && other[v] === 1)) {
    throw fault(
      'touches another body',
      'a force is defined on a body with air all round it; name all parts that move together',
    );
  }
  // Stress on the outline pushes whatever lies beyond; on bound sides what leaves by the one comes in by the other.
  for (let e = 0; e < mesh.edgeToSide.length; e++) {
    const side = mesh.edgeToSide[e];
    const condition = side < 0 ? undefined : (setup.edges?.[mesh.sideNames[side]]?.kind ?? 'closed');
    if (condition === undefined || condition === 'repeating' || condition === 'reversing') continue;
    other[mesh.edges[2 * e]] = 1;
    other[mesh.edges[2 * e + 1]] = 1;
  }
  for (let depth = 1; depth < DEPTH; depth++) {
    for (let t = 0; t < triangleCount(mesh); t++) {
      if (kind[mesh.triangleToRegion[t]] !== 'air') continue;
      const corners = [0, 1, 2].map((k) => mesh.triangles[3 * t + k]);
      if (!corners.some((v) => ring[v] === depth - 1)) continue;
      for (const v of corners) if (ring[v] > depth && other[v] === 0) ring[v] = depth;
    }
  }
  return Float64Array.from(ring, (r) => 1 - r / DEPTH);

  function fault(wrong: string, remedy: string): InputError {
    return new InputError([{ code: 'no-force', key: regions.join(', '), wrong, remedy }]);
  }
}

/**
 * Maxwell's stress averaged through given regions of air: F = - integral T grad w, with grad w given by place; for layers
 * whose shape is known, such as the gap of a machine.
 */
export function stressThrough(
  field: Field,
  regions: readonly string[],
  slope: (x: number, y: number) => readonly [wx: number, wy: number],
): { readonly fx: number; readonly fy: number } {
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
 * Derivative of `stressThrough(...).fy` with respect to the potential, as a functional: what an adaptive solution needs to
 * bound the error of a pull.
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
