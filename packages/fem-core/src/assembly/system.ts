import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import type { ElementRule } from '../elements/six-node.js';
import { FULL_RULE, globalNode, gradients, nodeCoordinates, placeOf, STRAIGHT_RULE } from '../elements/six-node.js';
import type { LocalLaw } from '../materials/constitutive.js';
import { evaluateMaterial, newLaw, remanenceAt } from '../materials/constitutive.js';
import type { Material } from '../materials/material.js';
import { isNonlinear } from '../materials/material.js';
import type { Mesh } from '../mesh/mesh.js';
import { nodeCount, triangleCount } from '../mesh/mesh.js';
import type { SymmetricPattern } from '../sparse/pattern.js';
import { multiply } from '../sparse/pattern.js';
import { currentDensities } from './currents.js';
import type { Setup } from './setup.js';
import { materialOf } from './setup.js';
import type { Unknowns } from './unknowns.js';

/**
 * The discrete problem: find u with residual(u) = 0, where for every unknown i
 *
 *   residual_i = integral of H . curl(N_i) - J N_i,   H = nu(B) (B - Br),  curl N = (dN/dy, -dN/dx)
 *
 * is the derivative of the energy functional; its tangent is symmetric and positive definite.
 */
export interface System {
  readonly mesh: Mesh;
  readonly unknowns: Unknowns;
  readonly pattern: SymmetricPattern;
  /** Int32Array(21 m): for the pairs i >= j of local nodes of triangle t, at 21 t + i (i + 1)/2 + j, the entry of the pattern; -1 where fixed. */
  readonly scatter: Int32Array;
  /** Material by region number. */
  readonly materials: readonly Material[];
  /** Triangles whose reluctivity depends on the field. */
  readonly nonlinear: Int32Array;
  /** Float64Array(entries): what the triangles of constant reluctivity add to the tangent, whatever the field. */
  readonly linearValues: Float64Array;
  /** Float64Array(nodes): integral of J N + nu Br . curl N. */
  readonly source: Float64Array;
  /** Float64Array(n): residual of the triangles of constant reluctivity, and of the source, where all unknowns are 0. */
  readonly offset: Float64Array;
  /** Int32Array(n): a node of each unknown. */
  readonly nodeOf: Int32Array;
}

export function buildSystem(mesh: Mesh, setup: Setup, unknowns: Unknowns): System {
  const materials = materialsOf(mesh, setup);
  const { pattern, scatter } = patternOf(mesh, unknowns);
  const nonlinear: number[] = [];
  const linearValues = new Float64Array(pattern.row.length);
  const source = new Float64Array(nodeCount(mesh));
  const density = currentDensities(mesh, setup);
  const work = newWork();
  for (let t = 0; t < triangleCount(mesh); t++) {
    const region = mesh.triangleToRegion[t];
    const material = materials[region];
    addSource(mesh, t, material, density[region], source, work);
    if (isNonlinear(material)) {
      nonlinear.push(t);
      continue;
    }
    const { nu } = evaluateMaterial(material, 0, 0, 0, 0, work.law);
    work.matrix.fill(0);
    nodeCoordinates(mesh, t, work.coordinates);
    const rule = ruleFor(mesh, t, false);
    for (let q = 0; q < rule.count; q++) {
      const det = gradients(work.coordinates, rule.slopes, 12 * q, work.grad);
      addOuter(work.grad, nu * rule.weights[q] * det, work.matrix);
    }
    scatterMatrix(mesh, unknowns, scatter, t, work.matrix, linearValues);
  }
  const nodal = source.map((value) => -value);
  if (unknowns.fixed.some((value) => value !== 0)) {
    for (let t = 0; t < triangleCount(mesh); t++) {
      const material = materials[mesh.triangleToRegion[t]];
      if (!isNonlinear(material)) addResidual(mesh, t, material, unknowns.fixed, nodal, work);
    }
  }
  return {
    mesh,
    unknowns,
    pattern,
    scatter,
    materials,
    nonlinear: Int32Array.from(nonlinear),
    linearValues,
    source,
    offset: gatherToUnknowns(unknowns, nodal, new Float64Array(unknowns.count)),
    nodeOf: nodesOf(unknowns),
  };
}

function nodesOf(unknowns: Unknowns): Int32Array {
  const nodeOf = new Int32Array(unknowns.count);
  unknowns.unknownOf.forEach((i, node) => {
    if (i >= 0) nodeOf[i] = node;
  });
  return nodeOf;
}

/** Quadrature for the stiffness of triangle t. */
export function ruleFor(mesh: Mesh, t: number, varies: boolean): ElementRule {
  return varies || mesh.curved[t] === 1 ? FULL_RULE : STRAIGHT_RULE;
}

