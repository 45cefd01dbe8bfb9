import { minimumDegreeOrder } from './minimum-degree.js';
import type { SymmetricPattern } from './pattern.js';

/**
 * Everything about a factor that depends on the pattern alone; serves any number of factorisations.
 *
 * Columns with (nearly) the same rows below the diagonal form supernodes: supernode s holds the columns
 * first[s] ... first[s + 1] - 1 of the reordered matrix and the rows rows[rowStart[s]] ... rows[rowStart[s + 1] - 1], its
 * own columns among them and first. Its block of the factor is dense, by columns, from blockStart[s].
 */
export interface Analysis {
  readonly pattern: SymmetricPattern;
  /** Int32Array(n): order[k] is the unknown in place k. */
  readonly order: Int32Array;
  /** Int32Array(n): place[i] is where unknown i went. */
  readonly place: Int32Array;
  readonly first: Int32Array;
  readonly rowStart: Int32Array;
  readonly rows: Int32Array;
  readonly blockStart: Float64Array;
  /** Int32Array(n): supernode of each column. */
  readonly supernodeOf: Int32Array;
  /** Int32Array(z): where in the blocks each entry of the matrix goes. */
  readonly target: Int32Array;
  /** Entries of the blocks, explicit zeros included. */
  readonly blockSize: number;
  /** Multiplications and additions of one factorisation, about. */
  readonly flops: number;
}

/** Explicit zeros a merge of two supernodes may bring, as a share of the merged block, by columns of the merged one. */
const RELAX: readonly (readonly [columns: number, zeros: number])[] = [
  [4, 1],
  [16, 0.4],
  [48, 0.1],
];
const relaxed = (columns: number): number => RELAX.find(([limit]) => columns <= limit)?.[1] ?? 0.05;

/**
 * Order, elimination tree (Liu, The role of elimination trees in sparse factorization, 1990), rows of the factor, and
 * relaxed supernodes (Ashcraft, Grimes, The influence of relaxed supernode partitions on the multifrontal method, 1989).
 */
export function analyse(pattern: SymmetricPattern, wanted: Int32Array = minimumDegreeOrder(pattern)): Analysis {
  const { n } = pattern;
  const upper = upperOf(pattern, inverseOf(wanted));
  const parent = eliminationTree(n, upper);
  const post = postorder(parent);
  const order = Int32Array.from(post, (k) => wanted[k]);
  const place = inverseOf(order);
  const sorted = upperOf(pattern, place);
  const tree = eliminationTree(n, sorted);
  const count = columnCounts(n, sorted, tree);
  const { first, rowStart, rows } = supernodes(n, pattern, place, tree, count);
  const supernodeOf = new Int32Array(n);
  const superCount = first.length - 1;
  const blockStart = new Float64Array(superCount + 1);
  let flops = 0;
  for (let s = 0; s < superCount; s++) {
    const width = first[s + 1] - first[s];
    const height = rowStart[s + 1] - rowStart[s];
    blockStart[s + 1] = blockStart[s] + width * height;
    for (let j = 0; j < width; j++) {
      supernodeOf[first[s] + j] = s;
      flops += (height - j) ** 2;
    }
  }
  const target = targets(pattern, place, { first, rowStart, rows, blockStart, supernodeOf });
  return {
    pattern,
    order,
    place,
    first,
    rowStart,
    rows,
    blockStart,
    supernodeOf,
    target,
    blockSize: blockStart[superCount],
    flops,
  };
}

function inverseOf(order: Int32Array): Int32Array {
  const inverse = new Int32Array(order.length);
  order.forEach((i, k) => {
    inverse[i] = k;
  });
  return inverse;
}

/** Rows above the diagonal of the reordered matrix, by columns: start Int32Array(n + 1), row lists unsorted. */
interface Upper {
  readonly start: Int32Array;
  readonly row: Int32Array;
}

