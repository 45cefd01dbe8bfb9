import { globalNode } from '../elements/six-node.js';
import type { Material } from '../materials/material.js';
import { isNonlinear } from '../materials/material.js';
import type { Mesh } from '../mesh/mesh.js';
import { nodeCount, triangleCount } from '../mesh/mesh.js';
import type { SymmetricPattern } from '../sparse/pattern.js';
import { multiply } from '../sparse/pattern.js';
import { checkMaterials } from './check-setup.js';
import { currentDensities } from './currents.js';
import type { Derivative, LocalEquations } from './local-equations.js';
import { addCurrent, formConstantEquations, formEquations, newLocalEquations } from './local-equations.js';
import { pairsOf, patternOfMesh } from './pattern-of-mesh.js';
import type { Setup } from './setup.js';
import { materialOf, VACUUM } from './setup.js';
import type { SteelTriangles } from './steel.js';
import { addSteel, laySteel } from './steel.js';
import type { Unknowns } from './unknowns.js';
import { gatherToUnknowns } from './unknowns.js';

/**
 * The discrete problem: find u with residual(u) = 0, where for every unknown i
 *
 *   residual_i = integral of H . curl(N_i) - J N_i,   curl N = (dN/dy, -dN/dx)
 *
 * is the derivative of the energy functional; its tangent is symmetric and positive definite.
 */
export interface System {
  /** m triangles. */
  readonly mesh: Mesh;
  /** n of them. */
  readonly unknowns: Unknowns;
  /** Of residual and tangent. */
  readonly pattern: SymmetricPattern;
  /**
   * Int32Array(21 m), with order 1 Int32Array(6 m): for the pairs i >= j of local functions of triangle t, at
   * 21 t + i (i + 1)/2 + j, the entry of the pattern; -1 where fixed.
   */
  readonly scatter: Int32Array;
  /** Material by region number. */
  readonly materials: readonly Material[];
  /** Triangles whose reluctivity depends on the field. */
  readonly nonlinear: Int32Array;
  /** Float64Array(entries): what the triangles of constant reluctivity add to the tangent, whatever the field. */
  readonly linearValues: Float64Array;
  /** Float64Array(nodes): integral of J N - H . curl N of the triangles of constant reluctivity where A = 0; with order 1 at corners. */
  readonly source: Float64Array;
  /** Float64Array(n): residual of the triangles of constant reluctivity, and of the source, where all unknowns are 0. */
  readonly offset: Float64Array;
  /** Int32Array(n): a node of each unknown. */
  readonly nodeOf: Int32Array;
  /** For the assembly's use alone. */
  readonly workspace: Workspace;
}

/** What one assembly leaves for the next to overwrite: a system's own, so that systems may take turns. */
interface Workspace {
  /** Triangles of B-H curves that a kernel takes. */
  readonly steel: SteelTriangles | undefined;
  /** The other triangles whose reluctivity depends on the field. */
  readonly others: Int32Array;
  readonly local: LocalEquations;
  /** Float64Array(nodes). */
  readonly nodal: Float64Array;
  /** Float64Array(n): unknowns, and the product of the constant part with them. */
  readonly u: Float64Array;
  readonly product: Float64Array;
}

/**
 * The equations of a mesh under a setup, ready to be assembled at any potential.
 * @param unknowns  `numberUnknowns` of the same mesh and setup
 * @throws InputError for regions without a material, and for materials whose figures are not finite or whose permeability is
 * not above 0
 */
