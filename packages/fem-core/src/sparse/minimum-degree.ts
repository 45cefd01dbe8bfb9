import { compileKernels, instantiate } from '../kernels/instantiate.js';
import { bytes } from '../kernels/ordering.wasm.js';
import type { SymmetricPattern } from './pattern.js';

/** The kernel of wasm/ordering.ts; its twin is `orderPlainly`. Orders the pattern at the end of the words. */
type OrderWords = (n: number, head: number, buckets: number, lists: number, end: number, dense: number) => void;

const compiled = compileKernels(bytes);

/**
 * Fill-reducing order of a symmetric matrix: approximate minimum degree on the quotient graph, with element absorption
 * (also aggressive), mass elimination and indistinguishable variables merged by hash. Unknowns coupled with more than
 * max(16, 10 sqrt(n)) others come last, by number: each step near one would walk its long list.
 * Amestoy, Davis, Duff, An approximate minimum degree ordering algorithm, SIAM J. Matrix Anal. Appl. 17, 1996.
 *
 * @returns Int32Array(n): order[k] is the unknown eliminated as number k
 */
export function minimumDegreeOrder(pattern: SymmetricPattern): Int32Array {
  if (compiled === undefined) return plainMinimumDegreeOrder(pattern);
  const plan = planOf(pattern);
  const kernels = instantiate<{ readonly minimumDegree: OrderWords }>(compiled, 4 * plan.end);
  const words = new Int32Array(kernels.buffer());
  putPattern(pattern, plan, words);
  kernels.exports.minimumDegree(plan.n, plan.head, plan.buckets, plan.lists, plan.end, plan.dense);
  return words.slice(plan.head, plan.head + plan.n);
}

/** The same order without WebAssembly. */
export function plainMinimumDegreeOrder(pattern: SymmetricPattern): Int32Array {
  const plan = planOf(pattern);
  const words = new Int32Array(plan.end);
  putPattern(pattern, plan, words);
  orderPlainly(words, plan);
  return words.slice(plan.head, plan.head + plan.n);
}

/** Where things are in the words: n records of eight, then heads of the degree lists, hash buckets, neighbour lists. */
interface Plan {
  readonly n: number;
  readonly head: number;
  readonly buckets: number;
  readonly lists: number;
  readonly end: number;
  /** Unknowns with more neighbours than this come last. */
  readonly dense: number;
}

/** Words of a node's record. */
const RECORD = 8;
/** Where its list begins: for a variable its elements, then its variables; for an element its variables. */
const LIST = 0;
/** Length of that list; 0 once the node is gone. */
const LENGTH = 1;
/** How many elements the list of a variable begins with. */
const ELEMENTS = 2;
/** Unknowns a variable stands for; 0 once it is merged, eliminated or set aside; negative while it is in the front. */
const WEIGHT = 3;
/** Of a variable the bound of its degree; of an element the weight of its variables. */
const DEGREE = 4;
/** Links of the degree lists; in the front, the next with the same hash; once it is gone, the node it follows, or -1. */
const NEXT = 5;
/** Links of the degree lists; in the front, the hash; of a pivot, where in the order it and those that follow it begin. */
const PREVIOUS = 6;
/** Stamp; 0 for an absorbed element. */
const MARK = 7;

/** Enough for fronts of plane problems; more variables in a bucket cost time only. */
const BUCKETS = 1024;
/** Stamps begin anew beyond this, so that they never overflow. */
const LAST_STAMP = 2 ** 30;

function planOf({ n, row }: SymmetricPattern): Plan {
  const head = RECORD * n;
  const buckets = head + n + 1;
  const lists = buckets + BUCKETS;
  // Live lists never outgrow the matrix, save for the element being formed (n at most). Beyond the lists there is room for
  // the pattern, which is used up before: that keeps compressions rare.
  const entries = 2 * (row.length - n);
  return {
    n,
    head,
    buckets,
    lists,
    end: lists + entries + row.length + n + 1,
    dense: Math.max(16, Math.floor(10 * Math.sqrt(n))),
  };
}

/** At the very end: the rows, then where the columns start. */
function putPattern({ n, start, row }: SymmetricPattern, { end }: Plan, words: Int32Array): void {
  words.set(start, end - (n + 1));
  words.set(row, end - (n + 1) - row.length);
}