function upperOf(pattern: SymmetricPattern, place: Int32Array): Upper {
  const { n } = pattern;
  const start = new Int32Array(n + 1);
  const each = (visit: (low: number, high: number) => void): void => {
    for (let j = 0; j < n; j++) {
      for (let p = pattern.start[j] + 1; p < pattern.start[j + 1]; p++) {
        const a = place[j];
        const b = place[pattern.row[p]];
        if (a < b) visit(a, b);
        else visit(b, a);
      }
    }
  };
  each((_, high) => start[high + 1]++);
  for (let j = 0; j < n; j++) start[j + 1] += start[j];
  const row = new Int32Array(start[n]);
  const next = start.slice();
  each((low, high) => {
    row[next[high]++] = low;
  });
  return { start, row };
}

/** parent[j] is the row of the first entry below the diagonal in column j of the factor, -1 for a root. */
function eliminationTree(n: number, upper: Upper): Int32Array {
  const parent = new Int32Array(n).fill(-1);
  const ancestor = new Int32Array(n).fill(-1); // path compression
  for (let j = 0; j < n; j++) {
    for (let p = upper.start[j]; p < upper.start[j + 1]; p++) {
      for (let i = upper.row[p]; i >= 0 && i < j; ) {
        const up = ancestor[i];
        ancestor[i] = j;
        if (up < 0) parent[i] = j;
        i = up;
      }
    }
  }
  return parent;
}

/** Children before parents, subtrees together. */
function postorder(parent: Int32Array): Int32Array {
  const n = parent.length;
  const head = new Int32Array(n + 1).fill(-1); // slot n gathers the roots
  const next = new Int32Array(n);
  for (let j = n - 1; j >= 0; j--) {
    const p = parent[j] < 0 ? n : parent[j];
    next[j] = head[p];
    head[p] = j;
  }
  const post = new Int32Array(n);
  const stack: number[] = [];
  let k = 0;
  for (let root = head[n]; root >= 0; root = next[root]) {
    stack.push(root);
    while (stack.length > 0) {
      const j = stack[stack.length - 1];
      const child = head[j];
      if (child < 0) {
        post[k++] = j;
        stack.pop();
      } else {
        head[j] = next[child];
        stack.push(child);
      }
    }
  }
  return post;
}

/** Entries of each column of the factor, diagonal included, by walking each row's subtree. */
function columnCounts(n: number, upper: Upper, parent: Int32Array): Int32Array {
  const count = new Int32Array(n).fill(1);
  const seen = new Int32Array(n).fill(-1);
  for (let k = 0; k < n; k++) {
    seen[k] = k;
    for (let p = upper.start[k]; p < upper.start[k + 1]; p++) {
      for (let i = upper.row[p]; seen[i] !== k; i = parent[i]) {
        count[i]++;
        seen[i] = k;
      }
    }
  }
  return count;
}

interface Supernodes {
  readonly first: Int32Array;
  readonly rowStart: Int32Array;
  readonly rows: Int32Array;
}

/** Groups a child with its parent where it comes right before it and few explicit zeros arise; then gathers the rows. */
function supernodes(
  n: number,
  pattern: SymmetricPattern,
  place: Int32Array,
  parent: Int32Array,
  count: Int32Array,
): Supernodes {
  // Groups of consecutive columns, merged from the left; each knows its first column and the zeros it already holds.
  const start: number[] = [];
  const zeros: number[] = [];
  for (let j = 0; j < n; j++) {
    start.push(j);
    zeros.push(0);
    // The last column of the group before must be a child of this one's first column.
    while (start.length > 1) {
      const a = start[start.length - 2];
      const b = start[start.length - 1];
      if (parent[b - 1] !== b) break;
      const left = b - a;
      const right = j + 1 - b;
      const height = right - 1 + count[j]; // rows of the right group: its columns and what lies below them
      const before = left - 1 + count[b - 1];
      const merged = left + height;
      const added = left * (merged - before);
      const held = zeros[zeros.length - 2] + zeros[zeros.length - 1] + added;
      const size = (left + right) * merged;
      if (added > 0 && held > relaxed(left + right) * size) break;
      start.pop();
      zeros.pop();
      zeros[zeros.length - 1] = held;
    }
  }
  const first = Int32Array.from([...start, n]);
  return { first, ...rowsOf(first, pattern, place, parent) };
}

