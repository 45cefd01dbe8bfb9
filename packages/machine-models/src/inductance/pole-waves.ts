import { MU0 } from '@gapwright/fem-core';
import type { System, Unknowns } from '@gapwright/fem-core/equations';
import { assembleFrozen, buildSystem, placementOf } from '@gapwright/fem-core/equations';
import type { Mesh } from '@gapwright/fem-core/mesh';
import { cornerCount, edgeCount, nodeCount, nodePoint } from '@gapwright/fem-core/mesh';
import type { Analysis, Factor, Placement, SymmetricPattern } from '@gapwright/fem-core/sparse';
import { analyse, chooseOrder, factor, solveMany } from '@gapwright/fem-core/sparse';
import type { SolvedSlice } from '../slices/solve-slice.js';

/**
 * Equations of waves that go round an unmagnetised rotor, on what is drawn of half a pole.
 *
 * The rotor repeats from pole to pole, so the field of a wave exp(i k x) of currents repeats too but for a phase:
 * A(x + tau) = exp(i p) A(x), p = k tau (Floquet, Bloch). And it is its own mirror image about the magnet's axis x = 0 and
 * midway between poles, x = tau/2. So A = E + i O with E even and O odd about x = 0, both real: E of the cosine part of the
 * wave, O of the sine part, each on half a pole. At x = tau/2, from A(tau/2) = exp(i p) A(-tau/2),
 *
 *   E = cos(p/2) w,  O = sin(p/2) w,   w the unknown both share,
 *
 * and what the wave asks of the slopes there, cos(p/2) E' + sin(p/2) O' = 0, is the natural condition of that tie. Odd orders
 * of the pole have p = pi: E closed and O free there. At x = 0 E is free and O = 0. Derived here.
 *
 * The reluctivity is the chord's at the slice's own field, the magnets' remanence is left out. Above and below, where there is
 * air without end, A falls like exp(-|k| y) with the longest wave of that phase: dA/dn = -|k| A.
 */
export interface PoleWaves {
  readonly mesh: Mesh;
  /** Nodes to unknowns of the two parts; -1 where there is none. Shared on the right. */
  readonly even: Int32Array;
  readonly odd: Int32Array;
  /** Uint8Array(nodes): 1 on the right, midway between poles. */
  readonly onRight: Uint8Array;
  readonly polePitch: number;
  readonly pattern: SymmetricPattern;
  readonly analysis: Analysis;
  /** Of one part: pattern by nodes, chord reluctivity. */
  readonly nodal: SymmetricPattern;
  readonly values: Float64Array;
  /** Integral of A^2 along the open sides, as entries of the nodal pattern and what each has. */
  readonly rim: readonly (readonly [entry: number, value: number])[];
  /** Entries of `pattern` that an entry of `nodal` goes to, by part; -1 for none. */
  readonly toEven: Int32Array;
  readonly toOdd: Int32Array;
}

/** @throws Error for a slice that is not cut along the magnet's axis */
export function buildPoleWaves({ field, pole }: Pick<SolvedSlice, 'field' | 'pole'>): PoleWaves {
  if (!pole.cuts.magnetAxis) throw new Error('waves are solved on half a pole, from the axis of a magnet on');
  const { mesh } = field;
  const all = everyNode(mesh);
  const system = buildSystem(mesh, field.setup, all);
  const values = assembleFrozen(system, field.potential, 'chord', new Float64Array(system.pattern.row.length));
  const onRight = nodesOn(mesh, 'right');
  const onLeft = nodesOn(mesh, 'left');
  const even = new Int32Array(nodeCount(mesh));
  const odd = new Int32Array(nodeCount(mesh));
  let count = 0;
  // Both parts of a node one after the other: rows and columns keep their order.
  for (let node = 0; node < even.length; node++) {
    even[node] = count++;
    odd[node] = onRight[node] === 1 ? even[node] : onLeft[node] === 1 ? -1 : count++;
  }
  const doubled = doublePattern(system.pattern, even, odd, count);
  const placement = unfolded(mesh, placementOf(mesh, all), even, odd, pole.polePitch, count);
  return {
    mesh,
    even,
    odd,
    onRight,
    polePitch: pole.polePitch,
    ...doubled,
    analysis: analyse(doubled.pattern, chooseOrder(doubled.pattern, placement)),
    nodal: system.pattern,
    values,
    rim: openRim(system, pole.cuts.midPlane ? ['top'] : ['top', 'bottom']),
  };
}

