import { currentDensities } from '../assembly/currents.js';
import { regionAreas } from '../elements/areas.js';
import { FULL_RULE, globalNode, gradients, nodeCoordinates } from '../elements/six-node.js';
import type { RecoveredGradient } from '../estimate/recovery.js';
import type { Field } from '../field/field.js';
import type { Functional } from '../field/functionals.js';
import { energiesOf, forEachSample } from '../field/integrals.js';
import { evaluateMaterial, newLaw } from '../materials/constitutive.js';
import { nodeCount, triangleCount } from '../mesh/mesh.js';
import type { GoalAt } from '../pipeline.js';

/**
 * The stored energy and the coenergy, whose derivatives along dA are the integrals of H . dB and of B . dH. The energy is
 * weighed by its size, or a hundredth of what the magnets would store without flux where it is less: in a closed circuit they
 * store none.
 */
export function energyGoals(
  field: Field,
  weight: (size: number) => number,
): readonly [energy: GoalAt, coenergy: GoalAt] {
  const { mesh } = field;
  const byH = new Float64Array(nodeCount(mesh));
  const byB = new Float64Array(nodeCount(mesh));
  const law = newLaw();
  forEachSample(field, 'all', (s) => {
    evaluateMaterial(s.material, s.bx, s.by, s.x, s.y, law);
    const [bx, by] = [law.xx * s.bx + law.xy * s.by, law.xy * s.bx + law.yy * s.by];
    for (let i = 0; i < 6; i++) {
      const node = globalNode(mesh, s.triangle, i);
      byH[node] += s.area * (s.hx * s.grad[6 + i] - s.hy * s.grad[i]);
      byB[node] += s.area * (bx * s.grad[6 + i] - by * s.grad[i]);
    }
  });
  const { energy, coenergy } = energiesOf(field);
  const bounded = hasBound(field);
  let remanent = 0;
  forEachSample(field, 'all', (s) => {
    remanent += s.area * evaluateMaterial(s.material, 0, 0, s.x, s.y, law).energy;
  });
  const size = Math.max(energy, 0.01 * remanent);
  const remainder = (recovered: RecoveredGradient): Float64Array => energyOfError(field, recovered);
  return [
    { value: bounded ? energy : Number.NaN, functional: byH, weight: weight(size), remainder }, // steers all the same
    { value: bounded ? coenergy : Number.NaN, functional: byB, weight: 0, remainder },
  ];
}

/** In unbounded space the energy of a net current grows without end. */
function hasBound({ mesh, setup, netCurrent = 0 }: Field): boolean {
  if (netCurrent === 0) return true;
  const areas = regionAreas(mesh);
  const gross = currentDensities(mesh, setup).reduce((sum, density, k) => sum + Math.abs(density) * areas[k], 0);
  return Math.abs(netCurrent) <= 1e-9 * gross;
}

/** By triangle: integral of e . dH/dB e / 2, with e the gap between recovered and element flux density, J/m. */
function energyOfError(field: Field, recovered: RecoveredGradient): Float64Array {
  const out = new Float64Array(triangleCount(field.mesh));
  const law = newLaw();
  forEachGap(field, recovered, (s, ex, ey) => {
    evaluateMaterial(s.material, s.bx, s.by, s.x, s.y, law);
    out[s.triangle] += 0.5 * s.area * (law.xx * ex * ex + 2 * law.xy * ex * ey + law.yy * ey * ey);
  });
  return out;
}

type Sample = Parameters<Parameters<typeof forEachSample>[2]>[0];

/** Visits all samples with recovered less element flux density, T. */
export function forEachGap(
  field: Field,
  recovered: RecoveredGradient,
  visit: (sample: Sample, ex: number, ey: number) => void,
): void {
  forEachSample(field, 'all', (s) => {
    let [ex, ey] = [-s.bx, -s.by];
    for (let i = 0; i < 6; i++) {
      const shape = FULL_RULE.values[6 * s.point + i];
      ex += shape * recovered[12 * s.triangle + 6 + i];
      ey -= shape * recovered[12 * s.triangle + i];
    }
    visit(s, ex, ey);
  });
}

