import { MU0 } from '../base/constants.js';
import { RULE_5 } from '../elements/quadrature.js';
import { FULL_RULE, globalNode, nodeCoordinates } from '../elements/six-node.js';
import { referenceTensor } from '../elements/straight-stiffness.js';
import { bytes } from '../kernels/assembly.wasm.js';
import { compileKernels, instantiate } from '../kernels/instantiate.js';
import type { BHCurve } from '../materials/bh-curve.js';
import type { Material } from '../materials/material.js';
import { pieceOf } from '../materials/monotone-cubic.js';
import type { Mesh } from '../mesh/mesh.js';
import { nodeCount } from '../mesh/mesh.js';
import type { AddPairs, Views } from './steel-plain.js';
import { addPairsPlain } from './steel-plain.js';

/**
 * Six-node triangles of B-H curves, laid out in a memory of their own for a kernel that takes them two at a time, and the
 * arrays it reads and adds to.
 *
 * In reference coordinates A = A0 + alpha xi + beta eta + (gamma xi^2 + 2 delta xi eta + epsilon eta^2)/2, whose coefficients are
 *
 *   alpha = 4 a5 - a1,  beta = 4 a4 - a2,  gamma = 4 (a1 - 2 a5),  delta = 4 (a3 - a4 - a5),  epsilon = 4 (a2 - 2 a4)
 *
 * with a_i = A_i - A_0, so that its slopes are g = (alpha + gamma xi + delta eta, beta + delta xi + epsilon eta). With the metric
 * M = det J J^-1 J^-T and h = M g at a point of weight w, B^2 = g . h / det J and
 *
 *   residual: sum of w nu h . dg,    tangent: sum of dg . C dg,  C = w (nu M + (dH/dB - nu)/B^2 h h^T / det J).
 *
 * The slopes' being linear leaves of C its moments to degree 2, from which the matrix of the five coefficients and then that
 * of the nodes follows. Straight triangles have one metric, curved ones one a point.
 */
export interface SteelTriangles {
  /** Float64Array(nodes), Wb/m: read. */
  readonly potential: Float64Array;
  /** Float64Array(nodes), A: added to. */
  readonly residual: Float64Array;
  /** Float64Array(entries), m/H: added to. */
  readonly tangent: Float64Array;
  readonly runs: readonly Run[];
  readonly addresses: Addresses;
  readonly addPairs: AddPairs;
}

/** Pairs of triangles, all of one curve and all straight or all curved. The rest are byte addresses. */
interface Run {
  readonly pairs: number;
  readonly law: number;
  readonly nodes: number;
  readonly metric: number;
  /** Bytes from the metric of one point of a pair to the next. */
  readonly pointStep: number;
  /** Bytes from the metric of one pair to the next. */
  readonly pairStep: number;
  readonly scatter: number;
}

interface Addresses {
  readonly rule: number;
  readonly scratch: number;
  readonly potential: number;
  readonly residual: number;
  readonly tangent: number;
}

const compiled = compileKernels(bytes);

/** Below it, making an instance takes longer than it saves. */
const FEWEST_TRIANGLES = 64;
/** A host may compile better while the first calls run: pairs a call. */
const CALL = 256;

const SCRATCH_BYTES = 1296;
const METRIC_BYTES = 64;
const NODES_BYTES = 48;
const SCATTER_BYTES = 168;

/**
 * Lays out the given triangles.
 *
 * @param triangles  numbers of triangles of 'curve' materials whose unknowns differ and have no sign
 * @param scatter  see `MeshPattern`
 * @param plain  true for the twin in TypeScript, which gives the same bits
 */
