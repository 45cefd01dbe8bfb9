/**
 * The steps of nested dissection; wasm/ordering.ts holds the same ones as a kernel. All data are words of one array: what
 * `DissectionPlaces` names begins at the word it tells. m is the number of corners; links join corners that are coupled.
 * A domain of the cuts is the same range of both sorted lists.
 */

/** The order in which the places stand before the kernel. */
export const PLACES = [
  /** Two coordinates of each unknown, two words each. */
  'points',
  /** See `Placement`; -1: all unknowns are corners. */
  'ends',
  /** The pattern. */
  'start',
  'row',
  /** Unknowns that are corners, by rising x: m words. */
  'corners',
  /** Numbers of the unknowns in this list, -1 for middles. */
  'numberOf',
  /** Node of the tree that holds each unknown. */
  'nodeOf',
  'order',
  /** For the sorting: coordinates as whole numbers, a list, 2048 counts. */
  'keys',
  'spare',
  'counts',
  /** m records. */
  'records',
  /** Corners sorted along x and y, by domains. */
  'byX',
  'byY',
  /** Two words a corner: its places in these lists. */
  'ranks',
  /** Four lines of m + 2 words. */
  'lines',
  /** Of each node of the tree: the one above, the last one below, its place among the nodes in the order. */
  'parent',
  'last',
  'rank',
  /** Where the next unknown of each rank goes. */
  'next',
  /** Links of the corners. */
  'lists',
] as const;
export type DissectionPlaces = Readonly<Record<(typeof PLACES)[number] | 'end', number>>;

/** Words of a corner's record. */
export const RECORD = 8;
/** Its links are the words FROM ... TO - 1. */
const FROM = 0;
const TO = 1;
/** Node of the tree that holds it; while its domain is cut, LEFT or RIGHT on the two sides. */
const NODE = 2;
/** Its partner across the cut in the matching, or -1. */
const MATE = 3;
/** Right of the cut: the search that reached it last, KEPT after one in vain. Left: KEPT after one in vain. */
const SEEN = 4;
/** Right of the cut: the corner it was reached from. */
const BEFORE = 5;

const LEFT = -1;
const RIGHT = -2;
const KEPT = 0x7fffffff;
/** Each side of a cut gets at least this share of a domain. */
const SMALLEST_SHARE = 0.2;

interface Cuts {
  readonly words: Int32Array;
  readonly records: number;
  /** Where the lists sorted along x and y begin. */
  readonly by: readonly [number, number];
  /** Two words a corner: its places in the lists sorted along x and y. */
  readonly ranks: number;
  /** Four lines of m + 2 words. */
  readonly lines: readonly [number, number, number, number];
  readonly parent: number;
  nodes: number;
  searches: number;
  /** The best cut of the present domain: its cost, axis, and the rank of the first corner right of it. */
  cost: number;
  axis: 0 | 1;
  at: number;
}

/** Dissects, orders, and returns the number of nodes. `points`: the coordinates among the words. */
export function dissectPlainly(words: Int32Array, points: Float64Array, places: DissectionPlaces, n: number): number {
  const m = findCorners(words, points, places, n);
  linkCorners(words, places, m);
  sortAlong(words, points, places, m, 1, places.corners, places.byY);
  const nodes = cutAll(words, places, m);
  findLast(words, places, nodes);
  placeAll(words, places, n, m);
  orderAll(words, places, n, nodes);
  return nodes;
}

/** Lists the corners by rising x and numbers them so; returns how many there are. */
function findCorners(words: Int32Array, points: Float64Array, places: DissectionPlaces, n: number): number {
  const { ends, corners, numberOf, order, byX } = places;
  let m = 0;
  for (let i = 0; i < n; i++) {
    words[numberOf + i] = -1;
    if (ends < 0 || (words[ends + 2 * i] === i && words[ends + 2 * i + 1] === i)) words[order + m++] = i;
  }
  sortAlong(words, points, places, m, 0, order, byX);
  for (let c = 0; c < m; c++) {
    const i = words[order + words[byX + c]];
    words[corners + c] = i;
    words[numberOf + i] = c;
    words[byX + c] = c;
  }
  return m;
}

