import type { SymmetricPattern } from './pattern.js';

/**
 * Fill-reducing order of a symmetric matrix: approximate minimum degree on the quotient graph, with element absorption
 * (also aggressive), mass elimination and indistinguishable variables merged by hash.
 * Amestoy, Davis, Duff, An approximate minimum degree ordering algorithm, SIAM J. Matrix Anal. Appl. 17, 1996.
 *
 * @returns Int32Array(n): order[k] is the unknown eliminated as number k
 */
export function minimumDegreeOrder(pattern: SymmetricPattern): Int32Array {
  const { n } = pattern;
  const graph = startGraph(pattern);
  const { lists, weight, degree } = graph;
  const order: number[] = [];
  let eliminated = 0;
  let lowest = 0;
  while (eliminated < n) {
    while (lists.head[lowest] < 0) lowest++;
    const pivot = lists.head[lowest];
    unlist(lists, pivot, degree[pivot]);
    const front = formElement(graph, pivot);
    order.push(pivot);
    eliminated += weight[pivot];
    const frontWeight = front.reduce((sum, i) => sum + weight[i], 0);
    measureElements(graph, front);
    const survivors: number[] = [];
    for (const i of front) {
      unlist(lists, i, degree[i]);
      if (updateVariable(graph, i, pivot, frontWeight, n - eliminated)) survivors.push(i);
      else {
        // Mass elimination: i touches nothing but the new element, so it can follow the pivot without fill.
        eliminated += weight[i];
        weight[pivot] += weight[i];
        graph.mergedInto[i] = pivot;
        weight[i] = 0;
      }
    }
    mergeTwins(graph, survivors);
    graph.members[pivot] = survivors.filter((i) => weight[i] > 0);
    for (const i of graph.members[pivot]) {
      degree[i] = Math.max(0, Math.min(degree[i], n - eliminated - weight[i]));
      enlist(lists, i, degree[i]);
      lowest = Math.min(lowest, degree[i]);
    }
    graph.elementWeight[pivot] = graph.members[pivot].reduce((sum, i) => sum + weight[i], 0);
  }
  return expand(order, graph.mergedInto, n);
}

interface DegreeLists {
  readonly head: Int32Array;
  readonly next: Int32Array;
  readonly previous: Int32Array;
}

interface QuotientGraph {
  /** Per variable: neighbouring variables not yet covered by an element. */
  readonly variables: number[][];
  /** Per variable: elements (eliminated pivots) it belongs to. */
  readonly elements: number[][];
  /** Per element: its variables. */
  readonly members: number[][];
  /** Unknowns a variable stands for; 0 once it is merged. */
  readonly weight: Int32Array;
  readonly elementWeight: Int32Array;
  readonly alive: Uint8Array;
  readonly degree: Int32Array;
  /** Per variable merged or mass-eliminated: the one it follows, else -1. */
  readonly mergedInto: Int32Array;
  readonly mark: Int32Array;
  /** Per element: weight of its part outside the present front, valid where outsideMark is the present epoch. */
  readonly outside: Int32Array;
  readonly outsideMark: Int32Array;
  readonly hash: Int32Array;
  readonly lists: DegreeLists;
  epoch: number;
}

function startGraph(pattern: SymmetricPattern): QuotientGraph {
  const { n, start, row } = pattern;
  const variables: number[][] = Array.from({ length: n }, () => []);
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      variables[j].push(row[p]);
      variables[row[p]].push(j);
    }
  }
  const lists = {
    head: new Int32Array(n + 1).fill(-1),
    next: new Int32Array(n).fill(-1),
    previous: new Int32Array(n).fill(-1),
  };
  const degree = Int32Array.from(variables, (list) => list.length);
  for (let i = n - 1; i >= 0; i--) enlist(lists, i, degree[i]);
  return {
    variables,
    elements: Array.from({ length: n }, () => []),
    members: Array.from({ length: n }, () => []),
    weight: new Int32Array(n).fill(1),
    elementWeight: new Int32Array(n),
    alive: new Uint8Array(n),
    degree,
    mergedInto: new Int32Array(n).fill(-1),
    mark: new Int32Array(n),
    outside: new Int32Array(n),
    outsideMark: new Int32Array(n),
    hash: new Int32Array(n),
    lists,
    epoch: 0,
  };
}

function enlist(lists: DegreeLists, i: number, degree: number): void {
  const old = lists.head[degree];
  lists.next[i] = old;
  lists.previous[i] = -1;
  if (old >= 0) lists.previous[old] = i;
  lists.head[degree] = i;
}