/** What the steps of the plain twin share. */
interface State {
  readonly words: Int32Array;
  readonly plan: Plan;
  /** First word of the lists not in use. */
  free: number;
  stamp: number;
  eliminated: number;
  /** No variable left has a lower degree. */
  lowest: number;
  /** Largest weight of an element so far: no mark goes beyond the stamp by more. */
  widest: number;
}

/** One step a pivot: form its element, measure the elements around, prune and merge the front, list it by its degrees. */
function orderPlainly(words: Int32Array, plan: Plan): void {
  const { n } = plan;
  layOut(words, plan);
  const state: State = { words, plan, free: 0, stamp: 2, eliminated: 0, lowest: 0, widest: 0 };
  const left = begin(state);
  while (state.eliminated < left) {
    const pivot = takeLowest(state);
    const place = state.eliminated;
    state.eliminated += words[RECORD * pivot + WEIGHT];
    formElement(state, pivot);
    measureElements(state, pivot);
    pruneFront(state, pivot);
    mergeTwins(state, pivot);
    listFront(state, pivot, n);
    words[RECORD * pivot + NEXT] = -1;
    words[RECORD * pivot + PREVIOUS] = place;
  }
  numberAll(state);
}

/** Lists of all neighbours from the lower triangle. */
function layOut(words: Int32Array, { n, lists, end }: Plan): void {
  const start = end - (n + 1);
  const row = start - words[start + n];
  for (let j = 0; j < n; j++) {
    const from = row + words[start + j] + 1;
    const to = row + words[start + j + 1];
    words[RECORD * j + LENGTH] += to - from;
    for (let p = from; p < to; p++) words[RECORD * words[p] + LENGTH]++;
  }
  let at = lists;
  for (let j = 0; j < n; j++) {
    words[RECORD * j + LIST] = at;
    words[RECORD * j + NEXT] = at;
    at += words[RECORD * j + LENGTH];
  }
  for (let j = 0; j < n; j++) {
    let own = words[RECORD * j + NEXT];
    const to = row + words[start + j + 1];
    for (let p = row + words[start + j] + 1; p < to; p++) {
      const i = words[p];
      words[own++] = i;
      words[words[RECORD * i + NEXT]++] = j;
    }
    words[RECORD * j + NEXT] = own;
  }
}

/** Sets the dense unknowns aside, lists the others by degree; returns how many there are. */
function begin(state: State): number {
  const { words, plan } = state;
  const { n, head, buckets, lists, dense } = plan;
  words.fill(-1, head, lists);
  let left = n;
  for (let i = n - 1; i >= 0; i--) {
    const at = RECORD * i;
    state.free = Math.max(state.free, words[at + LIST] + words[at + LENGTH]);
    words[at + ELEMENTS] = 0;
    words[at + DEGREE] = words[at + LENGTH];
    words[at + MARK] = 1;
    if (words[at + LENGTH] > dense) {
      words[at + WEIGHT] = 0;
      words[at + LENGTH] = 0;
      words[at + NEXT] = -1;
      words[at + PREVIOUS] = --left;
    } else {
      words[at + WEIGHT] = 1;
      enlist(words, head, i, words[at + DEGREE]);
    }
  }
  words.fill(-1, buckets, lists);
  return left;
}

function enlist(words: Int32Array, head: number, i: number, degree: number): void {
  const old = words[head + degree];
  words[RECORD * i + NEXT] = old;
  words[RECORD * i + PREVIOUS] = -1;
  if (old >= 0) words[RECORD * old + PREVIOUS] = i;
  words[head + degree] = i;
}

function unlist(words: Int32Array, head: number, i: number): void {
  const next = words[RECORD * i + NEXT];
  const previous = words[RECORD * i + PREVIOUS];
  if (next >= 0) words[RECORD * next + PREVIOUS] = previous;
  if (previous >= 0) words[RECORD * previous + NEXT] = next;
  else words[head + words[RECORD * i + DEGREE]] = next;
}

function takeLowest(state: State): number {
  const { words, plan } = state;
  let { lowest } = state;
  while (words[plan.head + lowest] < 0) lowest++;
  state.lowest = lowest;
  const pivot = words[plan.head + lowest];
  unlist(words, plan.head, pivot);
  return pivot;
}