/**
 * Writes 0 ... m - 1 to `sorted`, by rising x (axis 0) or y of the unknowns in `list`, equal ones by number: radix sort of the
 * coordinates as 32-bit parts of their extent.
 */
function sortAlong(
  words: Int32Array,
  points: Float64Array,
  places: DissectionPlaces,
  m: number,
  axis: 0 | 1,
  list: number,
  sorted: number,
): void {
  const { keys, spare, counts } = places;
  let low = Number.POSITIVE_INFINITY;
  let high = Number.NEGATIVE_INFINITY;
  for (let c = 0; c < m; c++) {
    const x = points[2 * words[list + c] + axis];
    if (x < low) low = x;
    if (x > high) high = x;
  }
  const scale = high > low ? 4294967295 / (high - low) : 0;
  for (let c = 0; c < m; c++) {
    const key = (points[2 * words[list + c] + axis] - low) * scale;
    words[keys + c] = key > 0 && key <= 4294967295 ? key : 0; // what is no number comes first
  }
  for (let c = 0; c < m; c++) words[spare + c] = c;
  let from = spare;
  let to = sorted;
  for (let shift = 0; shift < 33; shift += 11) {
    words.fill(0, counts, counts + 2048);
    for (let c = 0; c < m; c++) words[counts + ((words[keys + c] >>> shift) & 2047)]++;
    for (let b = 0, at = 0; b < 2048; b++) {
      const many = words[counts + b];
      words[counts + b] = at;
      at += many;
    }
    for (let k = 0; k < m; k++) {
      const c = words[from + k];
      words[to + words[counts + ((words[keys + c] >>> shift) & 2047)]++] = c;
    }
    [from, to] = [to, from];
  }
}

/** FROM and TO of the records, and the lists. */
function linkCorners(words: Int32Array, places: DissectionPlaces, m: number): void {
  const { records, corners, numberOf, start, row, lists } = places;
  for (let c = 0; c < m; c++) words[records + RECORD * c + TO] = 0;
  for (let c = 0; c < m; c++) {
    const j = words[start + words[corners + c]];
    const end = words[start + words[corners + c] + 1];
    for (let p = j + 1; p < end; p++) {
      const other = words[numberOf + words[row + p]];
      if (other < 0) continue;
      words[records + RECORD * c + TO]++;
      words[records + RECORD * other + TO]++;
    }
  }
  let at = lists;
  for (let c = 0; c < m; c++) {
    const count = words[records + RECORD * c + TO];
    words[records + RECORD * c + FROM] = at;
    words[records + RECORD * c + TO] = at;
    at += count;
  }
  for (let c = 0; c < m; c++) {
    const j = words[start + words[corners + c]];
    const end = words[start + words[corners + c] + 1];
    for (let p = j + 1; p < end; p++) {
      const other = words[numberOf + words[row + p]];
      if (other < 0) continue;
      words[words[records + RECORD * c + TO]++] = other;
      words[words[records + RECORD * other + TO]++] = c;
    }
  }
}

/** Cuts until all domains are whole: NODE of each record and the tree's parents. Returns the number of nodes. */
function cutAll(words: Int32Array, places: DissectionPlaces, m: number): number {
  const { records, byX, byY, ranks, lines, parent } = places;
  const cuts: Cuts = {
    words,
    records,
    by: [byX, byY],
    ranks,
    lines: [lines, lines + (m + 2), lines + 2 * (m + 2), lines + 3 * (m + 2)],
    parent,
    nodes: 0,
    searches: 0,
    cost: 0,
    axis: 0,
    at: 0,
  };
  for (let k = 0; k < m; k++) {
    words[ranks + 2 * words[byX + k]] = k;
    words[ranks + 2 * words[byY + k] + 1] = k;
  }
  dissect(cuts, 0, m, -1);
  return cuts.nodes;
}

