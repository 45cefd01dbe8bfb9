import { RULE_5, subdivided } from '../elements/quadrature.js';
import type { ElementRule } from '../elements/six-node.js';
import { FULL_RULE, globalNode, gradients, nodeCoordinates, shapeValues, tabulate } from '../elements/six-node.js';
import type { Mesh } from '../mesh/mesh.js';
import { nodeCount, triangleCount } from '../mesh/mesh.js';
import type { Spot } from './locate.js';

/**
 * A linear functional of the potential as a nodal vector g, Float64Array(nodes): J(A) = g . A. The answers that steer an
 * adaptive solution are told to it in this form.
 */
export type Functional = Float64Array;

/** J(A) = g . A for A at the nodes, Float64Array(nodes), Wb/m. */
export function applyFunctional(functional: Functional, potential: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < functional.length; i++) sum += functional[i] * potential[i];
  return sum;
}

/**
 * J(A) = integral of weight(x, y) A over the named regions, x and y in metres.
 *
 * @param wavelength  the shortest along which the weight varies, m: elements are cut for the quadrature until they span no
 * more than a quarter of it; weights that vary slowly need none
 */
export function weightedIntegral(
  mesh: Mesh,
  regions: readonly string[],
  weight: (x: number, y: number) => number,
  wavelength = Infinity,
): Functional {
  const g = new Float64Array(nodeCount(mesh));
  const cuts = Math.min(MOST_CUTS, Math.max(1, Math.ceil((4 * longestEdgeIn(mesh, regions)) / wavelength)));
  const rule = cuts === 1 ? FULL_RULE : tabulate(subdivided(RULE_5, cuts));
  eachPoint(mesh, regions, rule, (t, q, x, y, area) => {
    const w = area * weight(x, y);
    for (let i = 0; i < 6; i++) g[globalNode(mesh, t, i)] += w * rule.values[6 * q + i];
  });
  return g;
}

const MOST_CUTS = 16;

function longestEdgeIn(mesh: Mesh, regions: readonly string[]): number {
  const { xy, edges } = mesh;
  const wanted = mesh.regionNames.map((name) => regions.includes(name));
  let longest = 0;
  mesh.triangleToEdge.forEach((e, i) => {
    if (!wanted[mesh.triangleToRegion[(i / 3) | 0]]) return;
    const a = 2 * edges[2 * e];
    const b = 2 * edges[2 * e + 1];
    longest = Math.max(longest, Math.hypot(xy[a] - xy[b], xy[a + 1] - xy[b + 1]));
  });
  return longest;
}

/** J(A) = integral of wx Bx + wy By over the named regions, with the weights (wx, wy) given at (x, y) in metres. */
export function weightedFlux(
  mesh: Mesh,
  regions: readonly string[],
  weight: (x: number, y: number, triangle: number, point: number) => readonly [wx: number, wy: number],
): Functional {
  const g = new Float64Array(nodeCount(mesh));
  eachPoint(mesh, regions, FULL_RULE, (t, q, x, y, area, grad) => {
    const [wx, wy] = weight(x, y, t, q);
    for (let i = 0; i < 6; i++) g[globalNode(mesh, t, i)] += area * (wx * grad[6 + i] - wy * grad[i]);
  });
  return g;
}

/** J(A) = A at a place, Wb/m. */
export function pointPotential(mesh: Mesh, spot: Spot): Functional {
  const g = new Float64Array(nodeCount(mesh));
  const shapes = shapeValues(spot.xi, spot.eta, new Float64Array(6));
  for (let i = 0; i < 6; i++) g[globalNode(mesh, spot.triangle, i)] += shapes[i];
  return g;
}

function eachPoint(
  mesh: Mesh,
  regions: readonly string[],
  rule: ElementRule,
  visit: (t: number, q: number, x: number, y: number, area: number, grad: Float64Array) => void,
): void {
  const wanted = mesh.regionNames.map((name) => regions.includes(name));
  const at = new Float64Array(12);
  const grad = new Float64Array(12);
  for (let t = 0; t < triangleCount(mesh); t++) {
    if (!wanted[mesh.triangleToRegion[t]]) continue;
    nodeCoordinates(mesh, t, at);
    for (let q = 0; q < rule.count; q++) {
      const area = rule.weights[q] * gradients(at, rule.slopes, 12 * q, grad);
      let x = 0;
      let y = 0;
      for (let i = 0; i < 6; i++) {
        x += rule.values[6 * q + i] * at[2 * i];
        y += rule.values[6 * q + i] * at[2 * i + 1];
      }
      visit(t, q, x, y, area, grad);
    }
  }
}
