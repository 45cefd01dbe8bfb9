/**
 * Symbolic analysis of a sparse Cholesky factorisation, a function a step. The plain twins in src/sparse/elimination-tree.ts,
 * fronts.ts and analysis-plain.ts give the same numbers and tell what they are. All arguments named after arrays are byte addresses
 * of 32-bit integers, unless told otherwise; `work...` is scratch of n + 1 of them.
 */

function get(array: usize, i: i32): i32 {
  return load<i32>(array + ((<usize>i) << 2));
}

function put(array: usize, i: i32, value: i32): void {
  store<i32>(array + ((<usize>i) << 2), value);
}

function increase(array: usize, i: i32, by: i32): void {
  const at = array + ((<usize>i) << 2);
  store<i32>(at, load<i32>(at) + by);
}

/** All bytes of so many integers: 0 or -1. */
function fill(array: usize, count: i32, value: u8): void {
  memory.fill(array, value, (<usize>count) << 2);
}

/** Counts become starts. */
function sumUp(starts: usize, count: i32): void {
  let sum = 0;
  for (let k = 0; k < count; k++) {
    sum += get(starts, k);
    put(starts, k, sum);
  }
}

/** inverse[order[k]] = k */
export function invert(count: i32, order: usize, inverse: usize): void {
  for (let k = 0; k < count; k++) put(inverse, get(order, k), k);
}

/** to[k] = from[at[k]] */
export function arrange(count: i32, from: usize, at: usize, to: usize): void {
  for (let k = 0; k < count; k++) put(to, k, get(from, get(at, k)));
}

/**
 * `reorderedCouplings`. The starts have n + 2 places: numbers of entries gather two places on, starts one place on, and
 * filling a list moves its start to where the next one's belongs.
 */
export function reorder(
  n: i32,
  start: usize,
  row: usize,
  place: usize,
  earlierStart: usize,
  earlier: usize,
  laterStart: usize,
  later: usize,
  laterEntry: usize,
): void {
  fill(laterStart, n + 2, 0);
  fill(earlierStart, n + 2, 0);
  for (let j = 0; j < n; j++) {
    const b = get(place, j);
    for (let p = get(start, j) + 1, end = get(start, j + 1); p < end; p++) {
      const a = get(place, get(row, p));
      increase(laterStart, min(a, b) + 2, 1);
      increase(earlierStart, max(a, b) + 2, 1);
    }
  }
  sumUp(laterStart, n + 2);
  sumUp(earlierStart, n + 2);
  for (let j = 0; j < n; j++) {
    const b = get(place, j);
    for (let p = get(start, j) + 1, end = get(start, j + 1); p < end; p++) {
      const a = get(place, get(row, p));
      const low = min(a, b);
      const q = get(laterStart, low + 1);
      put(laterStart, low + 1, q + 1);
      put(later, q, max(a, b));
      put(laterEntry, q, p);
    }
  }
  for (let k = 0, q = 0; k < n; k++) {
    for (const end = get(laterStart, k + 1); q < end; q++) {
      const high = get(later, q);
      const to = get(earlierStart, high + 1);
      put(earlierStart, high + 1, to + 1);
      put(earlier, to, k);
    }
  }
}

export function eliminationTree(n: i32, earlierStart: usize, earlier: usize, parent: usize, work: usize): void {
  fill(parent, n, 0xff);
  fill(work, n, 0xff); // ancestors
  for (let j = 0, p = 0; j < n; j++) {
    for (const end = get(earlierStart, j + 1); p < end; p++) {
      for (let i = get(earlier, p); i >= 0 && i < j; ) {
        const up = get(work, i);
        put(work, i, j);
        if (up < 0) put(parent, i, j);
        i = up;
      }
    }
  }
}

export function postorder(n: i32, parent: usize, post: usize, head: usize, next: usize): void {
  fill(head, n + 1, 0xff);
  for (let j = n - 1; j >= 0; j--) {
    const up = get(parent, j);
    const p = up < 0 ? n : up;
    put(next, j, get(head, p));
    put(head, p, j);
  }
  let k = 0;
  for (let j = n; ; ) {
    for (let down = get(head, j); down >= 0; down = get(head, j)) j = down;
    while (j !== n && get(next, j) < 0) {
      put(post, k++, j);
      const up = get(parent, j);
      j = up < 0 ? n : up;
    }
    if (j === n) return;
    put(post, k++, j);
    j = get(next, j);
  }
}

