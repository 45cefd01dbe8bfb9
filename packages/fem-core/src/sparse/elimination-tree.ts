import type { SymmetricPattern } from './pattern.js';

/** For each unknown, how many of those it couples to come earlier and how many later. @param place  of each unknown */
export function countCouplings(
  { n, start, row }: SymmetricPattern,
  place: Int32Array,
): { earlierCount: Int32Array; laterCount: Int32Array } {
  const earlierCount = new Int32Array(n);
  const laterCount = new Int32Array(n);
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      const jFirst = place[j] < place[row[p]];
      earlierCount[jFirst ? row[p] : j]++;
      laterCount[jFirst ? j : row[p]]++;
    }
  }
  return { earlierCount, laterCount };
}

/**
 * Where the lists of the unknowns start, one after another in the given order: Int32Array(n + 1) by places.
 *
 * @param counts  lengths of the lists by unknowns, and on return their starts
 */
export function startLists(order: Int32Array, counts: Int32Array): Int32Array {
  const starts = new Int32Array(order.length + 1);
  for (let k = 0; k < order.length; k++) {
    starts[k + 1] = starts[k] + counts[order[k]];
    counts[order[k]] = starts[k];
  }
  return starts;
}

/**
 * The unknowns that each one couples to and that come earlier, unsorted.
 *
 * @param place  where each unknown comes
 * @param next   where the list of each unknown starts, and on return where it ends
 */
export function listEarlier({ n, start, row }: SymmetricPattern, place: Int32Array, next: Int32Array): Int32Array {
  const earlier = new Int32Array(row.length - n);
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      const i = row[p];
      if (place[j] < place[i]) earlier[next[i]++] = j;
      else earlier[next[j]++] = i;
    }
  }
  return earlier;
}

/** The places later than each unknown's that it couples to, unsorted, and the entries of the pattern that these are. */
export function listLater(
  { n, start, row }: SymmetricPattern,
  place: Int32Array,
  next: Int32Array,
): { later: Int32Array; laterEntry: Int32Array } {
  const later = new Int32Array(row.length - n);
  const laterEntry = new Int32Array(row.length - n);
  for (let j = 0; j < n; j++) {
    for (let p = start[j] + 1; p < start[j + 1]; p++) {
      const i = row[p];
      const q = next[place[j] < place[i] ? j : i]++;
      later[q] = Math.max(place[i], place[j]);
      laterEntry[q] = p;
    }
  }
  return { later, laterEntry };
}

/**
 * parent[j] is the unknown of the first entry below the diagonal in the factor's column of unknown j, -1 for a root.
 * Liu, The role of elimination trees in sparse factorization, SIAM J. Matrix Anal. Appl. 11, 1990; path compression.
 */
export function eliminationTree(wanted: Int32Array, earlierStart: Int32Array, earlier: Int32Array): Int32Array {
  const parent = new Int32Array(wanted.length).fill(-1);
  const ancestor = new Int32Array(wanted.length).fill(-1);
  for (let k = 0; k < wanted.length; k++) {
    const j = wanted[k];
    for (let p = earlierStart[k]; p < earlierStart[k + 1]; p++) {
      for (let i = earlier[p]; i >= 0 && ancestor[i] !== j; ) {
        const up = ancestor[i];
        ancestor[i] = j;
        if (up < 0) parent[i] = j;
        i = up;
      }
    }
  }
  return parent;
}

/**
 * Children before parents, subtrees together, the child that was wanted first first.
 *
 * @returns post, the unknowns in this order; place, its inverse; and the tree by these places
 */
export function postorder(
  wanted: Int32Array,
  parent: Int32Array,
): { post: Int32Array; place: Int32Array; postParent: Int32Array } {
  const n = parent.length;
  const head = new Int32Array(n + 1).fill(-1); // slot n gathers the roots
  const next = new Int32Array(n + 1).fill(-1);
  for (let k = n - 1; k >= 0; k--) {
    const j = wanted[k];
    const p = parent[j] < 0 ? n : parent[j];
    next[j] = head[p];
    head[p] = j;
  }
  const post = new Int32Array(n);
  const place = new Int32Array(n);
  let k = 0;
  for (let j = n; ; ) {
    // Down to the first leaf; then out to a sibling or up.
    while (head[j] >= 0) j = head[j];
    while (j !== n && next[j] < 0) {
      place[j] = k;
      post[k++] = j;
      j = parent[j] < 0 ? n : parent[j];
    }
    if (j === n) break;
    place[j] = k;
    post[k++] = j;
    j = next[j];
  }
  const postParent = post.map((j) => (parent[j] < 0 ? -1 : place[parent[j]]));
  return { post, place, postParent };
}

/** What `columnCounts` finds. */
export interface Counts {
  /** Int32Array(n): entries of each column of the factor, diagonal included. */
  readonly count: Int32Array;
  /**
   * The leaves of the rows' subtrees, which say where a row has its entries: on the ways up the tree from them. Two numbers a
   * leaf: its column, and where in this array the leaf before it in the same row stands, -1 where there is none.
   */
  readonly leaves: Int32Array;
  /** Int32Array(n): where the last leaf of each row stands, -1 where there is none. */
  readonly lastLeaf: Int32Array;
}

/**
 * A column's count is what its children's hold between them, less what they share; a coupling counts where it is a leaf of
 * its row's subtree, and two such leaves share what lies above their least common ancestor.
 * Gilbert, Ng, Peyton, An efficient algorithm to compute row and column counts for sparse Cholesky factorization,
 * SIAM J. Matrix Anal. Appl. 15, 1994.
 *
 * @param parent  elimination tree of postordered columns
 */
export function columnCounts(laterStart: Int32Array, later: Int32Array, parent: Int32Array): Counts {
  const n = parent.length;
  const count = new Int32Array(n);
  const leaves = new Int32Array(2 * later.length);
  const lastLeaf = new Int32Array(n).fill(-1);
  const firstBelow = new Int32Array(n).fill(-1); // the first descendant of each column; itself, for a leaf of the tree
  const lastFirst = new Int32Array(n).fill(-1); // per row: the first descendant of its last leaf
  const ancestor = parent.slice();
  let leaf = 0;
  for (let j = 0; j < n; j++) {
    if (firstBelow[j] < 0) {
      firstBelow[j] = j;
      count[j]++;
    }
    for (let p = laterStart[j]; p < laterStart[j + 1]; p++) {
      const i = later[p];
      if (firstBelow[j] <= lastFirst[i]) continue; // j lies above a leaf already met
      lastFirst[i] = firstBelow[j];
      count[j]++;
      const before = lastLeaf[i];
      lastLeaf[i] = leaf;
      leaves[leaf++] = j;
      leaves[leaf++] = before;
      if (before >= 0) count[topmost(ancestor, leaves[before], j)]--;
    }
    const up = parent[j];
    if (up < 0) continue;
    count[up] += count[j] - 1; // all but the diagonal of j
    if (firstBelow[up] < 0) firstBelow[up] = firstBelow[j];
  }
  return { count, leaves, lastLeaf };
}

/** The first ancestor of a leaf that is not passed before the present column, to which the way is made short. */
function topmost(ancestor: Int32Array, leaf: number, present: number): number {
  let top = leaf;
  while (top < present) top = ancestor[top];
  for (let j = leaf; j < present; ) {
    const up = ancestor[j];
    ancestor[j] = top;
    j = up;
  }
  return top;
}