function unlist(lists: DegreeLists, i: number, degree: number): void {
  const { next, previous, head } = lists;
  if (previous[i] >= 0) next[previous[i]] = next[i];
  else head[degree] = next[i];
  if (next[i] >= 0) previous[next[i]] = previous[i];
}

/** Variables adjacent to the pivot; its elements are absorbed into the new one. */
function formElement(graph: QuotientGraph, pivot: number): number[] {
  const { variables, elements, members, weight, mark, alive } = graph;
  const epoch = ++graph.epoch;
  const front: number[] = [];
  mark[pivot] = epoch;
  const take = (i: number): void => {
    if (weight[i] === 0 || mark[i] === epoch) return;
    mark[i] = epoch;
    front.push(i);
  };
  for (const i of variables[pivot]) take(i);
  for (const e of elements[pivot]) {
    for (const i of members[e]) take(i);
    alive[e] = 0;
    members[e] = [];
  }
  alive[pivot] = 1;
  variables[pivot] = [];
  elements[pivot] = [];
  return front;
}

/** For every element that meets the front, the weight of its part outside it. */
function measureElements(graph: QuotientGraph, front: readonly number[]): void {
  const { elements, weight, elementWeight, outside, outsideMark, alive, epoch } = graph;
  for (const i of front) {
    for (const e of elements[i]) {
      if (alive[e] === 0) continue;
      if (outsideMark[e] !== epoch) {
        outsideMark[e] = epoch;
        outside[e] = elementWeight[e];
      }
      outside[e] -= weight[i];
    }
  }
}

/** Prunes the lists of i and bounds its degree; false when i touches nothing beyond the front. */
function updateVariable(graph: QuotientGraph, i: number, pivot: number, frontWeight: number, left: number): boolean {
  const { variables, elements, weight, mark, outside, alive, degree, epoch } = graph;
  let beyond = 0;
  let hash = pivot;
  let kept = 0;
  const ownElements = elements[i];
  for (const e of ownElements) {
    if (alive[e] === 0) continue;
    if (outside[e] <= 0) {
      alive[e] = 0; // aggressive absorption: it lies wholly in the front
      continue;
    }
    ownElements[kept++] = e;
    beyond += outside[e];
    hash = (hash + e) | 0;
  }
  ownElements.length = kept;
  kept = 0;
  const ownVariables = variables[i];
  for (const j of ownVariables) {
    if (weight[j] === 0 || mark[j] === epoch) continue; // merged, or covered by the new element
    ownVariables[kept++] = j;
    beyond += weight[j];
    hash = (hash + j) | 0;
  }
  ownVariables.length = kept;
  if (beyond === 0) return false;
  ownElements.push(pivot);
  const rest = frontWeight - weight[i];
  degree[i] = Math.min(left, degree[i] + rest, beyond + rest);
  graph.hash[i] = hash;
  return true;
}

/** Merges variables of the front whose lists are the same: they will be eliminated together. */
function mergeTwins(graph: QuotientGraph, front: readonly number[]): void {
  const { variables, elements, weight, mark, degree, mergedInto, hash } = graph;
  const byHash = [...front].sort((i, j) => hash[i] - hash[j] || i - j);
  for (let a = 0; a < byHash.length; a++) {
    const i = byHash[a];
    if (weight[i] === 0) continue;
    let epoch = 0;
    for (let b = a + 1; b < byHash.length && hash[byHash[b]] === hash[i]; b++) {
      const j = byHash[b];
      if (weight[j] === 0) continue;
      if (variables[j].length !== variables[i].length || elements[j].length !== elements[i].length) continue;
      if (epoch === 0) {
        epoch = ++graph.epoch;
        for (const v of variables[i]) mark[v] = epoch;
        for (const e of elements[i]) mark[e] = epoch;
      }
      if (!variables[j].every((v) => mark[v] === epoch) || !elements[j].every((e) => mark[e] === epoch)) continue;
      weight[i] += weight[j];
      degree[i] -= weight[j];
      weight[j] = 0;
      mergedInto[j] = i;
      variables[j] = [];
      elements[j] = [];
    }
  }
}

/** Puts each merged variable right after the one it followed. */
function expand(pivots: readonly number[], mergedInto: Int32Array, n: number): Int32Array {
  const followers: number[][] = Array.from({ length: n }, () => []);
  mergedInto.forEach((into, i) => {
    if (into >= 0) followers[into].push(i);
  });
  const order = new Int32Array(n);
  let k = 0;
  const stack: number[] = [];
  for (const pivot of pivots) {
    stack.push(pivot);
    while (stack.length > 0) {
      const i = stack.pop() as number;
      order[k++] = i;
      stack.push(...followers[i]);
    }
  }
  if (k !== n) throw new Error('minimumDegreeOrder: an unknown was lost');
  return order;
}
