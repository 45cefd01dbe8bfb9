import { postorder, sumUp } from './elimination-tree.js';
import { blockSize, tileCount } from './front-layout.js';

/**
 * Columns of the factor gathered in fronts, children before parents: front s eliminates the places first[s] ...
 * first[s + 1] - 1 and has below[s] rows more.
 */
export interface Fronts {
  /** Int32Array(n): place of each column. */
  readonly place: Int32Array;
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
 * @param parent  elimination tree
 * @param post    a postorder of it
 * @param count   entries of each column of the factor
 */
export function gatherFronts(parent: Int32Array, post: Int32Array, count: Int32Array): Fronts {
  const top = new Int32Array(parent.length); // of each column: the last of its front
  const width = new Int32Array(parent.length); // of each top: columns of its front
  gatherSupernodes(parent, post, count, top, width);
  mergeChildren(parent, post, count, top, width);
  return numberFronts(parent, post, count, top, width);
}

/** Chains of columns, each with the rows of the one before but for that one itself. */
function gatherSupernodes(
  parent: Int32Array,
  post: Int32Array,
  count: Int32Array,
  top: Int32Array,
  width: Int32Array,
): void {
  const n = parent.length;
  const goesOn = new Uint8Array(n); // into its parent
  width.fill(1);
  for (let k = 0; k < n; k++) {
    const j = post[k];
    const up = parent[j];
    if (up < 0 || count[j] !== count[up] + 1 || width[up] > 1) continue;
    goesOn[j] = 1;
    width[up] += width[j];
  }
  for (let k = n - 1; k >= 0; k--) {
    const j = post[k];
    top[j] = goesOn[j] === 1 ? top[parent[j]] : j;
  }
}

function mergeChildren(
  parent: Int32Array,
  post: Int32Array,
  count: Int32Array,
  top: Int32Array,
  width: Int32Array,
): void {
  const n = parent.length;
  const head = new Int32Array(n).fill(-1); // children of each top, by their tops
  const next = new Int32Array(n).fill(-1);
  const time = new Float64Array(n);
  for (let k = 0; k < n; k++) {
    const t = post[k];
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
  for (let k = n - 1; k >= 0; k--) top[post[k]] = top[top[post[k]]]; // a merged front's columns follow its top
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

function numberFronts(
  parent: Int32Array,
  post: Int32Array,
  count: Int32Array,
  top: Int32Array,
  width: Int32Array,
): Fronts {
  const n = parent.length;
  const tops = post.filter((j) => top[j] === j);
  const indexOf = new Int32Array(n);
  for (let s = 0; s < tops.length; s++) indexOf[tops[s]] = s;
  const up = tops.map((t) => (parent[t] < 0 ? -1 : indexOf[top[parent[t]]]));
  const sequence = postorder(up);
  const frontCount = tops.length;
  const first = new Int32Array(frontCount + 1);
  const below = new Int32Array(frontCount);
  for (let s = 0; s < frontCount; s++) {
    const t = tops[sequence[s]];
    first[s + 1] = width[t];
    below[s] = count[t] - 1;
    indexOf[t] = s;
  }
  sumUp(first);
  const frontOf = new Int32Array(n);
  const place = new Int32Array(n);
  const next = first.slice(0, frontCount);
  for (let k = 0; k < n; k++) {
    const j = post[k];
    frontOf[j] = indexOf[top[j]];
    place[j] = next[frontOf[j]]++;
  }
  const parentFront = new Int32Array(frontCount);
  for (let s = 0; s < frontCount; s++) {
    const above = parent[tops[sequence[s]]];
    parentFront[s] = above < 0 ? -1 : frontOf[above];
  }
  return { place, frontOf, first, below, parent: parentFront };
}
