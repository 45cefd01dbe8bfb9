import { blockSize, tileCount } from './front-layout.js';

/**
 * Columns of the factor gathered in fronts, children before parents: front s eliminates the places first[s] ...
 * first[s + 1] - 1 and has below[s] rows more. The columns are numbered in a postorder of the elimination tree.
 */
export interface Fronts {
  /** Int32Array(n): the column at each place. */
  readonly columns: Int32Array;
  /** Int32Array(n): front of each column. */
  readonly frontOf: Int32Array;
  readonly first: Int32Array;
  readonly below: Int32Array;
  /** Int32Array(f), -1 for a root. */
  readonly parent: Int32Array;
}

/**
 * Fundamental supernodes (Liu, Ng, Peyton, On finding supernodes for sparse matrix computations, 1993), then children merged
 * into their parents wherever that saves time by the estimate below, for all the explicit zeros it brings (after Ashcraft,
 * Grimes, The influence of relaxed supernode partitions on the multifrontal method, 1989).
 *
 * @param parent  elimination tree of postordered columns
 * @param count   entries of each column of the factor
 */
export function gatherFronts(parent: Int32Array, count: Int32Array): Fronts {
  const top = new Int32Array(parent.length); // of each column: the last of its front
  const width = new Int32Array(parent.length); // of each top: columns of its front
  gatherSupernodes(parent, count, top, width);
  mergeChildren(parent, count, top, width);
  return numberFronts(parent, count, top, width);
}

/** Chains of columns, each with the rows of the one before but for that one itself. */
function gatherSupernodes(parent: Int32Array, count: Int32Array, top: Int32Array, width: Int32Array): void {
  const n = parent.length;
  width.fill(1);
  for (let j = 0; j < n; j++) {
    const up = parent[j];
    const goesOn = up >= 0 && count[j] === count[up] + 1 && width[up] === 1;
    top[j] = goesOn ? up : j; // for now
    if (goesOn) width[up] += width[j];
  }
  for (let j = n - 1; j >= 0; j--) top[j] = top[top[j]];
}

function mergeChildren(parent: Int32Array, count: Int32Array, top: Int32Array, width: Int32Array): void {
  const n = parent.length;
  const head = new Int32Array(n).fill(-1); // children of each top, by their tops
  const next = new Int32Array(n).fill(-1);
  const time = new Float64Array(n);
  for (let t = 0; t < n; t++) {
    if (top[t] !== t) continue;
    const below = count[t] - 1;
    let own = frontTime(width[t], below);
    for (let child = head[t]; child >= 0; child = next[child]) {
      const together = frontTime(width[t] + width[child], below);
      if (together > own + time[child]) continue;
      own = together;
      width[t] += width[child];
      top[child] = t;
    }
    time[t] = own;
    if (parent[t] < 0) continue;
    const up = top[parent[t]];
    next[t] = head[up];
    head[up] = t;
  }
  for (let j = n - 1; j >= 0; j--) top[j] = top[top[j]]; // a merged front's columns follow its top
}

/**
 * Estimated cycles to factor a front, add its update to its parent's and solve with it once. Tiles take eight cycles a
 * column of their factors and some twenty besides; a number of the block is fetched from far away and sent back.
 */
function frontTime(width: number, below: number): number {
  const w = tileCount(width);
  const b = tileCount(below);
  const update = 0.5 * b * (b + 1) * (8 * width + 20);
  const substitution = b * w * (16 * w + 24);
  const triangle = w * (w * (5.4 * w + 16) + 100);
  const addition = below * (1.5 * below + 12);
  return 400 + update + substitution + triangle + addition + 12 * blockSize(width, below);
}

/** Fronts in the order of their tops, which keeps subtrees together, as the columns' order does. */
function numberFronts(parent: Int32Array, count: Int32Array, top: Int32Array, width: Int32Array): Fronts {
  const n = parent.length;
  const tops = top.filter((t, j) => t === j);
  const first = new Int32Array(tops.length + 1);
  const indexOf = new Int32Array(n);
  for (let s = 0; s < tops.length; s++) {
    first[s + 1] = first[s] + width[tops[s]];
    indexOf[tops[s]] = s;
  }
  const columns = new Int32Array(n);
  const frontOf = new Int32Array(n);
  const next = first.slice();
  for (let j = 0; j < n; j++) {
    frontOf[j] = indexOf[top[j]];
    columns[next[frontOf[j]]++] = j;
  }
  return {
    ...{ columns, frontOf, first },
    below: tops.map((t) => count[t] - 1),
    parent: tops.map((t) => (parent[t] < 0 ? -1 : frontOf[parent[t]])),
  };
}