interface Work {
  readonly coordinates: Float64Array;
  readonly grad: Float64Array;
  /** Lower triangle of the local matrix, rows after one another. */
  readonly matrix: Float64Array;
  readonly local: Float64Array;
  readonly law: LocalLaw;
}
const newWork = (): Work => ({
  coordinates: new Float64Array(12),
  grad: new Float64Array(12),
  matrix: new Float64Array(21),
  local: new Float64Array(6),
  law: newLaw(),
});

function addOuter(grad: Float64Array, weight: number, matrix: Float64Array): void {
  let p = 0;
  for (let i = 0; i < 6; i++) {
    const gx = weight * grad[i];
    const gy = weight * grad[6 + i];
    for (let j = 0; j <= i; j++) matrix[p++] += gx * grad[j] + gy * grad[6 + j];
  }
}

function scatterMatrix(
  mesh: Mesh,
  unknowns: Unknowns,
  scatter: Int32Array,
  t: number,
  matrix: Float64Array,
  values: Float64Array,
): void {
  const { sign } = unknowns;
  for (let i = 0, p = 0; i < 6; i++) {
    const si = sign[globalNode(mesh, t, i)];
    for (let j = 0; j <= i; j++, p++) {
      const at = scatter[21 * t + p];
      if (at < 0) continue;
      const value = si * sign[globalNode(mesh, t, j)] * matrix[p];
      // Two nodes of one triangle may share an unknown (a repeating strip one element wide): both orders add up.
      values[at] +=
        i !== j && unknowns.unknownOf[globalNode(mesh, t, i)] === unknowns.unknownOf[globalNode(mesh, t, j)]
          ? 2 * value
          : value;
    }
  }
}

/** Currents, and the remanence of magnets of constant reluctivity. */
function addSource(mesh: Mesh, t: number, material: Material, density: number, source: Float64Array, work: Work): void {
  const magnetic = (material.kind === 'magnet' || material.kind === 'directed-magnet') && !isNonlinear(material);
  if (density === 0 && !magnetic) return;
  const { coordinates, grad } = work;
  const { nu } = evaluateMaterial(material, 0, 0, 0, 0, work.law);
  nodeCoordinates(mesh, t, coordinates);
  for (let q = 0; q < FULL_RULE.count; q++) {
    const weight = FULL_RULE.weights[q] * gradients(coordinates, FULL_RULE.slopes, 12 * q, grad);
    const [rx, ry] = magnetic ? remanenceAt(material, ...placeOf(coordinates, q)) : [0, 0];
    for (let i = 0; i < 6; i++) {
      const curl = rx * grad[6 + i] - ry * grad[i];
      source[globalNode(mesh, t, i)] += weight * (density * FULL_RULE.values[6 * q + i] + nu * curl);
    }
  }
}

function materialsOf(mesh: Mesh, setup: Setup): Material[] {
  const faults: Fault[] = [];
  const materials = mesh.regionNames.map((name, region): Material => {
    const material = materialOf(setup, name);
    if (material !== undefined) return material;
    if (mesh.triangleToRegion.includes(region)) {
      faults.push({ code: 'no-material', key: name, wrong: 'has no material', remedy: 'name it in the setup' });
    }
    return { kind: 'linear', muR: 1 };
  });
  if (faults.length > 0) throw new InputError(faults);
  return materials;
}

/** Pattern of all couplings within triangles, and where each local pair lands in it. */
function patternOf(mesh: Mesh, unknowns: Unknowns): { pattern: SymmetricPattern; scatter: Int32Array } {
  const m = triangleCount(mesh);
  const n = unknowns.count;
  const columns: number[][] = Array.from({ length: n }, (_, j) => [j]);
  const at = new Int32Array(6);
  for (let t = 0; t < m; t++) {
    for (let i = 0; i < 6; i++) {
      at[i] = unknowns.unknownOf[globalNode(mesh, t, i)];
      if (at[i] < 0) continue;
      for (let j = 0; j < i; j++) {
        if (at[j] >= 0 && at[j] !== at[i]) columns[Math.min(at[i], at[j])].push(Math.max(at[i], at[j]));
      }
    }
  }
  const start = new Int32Array(n + 1);
  columns.forEach((column, j) => {
    column.sort((a, b) => a - b);
    let kept = 0;
    for (const i of column) if (kept === 0 || column[kept - 1] !== i) column[kept++] = i;
    column.length = kept;
    start[j + 1] = start[j] + kept;
  });
  const row = new Int32Array(start[n]);
  columns.forEach((column, j) => {
    row.set(column, start[j]);
  });
  const scatter = new Int32Array(21 * m).fill(-1);
  for (let t = 0; t < m; t++) {
    for (let i = 0, p = 0; i < 6; i++) {
      const a = unknowns.unknownOf[globalNode(mesh, t, i)];
      for (let j = 0; j <= i; j++, p++) {
        const b = unknowns.unknownOf[globalNode(mesh, t, j)];
        if (a >= 0 && b >= 0)
          scatter[21 * t + p] = find(row, start[Math.min(a, b)], start[Math.min(a, b) + 1], Math.max(a, b));
      }
    }
  }
  return { pattern: { n, start, row }, scatter };
}