/** The variables adjacent to the pivot become its list, their weights negative; its own elements are absorbed. */
function formElement(state: State, pivot: number): void {
  const { words, plan } = state;
  const own = RECORD * pivot;
  const inPlace = words[own + ELEMENTS] === 0;
  // The degree bounds how many variables the new list can hold.
  if (!inPlace && state.free + words[own + DEGREE] > plan.end) compress(state);
  words[own + WEIGHT] = 0;
  const from = words[own + LIST];
  const to = from + words[own + LENGTH];
  const variables = from + words[own + ELEMENTS];
  const first = inPlace ? from : state.free;
  let at = first;
  let weight = 0;
  const take = (p: number, end: number): void => {
    for (; p < end; p++) {
      const i = words[p];
      const w = words[RECORD * i + WEIGHT];
      if (w <= 0) continue; // gone, or in the front already
      words[RECORD * i + WEIGHT] = -w;
      weight += w;
      words[at++] = i;
      unlist(words, plan.head, i);
    }
  };
  for (let q = from; q < variables; q++) {
    const e = RECORD * words[q];
    if (words[e + MARK] === 0) continue;
    take(words[e + LIST], words[e + LIST] + words[e + LENGTH]);
    words[e + MARK] = 0;
    words[e + LENGTH] = 0;
  }
  take(variables, to);
  if (!inPlace) state.free = at;
  words[own + LIST] = first;
  words[own + LENGTH] = at - first;
  words[own + DEGREE] = weight;
  words[own + MARK] = 1;
  state.widest = Math.max(state.widest, weight);
}

/** Moves the lists in use together: the first word of each gives way to -1 - its node for the while. */
function compress(state: State): void {
  const { words, plan } = state;
  for (let i = 0; i < plan.n; i++) {
    const at = RECORD * i;
    if (words[at + LENGTH] === 0) continue;
    const first = words[at + LIST];
    words[at + LIST] = words[first];
    words[first] = -1 - i;
  }
  let to = plan.lists;
  for (let p = plan.lists; p < state.free; ) {
    const sign = words[p++];
    if (sign >= 0) continue;
    const at = RECORD * (-1 - sign);
    words[to] = words[at + LIST];
    words[at + LIST] = to++;
    for (let k = words[at + LENGTH] - 1; k > 0; k--) words[to++] = words[p++];
  }
  state.free = to;
}

/** Of every element that meets the front, mark - stamp becomes the weight of its part outside. */
function measureElements(state: State, pivot: number): void {
  const { words, stamp } = state;
  const first = words[RECORD * pivot + LIST];
  const end = first + words[RECORD * pivot + LENGTH];
  for (let q = first; q < end; q++) {
    const at = RECORD * words[q];
    const weight = words[at + WEIGHT]; // negative
    const from = words[at + LIST];
    const to = from + words[at + ELEMENTS];
    for (let p = from; p < to; p++) {
      const e = RECORD * words[p];
      const mark = words[e + MARK];
      if (mark >= stamp) words[e + MARK] = mark + weight;
      else if (mark !== 0) words[e + MARK] = words[e + DEGREE] + stamp + weight;
    }
  }
}

/**
 * Drops from the lists of the front what the new element covers, absorbs the elements that lie wholly in the front, and
 * bounds the degrees. A variable that touches nothing else follows the pivot without fill; the others go to the buckets.
 */
function pruneFront(state: State, pivot: number): void {
  const { words, plan, stamp } = state;
  const own = RECORD * pivot;
  const first = words[own + LIST];
  const end = first + words[own + LENGTH];
  for (let q = first; q < end; q++) {
    const i = words[q];
    const at = RECORD * i;
    const from = words[at + LIST];
    const variables = from + words[at + ELEMENTS];
    const to = from + words[at + LENGTH];
    let kept = from;
    let beyond = 0;
    let hash = 0;
    for (let p = from; p < variables; p++) {
      const e = words[p];
      const mark = words[RECORD * e + MARK];
      if (mark > stamp) {
        beyond += mark - stamp;
        words[kept++] = e;
        hash += e;
      } else if (mark !== 0) {
        words[RECORD * e + MARK] = 0;
        words[RECORD * e + LENGTH] = 0;
      }
    }
    const elements = kept;
    for (let p = variables; p < to; p++) {
      const j = words[p];
      const weight = words[RECORD * j + WEIGHT];
      if (weight <= 0) continue;
      beyond += weight;
      words[kept++] = j;
      hash += j;
    }
    if (beyond === 0) {
      const weight = -words[at + WEIGHT];
      words[own + DEGREE] -= weight;
      state.eliminated += weight;
      words[at + WEIGHT] = 0;
      words[at + LENGTH] = 0;
      words[at + NEXT] = pivot;
      continue;
    }
    // Room is sure: the pivot, or an element it absorbed, has just left the list. The new element comes first.
    words[kept] = words[elements];
    words[elements] = words[from];
    words[from] = pivot;
    words[at + ELEMENTS] = elements - from + 1;
    words[at + LENGTH] = kept - from + 1;
    words[at + DEGREE] = Math.min(words[at + DEGREE], beyond);
    const bucket = plan.buckets + (hash & (BUCKETS - 1));
    words[at + PREVIOUS] = hash;
    words[at + NEXT] = words[bucket];
    words[bucket] = i;
  }
  state.stamp += state.widest + 1;
  if (state.stamp > LAST_STAMP) renewStamps(state);
}