/** Rows of each supernode: its columns, then the rows of the matrix and of its children's blocks below them, rising. */
function rowsOf(
  first: Int32Array,
  pattern: SymmetricPattern,
  place: Int32Array,
  parent: Int32Array,
): { rowStart: Int32Array; rows: Int32Array } {
  const superCount = first.length - 1;
  const n = pattern.n;
  const below: number[][] = Array.from({ length: n }, () => []); // rows below the diagonal by column of the reordered matrix
  for (let j = 0; j < n; j++) {
    for (let p = pattern.start[j] + 1; p < pattern.start[j + 1]; p++) {
      const a = place[j];
      const b = place[pattern.row[p]];
      below[Math.min(a, b)].push(Math.max(a, b));
    }
  }
  const superOf = new Int32Array(n);
  for (let s = 0; s < superCount; s++) superOf.fill(s, first[s], first[s + 1]);
  const children: number[][] = Array.from({ length: superCount }, () => []);
  const lists: number[][] = [];
  const mark = new Int32Array(n).fill(-1);
  for (let s = 0; s < superCount; s++) {
    const a = first[s];
    const end = first[s + 1];
    const list: number[] = [];
    const take = (i: number): void => {
      if (i < end || mark[i] === s) return;
      mark[i] = s;
      list.push(i);
    };
    for (let j = a; j < end; j++) below[j].forEach(take);
    for (const child of children[s]) lists[child].forEach(take);
    list.sort((i, j) => i - j);
    lists.push(list);
    const up = parent[end - 1];
    if (up >= 0) children[superOf[up]].push(s);
  }
  const rowStart = new Int32Array(superCount + 1);
  for (let s = 0; s < superCount; s++) rowStart[s + 1] = rowStart[s] + (first[s + 1] - first[s]) + lists[s].length;
  const rows = new Int32Array(rowStart[superCount]);
  for (let s = 0; s < superCount; s++) {
    let at = rowStart[s];
    for (let j = first[s]; j < first[s + 1]; j++) rows[at++] = j;
    rows.set(lists[s], at);
  }
  return { rowStart, rows };
}

function targets(
  pattern: SymmetricPattern,
  place: Int32Array,
  blocks: Pick<Analysis, 'first' | 'rowStart' | 'rows' | 'blockStart' | 'supernodeOf'>,
): Int32Array {
  const { first, rowStart, rows, blockStart, supernodeOf } = blocks;
  const { n, start, row } = pattern;
  const target = new Int32Array(row.length);
  // Entries grouped by supernode, so that a table row -> position is filled once for each.
  const bySuper: number[][] = Array.from({ length: first.length - 1 }, () => []);
  const columnOfEntry = new Int32Array(row.length);
  for (let j = 0; j < n; j++) {
    for (let p = start[j]; p < start[j + 1]; p++) {
      columnOfEntry[p] = j;
      bySuper[supernodeOf[Math.min(place[j], place[row[p]])]].push(p);
    }
  }
  const position = new Int32Array(n);
  bySuper.forEach((entries, s) => {
    const height = rowStart[s + 1] - rowStart[s];
    for (let r = 0; r < height; r++) position[rows[rowStart[s] + r]] = r;
    for (const p of entries) {
      const a = place[columnOfEntry[p]];
      const b = place[row[p]];
      const [column, down] = a < b ? [a, b] : [b, a];
      target[p] = blockStart[s] + (column - first[s]) * height + position[down];
    }
  });
  return target;
}