/** Nothing held, nothing tied. */
function everyNode(mesh: Mesh): Unknowns {
  const count = nodeCount(mesh);
  return {
    order: 2,
    count,
    unknownOf: Int32Array.from({ length: count }, (_, node) => node),
    sign: new Int8Array(count).fill(1),
    fixed: new Float64Array(count),
    edges: mesh.edges,
  };
}

function* edgesOn(mesh: Mesh, side: string): Generator<readonly [a: number, middle: number, b: number]> {
  const wanted = mesh.sideNames.indexOf(side);
  for (let e = 0; e < edgeCount(mesh); e++) {
    if (mesh.edgeToSide[e] === wanted) yield [mesh.edges[2 * e], cornerCount(mesh) + e, mesh.edges[2 * e + 1]];
  }
}

function nodesOn(mesh: Mesh, side: string): Uint8Array {
  const on = new Uint8Array(nodeCount(mesh));
  for (const nodes of edgesOn(mesh, side)) for (const node of nodes) on[node] = 1;
  return on;
}

/** Pattern of both parts, and where the entries of one go. Rows rise as they do in the nodal one. */
function doublePattern(
  nodal: SymmetricPattern,
  even: Int32Array,
  odd: Int32Array,
  n: number,
): Pick<PoleWaves, 'pattern' | 'toEven' | 'toOdd'> {
  const toEven = new Int32Array(nodal.row.length).fill(-1);
  const toOdd = new Int32Array(nodal.row.length).fill(-1);
  const start = new Int32Array(n + 1);
  const row = new Int32Array(2 * nodal.row.length);
  let z = 0;
  for (let j = 0; j < nodal.n; j++) {
    const shared = even[j] === odd[j];
    for (let p = nodal.start[j]; p < nodal.start[j + 1]; p++) {
      const i = nodal.row[p];
      toEven[p] = z;
      row[z++] = even[i];
      if (!shared) continue;
      if (even[i] === odd[i]) toOdd[p] = toEven[p];
      else if (odd[i] >= 0) {
        toOdd[p] = z;
        row[z++] = odd[i];
      }
    }
    start[even[j] + 1] = z;
    if (shared || odd[j] < 0) continue;
    for (let p = nodal.start[j]; p < nodal.start[j + 1]; p++) {
      const i = odd[nodal.row[p]];
      if (i < 0) continue;
      toOdd[p] = z;
      row[z++] = i;
    }
    start[odd[j] + 1] = z;
  }
  return { pattern: { n, start, row: row.slice(0, z) }, toEven, toOdd };
}

/** For the order of elimination: the odd part stands mirrored at the right side, beyond it. */
function unfolded(
  mesh: Mesh,
  { points, ends }: Required<Placement>,
  even: Int32Array,
  odd: Int32Array,
  polePitch: number,
  n: number,
): Placement {
  const at = new Float64Array(2 * n);
  const endsOf = new Int32Array(2 * n).fill(-1);
  for (let node = 0; node < nodeCount(mesh); node++) {
    for (const part of [odd, even]) {
      const i = part[node];
      if (i < 0) continue;
      at[2 * i] = part === even ? points[2 * node] : polePitch - points[2 * node];
      at[2 * i + 1] = points[2 * node + 1];
      for (let k = 0; k < 2; k++) endsOf[2 * i + k] = part[ends[2 * node + k]];
    }
  }
  return { points: at, ends: endsOf };
}