/** The domain lo ... hi - 1 becomes: left side, right side, separator. */
function dissect(cuts: Cuts, lo: number, hi: number, parent: number): void {
  const { words, records, by, parent: above } = cuts;
  const node = cuts.nodes++;
  words[above + node] = parent;
  if (hi - lo <= 1) {
    for (let k = lo; k < hi; k++) words[records + RECORD * words[by[0] + k] + NODE] = node;
    return;
  }
  cuts.cost = Number.POSITIVE_INFINITY;
  measureCuts(cuts, lo, hi);
  chooseCut(cuts, 0, lo, hi);
  chooseCut(cuts, 1, lo, hi);
  const boundary = matchAcross(cuts, lo, hi);
  coverCut(cuts, hi, boundary, node);
  const left = partition(cuts, 0, lo, hi);
  partition(cuts, 1, lo, hi);
  const middle = lo + left;
  let end = middle;
  while (end < hi && words[records + RECORD * words[by[0] + end] + NODE] === RIGHT) end++;
  if (middle > lo) dissect(cuts, lo, middle, node);
  if (end > middle) dissect(cuts, middle, end, node);
}

/**
 * For each cut of the domain across an axis, how many corners left of it have links across, and how many right of it, as
 * differences: line 2 axis and line 2 axis + 1.
 */
function measureCuts(cuts: Cuts, lo: number, hi: number): void {
  const { words, records, by, lines, ranks } = cuts;
  for (const line of lines) words.fill(0, line, line + hi - lo + 2);
  // Place k of a line stands for the cut left of rank lo + k.
  const [xLeft, xRight, yLeft, yRight] = [lines[0] - lo, lines[1] - lo, lines[2] - lo, lines[3] - lo];
  for (let k = lo; k < hi; k++) {
    const i = words[by[0] + k];
    const v = records + RECORD * i;
    const ky = words[ranks + 2 * i + 1];
    let xLow = k;
    let xHigh = k;
    let yLow = ky;
    let yHigh = ky;
    for (let p = words[v + FROM]; p < words[v + TO]; p++) {
      const at = ranks + 2 * words[p];
      const x = words[at];
      if (x < lo || x >= hi) continue;
      const y = words[at + 1];
      if (x < xLow) xLow = x;
      else if (x > xHigh) xHigh = x;
      if (y < yLow) yLow = y;
      else if (y > yHigh) yHigh = y;
    }
    words[xLeft + k + 1]++;
    words[xLeft + xHigh + 1]--;
    words[xRight + xLow + 1]++;
    words[xRight + k + 1]--;
    words[yLeft + ky + 1]++;
    words[yLeft + yHigh + 1]--;
    words[yRight + yLow + 1]++;
    words[yRight + ky + 1]--;
  }
}

/**
 * The smaller of the two numbers is the size s of a separator, which will hold about 2 s + 1 unknowns with the middles
 * between and beside its corners. Keeps the cut where the square of these, over the smaller side, is least.
 */
function chooseCut(cuts: Cuts, axis: 0 | 1, lo: number, hi: number): void {
  const { words, lines } = cuts;
  const size = hi - lo;
  const left = lines[2 * axis];
  const right = lines[2 * axis + 1];
  const least = Math.max(1, Math.floor(SMALLEST_SHARE * size));
  let l = 0;
  let r = 0;
  for (let k = 1; k <= size - least; k++) {
    l += words[left + k];
    r += words[right + k];
    if (k < least) continue;
    const s = Math.min(l, r);
    const cost = (2 * s + 1) ** 2 / Math.min(k, size - k);
    if (cost < cuts.cost) {
      cuts.cost = cost;
      cuts.axis = axis;
      cuts.at = lo + k;
    }
  }
}

