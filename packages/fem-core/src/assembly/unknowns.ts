import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import { regionAreas } from '../elements/areas.js';
import type { Mesh } from '../mesh/mesh.js';
import { cornerCount, edgeCount, nodeCount, nodePoint } from '../mesh/mesh.js';
import { currentDensities } from './currents.js';
import type { EdgeCondition, Setup } from './setup.js';
import { own } from './setup.js';

/**
 * How the potential at the nodes follows from the unknowns: A[node] = sign[node] u[unknownOf[node]] + fixed[node].
 * Nodes of repeating and reversing sides share unknowns, with sign +1 or -1; no multipliers, no penalties.
 */
export interface Unknowns {
  /** 2: all nodes of the six-node triangles; 1: corners alone, and A at the middle of an edge is the mean of its ends. */
  readonly order: 1 | 2;
  /** Their number, n. */
  readonly count: number;
  /** Int32Array(nodes): -1 where the value is fixed, and at middles of order 1. */
  readonly unknownOf: Int32Array;
  /** Int8Array(nodes): +1 or -1; 0 where there is no unknown. */
  readonly sign: Int8Array;
  /** Float64Array(nodes), Wb/m: the value where it is fixed, else 0. */
  readonly fixed: Float64Array;
  /** Int32Array(2e): end corners of each edge, those of the mesh. */
  readonly edges: Int32Array;
}

/**
 * Numbers the unknowns of a mesh under the edge conditions.
 * @param order  of the elements: 1 linear, 2 quadratic
 * @throws InputError for conditions on sides that do not exist or have no match, sides that hold different values at one
 * place, values that are not finite, and currents without return where nothing fixes the potential
 */
export function numberUnknowns(mesh: Mesh, setup: Setup, order: 1 | 2 = 2): Unknowns {
  const conditions = conditionsOf(mesh, setup);
  const nodes = nodeCount(mesh);
  const corners = cornerCount(mesh);
  const tie = newTies(nodes);
  const held = newHolds(nodes);
  const faults: Fault[] = [];
  for (let e = 0; e < edgeCount(mesh); e++) {
    const side = mesh.edgeToSide[e];
    if (side < 0) continue;
    const condition = conditions[side];
    if (condition.kind === 'crossing') continue;
    const tied = condition.kind === 'repeating' || condition.kind === 'reversing';
    const mate = mesh.edgeToMatch[e];
    for (let k = 0; k <= order; k++) {
      const node = k < 2 ? mesh.edges[2 * e + k] : corners + e;
      if (tied)
        bind(tie, node, k < 2 ? mesh.edges[2 * mate + k] : corners + mate, condition.kind === 'repeating' ? 1 : -1);
      else hold(held, mesh, node, side, condition, faults);
    }
  }
  if (mesh.beyond !== undefined) held.by[mesh.beyond.infinity] = mesh.sideNames.length; // at 0
  carryToRoots(mesh, tie, held, faults);
  if (faults.length > 0) throw new InputError(faults);
  return collect(mesh, setup, order, tie, held);
}

/** A at the nodes, Wb/m, from the unknowns u, Float64Array(n); written into `out`, Float64Array(nodes), and returned. */
export function potentialOf(unknowns: Unknowns, u: Float64Array, out: Float64Array): Float64Array {
  const { order, unknownOf, sign, fixed, edges } = unknowns;
  const corners = out.length - edges.length / 2;
  const own = order === 2 ? out.length : corners;
  for (let node = 0; node < own; node++) {
    const i = unknownOf[node];
    out[node] = i < 0 ? fixed[node] : sign[node] * u[i];
  }
  for (let e = 0; own + e < out.length; e++) out[own + e] = 0.5 * (out[edges[2 * e]] + out[edges[2 * e + 1]]);
  return out;
}

/**
 * Sum over the nodes of each unknown, with their signs, of a nodal vector: what a functional of A is to the unknowns. With
 * order 1 each end of an edge takes half of what its middle has.
 * @param out  Float64Array(n), overwritten and returned
 */
export function gatherToUnknowns(unknowns: Unknowns, nodal: Float64Array, out: Float64Array): Float64Array {
  const { order, unknownOf, sign, edges } = unknowns;
  const corners = nodal.length - edges.length / 2;
  const own = order === 2 ? nodal.length : corners;
  out.fill(0);
  for (let node = 0; node < own; node++) {
    const i = unknownOf[node];
    if (i >= 0) out[i] += sign[node] * nodal[node];
  }
  if (order === 2) return out;
  for (let k = 0; k < edges.length; k++) {
    const i = unknownOf[edges[k]];
    if (i >= 0) out[i] += 0.5 * sign[edges[k]] * nodal[corners + (k >> 1)];
  }
  return out;
}