/** Mass matrix of the quadratic elements along a side: length/30 (4 2 -1, 2 16 2, -1 2 4). */
function openRim({ mesh, pattern }: System, sides: readonly string[]): PoleWaves['rim'] {
  const rim: (readonly [number, number])[] = [];
  const mass = [
    [4, 2, -1],
    [2, 16, 2],
    [-1, 2, 4],
  ];
  for (const side of sides) {
    for (const nodes of edgesOn(mesh, side)) {
      const [xa, ya] = nodePoint(mesh, nodes[0]);
      const [xb, yb] = nodePoint(mesh, nodes[2]);
      const share = Math.hypot(xb - xa, yb - ya) / 30;
      for (let a = 0; a < 3; a++) {
        for (let b = 0; b < 3; b++) {
          if (nodes[a] >= nodes[b]) rim.push([entryOf(pattern, nodes[a], nodes[b]), share * mass[a][b]]);
        }
      }
    }
  }
  return rim;
}

function entryOf({ start, row }: SymmetricPattern, i: number, j: number): number {
  for (let p = start[j]; p < start[j + 1]; p++) if (row[p] === i) return p;
  throw new Error('two nodes of one edge are not coupled');
}

/**
 * Factor of the equations for the phase p from 0 to pi that a wave gains from one pole to the next.
 *
 * @param reuse  a factor no longer needed
 * @throws Error where the matrix is not positive definite, as after a slice without a solution
 */
export function factorWaves(waves: PoleWaves, phase: number, reuse?: Factor): Factor {
  const { nodal, values, rim, toEven, toOdd, onRight, pattern, analysis } = waves;
  const [c, s] = tie(phase);
  const one = values.slice();
  const fall = (phase === 0 ? 2 * Math.PI : phase) / waves.polePitch;
  for (const [entry, value] of rim) one[entry] += (fall / MU0) * value;
  const both = new Float64Array(pattern.row.length);
  for (let j = 0; j < nodal.n; j++) {
    for (let p = nodal.start[j]; p < nodal.start[j + 1]; p++) {
      const ties = onRight[j] + onRight[nodal.row[p]];
      both[toEven[p]] += one[p] * c ** ties;
      if (toOdd[p] >= 0) both[toOdd[p]] += one[p] * s ** ties;
    }
  }
  const factored = factor(analysis, both, { reuse });
  if (!('blocks' in factored)) throw new Error(`the equations of waves are not positive definite (${factored.pivot})`);
  return factored;
}

/** cos(p/2) and sin(p/2), exact at both ends. */
const tie = (phase: number): readonly [c: number, s: number] =>
  phase === Math.PI ? [0, 1] : [Math.cos(phase / 2), Math.sin(phase / 2)];

/** A nodal vector for each part. */
export interface Parts {
  readonly even: Float64Array;
  readonly odd: Float64Array;
}

/** Potentials, Wb/m, of sources by nodes, A. */
export function solveWaves(
  waves: PoleWaves,
  phase: number,
  factored: Factor,
  sources: readonly Parts[],
): readonly Parts[] {
  const { even, odd, onRight, pattern } = waves;
  const { n } = pattern;
  const [c, s] = tie(phase);
  const x = new Float64Array(n * sources.length);
  sources.forEach((source, k) => {
    for (let node = 0; node < even.length; node++) {
      x[k * n + even[node]] += (onRight[node] === 1 ? c : 1) * source.even[node];
      if (odd[node] >= 0) x[k * n + odd[node]] += (onRight[node] === 1 ? s : 1) * source.odd[node];
    }
  });
  solveMany(factored, x, x, sources.length);
  return sources.map((_, k) => ({
    even: Float64Array.from(even, (i, node) => (onRight[node] === 1 ? c : 1) * x[k * n + i]),
    odd: Float64Array.from(odd, (i, node) => (i < 0 ? 0 : (onRight[node] === 1 ? s : 1) * x[k * n + i])),
  }));
}