function renewStamps(state: State): void {
  const { words, plan } = state;
  for (let i = 0; i < plan.n; i++) if (words[RECORD * i + MARK] !== 0) words[RECORD * i + MARK] = 1;
  state.stamp = 2;
}

/** Merges variables of the front whose lists hold the same: they will be eliminated together. */
function mergeTwins(state: State, pivot: number): void {
  const { words, plan } = state;
  const first = words[RECORD * pivot + LIST];
  const end = first + words[RECORD * pivot + LENGTH];
  for (let q = first; q < end; q++) {
    const at = RECORD * words[q];
    if (words[at + WEIGHT] === 0) continue;
    const bucket = plan.buckets + (words[at + PREVIOUS] & (BUCKETS - 1));
    let i = words[bucket];
    words[bucket] = -1;
    for (; i >= 0 && words[RECORD * i + NEXT] >= 0; i = words[RECORD * i + NEXT]) {
      mergeInto(words, i, state.stamp);
      state.stamp++;
    }
  }
}

/** Merges into i those after it in its bucket that have the same list. Both begin with the new element. */
function mergeInto(words: Int32Array, i: number, stamp: number): void {
  const at = RECORD * i;
  const length = words[at + LENGTH];
  const from = words[at + LIST];
  for (let p = from + 1; p < from + length; p++) words[RECORD * words[p] + MARK] = stamp;
  let before = at;
  for (let j = words[at + NEXT]; j >= 0; ) {
    const other = RECORD * j;
    const next = words[other + NEXT];
    let same =
      words[other + PREVIOUS] === words[at + PREVIOUS] &&
      words[other + LENGTH] === length &&
      words[other + ELEMENTS] === words[at + ELEMENTS];
    const list = words[other + LIST];
    for (let p = list + 1; same && p < list + length; p++) same = words[RECORD * words[p] + MARK] === stamp;
    if (same) {
      words[at + WEIGHT] += words[other + WEIGHT];
      words[other + WEIGHT] = 0;
      words[other + LENGTH] = 0;
      words[other + NEXT] = i;
      words[before + NEXT] = next;
    } else before = other;
    j = next;
  }
}

/** Leaves in the list of the new element the variables that remain, and lists them by their degrees. */
function listFront(state: State, pivot: number, n: number): void {
  const { words, plan } = state;
  const own = RECORD * pivot;
  const first = words[own + LIST];
  const end = first + words[own + LENGTH];
  const weight = words[own + DEGREE];
  let kept = first;
  for (let q = first; q < end; q++) {
    const i = words[q];
    const at = RECORD * i;
    const mine = -words[at + WEIGHT];
    if (mine === 0) continue;
    words[at + WEIGHT] = mine;
    const degree = Math.min(words[at + DEGREE] + weight - mine, n - state.eliminated - mine);
    words[at + DEGREE] = degree;
    enlist(words, plan.head, i, degree);
    state.lowest = Math.min(state.lowest, degree);
    words[kept++] = i;
  }
  words[own + LENGTH] = kept - first;
  if (kept === first) words[own + MARK] = 0;
  if (end === state.free) state.free = kept;
}

/** Puts each pivot and those that follow it into their places; the heads of the lists give way to the order. */
function numberAll({ words, plan }: State): void {
  for (let i = 0; i < plan.n; i++) {
    let root = i;
    while (words[RECORD * root + NEXT] >= 0) root = words[RECORD * root + NEXT];
    for (let k = i; k !== root; ) {
      const next = words[RECORD * k + NEXT];
      words[RECORD * k + NEXT] = root;
      k = next;
    }
    words[plan.head + words[RECORD * root + PREVIOUS]++] = i;
  }
}