/** Marks the sides; pairs corners across the cut, first come first served. Leaves the left ones with links across in a line. */
function matchAcross(cuts: Cuts, lo: number, hi: number): number {
  const { words, records, ranks, axis, at } = cuts;
  const list = cuts.by[axis];
  for (let k = lo; k < hi; k++) {
    const v = records + RECORD * words[list + k];
    words[v + NODE] = k < at ? LEFT : RIGHT;
    words[v + MATE] = -1;
    words[v + SEEN] = -1;
  }
  let count = 0;
  for (let k = lo; k < at; k++) {
    const i = words[list + k];
    const v = records + RECORD * i;
    let across = false;
    for (let p = words[v + FROM]; p < words[v + TO]; p++) {
      const j = words[p];
      const other = records + RECORD * j;
      const r = words[ranks + 2 * j + axis];
      if (r < at || r >= hi) continue;
      across = true;
      if (words[other + MATE] >= 0) continue;
      words[other + MATE] = i;
      words[v + MATE] = j;
      break;
    }
    if (across) words[cuts.lines[0] + count++] = i;
  }
  return count;
}

/**
 * Completes the matching by alternating paths, breadth first; what a search in vain has reached no later path needs
 * (Kuhn, The Hungarian method for the assignment problem, 1955). Koenig's cover: the corners reached by searches in vain on
 * the right, the matched ones not reached on the left.
 */
function coverCut(cuts: Cuts, hi: number, count: number, node: number): void {
  const { words, records, ranks, axis, at, lines } = cuts;
  const [boundary, queue] = lines;
  for (let b = 0; b < count; b++) {
    const root = words[boundary + b];
    if (words[records + RECORD * root + MATE] >= 0) continue;
    const search = cuts.searches++;
    let tail = 0;
    words[queue + tail++] = root;
    let free = -1;
    for (let q = 0; q < tail && free < 0; q++) {
      const i = words[queue + q];
      const v = records + RECORD * i;
      for (let p = words[v + FROM]; p < words[v + TO]; p++) {
        const j = words[p];
        const other = records + RECORD * j;
        const r = words[ranks + 2 * j + axis];
        if (r < at || r >= hi || words[other + SEEN] === search || words[other + SEEN] === KEPT) continue;
        words[other + SEEN] = search;
        words[other + BEFORE] = i;
        if (words[other + MATE] < 0) {
          free = j;
          break;
        }
        words[queue + tail++] = words[other + MATE];
      }
    }
    if (free >= 0) {
      for (let j = free; j >= 0; ) {
        const i = words[records + RECORD * j + BEFORE];
        const next = words[records + RECORD * i + MATE];
        words[records + RECORD * i + MATE] = j;
        words[records + RECORD * j + MATE] = i;
        j = next;
      }
    } else {
      for (let q = 0; q < tail; q++) {
        const v = records + RECORD * words[queue + q];
        words[v + SEEN] = KEPT;
        if (words[v + MATE] >= 0) words[records + RECORD * words[v + MATE] + SEEN] = KEPT;
      }
    }
  }
  for (let b = 0; b < count; b++) {
    const v = records + RECORD * words[boundary + b];
    if (words[v + MATE] < 0) continue; // never in the cover
    if (words[v + SEEN] === KEPT) words[records + RECORD * words[v + MATE] + NODE] = node;
    else words[v + NODE] = node;
  }
}

/** Sorts a list of the domain into left, right, separator, each in the order it had; returns how many are left. */
function partition(cuts: Cuts, axis: 0 | 1, lo: number, hi: number): number {
  const { words, records, ranks, lines } = cuts;
  const list = cuts.by[axis];
  const [rights, separator] = lines;
  let to = lo;
  let rightCount = 0;
  let cutCount = 0;
  const put = (i: number): void => {
    words[list + to] = i;
    words[ranks + 2 * i + axis] = to++;
  };
  for (let k = lo; k < hi; k++) {
    const i = words[list + k];
    const side = words[records + RECORD * i + NODE];
    if (side === LEFT) put(i);
    else if (side === RIGHT) words[rights + rightCount++] = i;
    else words[separator + cutCount++] = i;
  }
  const left = to - lo;
  for (let k = 0; k < rightCount; k++) put(words[rights + k]);
  for (let k = 0; k < cutCount; k++) put(words[separator + k]);
  return left;
}

