import type { Fault } from '../base/fault.js';
import { InputError } from '../base/fault.js';
import { regionAreas } from '../elements/areas.js';
import type { Mesh } from '../mesh/mesh.js';
import { cornerCount, edgeCount, nodeCount, nodePoint } from '../mesh/mesh.js';
import { currentDensities } from './currents.js';
import type { EdgeCondition, Setup } from './setup.js';

/**
 * How the potential at the nodes follows from the unknowns: A[node] = sign[node] u[unknownOf[node]] + fixed[node].
 * Nodes of repeating and reversing sides share unknowns, with sign +1 or -1; no multipliers, no penalties.
 */
export interface Unknowns {
  readonly count: number;
  /** Int32Array(nodes): -1 where the value is fixed. */
  readonly unknownOf: Int32Array;
  /** Int8Array(nodes): +1 or -1; 0 where the value is fixed. */
  readonly sign: Int8Array;
  /** Float64Array(nodes), Wb/m: the value where it is fixed, else 0. */
  readonly fixed: Float64Array;
}

/**
 * Numbers the unknowns of a mesh under the edge conditions.
 * @throws InputError for conditions on sides that do not exist or have no match, and where nothing fixes the potential
 */
export function numberUnknowns(mesh: Mesh, setup: Setup): Unknowns {
  const conditions = conditionsOf(mesh, setup);
  const nodes = nodeCount(mesh);
  const corners = cornerCount(mesh);
  const tie = newTies(nodes);
  const held = new Map<number, number>();
  for (let e = 0; e < edgeCount(mesh); e++) {
    if (mesh.edgeToSide[e] < 0) continue;
    const condition = conditions[mesh.edgeToSide[e]];
    const edgeNodes = [mesh.edges[2 * e], mesh.edges[2 * e + 1], corners + e];
    if (condition.kind === 'crossing') continue;
    if (condition.kind === 'repeating' || condition.kind === 'reversing') {
      const mate = mesh.edgeToMatch[e];
      const sign = condition.kind === 'repeating' ? 1 : -1;
      const mates = [mesh.edges[2 * mate], mesh.edges[2 * mate + 1], corners + mate];
      edgeNodes.forEach((node, i) => {
        bind(tie, node, mates[i], sign);
      });
    } else for (const node of edgeNodes) held.set(node, heldValue(condition, ...nodePoint(mesh, node)));
  }
  if (mesh.beyond !== undefined) held.set(mesh.beyond.infinity, 0);
  return collect(mesh, setup, tie, held);
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
    return setup.edges?.[side] ?? { kind: 'closed' };
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

/** Union-find over nodes with a sign to the root; `zero` marks groups tied to their own negative, where A = 0. */
interface Ties {
  readonly parent: Int32Array;
  readonly sign: Int8Array;
  readonly zero: Uint8Array;
}

function newTies(nodes: number): Ties {
  return {
    parent: Int32Array.from({ length: nodes }, (_, i) => i),
    sign: new Int8Array(nodes).fill(1),
    zero: new Uint8Array(nodes),
  };
}

function rootOf(tie: Ties, node: number): { root: number; sign: number } {
  let sign = 1;
  let at = node;
  while (tie.parent[at] !== at) {
    sign *= tie.sign[at];
    at = tie.parent[at];
  }
  return { root: at, sign };
}

function bind(tie: Ties, a: number, b: number, sign: number): void {
  const [ra, rb] = [rootOf(tie, a), rootOf(tie, b)];
  const between = ra.sign * sign * rb.sign;
  if (ra.root === rb.root) {
    if (between < 0) tie.zero[ra.root] = 1;
    return;
  }
  tie.parent[rb.root] = ra.root;
  tie.sign[rb.root] = between;
  if (tie.zero[rb.root] === 1) tie.zero[ra.root] = 1;
}

function collect(mesh: Mesh, setup: Setup, tie: Ties, held: ReadonlyMap<number, number>): Unknowns {
  const nodes = nodeCount(mesh);
  const heldRoot = new Map<number, number>();
  for (const [node, value] of held) {
    const { root, sign } = rootOf(tie, node);
    heldRoot.set(root, sign * value);
  }
  const unknownOf = new Int32Array(nodes).fill(-1);
  const sign = new Int8Array(nodes);
  const fixed = new Float64Array(nodes);
  const numberOf = new Int32Array(nodes).fill(-1);
  let count = 0;
  let free = true;
  const pin = !anyFixed(tie, heldRoot) && onlyRepeating(setup);
  for (let node = 0; node < nodes; node++) {
    const { root, sign: s } = rootOf(tie, node);
    const value = tie.zero[root] === 1 ? 0 : heldRoot.get(root);
    if (value !== undefined || (pin && root === rootOf(tie, 0).root)) {
      fixed[node] = s * (value ?? 0); // adding a constant to A changes no field: pinning one node is sound where nothing else fixes it
      free = false;
      continue;
    }
    if (numberOf[root] < 0) numberOf[root] = count++;
    unknownOf[node] = numberOf[root];
    sign[node] = s;
  }
  if (pin && !free) checkReturn(mesh, setup);
  return { count, unknownOf, sign, fixed };
}

function anyFixed(tie: Ties, heldRoot: ReadonlyMap<number, number>): boolean {
  return heldRoot.size > 0 || tie.zero.includes(1);
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
  // Eight edges round a circle miss 8e-4 of its area: no reason to refuse bars that carry the same current.
  if (Math.abs(net) <= 1e-3 * gross) return;
  throw new InputError([
    {
      code: 'no-return',
      key: 'edges',
      wrong: `no side fixes the potential and the currents sum to ${net} A`,
      remedy: 'close a side, or let the currents sum to zero',
    },
  ]);
}