export function columnCounts(
  n: i32,
  laterStart: usize,
  later: usize,
  parent: usize,
  post: usize,
  count: usize,
  firstBelow: usize,
  lastFirst: usize,
  lastLeaf: usize,
  ancestor: usize,
): void {
  fill(firstBelow, n, 0xff);
  fill(lastFirst, n, 0xff);
  fill(lastLeaf, n, 0xff);
  fill(count, n, 0);
  for (let k = 0; k < n; k++) {
    put(ancestor, k, k);
    for (let j = get(post, k); j >= 0 && get(firstBelow, j) < 0; j = get(parent, j)) put(firstBelow, j, k);
  }
  for (let k = 0; k < n; k++) {
    const j = get(post, k);
    const up = get(parent, j);
    const first = get(firstBelow, j);
    let own = first === k ? 1 : 0;
    if (up >= 0) increase(count, up, -1);
    for (let p = get(laterStart, j), end = get(laterStart, j + 1); p < end; p++) {
      const i = get(later, p);
      if (first <= get(lastFirst, i)) continue;
      put(lastFirst, i, first);
      own++;
      const leaf = get(lastLeaf, i);
      put(lastLeaf, i, j);
      if (leaf >= 0) increase(count, topmost(ancestor, leaf), -1);
    }
    increase(count, j, own);
    if (up >= 0) put(ancestor, j, up);
  }
  for (let k = 0; k < n; k++) {
    const j = get(post, k);
    const up = get(parent, j);
    if (up >= 0) increase(count, up, get(count, j));
  }
}

function topmost(ancestor: usize, leaf: i32): i32 {
  let top = leaf;
  for (let up = get(ancestor, top); up !== top; up = get(ancestor, top)) top = up;
  for (let j = leaf; j !== top; ) {
    const up = get(ancestor, j);
    put(ancestor, j, top);
    j = up;
  }
  return top;
}

/** `gatherSupernodes`. */
export function gatherSupernodes(n: i32, parent: usize, post: usize, count: usize, top: usize, width: usize): void {
  for (let j = 0; j < n; j++) put(width, j, 1);
  for (let k = 0; k < n; k++) {
    const j = get(post, k);
    const up = get(parent, j);
    const goesOn = up >= 0 && get(count, j) === get(count, up) + 1 && get(width, up) === 1;
    put(top, j, goesOn ? up : j); // for now
    if (goesOn) increase(width, up, get(width, j));
  }
  for (let k = n - 1; k >= 0; k--) {
    const j = get(post, k);
    const up = get(top, j);
    if (up !== j) put(top, j, get(top, up));
  }
}

/** `mergeChildren`. @param time  room for n Float64 */
export function mergeChildren(
  n: i32,
  parent: usize,
  post: usize,
  count: usize,
  top: usize,
  width: usize,
  head: usize,
  next: usize,
  time: usize,
): void {
  fill(head, n, 0xff);
  for (let k = 0; k < n; k++) {
    const t = get(post, k);
    if (get(top, t) !== t) continue;
    const below = get(count, t) - 1;
    let columns = get(width, t);
    let own = frontTime(columns, below);
    for (let child = get(head, t); child >= 0; child = get(next, child)) {
      const together = frontTime(columns + get(width, child), below);
      if (together > own + load<f64>(time + ((<usize>child) << 3))) continue;
      own = together;
      columns += get(width, child);
      put(top, child, t);
    }
    put(width, t, columns);
    store<f64>(time + ((<usize>t) << 3), own);
    const above = get(parent, t);
    if (above < 0) continue;
    const up = get(top, above);
    put(next, t, get(head, up));
    put(head, up, t);
  }
  for (let k = n - 1; k >= 0; k--) {
    const j = get(post, k);
    put(top, j, get(top, get(top, j)));
  }
}

function frontTime(columns: i32, rows: i32): f64 {
  const width = <f64>columns;
  const below = <f64>rows;
  const w = <f64>((columns + 3) >> 2);
  const b = <f64>((rows + 3) >> 2);
  const update = 0.5 * b * (b + 1) * (8 * width + 20);
  const substitution = b * w * (16 * w + 24);
  const triangle = w * (w * (5.4 * w + 16) + 100);
  const addition = below * (1.5 * below + 12);
  return 400 + update + substitution + triangle + addition + 12 * <f64>blockSize(columns, rows);
}