export function laySteel(
  mesh: Mesh,
  materials: readonly Material[],
  triangles: Int32Array,
  scatter: Int32Array,
  entries: number,
  plain = triangles.length < FEWEST_TRIANGLES,
): SteelTriangles {
  const nodes = nodeCount(mesh);
  const groups = groupByLaw(mesh, materials, triangles);
  let end = 0;
  const reserve = (byteCount: number): number => {
    const at = end;
    end += 16 * Math.ceil(byteCount / 16);
    return at;
  };
  const rule = reserve(FULL_RULE.count * 48);
  const scratch = reserve(SCRATCH_BYTES);
  // What stands beside the last of an odd number goes to one node and one entry more than there are.
  const potential = reserve(8 * (nodes + 1));
  const residual = reserve(8 * (nodes + 1));
  const tangent = reserve(8 * (entries + 1));
  const laws = new Map<BHCurve, number>();
  for (const { curve } of groups) if (!laws.has(curve)) laws.set(curve, reserve(lawBytes(curve)));
  const runs = groups.map(({ curve, curved, members }): Run => {
    const pairs = (members.length + 1) >> 1;
    const pointStep = curved ? METRIC_BYTES : 0;
    const pairStep = curved ? METRIC_BYTES * FULL_RULE.count : METRIC_BYTES;
    return {
      pairs,
      law: laws.get(curve) ?? 0, // every group's curve has been laid
      nodes: reserve(pairs * NODES_BYTES),
      metric: reserve(pairs * pairStep),
      pointStep,
      pairStep,
      scatter: reserve(pairs * SCATTER_BYTES),
    };
  });

  const instance =
    compiled === undefined || plain ? undefined : instantiate<{ readonly addPairs: AddPairs }>(compiled, end);
  const buffer = instance === undefined ? new ArrayBuffer(end) : instance.buffer();
  const views: Views = { numbers: new Float64Array(buffer), words: new Int32Array(buffer) };
  writeRule(views, rule);
  for (const [curve, at] of laws) writeLaw(curve, views, at);
  groups.forEach(({ members }, k) => {
    writeNodes(mesh, members, views, runs[k]);
    writeMetric(mesh, members, views, runs[k]);
    writeScatter(scatter, entries, members, views, runs[k]);
  });
  return {
    potential: new Float64Array(buffer, potential, nodes),
    residual: new Float64Array(buffer, residual, nodes),
    tangent: new Float64Array(buffer, tangent, entries),
    runs,
    addresses: { rule, scratch, potential, residual, tangent },
    addPairs: instance?.exports.addPairs ?? addPairsPlain(views),
  };
}

/** Adds the triangles' part to `residual` and, where asked for, to `tangent`. */
export function addSteel({ runs, addresses, addPairs }: SteelTriangles, withTangent: boolean): void {
  const { rule, scratch, potential, residual, tangent } = addresses;
  for (const run of runs) {
    for (let first = 0; first < run.pairs; first += CALL) {
      addPairs(
        Math.min(CALL, run.pairs - first),
        run.law,
        run.nodes + NODES_BYTES * first,
        run.metric + run.pairStep * first,
        run.pointStep,
        run.pairStep,
        run.scatter + SCATTER_BYTES * first,
        rule,
        scratch,
        potential,
        residual,
        withTangent ? tangent : 0,
      );
    }
  }
}

interface Group {
  readonly curve: BHCurve;
  readonly curved: boolean;
  readonly members: readonly number[];
}

/** In the order of the materials, straight ones first. */
function groupByLaw(mesh: Mesh, materials: readonly Material[], triangles: Int32Array): Group[] {
  const groups = new Map<BHCurve, readonly [straight: number[], curved: number[]]>();
  for (const material of materials) if (material.kind === 'curve') groups.set(material.curve, [[], []]);
  const byRegion = materials.map((material) => (material.kind === 'curve' ? groups.get(material.curve) : undefined));
  for (const t of triangles) byRegion[mesh.triangleToRegion[t]]?.[mesh.curved[t]].push(t);
  return [...groups]
    .flatMap(([curve, both]) => both.map((members, k) => ({ curve, curved: k === 1, members })))
    .filter(({ members }) => members.length > 0);
}

function writeRule({ numbers }: Views, at: number): void {
  for (let q = 0, k = at / 8; q < FULL_RULE.count; q++, k += 6) {
    numbers.fill(RULE_5.points[2 * q], k, k + 2);
    numbers.fill(RULE_5.points[2 * q + 1], k + 2, k + 4);
    numbers.fill(RULE_5.weights[q], k + 4, k + 6);
  }
}

/** Each pair: nodes 0 of both, nodes 1 of both, ... */
function writeNodes(mesh: Mesh, members: readonly number[], { words }: Views, run: Run): void {
  const spare = nodeCount(mesh);
  for (let k = 0; k < 2 * run.pairs; k++) {
    const at = run.nodes / 4 + 12 * (k >> 1) + (k & 1);
    for (let i = 0; i < 6; i++) words[at + 2 * i] = k < members.length ? globalNode(mesh, members[k], i) : spare;
  }
}