export function buildSystem(mesh: Mesh, setup: Setup, unknowns: Unknowns): System {
  checkMaterials(mesh, setup);
  const materials = materialsOf(mesh, setup);
  const { pattern, scatter } = patternOfMesh(localUnknowns(mesh, unknowns), 3 * unknowns.order, unknowns.count);
  const linearValues = new Float64Array(pattern.row.length);
  const source = new Float64Array(nodeCount(mesh));
  const held = new Float64Array(nodeCount(mesh)); // residual of the held values
  const local = newLocalEquations(unknowns.order);
  const density = currentDensities(mesh, setup);
  const holding = unknowns.fixed.some((value) => value !== 0);
  const nonlinear: number[] = [];
  for (let t = 0; t < triangleCount(mesh); t++) {
    const region = mesh.triangleToRegion[t];
    if (density[region] !== 0) addCurrent(mesh, t, density[region], local, source);
    if (isNonlinear(materials[region])) {
      nonlinear.push(t);
      continue;
    }
    if (formConstantEquations(mesh, t, materials[region], local)) subtractAtNodes(mesh, t, local.residual, source);
    addMatrix(mesh, unknowns, scatter, t, local.matrix, linearValues);
    if (holding) addHeld(mesh, unknowns, t, local.matrix, held);
  }
  for (let node = 0; node < held.length; node++) held[node] -= source[node];
  const system = {
    mesh,
    unknowns,
    pattern,
    scatter,
    materials,
    nonlinear: Int32Array.from(nonlinear),
    linearValues,
    source,
    offset: gatherToUnknowns(unknowns, held, new Float64Array(unknowns.count)),
    nodeOf: nodesOf(unknowns),
  };
  return { ...system, workspace: newWorkspace(system, local) };
}

/** Regions that cover nothing may be without. */
const materialsOf = (mesh: Mesh, setup: Setup): Material[] =>
  mesh.regionNames.map((name) => materialOf(setup, name) ?? VACUUM);

/** Int32Array(functions m): the unknown of each local function of each triangle, -1 where it is fixed. */
function localUnknowns(mesh: Mesh, { order, unknownOf }: Unknowns): Int32Array {
  const size = 3 * order;
  const unknowns = new Int32Array(size * triangleCount(mesh));
  for (let t = 0; t < triangleCount(mesh); t++) {
    for (let i = 0; i < size; i++) unknowns[size * t + i] = unknownOf[globalNode(mesh, t, i)];
  }
  return unknowns;
}

function nodesOf({ count, unknownOf }: Unknowns): Int32Array {
  const nodeOf = new Int32Array(count);
  for (let node = 0; node < unknownOf.length; node++) if (unknownOf[node] >= 0) nodeOf[unknownOf[node]] = node;
  return nodeOf;
}

/** Adds a triangle's matrix, with the signs of its nodes, to the values of the pattern. */
function addMatrix(
  mesh: Mesh,
  { order, sign, unknownOf }: Unknowns,
  scatter: Int32Array,
  t: number,
  matrix: Float64Array,
  values: Float64Array,
): void {
  const size = 3 * order;
  let at = pairsOf(size) * t;
  for (let i = 0, p = 0; i < size; i++) {
    const row = globalNode(mesh, t, i);
    for (let j = 0; j <= i; j++, p++, at++) {
      const entry = scatter[at];
      if (entry < 0) continue;
      const column = globalNode(mesh, t, j);
      // Two nodes of one triangle may share an unknown (a repeating strip one element wide): both orders add up.
      const times = i !== j && unknownOf[row] === unknownOf[column] ? 2 : 1;
      values[entry] += times * sign[row] * sign[column] * matrix[p];
    }
  }
}

function subtractAtNodes(mesh: Mesh, t: number, values: Float64Array, nodal: Float64Array): void {
  for (let i = 0; i < values.length; i++) nodal[globalNode(mesh, t, i)] -= values[i];
}

/** Adds a triangle's matrix times the held values of its nodes. */
function addHeld(mesh: Mesh, { order, fixed }: Unknowns, t: number, matrix: Float64Array, nodal: Float64Array): void {
  for (let j = 0; j < 3 * order; j++) {
    const value = fixed[globalNode(mesh, t, j)];
    if (value === 0) continue;
    for (let i = 0; i < 3 * order; i++) {
      const p = i < j ? pairsOf(j) + i : pairsOf(i) + j;
      nodal[globalNode(mesh, t, i)] += value * matrix[p];
    }
  }
}