function find(row: Int32Array, from: number, to: number, value: number): number {
  let low = from;
  let high = to - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (row[middle] < value) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Potential at the nodes from the unknowns, written into `out` (Float64Array(nodes)) and returned. */
export function potentialOf(unknowns: Unknowns, u: Float64Array, out: Float64Array): Float64Array {
  for (let node = 0; node < out.length; node++) {
    const i = unknowns.unknownOf[node];
    out[node] = i < 0 ? unknowns.fixed[node] : unknowns.sign[node] * u[i];
  }
  return out;
}

/** Sum over the nodes of each unknown, with their signs, of a nodal vector: what a functional of A is to the unknowns. */
export function gatherToUnknowns(unknowns: Unknowns, nodal: Float64Array, out: Float64Array): Float64Array {
  out.fill(0);
  for (let node = 0; node < nodal.length; node++) {
    const i = unknowns.unknownOf[node];
    if (i >= 0) out[i] += unknowns.sign[node] * nodal[node];
  }
  return out;
}

/**
 * Residual at the given potential, by unknowns, and, where `tangent` is given, the lower triangle of its derivative.
 * @param potential  Float64Array(nodes), Wb/m
 * @param residual  Float64Array(n), A; overwritten
 * @param tangent  Float64Array(entries), m/H; overwritten
 */
export function assemble(
  system: System,
  potential: Float64Array,
  residual: Float64Array,
  tangent?: Float64Array,
): void {
  const { mesh, unknowns, pattern, materials, offset, nodeOf } = system;
  // Constant reluctivity: the residual is the matrix times the unknowns, without another walk over the triangles.
  const u = Float64Array.from(nodeOf, (node) => unknowns.sign[node] * potential[node]);
  const linear = multiply(pattern, system.linearValues, u, new Float64Array(unknowns.count));
  const nodal = new Float64Array(potential.length);
  const work = newWork();
  tangent?.set(system.linearValues);
  for (const t of system.nonlinear) {
    work.matrix.fill(0);
    addResidual(mesh, t, materials[mesh.triangleToRegion[t]], potential, nodal, work);
    if (tangent !== undefined) scatterMatrix(mesh, unknowns, system.scatter, t, work.matrix, tangent);
  }
  gatherToUnknowns(unknowns, nodal, residual);
  for (let i = 0; i < residual.length; i++) residual[i] += linear[i] + offset[i];
}

/**
 * Adds the triangle's residual: for constant reluctivity integral nu grad A . grad N_i (the remanence is in `source`), else
 * integral H . curl N_i, and then the tangent integral curl N_i . dH/dB curl N_j to work.matrix.
 */
function addResidual(
  mesh: Mesh,
  t: number,
  material: Material,
  potential: Float64Array,
  nodal: Float64Array,
  work: Work,
): void {
  const { coordinates, grad, local, law } = work;
  const varies = isNonlinear(material);
  const rule = ruleFor(mesh, t, varies);
  nodeCoordinates(mesh, t, coordinates);
  for (let i = 0; i < 6; i++) local[i] = potential[globalNode(mesh, t, i)];
  for (let q = 0; q < rule.count; q++) {
    const weight = rule.weights[q] * gradients(coordinates, rule.slopes, 12 * q, grad);
    let gx = 0;
    let gy = 0;
    for (let i = 0; i < 6; i++) {
      gx += local[i] * grad[i];
      gy += local[i] * grad[6 + i];
    }
    const [x, y] = material.kind === 'directed-magnet' && varies ? placeOf(coordinates, q) : [0, 0];
    evaluateMaterial(material, gy, -gx, x, y, law);
    const [hx, hy] = varies ? [law.hx, law.hy] : [law.nu * gy, -law.nu * gx];
    for (let i = 0; i < 6; i++) nodal[globalNode(mesh, t, i)] += weight * (hx * grad[6 + i] - hy * grad[i]);
    if (varies) addTangent(grad, law, weight, work.matrix);
  }
}

/** weight x curl N_i . dH/dB curl N_j, curl N = (dN/dy, -dN/dx). */
function addTangent(grad: Float64Array, law: LocalLaw, weight: number, matrix: Float64Array): void {
  const [xx, xy, yy] = [weight * law.xx, weight * law.xy, weight * law.yy];
  let p = 0;
  for (let i = 0; i < 6; i++) {
    const cx = xx * grad[6 + i] - xy * grad[i];
    const cy = xy * grad[6 + i] - yy * grad[i];
    for (let j = 0; j <= i; j++) matrix[p++] += cx * grad[6 + j] - cy * grad[j];
  }
}
