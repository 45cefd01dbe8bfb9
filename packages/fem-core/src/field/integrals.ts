import { materialOf, VACUUM } from '../assembly/setup.js';
import { MU0 } from '../base/constants.js';
import { FULL_RULE, globalNode, gradients, nodeCoordinates } from '../elements/six-node.js';
import { evaluateMaterial, newLaw } from '../materials/constitutive.js';
import type { Material } from '../materials/material.js';
import { triangleCount } from '../mesh/mesh.js';
import type { Field } from './field.js';

/** What is known at one quadrature point of a field. */
export interface FieldSample {
  /** Number of the triangle in the mesh. */
  triangle: number;
  /** Number of the quadrature point in its triangle: of `FULL_RULE`. */
  point: number;
  /** Where it is, m. */
  x: number;
  /** Likewise. */
  y: number;
  /** Quadrature weight times det J, m^2: sums to areas. */
  area: number;
  /** Potential, Wb/m. */
  a: number;
  /** Flux density along x, T. */
  bx: number;
  /** Along y, T. */
  by: number;
  /** Field strength along x, A/m. */
  hx: number;
  /** Along y, A/m. */
  hy: number;
  /** J/m^3: integral of H dB, of magnets from the remanence. */
  energy: number;
  /** Chord reluctivity, m/H. */
  nu: number;
  /** What fills the place. */
  material: Material;
  /** Float64Array(12): d/dx of the six shape functions here, then d/dy, 1/m. */
  readonly grad: Float64Array;
}

/**
 * Visits the quadrature points (seven a triangle) of all triangles of the named regions, in the order of the mesh. The
 * sample object is used again at every visit.
 */
export function forEachSample(
  field: Field,
  regions: readonly string[] | 'all',
  visit: (sample: FieldSample) => void,
): void {
  const { mesh, setup, potential } = field;
  const wanted = mesh.regionNames.map((name) => regions === 'all' || regions.includes(name));
  const at = new Float64Array(12);
  const grad = new Float64Array(12);
  const law = newLaw();
  const sample: FieldSample = {
    triangle: 0,
    point: 0,
    x: 0,
    y: 0,
    area: 0,
    a: 0,
    bx: 0,
    by: 0,
    hx: 0,
    hy: 0,
    energy: 0,
    nu: 0,
    material: VACUUM,
    grad,
  };
  for (let t = 0; t < triangleCount(mesh); t++) {
    if (!wanted[mesh.triangleToRegion[t]]) continue;
    nodeCoordinates(mesh, t, at);
    const material = materialOf(setup, mesh.regionNames[mesh.triangleToRegion[t]]) ?? VACUUM;
    for (let q = 0; q < FULL_RULE.count; q++) {
      const det = gradients(at, FULL_RULE.slopes, 12 * q, grad);
      let x = 0;
      let y = 0;
      let a = 0;
      let gx = 0;
      let gy = 0;
      for (let i = 0; i < 6; i++) {
        const n = FULL_RULE.values[6 * q + i];
        const value = potential[globalNode(mesh, t, i)];
        x += n * at[2 * i];
        y += n * at[2 * i + 1];
        a += n * value;
        gx += value * grad[i];
        gy += value * grad[6 + i];
      }
      evaluateMaterial(material, gy, -gx, x, y, law);
      sample.triangle = t;
      sample.point = q;
      sample.x = x;
      sample.y = y;
      sample.area = FULL_RULE.weights[q] * det;
      sample.a = a;
      sample.bx = gy;
      sample.by = -gx;
      sample.hx = law.hx;
      sample.hy = law.hy;
      sample.energy = law.energy;
      sample.nu = law.nu;
      sample.material = material;
      visit(sample);
    }
  }
}

/** Means of the field over an area. */
export interface RegionMeans {
  /** m^2. */
  readonly area: number;
  /** Mean of Bx, T. */
  readonly bx: number;
  /** Mean of By, T. */
  readonly by: number;
  /** Mean of |B|, T. */
  readonly b: number;
  /** Mean of A, Wb/m. */
  readonly a: number;
}

/** Means over the named regions together; of no area, all but the area are NaN. */
export function meanOver(field: Field, regions: readonly string[]): RegionMeans {
  let area = 0;
  let bx = 0;
  let by = 0;
  let b = 0;
  let a = 0;
  forEachSample(field, regions, (s) => {
    area += s.area;
    bx += s.area * s.bx;
    by += s.area * s.by;
    b += s.area * Math.hypot(s.bx, s.by);
    a += s.area * s.a;
  });
  return { area, bx: bx / area, by: by / area, b: b / area, a: a / area };
}

/** Energy and coenergy of a field. */
export interface Energies {
  /** J per metre of depth: air B^2/(2 mu0), curve integral of H dB, magnet (B - Br)^2/(2 mu). */
  readonly energy: number;
  /** J per metre of depth: integral of H . B - energy. */
  readonly coenergy: number;
}

/**
 * Energy and coenergy of the named regions together; names that are no region count nothing. In unbounded space that of the
 * image is that of all beyond the circle.
 */
export function energiesOf(field: Field, regions: readonly string[] | 'all' = 'all'): Energies {
  let energy = 0;
  let product = 0;
  forEachSample(field, regions, (s) => {
    energy += s.area * s.energy;
    product += s.area * (s.hx * s.bx + s.hy * s.by);
  });
  return { energy, coenergy: product - energy };
}

/** Means of the field triangle by triangle. */
export interface TriangleMeans {
  /** Float64Array(2m): Bx, By, T. */
  readonly fluxDensity: Float64Array;
  /** Float64Array(m): relative permeability, 1/(mu0 nu). */
  readonly relativePermeability: Float64Array;
}

/** Means of the field over each triangle of its mesh, m of them. */
export function triangleMeans(field: Field): TriangleMeans {
  const m = triangleCount(field.mesh);
  const fluxDensity = new Float64Array(2 * m);
  const relativePermeability = new Float64Array(m);
  const area = new Float64Array(m);
  forEachSample(field, 'all', (s) => {
    area[s.triangle] += s.area;
    fluxDensity[2 * s.triangle] += s.area * s.bx;
    fluxDensity[2 * s.triangle + 1] += s.area * s.by;
    relativePermeability[s.triangle] += s.area / (MU0 * s.nu);
  });
  for (let t = 0; t < m; t++) {
    fluxDensity[2 * t] /= area[t];
    fluxDensity[2 * t + 1] /= area[t];
    relativePermeability[t] /= area[t];
  }
  return { fluxDensity, relativePermeability };
}
