import type { SymmetricPattern } from './pattern.js';

/** Off-diagonal couplings of the reordered matrix, each once: lists of places, unsorted. */
export interface Couplings {
  /** Int32Array(n + 1): the earlier places that place j couples to are earlier[earlierStart[j]] ... */
  readonly earlierStart: Int32Array;
  readonly earlier: Int32Array;
  /** The same for the later ones. */
  readonly laterStart: Int32Array;
  readonly later: Int32Array;
  /** The entry of the pattern that each of these is. */
  readonly laterEntry: Int32Array;
}

/** @param place  Int32Array(n): where each unknown goes */
export function reorderedCouplings(pattern: SymmetricPattern, place: Int32Array): Couplings {
  const earlierStart = new Int32Array(pattern.n + 1);
  const laterStart = new Int32Array(pattern.n + 1);
  countCouplings(pattern, place, earlierStart, laterStart);
  sumUp(earlierStart);
  sumUp(laterStart);
  const earlier = new Int32Array(earlierStart[pattern.n]);
  const later = new Int32Array(laterStart[pattern.n]);
  const laterEntry = new Int32Array(laterStart[pattern.n]);
  const couplings = { earlierStart, earlier, laterStart, later, laterEntry };
  fillCouplings(pattern, place, couplings);
  return couplings;
}

function countCouplings(pattern: SymmetricPattern, place: Int32Array, earlier: Int32Array, later: Int32Array): void {
  const { n, start, row } = pattern;
  for (let j = 0; j < n; j++) {
    const b = place[j];
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      const a = place[row[p]];
      earlier[Math.max(a, b) + 1]++;
      later[Math.min(a, b) + 1]++;
    }
  }
}

/** Counts at k + 1 become starts. */
export function sumUp(starts: Int32Array): void {
  for (let k = 1; k < starts.length; k++) starts[k] += starts[k - 1];
}

function fillCouplings(pattern: SymmetricPattern, place: Int32Array, couplings: Couplings): void {
  const { n, start, row } = pattern;
  const { earlier, later, laterEntry } = couplings;
  const nextEarlier = couplings.earlierStart.slice();
  const nextLater = couplings.laterStart.slice();
  for (let j = 0; j < n; j++) {
    const b = place[j];
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      const a = place[row[p]];
      const low = Math.min(a, b);
      const high = Math.max(a, b);
      earlier[nextEarlier[high]++] = low;
      const q = nextLater[low]++;
      later[q] = high;
      laterEntry[q] = p;
    }
  }
}

/**
 * parent[j] is the row of the first entry below the diagonal in column j of the factor, -1 for a root.
 * Liu, The role of elimination trees in sparse factorization, SIAM J. Matrix Anal. Appl. 11, 1990; path compression.
 */
export function eliminationTree(n: number, couplings: Couplings): Int32Array {
  const { earlierStart, earlier } = couplings;
  const parent = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n).fill(-1);
  for (let j = 0; j < n; j++) {
    for (let p = earlierStart[j]; p < earlierStart[j + 1]; p++) {
      for (let i = earlier[p]; i >= 0 && i < j; ) {
        const up = ancestor[i];
        ancestor[i] = j;
        if (up < 0) parent[i] = j;
        i = up;
      }
    }
  }
  return parent;
}

/** Children before parents, subtrees together, the lower-numbered child first. */
export function postorder(parent: Int32Array): Int32Array {
  const n = parent.length;
  const head = new Int32Array(n + 1).fill(-1); // slot n gathers the roots
  const next = new Int32Array(n + 1).fill(-1);
  for (let j = n - 1; j >= 0; j--) {
    const p = parent[j] < 0 ? n : parent[j];
    next[j] = head[p];
    head[p] = j;
  }
  const post = new Int32Array(n);
  let k = 0;
  for (let j = n; ; ) {
    // Down to the first leaf; then out to a sibling or up.
    while (head[j] >= 0) j = head[j];
    while (j !== n && next[j] < 0) {
      post[k++] = j;
      j = parent[j] < 0 ? n : parent[j];
    }
    if (j === n) return post;
    post[k++] = j;
    j = next[j];
  }
}

/**
 * Entries of each column of the factor, diagonal included. A column's count is what its children's hold between them, less
 * what they share; a coupling counts where it is a leaf of its row's subtree, and two such leaves share what lies above
 * their least common ancestor.
 * Gilbert, Ng, Peyton, An efficient algorithm to compute row and column counts for sparse Cholesky factorization,
 * SIAM J. Matrix Anal. Appl. 15, 1994.
 */
export function columnCounts(couplings: Couplings, parent: Int32Array, post: Int32Array): Int32Array {
  const { laterStart, later } = couplings;
  const n = parent.length;
  const firstBelow = firstDescendants(parent, post);
  const count = new Int32Array(n);
  const lastFirst = new Int32Array(n).fill(-1); // per row: the first descendant of its last leaf
  const lastLeaf = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n); // of the columns passed, grouped by their topmost one
  for (let j = 0; j < n; j++) ancestor[j] = j;
  for (let k = 0; k < n; k++) {
    const j = post[k];
    const up = parent[j];
    if (firstBelow[j] === k) count[j]++; // a leaf of the tree
    if (up >= 0) count[up]--; // the diagonal of j, which no ancestor has
    for (let p = laterStart[j]; p < laterStart[j + 1]; p++) {
      const i = later[p];
      if (firstBelow[j] <= lastFirst[i]) continue; // j lies above a leaf already met
      lastFirst[i] = firstBelow[j];
      count[j]++;
      const leaf = lastLeaf[i];
      lastLeaf[i] = j;
      if (leaf >= 0) count[topmost(ancestor, leaf)]--;
    }
    if (up >= 0) ancestor[j] = up;
  }
  for (let k = 0; k < n; k++) {
    const up = parent[post[k]];
    if (up >= 0) count[up] += count[post[k]];
  }
  return count;
}

/** Place in the postorder of the first descendant of each column (itself, for a leaf). */
function firstDescendants(parent: Int32Array, post: Int32Array): Int32Array {
  const first = new Int32Array(parent.length).fill(-1);
  for (let k = 0; k < post.length; k++) {
    for (let j = post[k]; j >= 0 && first[j] < 0; j = parent[j]) first[j] = k;
  }
  return first;
}

function topmost(ancestor: Int32Array, leaf: number): number {
  let top = leaf;
  while (top !== ancestor[top]) top = ancestor[top];
  for (let j = leaf; j !== top; ) {
    const up = ancestor[j];
    ancestor[j] = top;
    j = up;
  }
  return top;
}