function heldValue(condition: EdgeCondition, x: number, y: number): number {
  switch (condition.kind) {
    case 'applied':
      return condition.field[0] * y - condition.field[1] * x;
    case 'potential':
      return condition.value(x, y);
    default:
      return 0;
  }
}

function conditionsOf(mesh: Mesh, setup: Setup): EdgeCondition[] {
  const faults: Fault[] = [];
  for (const side of Object.keys(setup.edges ?? {})) {
    if (mesh.beyond !== undefined) {
      faults.push({
        code: 'no-side',
        key: `edges.${side}`,
        wrong: 'the section lies in unbounded space and has no sides',
        remedy: 'leave the condition out, or let the section be bounded',
      });
      continue;
    }
    if (mesh.sideNames.includes(side)) continue;
    faults.push({
      code: 'unknown-side',
      key: `edges.${side}`,
      wrong: 'is no side of the outline',
      remedy: `sides here are: ${mesh.sideNames.join(', ')}`,
    });
  }
  const conditions = mesh.sideNames.map((side): EdgeCondition => {
    if (mesh.beyond !== undefined) return { kind: 'repeating' }; // the rim and its image
    return own(setup.edges, side) ?? { kind: 'closed' };
  });
  for (let e = 0; e < edgeCount(mesh); e++) {
    const side = mesh.edgeToSide[e];
    if (side < 0) continue;
    const { kind } = conditions[side];
    if (kind !== 'repeating' && kind !== 'reversing') continue;
    const mate = mesh.edgeToMatch[e];
    const key = `edges.${mesh.sideNames[side]}`;
    if (mate < 0) {
      faults.push({
        code: 'no-match',
        key,
        wrong: `is ${kind} but matched with no side`,
        remedy: 'name the pair in the section under matched',
      });
    } else if (conditions[mesh.edgeToSide[mate]].kind !== kind) {
      faults.push({
        code: 'one-sided',
        key,
        wrong: `is ${kind} but its match is not`,
        remedy: 'give both sides of a pair the same condition',
      });
    } else continue;
    break;
  }
  if (faults.length > 0) throw new InputError(faults);
  return conditions;
}

/** Values held at nodes, and the number of the side that holds each, -1 where none does. */
interface Holds {
  readonly value: Float64Array;
  readonly by: Int32Array;
  /** Pairs of nodes, one another or the same, that are held at values not equal; the second by the side given. */
  readonly apart: { readonly first: number; readonly second: number; readonly side: number; readonly value: number }[];
}

const newHolds = (nodes: number): Holds => ({
  value: new Float64Array(nodes),
  by: new Int32Array(nodes).fill(-1),
  apart: [],
});

function hold(held: Holds, mesh: Mesh, node: number, side: number, condition: EdgeCondition, faults: Fault[]): void {
  if (held.by[node] === side) return;
  const [x, y] = nodePoint(mesh, node);
  const value = heldValue(condition, x, y);
  if (!Number.isFinite(value)) {
    const key = `edges.${mesh.sideNames[side]}`;
    if (faults.some((fault) => fault.key === key)) return;
    const wrong = `holds A = ${value} Wb/m at (${x}, ${y})`;
    faults.push({ code: 'not-finite', key, wrong, remedy: 'hold finite values along the whole side' });
  } else if (held.by[node] < 0) {
    held.by[node] = side;
    held.value[node] = value;
  } else if (value !== held.value[node]) held.apart.push({ first: node, second: node, side, value });
}

/** Held values less than this share of the largest apart are the same. */
const SAME = 1e-9;

/** Lets the root of each group of tied nodes hold what any of them holds, and tells where that is contradictory. */
function carryToRoots(mesh: Mesh, tie: Ties, held: Holds, faults: Fault[]): void {
  const { value, by, apart } = held;
  const nodes = by.length;
  const source = new Int32Array(nodes).fill(-1); // by root: the node whose value it holds
  let scale = 0;
  for (let node = 0; node < nodes; node++) {
    if (by[node] < 0) continue;
    scale = Math.max(scale, Math.abs(value[node]));
    const root = rootOf(tie, node);
    const first = source[root];
    if (first < 0) source[root] = node;
    else {
      const brought = signOf(tie, node) * signOf(tie, first) * value[first];
      if (brought !== value[node]) apart.push({ first, second: node, side: by[node], value: value[node] });
    }
  }
  const told = new Set<string>();
  const tell = (a: number, b: number, wrong: string): void => {
    if (told.has(`${a} ${b}`) || told.has(`${b} ${a}`)) return;
    told.add(`${a} ${b}`);
    faults.push({
      code: 'contradictory-edges',
      key: `edges.${mesh.sideNames[a]}`,
      wrong,
      remedy: 'let the values agree there, or let the field cross one of the sides',
    });
  };
  const place = (node: number): string => `(${nodePoint(mesh, node).join(', ')})`;
  for (const { value: at } of apart) scale = Math.max(scale, Math.abs(at));
  for (const { first, second, side, value: at } of apart) {
    const sign = signOf(tie, first) * signOf(tie, second);
    if (Math.abs(at - sign * value[first]) <= SAME * scale) continue;
    const one = `holds A = ${value[first]} Wb/m at ${place(first)}`;
    const other = `edges.${mesh.sideNames[side]} holds ${at} Wb/m`;
    if (first === second) tell(by[first], side, `${one}, where ${other}`);
    else tell(by[first], side, `${one}, but at ${place(second)}, tied to it with sign ${sign}, ${other}`);
  }
  for (let root = 0; root < nodes; root++) {
    const node = source[root];
    if (node < 0) continue;
    if (tie.zero[root] === 1) {
      const wrong = `holds A = ${value[node]} Wb/m at ${place(node)}, which the reversing sides tie to its own negative`;
      if (Math.abs(value[node]) > SAME * scale) tell(by[node], by[node], wrong);
    } else if (node !== root) {
      by[root] = by[node];
      value[root] = signOf(tie, node) * value[node];
    }
  }
}

