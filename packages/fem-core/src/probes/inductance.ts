import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import type { System } from '../assembly/system.js';
import { assembleFrozen } from '../assembly/system.js';
import { gatherToUnknowns, potentialOf } from '../assembly/unknowns.js';
import { InputError } from '../base/fault.js';
import { smoothParts } from '../estimate/goal-error.js';
import { recoverGradients } from '../estimate/recovery.js';
import type { Field } from '../field/field.js';
import type { Functional } from '../field/functionals.js';
import { applyFunctional, weightedIntegral } from '../field/functionals.js';
import { nodeCount } from '../mesh/mesh.js';
import type { Tangent } from '../solve/tangent.js';
import { analyseSystem, buildTangent, solveTangent } from '../solve/tangent.js';
import { areaOf, productOfGaps } from './goals.js';

/** A coil by the regions it runs through: turns that come out of the page count positive, those that go back negative. */
export interface Coil {
  /** What the result calls it. */
  readonly name: string;
  /** The regions it runs through. */
  readonly sides: readonly {
    /** Name of the region. */
    readonly region: string;
    /** Spread evenly over it. */
    readonly turns: number;
  }[];
}

/** Symmetric, rows and columns in the order of the coils, H per metre of depth. */
export type InductanceMatrix = readonly (readonly number[])[];

/** Inductances about a solved field. */
export interface Inductances {
  /** Of the coils, in the order of rows and columns. */
  readonly names: readonly string[];
  /** Linkage per ampere of the currents alone, the permeability frozen at the field: for phasor diagrams. */
  readonly apparent: InductanceMatrix;
  /** Change of linkage per change of current about the field: for ripple and transients. */
  readonly incremental: InductanceMatrix;
  /** Estimated errors of the incremental ones from the mesh. */
  readonly error: InductanceMatrix;
  /** Share of the flux of a pair that is common, largest over all combinations of coils; below 1, or the mesh is too coarse. */
  readonly coupling: number;
}

/**
 * Inductances by frozen permeability: with the reluctivity held as the solved field left it, every coil in turn carries one
 * ampere, and the linkages of all are read. Magnets count by their recoil.
 * Bianchi, Bolognani, Magnetic models of saturated interior permanent magnet motors based on finite element analysis, IEEE
 * IAS Annual Meeting, 1998 (title from memory).
 *
 * @param solved  a converged field with its system, such as `solveProbes` gives; the tangent spares an analysis
 * @throws InputError for coils in regions that cover nothing, without turns, or whose turns do not come back where no side
 * holds A; Error where the matrix is not positive definite
 */
export function inductancesAt(
  solved: { readonly field: Field; readonly system: System; readonly tangent?: Tangent | undefined },
  coils: readonly Coil[],
): Inductances {
  const { field, system } = solved;
  for (const coil of coils) checkReturn(system, coil);
  const linkages = coils.map((coil) => linkageOf(field, coil));
  const known = solved.tangent !== undefined && 'blocks' in solved.tangent ? solved.tangent.analysis : undefined;
  const analysis = known ?? analyseSystem(system);
  const values = new Float64Array(system.pattern.row.length);
  const potentials = (which: 'chord' | 'tangent'): Float64Array[] => {
    const matrix = buildTangent(system, analysis, assembleFrozen(system, field.potential, which, values), undefined);
    if ('failure' in matrix) throw new Error(`inductancesAt: ${matrix.failure}`);
    return linkages.map((linkage) => potentialPerAmpere(system, matrix, linkage));
  };
  const byTangent = potentials('tangent');
  const byChord = potentials('chord');
  const matrixOf = (fields: readonly Float64Array[]): number[][] =>
    linkages.map((linkage, i) => fields.map((_, j) => symmetric(linkage, linkages[j], fields[i], fields[j])));
  const gradients = recoverGradients(field.mesh, smoothParts(field), byTangent);
  const incremental = matrixOf(byTangent);
  return {
    names: coils.map((coil) => coil.name),
    apparent: matrixOf(byChord),
    incremental,
    error: byTangent.map((a, i) => byTangent.map((b, j) => productOfGaps(field, a, gradients[i], b, gradients[j]))),
    coupling: couplingOf(incremental),
  };
}

/** Where nothing but infinity, or a pinned node, holds A, a coil has an inductance only if its turns come back. */
function checkReturn({ mesh, unknowns }: System, coil: Coil): void {
  const net = coil.sides.reduce((sum, { turns }) => sum + turns, 0);
  const gross = coil.sides.reduce((sum, { turns }) => sum + Math.abs(turns), 0);
  if (!(gross > 0) || !Number.isFinite(gross)) {
    throw fault(coil, 'has no turns', 'give turns that are finite and not all 0');
  }
  const fixed = unknowns.unknownOf.reduce((count, i) => count + (i < 0 ? 1 : 0), 0);
  if ((mesh.beyond === undefined && fixed > 1) || Math.abs(net) <= 1e-9 * gross) return;
  throw fault(coil, `has turns that sum to ${net}, and no side that holds A`, 'name the side by which it returns');
}

function fault(coil: Coil, wrong: string, remedy: string): InputError {
  return new InputError([{ code: 'no-return', key: `coils.${coil.name}`, wrong, remedy }]);
}

/** By reciprocity L_ij = L_ji; the mean takes rounding out. */
const symmetric = (g: Functional, h: Functional, a: Float64Array, b: Float64Array): number =>
  0.5 * (applyFunctional(g, b) + applyFunctional(h, a));

function linkageOf(field: Field, coil: Coil): Functional {
  const sum = new Float64Array(nodeCount(field.mesh));
  for (const { region, turns } of coil.sides) {
    const area = areaOf(field, [region]);
    if (area === 0) {
      throw new InputError([
        {
          code: 'no-region',
          key: `coils.${coil.name}`,
          wrong: `${region} covers no area`,
          remedy: `regions here are: ${field.mesh.regionNames.join(', ')}`,
        },
      ]);
    }
    weightedIntegral(field.mesh, [region], () => turns / area).forEach((g, node) => {
      sum[node] += g;
    });
  }
  return sum;
}

/** The linkage's functional is also the source of one ampere through the coil. */
function potentialPerAmpere(system: System, matrix: Tangent, linkage: Functional): Float64Array {
  const { unknowns } = system;
  const u = gatherToUnknowns(unknowns, linkage, new Float64Array(unknowns.count));
  const free = { ...unknowns, fixed: new Float64Array(linkage.length) };
  return potentialOf(free, solveTangent(matrix, u, u), new Float64Array(linkage.length));
}

/** Largest eigenvalue of the matrix scaled to a unit diagonal, less 1, over the number of other coils. */
function couplingOf(matrix: InductanceMatrix): number {
  const n = matrix.length;
  if (n < 2) return 0;
  const scaled = new Matrix(matrix.map((row, i) => row.map((l, j) => l / Math.sqrt(matrix[i][i] * matrix[j][j]))));
  const { realEigenvalues } = new EigenvalueDecomposition(scaled, { assumeSymmetric: true });
  return (Math.max(...realEigenvalues) - 1) / (n - 1);
}