function triangleStart(tile: i32): i32 {
  return 8 * tile * (tile + 1);
}

function triangleSize(width: i32): i32 {
  return triangleStart(width >> 2) + ((width & 3) === 0 ? 0 : 4 * width);
}

function blockSize(width: i32, below: i32): i64 {
  return <i64>triangleSize(width) + <i64>(4 * width) * <i64>((below + 3) >> 2);
}

/** `numberFronts`; returns their number, up to which the arrays that count fronts are filled. */
export function numberFronts(
  n: i32,
  parent: usize,
  post: usize,
  count: usize,
  top: usize,
  width: usize,
  place: usize,
  frontOf: usize,
  first: usize,
  below: usize,
  parentFront: usize,
  workTops: usize,
  workIndex: usize,
  workSequence: usize,
  workHead: usize,
  workNext: usize,
): i32 {
  let fronts = 0;
  for (let k = 0; k < n; k++) {
    const j = get(post, k);
    if (get(top, j) !== j) continue;
    put(workIndex, j, fronts);
    put(workTops, fronts++, j);
  }
  for (let s = 0; s < fronts; s++) {
    const above = get(parent, get(workTops, s));
    put(parentFront, s, above < 0 ? -1 : get(workIndex, get(top, above))); // by the order of their tops for now
  }
  postorder(fronts, parentFront, workSequence, workHead, workNext);
  put(first, 0, 0);
  for (let s = 0; s < fronts; s++) {
    const t = get(workTops, get(workSequence, s));
    put(first, s + 1, get(first, s) + get(width, t));
    put(below, s, get(count, t) - 1);
    put(workIndex, t, s);
    put(workHead, s, get(first, s)); // place of its next column
  }
  for (let k = 0; k < n; k++) {
    const j = get(post, k);
    const s = get(workIndex, get(top, j));
    put(frontOf, j, s);
    const at = get(workHead, s);
    put(place, j, at);
    put(workHead, s, at + 1);
  }
  for (let s = 0; s < fronts; s++) {
    const above = get(parent, get(workTops, get(workSequence, s)));
    put(parentFront, s, above < 0 ? -1 : get(frontOf, above));
  }
  return fronts;
}

/** `childrenOf`. */
export function childrenOf(fronts: i32, parentFront: usize, child: usize, sibling: usize): void {
  fill(child, fronts, 0xff);
  fill(sibling, fronts, 0xff);
  for (let s = fronts - 1; s >= 0; s--) {
    const up = get(parentFront, s);
    if (up < 0) continue;
    put(sibling, s, get(child, up));
    put(child, up, s);
  }
}

/** Where the rows of each front start; `fronts` + 1 places. Returns where the last ones end. */
export function startRows(fronts: i32, below: usize, rowStart: usize): i32 {
  put(rowStart, 0, 0);
  for (let s = 0; s < fronts; s++) put(rowStart, s + 1, get(rowStart, s) + ((get(below, s) + 3) & ~3));
  return get(rowStart, fronts);
}

/** `placeBlocks`: returns where the last one ends. */
export function placeBlocks(fronts: i32, first: usize, below: usize, blockStart: usize): f64 {
  let end: i64 = 0;
  put(blockStart, 0, 0);
  for (let s = 0; s < fronts; s++) {
    end += blockSize(get(first, s + 1) - get(first, s), get(below, s));
    put(blockStart, s + 1, <i32>end);
  }
  return <f64>end;
}

/** The rows of `rowsOf`. @param columns  inverse of the places */
export function listRows(
  n: i32,
  fronts: i32,
  columns: usize,
  frontOf: usize,
  below: usize,
  parentFront: usize,
  earlierStart: usize,
  earlier: usize,
  rowStart: usize,
  rows: usize,
  workNext: usize,
  workSeen: usize,
): void {
  memory.copy(workNext, rowStart, (<usize>fronts) << 2);
  fill(workSeen, fronts, 0xff);
  for (let k = 0; k < n; k++) {
    const j = get(columns, k);
    put(workSeen, get(frontOf, j), k);
    for (let p = get(earlierStart, j), end = get(earlierStart, j + 1); p < end; p++) {
      for (let s = get(frontOf, get(earlier, p)); get(workSeen, s) !== k; s = get(parentFront, s)) {
        const at = get(workNext, s);
        put(rows, at, k);
        put(workNext, s, at + 1);
        put(workSeen, s, k);
      }
    }
  }
  for (let s = 0; s < fronts; s++) {
    for (let p = get(rowStart, s) + get(below, s), end = get(rowStart, s + 1); p < end; p++) put(rows, p, n);
  }
}