/** Nodes are numbered from the root down, one branch after the other: the largest number below each. */
function findLast(words: Int32Array, { parent, last }: DissectionPlaces, nodes: number): void {
  for (let t = 0; t < nodes; t++) words[last + t] = t;
  for (let t = nodes - 1; t > 0; t--) {
    const above = last + words[parent + t];
    if (words[above] < words[last + t]) words[above] = words[last + t];
  }
}

/**
 * Middle unknowns join the deepest node that leaves all their neighbours above or below it. Each meets its neighbours one by
 * one and sinks to the lowest of them; where they part it settles at the parting, or above: ~node stands for that meanwhile.
 * Corners are met first, then other middles from the last unknown on: those of higher number have their place by then.
 */
function placeAll(words: Int32Array, places: DissectionPlaces, n: number, m: number): void {
  const { records, corners, numberOf, start, row, nodeOf } = places;
  words.fill(0, nodeOf, nodeOf + n);
  for (let c = 0; c < m; c++) words[nodeOf + words[corners + c]] = words[records + RECORD * c + NODE];
  for (let c = 0; c < m; c++) {
    const j = words[corners + c];
    const node = words[nodeOf + j];
    const end = words[start + j + 1];
    for (let p = words[start + j] + 1; p < end; p++) {
      const i = words[row + p];
      const at = words[nodeOf + i];
      if (at !== node && words[numberOf + i] < 0) words[nodeOf + i] = meet(words, places, at, node);
    }
  }
  for (let j = n - 1; j >= 0; j--) {
    if (words[numberOf + j] >= 0) continue;
    let node = words[nodeOf + j];
    const end = words[start + j + 1];
    for (let p = words[start + j] + 1; p < end; p++) {
      const other = words[nodeOf + words[row + p]];
      if (node !== other) node = meet(words, places, node, other);
    }
    words[nodeOf + j] = node < 0 ? ~node : node;
  }
}

/** Where an unknown at `node` (sinking), or ~node (settled), goes on meeting a neighbour at node `other`. */
function meet(words: Int32Array, { parent, last }: DissectionPlaces, node: number, other: number): number {
  const at = node < 0 ? ~node : node;
  if (other > at) {
    if (other <= words[last + at]) return node < 0 ? node : other;
  } else if (at <= words[last + other]) return node;
  let above = words[parent + at];
  while (other < above || other > words[last + above]) above = words[parent + above];
  return ~above;
}

/** What lies below a node comes before it; within a node middle unknowns come before corners, each by number. */
function orderAll(words: Int32Array, places: DissectionPlaces, n: number, nodes: number): void {
  const { parent, last, rank, next, nodeOf, numberOf, order } = places;
  // Children after parents in number, before them in rank: rank = last - depth. The depths come first.
  words[rank] = 0;
  for (let t = 1; t < nodes; t++) words[rank + t] = words[rank + words[parent + t]] + 1;
  for (let t = 0; t < nodes; t++) words[rank + t] = words[last + t] - words[rank + t];
  words.fill(0, next, next + nodes + 1);
  for (let i = 0; i < n; i++) words[next + words[rank + words[nodeOf + i]] + 1]++;
  for (let k = 0; k < nodes; k++) words[next + k + 1] += words[next + k];
  for (let i = 0; i < n; i++) {
    if (words[numberOf + i] < 0) words[order + words[next + words[rank + words[nodeOf + i]]]++] = i;
  }
  for (let i = 0; i < n; i++) {
    if (words[numberOf + i] >= 0) words[order + words[next + words[rank + words[nodeOf + i]]]++] = i;
  }
}