function newWorkspace(system: Omit<System, 'workspace'>, local: LocalEquations): Workspace {
  const { mesh, unknowns, materials, nonlinear, scatter, pattern } = system;
  const eligible = (t: number): boolean =>
    unknowns.order === 2 && materials[mesh.triangleToRegion[t]].kind === 'curve' && isUntied(mesh, unknowns, t);
  const steel = nonlinear.filter(eligible);
  return {
    steel: steel.length === 0 ? undefined : laySteel(mesh, materials, steel, scatter, pattern.row.length),
    others: nonlinear.filter((t) => !eligible(t)),
    local,
    nodal: new Float64Array(unknowns.unknownOf.length),
    u: new Float64Array(unknowns.count),
    product: new Float64Array(unknowns.count),
  };
}

/** No node of the triangle has a sign, and no two share an unknown. */
function isUntied(mesh: Mesh, { unknownOf, sign }: Unknowns, t: number): boolean {
  for (let i = 0; i < 6; i++) {
    const node = globalNode(mesh, t, i);
    if (sign[node] < 0) return false;
    const unknown = unknownOf[node];
    if (unknown < 0) continue;
    for (let j = 0; j < i; j++) if (unknownOf[globalNode(mesh, t, j)] === unknown) return false;
  }
  return true;
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
  const { unknowns, pattern, linearValues, nonlinear, offset, nodeOf, workspace } = system;
  const { steel, others, u, product } = workspace;
  const nodal = (steel?.residual ?? workspace.nodal).fill(0);
  const values = tangent === undefined ? undefined : (steel?.tangent ?? tangent);
  values?.set(linearValues);
  if (steel !== undefined) {
    steel.potential.set(potential);
    addSteel(steel, values !== undefined);
  }
  for (const t of others) addTriangle(system, t, potential, 'tangent', nodal, values);
  if (steel !== undefined) tangent?.set(steel.tangent);
  gatherToUnknowns(unknowns, nodal, residual);
  // Constant reluctivity: the residual is the matrix times the unknowns, without another walk over the triangles.
  if (nonlinear.length < triangleCount(system.mesh)) {
    for (let i = 0; i < u.length; i++) u[i] = unknowns.sign[nodeOf[i]] * potential[nodeOf[i]];
    multiply(pattern, linearValues, u, product);
    for (let i = 0; i < residual.length; i++) residual[i] += product[i];
  }
  for (let i = 0; i < residual.length; i++) residual[i] += offset[i];
}

/**
 * Matrix of the reluctivity frozen at a field, as its lower triangle: `chord` with nu = H/B alike in all directions, for
 * which the field of steel is a linear one (apparent inductances); `tangent` with dH/dB, the matrix of small changes
 * (incremental inductances).
 *
 * @param potential  Float64Array(nodes), Wb/m
 * @param values  Float64Array(entries), m/H; overwritten and returned
 */
export function assembleFrozen(
  system: System,
  potential: Float64Array,
  which: Derivative,
  values: Float64Array,
): Float64Array {
  const { workspace, linearValues, nonlinear } = system;
  const nodal = workspace.nodal.fill(0); // goes unused
  values.set(linearValues);
  for (const t of nonlinear) addTriangle(system, t, potential, which, nodal, values);
  return values;
}

/** Adds the equations of a triangle whose reluctivity depends on the field. */
function addTriangle(
  system: System,
  t: number,
  potential: Float64Array,
  which: Derivative,
  nodal: Float64Array,
  values: Float64Array | undefined,
): void {
  const { mesh, unknowns, materials, scatter, workspace } = system;
  const { local } = workspace;
  for (let i = 0; i < local.potential.length; i++) local.potential[i] = potential[globalNode(mesh, t, i)];
  formEquations(mesh, t, materials[mesh.triangleToRegion[t]], which, local);
  for (let i = 0; i < local.residual.length; i++) nodal[globalNode(mesh, t, i)] += local.residual[i];
  if (values !== undefined) addMatrix(mesh, unknowns, scatter, t, local.matrix, values);
}