/** `relativeRows` and `entriesOf`. @param workAmong  of n + 1, as is `workInBlock` */
export function makeMaps(
  fronts: i32,
  start: usize,
  wanted: usize,
  columns: usize,
  first: usize,
  below: usize,
  child: usize,
  sibling: usize,
  laterStart: usize,
  later: usize,
  laterEntry: usize,
  rowStart: usize,
  rows: usize,
  blockStart: usize,
  relative: usize,
  entryStart: usize,
  source: usize,
  target: usize,
  workAmong: usize,
  workInBlock: usize,
): void {
  let e = 0;
  put(entryStart, 0, 0);
  for (let s = 0; s < fronts; s++) {
    const from = get(first, s);
    const width = get(first, s + 1) - from;
    for (let c = 0; c < width; c++) {
      put(workAmong, from + c, c);
      put(workInBlock, get(columns, from + c), triangleStart(c >> 2) + (c & 3));
    }
    const own = get(rowStart, s);
    const rest = triangleSize(width);
    for (let i = 0, count = get(below, s); i < count; i++) {
      const k = get(rows, own + i);
      put(workAmong, k, width + i);
      put(workInBlock, get(columns, k), rest + 4 * width * (i >> 2) + (i & 3));
    }
    for (let c = get(child, s); c >= 0; c = get(sibling, c)) {
      const at = get(rowStart, c);
      for (let p = at, end = at + get(below, c); p < end; p++) put(relative, p, get(workAmong, get(rows, p)));
      for (let p = at + get(below, c), end = get(rowStart, c + 1); p < end; p++) put(relative, p, 0);
    }
    for (let c = 0; c < width; c++) {
      const j = get(columns, from + c);
      const column = get(blockStart, s) + 4 * c;
      put(source, e, get(start, get(wanted, j)));
      put(target, e++, column + get(workInBlock, j));
      for (let q = get(laterStart, j), end = get(laterStart, j + 1); q < end; q++) {
        put(source, e, get(laterEntry, q));
        put(target, e++, column + get(workInBlock, get(later, q)));
      }
    }
    put(entryStart, s + 1, e);
  }
}

/** `placeUpdates`: returns the room they take. @param workRoom  room for so many Int64 */
export function placeUpdates(
  fronts: i32,
  below: usize,
  parentFront: usize,
  updateStart: usize,
  workOdd: usize,
  workRoom: usize,
): f64 {
  for (let s = fronts - 1; s >= 0; s--) {
    const up = get(parentFront, s);
    put(workOdd, s, up < 0 ? 0 : 1 - get(workOdd, up));
  }
  memory.fill(workRoom, 0, (<usize>fronts) << 3); // what the children's updates take
  let even: i64 = 0;
  let odd: i64 = 0;
  let highestEven: i64 = 0;
  let highestOdd: i64 = 0;
  for (let s = 0; s < fronts; s++) {
    const tiles = <i64>((get(below, s) + 3) >> 2);
    const size = 8 * tiles * (tiles + 1);
    const childrens = load<i64>(workRoom + ((<usize>s) << 3));
    if (get(workOdd, s) === 1) {
      put(updateStart, s, <i32>odd);
      odd += size;
      highestOdd = max(highestOdd, odd);
      even -= childrens;
    } else {
      put(updateStart, s, <i32>even);
      even += size;
      highestEven = max(highestEven, even);
      odd -= childrens;
    }
    const up = get(parentFront, s);
    if (up < 0) continue;
    const at = workRoom + ((<usize>up) << 3);
    store<i64>(at, load<i64>(at) + size);
  }
  for (let s = 0; s < fronts; s++) if (get(workOdd, s) === 1) increase(updateStart, s, <i32>highestEven);
  return <f64>(highestEven + highestOdd);
}

export function sumOf(n: i32, count: usize): f64 {
  let sum: f64 = 0;
  for (let j = 0; j < n; j++) sum += <f64>get(count, j);
  return sum;
}

export function sumOfSquares(n: i32, count: usize): f64 {
  let sum: f64 = 0;
  for (let j = 0; j < n; j++) sum += <f64>get(count, j) * <f64>get(count, j);
  return sum;
}