/** Union-find over nodes with a sign to the root; `zero` marks groups tied to their own negative, where A = 0. */
interface Ties {
  readonly parent: Int32Array;
  readonly sign: Int8Array;
  readonly zero: Uint8Array;
}

function newTies(nodes: number): Ties {
  const parent = new Int32Array(nodes);
  for (let node = 0; node < nodes; node++) parent[node] = node;
  return { parent, sign: new Int8Array(nodes).fill(1), zero: new Uint8Array(nodes) };
}

function rootOf({ parent }: Ties, node: number): number {
  let at = node;
  while (parent[at] !== at) at = parent[at];
  return at;
}

/** Sign of a node to its root. */
function signOf({ parent, sign }: Ties, node: number): number {
  let product = 1;
  for (let at = node; parent[at] !== at; at = parent[at]) product *= sign[at];
  return product;
}

function bind(tie: Ties, a: number, b: number, sign: number): void {
  const [ra, rb] = [rootOf(tie, a), rootOf(tie, b)];
  const between = signOf(tie, a) * sign * signOf(tie, b);
  if (ra === rb) {
    if (between < 0) tie.zero[ra] = 1;
    return;
  }
  tie.parent[rb] = ra;
  tie.sign[rb] = between;
  if (tie.zero[rb] === 1) tie.zero[ra] = 1;
}

function collect(mesh: Mesh, setup: Setup, order: 1 | 2, tie: Ties, held: Holds): Unknowns {
  const nodes = nodeCount(mesh);
  const unknownOf = new Int32Array(nodes).fill(-1);
  const sign = new Int8Array(nodes);
  const fixed = new Float64Array(nodes);
  const numberOf = new Int32Array(nodes).fill(-1);
  // Adding a constant to A changes no field: pinning one node is sound where nothing else fixes it.
  const pin = held.by.every((side) => side < 0) && !tie.zero.includes(1) && onlyRepeating(setup);
  const pinned = pin ? rootOf(tie, 0) : -1;
  if (pin) checkReturn(mesh, setup);
  let count = 0;
  for (let node = 0; node < (order === 2 ? nodes : cornerCount(mesh)); node++) {
    const root = rootOf(tie, node);
    if (tie.zero[root] === 1 || root === pinned) continue;
    if (held.by[root] >= 0) {
      fixed[node] = node === root ? held.value[root] : signOf(tie, node) * held.value[root];
      continue;
    }
    if (numberOf[root] < 0) numberOf[root] = count++;
    unknownOf[node] = numberOf[root];
    sign[node] = node === root ? 1 : signOf(tie, node);
  }
  return { order, count, unknownOf, sign, fixed, edges: mesh.edges };
}

const onlyRepeating = (setup: Setup): boolean =>
  Object.values(setup.edges ?? {}).every((condition) => condition.kind !== 'reversing');

/** With natural and repeating sides alone the currents must sum to zero, or no field exists (Ampere's law). */
function checkReturn(mesh: Mesh, setup: Setup): void {
  const areas = regionAreas(mesh);
  let [net, gross] = [0, 0];
  currentDensities(mesh, setup).forEach((density, region) => {
    net += density * areas[region];
    gross += Math.abs(density) * areas[region];
  });
  if (Math.abs(net) <= 1e-9 * gross) return; // rounding
  throw new InputError([
    {
      code: 'no-return',
      key: 'edges',
      wrong: `no side fixes the potential and the currents sum to ${net} A`,
      remedy: 'close a side, or let the currents sum to zero',
    },
  ]);
}