/** Each pair, or each point of each pair: M's xi xi of both, xi eta of both, eta eta of both, 1/det J of both. */
function writeMetric(mesh: Mesh, members: readonly number[], { numbers }: Views, run: Run): void {
  const coordinates = new Float64Array(12);
  const sides = new Float64Array(6);
  const metric = new Float64Array(3);
  const points = run.pointStep === 0 ? 1 : FULL_RULE.count;
  for (let k = 0; k < 2 * run.pairs; k++) {
    nodeCoordinates(mesh, members[Math.min(k, members.length - 1)], coordinates);
    for (let q = 0; q < points; q++) {
      const det = referenceTensor(points === 1 ? coordinates : sidesAt(coordinates, q, sides), 1, 0, 1, metric);
      const at = run.metric / 8 + (run.pairStep / 8) * (k >> 1) + 8 * q + (k & 1);
      for (let i = 0; i < 3; i++) numbers[at + 2 * i] = metric[i];
      numbers[at + 6] = 1 / det;
    }
  }
}

/** Corners of the straight triangle that has the Jacobian of a curved one at point q of the full rule. */
function sidesAt(coordinates: Float64Array, q: number, out: Float64Array): Float64Array {
  out.fill(0);
  for (let i = 0; i < 6; i++) {
    for (let k = 0; k < 2; k++) {
      out[2 + k] += FULL_RULE.slopes[12 * q + i] * coordinates[2 * i + k];
      out[4 + k] += FULL_RULE.slopes[12 * q + 6 + i] * coordinates[2 * i + k];
    }
  }
  return out;
}

/** Each pair: entry 0 of both, entry 1 of both, ... */
function writeScatter(
  scatter: Int32Array,
  spare: number,
  members: readonly number[],
  { words }: Views,
  run: Run,
): void {
  for (let k = 0; k < 2 * run.pairs; k++) {
    const at = run.scatter / 4 + 42 * (k >> 1) + (k & 1);
    for (let p = 0; p < 21; p++) {
      const entry = k < members.length ? scatter[21 * members[k] + p] : -1;
      words[at + 2 * p] = entry < 0 ? spare : entry;
    }
  }
}

/** Cells of equal width over the curve, so that the piece that holds a flux density is near at hand. */
const cellsOf = ({ b }: Pick<BHCurve, 'b'>): number => Math.min(4096, Math.max(64, 4 * b.length));

const lawBytes = (curve: BHCurve): number => 24 + 4 * (cellsOf(curve) + 1) + 8 + 48 * curve.b.length;

/**
 * Cells per tesla, dH/dB at rest, the number of cells; of each cell, centred on its number, the distance in bytes to the piece
 * its low end lies in; then the pieces: start, H = c0 + d (c1 + d (c2 + d c3)) at d beyond it, end. The last piece is that of vacuum.
 */
function writeLaw({ b, h, slope }: BHCurve, { numbers, words }: Views, at: number): void {
  const last = b.length - 1;
  const cells = cellsOf({ b });
  numbers[at / 8] = cells / b[last];
  numbers[at / 8 + 1] = slope[0];
  numbers[at / 8 + 2] = cells;
  const pieces = (24 + 4 * (cells + 1) + 7) & ~7;
  // From half a cell below, and a little for rounding.
  for (let c = 0; c <= cells; c++) words[at / 4 + 6 + c] = pieces + 48 * pieceOf(b, ((c - 0.500001) / cells) * b[last]);
  for (let i = 0; i <= last; i++) {
    const k = (at + pieces) / 8 + 6 * i;
    numbers[k] = b[i];
    numbers[k + 1] = h[i];
    if (i === last) {
      numbers.set([1 / MU0, 0, 0, Number.NaN], k + 2); // nothing is beyond its end
    } else {
      const d = b[i + 1] - b[i];
      const chord = (h[i + 1] - h[i]) / d;
      numbers[k + 2] = slope[i];
      numbers[k + 3] = (3 * chord - 2 * slope[i] - slope[i + 1]) / d;
      numbers[k + 4] = (slope[i] + slope[i + 1] - 2 * chord) / (d * d);
      numbers[k + 5] = b[i + 1];
    }
  }
}