/** Area of the named regions together, m^2. */
export function areaOf(field: Field, regions: readonly string[]): number {
  const areas = regionAreas(field.mesh);
  return field.mesh.regionNames.reduce((sum, name, k) => (regions.includes(name) ? sum + areas[k] : sum), 0);
}

/** Means of Bx and of By over one triangle. */
export function meanInTriangle({ mesh }: Field, t: number): readonly [bx: Functional, by: Functional] {
  const bx = new Float64Array(nodeCount(mesh));
  const by = new Float64Array(nodeCount(mesh));
  const at = nodeCoordinates(mesh, t, new Float64Array(12));
  const grad = new Float64Array(12);
  let area = 0;
  for (let q = 0; q < FULL_RULE.count; q++) {
    const weight = FULL_RULE.weights[q] * gradients(at, FULL_RULE.slopes, 12 * q, grad);
    area += weight;
    for (let i = 0; i < 6; i++) {
      bx[globalNode(mesh, t, i)] += weight * grad[6 + i];
      by[globalNode(mesh, t, i)] -= weight * grad[i];
    }
  }
  for (let i = 0; i < 6; i++) {
    bx[globalNode(mesh, t, i)] /= area;
    by[globalNode(mesh, t, i)] /= area;
  }
  return [bx, by];
}

/** Mean of |B| over regions, as derivative: integral of (B/|B|) . dB / area. */
export function meanDensityFunctional(field: Field, regions: readonly string[], area: number): Functional {
  const g = new Float64Array(nodeCount(field.mesh));
  forEachSample(field, regions, (s) => {
    const b = Math.hypot(s.bx, s.by);
    if (b === 0) return;
    const [wx, wy] = [(s.area * s.bx) / (b * area), (s.area * s.by) / (b * area)];
    for (let i = 0; i < 6; i++) g[globalNode(field.mesh, s.triangle, i)] += wx * s.grad[6 + i] - wy * s.grad[i];
  });
  return g;
}

/** By triangle: what the error of B adds to the mean of |B| beyond that derivative, |B + e| - |B| - (B/|B|) . e >= 0. */
export function densityRemainder(
  field: Field,
  regions: readonly string[],
  area: number,
  recovered: RecoveredGradient,
): Float64Array {
  const out = new Float64Array(triangleCount(field.mesh));
  const wanted = field.mesh.regionNames.map((name) => regions.includes(name));
  forEachGap(field, recovered, (s, ex, ey) => {
    if (!wanted[field.mesh.triangleToRegion[s.triangle]]) return;
    const b = Math.hypot(s.bx, s.by);
    const along = b === 0 ? 0 : (s.bx * ex + s.by * ey) / b;
    out[s.triangle] += (s.area / area) * Math.max(0, Math.hypot(s.bx + ex, s.by + ey) - b - along);
  });
  return out;
}

/**
 * Sum over the triangles of |integral of e_a . dH/dB e_b|, with e the gaps between recovered and element flux densities of two
 * potentials and dH/dB that of the field: the error of their product in energy, in practice.
 */
export function productOfGaps(
  field: Field,
  a: Float64Array,
  recoveredA: RecoveredGradient,
  b: Float64Array,
  recoveredB: RecoveredGradient,
): number {
  const { mesh } = field;
  const share = new Float64Array(triangleCount(mesh));
  const law = newLaw();
  const gap = (potential: Float64Array, recovered: RecoveredGradient, s: Sample, k: 0 | 1): number => {
    let sum = 0;
    for (let i = 0; i < 6; i++) {
      sum += FULL_RULE.values[6 * s.point + i] * recovered[12 * s.triangle + 6 * k + i];
      sum -= potential[globalNode(mesh, s.triangle, i)] * s.grad[6 * k + i];
    }
    return sum;
  };
  forEachSample(field, 'all', (s) => {
    evaluateMaterial(s.material, s.bx, s.by, s.x, s.y, law);
    const [ax, ay] = [gap(a, recoveredA, s, 1), -gap(a, recoveredA, s, 0)];
    const [bx, by] = [gap(b, recoveredB, s, 1), -gap(b, recoveredB, s, 0)];
    share[s.triangle] += s.area * (law.xx * ax * bx + law.xy * (ax * by + ay * bx) + law.yy * ay * by);
  });
  return share.reduce((sum, part) => sum + Math.abs(part), 0);
}
