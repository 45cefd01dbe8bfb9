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

/** inverse[order[k]] = k */
export function invert(count: i32, order: usize, inverse: usize): void {
  for (let k = 0; k < count; k++) put(inverse, get(order, k), k);
}

/** to[k] = from[at[k]] */
export function arrange(count: i32, from: usize, at: usize, to: usize): void {
  for (let k = 0; k < count; k++) put(to, k, get(from, get(at, k)));
}

/** `countCouplings`. */
export function countCouplings(n: i32, start: usize, row: usize, place: usize, earlier: usize, later: usize): void {
  fill(earlier, n, 0);
  fill(later, n, 0);
  for (let j = 0; j < n; j++) {
    const b = get(place, j);
    for (let p = get(start, j) + 1, end = get(start, j + 1); p < end; p++) {
      const i = get(row, p);
      const swap = (i ^ j) & ifLess(b, get(place, i));
      increase(earlier, j ^ swap, 1);
      increase(later, i ^ swap, 1);
    }
  }
}

/** All bits where a < b, of numbers from 0 up: which of two couples comes first cannot be foretold, so branches are slow. */
function ifLess(a: i32, b: i32): i32 {
  return (a - b) >> 31;
}

/** `startLists`. */
export function startLists(n: i32, order: usize, next: usize, starts: usize): void {
  let sum = 0;
  for (let k = 0; k < n; k++) {
    const i = get(order, k);
    const count = get(next, i);
    put(starts, k, sum);
    put(next, i, sum);
    sum += count;
  }
  put(starts, n, sum);
}

/** `listEarlier`. */
export function listEarlier(n: i32, start: usize, row: usize, place: usize, next: usize, earlier: usize): void {
  for (let j = 0; j < n; j++) {
    const b = get(place, j);
    for (let p = get(start, j) + 1, end = get(start, j + 1); p < end; p++) {
      const i = get(row, p);
      const swap = (i ^ j) & ifLess(b, get(place, i));
      const high = j ^ swap;
      const q = get(next, high);
      put(next, high, q + 1);
      put(earlier, q, i ^ swap);
    }
  }
}

/** `listLater`. */
export function listLater(
  n: i32,
  start: usize,
  row: usize,
  place: usize,
  next: usize,
  later: usize,
  laterEntry: usize,
): void {
  for (let j = 0; j < n; j++) {
    const b = get(place, j);
    for (let p = get(start, j) + 1, end = get(start, j + 1); p < end; p++) {
      const i = get(row, p);
      const a = get(place, i);
      const less = ifLess(b, a);
      const low = i ^ ((i ^ j) & less);
      const q = get(next, low);
      put(next, low, q + 1);
      put(later, q, b ^ ((a ^ b) & less));
      put(laterEntry, q, p);
    }
  }
}

/** `eliminationTree`. */
export function eliminationTree(
  n: i32,
  wanted: usize,
  earlierStart: usize,
  earlier: usize,
  parent: usize,
  workAncestor: usize,
): void {
  fill(parent, n, 0xff);
  fill(workAncestor, n, 0xff);
  for (let k = 0, p = 0; k < n; k++) {
    const j = get(wanted, k);
    for (const end = get(earlierStart, k + 1); p < end; p++) {
      for (let i = get(earlier, p); ; ) {
        const up = get(workAncestor, i);
        if (up === j) break;
        put(workAncestor, i, j);
        if (up < 0) {
          put(parent, i, j);
          break;
        }
        i = up;
      }
    }
  }
}

/** `postorder`. */
export function postorder(
  n: i32,
  wanted: usize,
  parent: usize,
  post: usize,
  postParent: usize,
  place: usize,
  workHead: usize,
  workNext: usize,
): void {
  fill(workHead, n + 1, 0xff);
  for (let k = n - 1; k >= 0; k--) {
    const j = get(wanted, k);
    const up = get(parent, j);
    const p = up < 0 ? n : up;
    put(workNext, j, get(workHead, p));
    put(workHead, p, j);
  }
  let k = 0;
  for (let j = n; ; ) {
    for (let down = get(workHead, j); down >= 0; down = get(workHead, j)) j = down;
    while (j !== n && get(workNext, j) < 0) {
      put(place, j, k);
      put(post, k++, j);
      const up = get(parent, j);
      j = up < 0 ? n : up;
    }
    if (j === n) break;
    put(place, j, k);
    put(post, k++, j);
    j = get(workNext, j);
  }
  for (let k = 0; k < n; k++) {
    const up = get(parent, get(post, k));
    put(postParent, k, up < 0 ? -1 : get(place, up));
  }
}

/** `columnCounts`. */
export function columnCounts(
  n: i32,
  laterStart: usize,
  later: usize,
  parent: usize,
  count: usize,
  leaves: usize,
  lastLeaf: usize,
  workFirst: usize,
  workLastFirst: usize,
  workAncestor: usize,
): void {
  fill(count, n, 0);
  fill(workFirst, n, 0xff);
  fill(workLastFirst, n, 0xff);
  fill(lastLeaf, n, 0xff);
  memory.copy(workAncestor, parent, (<usize>n) << 2);
  let leaf = 0;
  for (let j = 0, p = 0; j < n; j++) {
    const known = get(workFirst, j);
    const first = known < 0 ? j : known;
    let own = known < 0 ? 1 : 0;
    for (const end = get(laterStart, j + 1); p < end; p++) {
      const i = get(later, p);
      if (first <= get(workLastFirst, i)) continue;
      put(workLastFirst, i, first);
      own++;
      const before = get(lastLeaf, i);
      put(lastLeaf, i, leaf);
      put(leaves, leaf++, j);
      put(leaves, leaf++, before);
      if (before >= 0) increase(count, topmost(workAncestor, get(leaves, before), j), -1);
    }
    own += get(count, j);
    put(count, j, own);
    const up = get(parent, j);
    if (up < 0) continue;
    increase(count, up, own - 1);
    if (get(workFirst, up) < 0) put(workFirst, up, first);
  }
}

function topmost(ancestor: usize, leaf: i32, present: i32): i32 {
  let top = leaf;
  while (top < present) top = get(ancestor, top);
  for (let j = leaf; j < present; ) {
    const up = get(ancestor, j);
    put(ancestor, j, top);
    j = up;
  }
  return top;
}

/** `gatherSupernodes`. */
export function gatherSupernodes(n: i32, parent: usize, count: usize, top: usize, width: usize): void {
  for (let j = 0; j < n; j++) put(width, j, 1);
  for (let j = 0; j < n; j++) {
    const up = get(parent, j);
    const goesOn = up >= 0 && get(count, j) === get(count, up) + 1 && get(width, up) === 1;
    put(top, j, goesOn ? up : j); // for now
    if (goesOn) increase(width, up, get(width, j));
  }
  for (let j = n - 1; j >= 0; j--) put(top, j, get(top, get(top, j)));
}

/** `mergeChildren`. @param workTime  room for n Float64 */
export function mergeChildren(
  n: i32,
  parent: usize,
  count: usize,
  top: usize,
  width: usize,
  workHead: usize,
  workNext: usize,
  workTime: usize,
): void {
  fill(workHead, n, 0xff);
  for (let t = 0; t < n; t++) {
    if (get(top, t) !== t) continue;
    const below = get(count, t) - 1;
    let columns = get(width, t);
    let own = frontTime(columns, below);
    for (let child = get(workHead, t); child >= 0; child = get(workNext, child)) {
      const together = frontTime(columns + get(width, child), below);
      if (together > own + load<f64>(workTime + ((<usize>child) << 3))) continue;
      own = together;
      columns += get(width, child);
      put(top, child, t);
    }
    put(width, t, columns);
    store<f64>(workTime + ((<usize>t) << 3), own);
    const above = get(parent, t);
    if (above < 0) continue;
    const up = get(top, above);
    put(workNext, t, get(workHead, up));
    put(workHead, up, t);
  }
  for (let j = n - 1; j >= 0; j--) put(top, j, get(top, get(top, j)));
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
  count: usize,
  top: usize,
  width: usize,
  columns: usize,
  frontOf: usize,
  first: usize,
  below: usize,
  parentFront: usize,
  workTops: usize,
  workIndex: usize,
  workNext: usize,
): i32 {
  let fronts = 0;
  let end = 0;
  for (let j = 0; j < n; j++) {
    if (get(top, j) !== j) continue;
    put(first, fronts, end);
    put(workNext, fronts, end);
    put(below, fronts, get(count, j) - 1);
    put(workTops, fronts, j);
    put(workIndex, j, fronts++);
    end += get(width, j);
  }
  put(first, fronts, end);
  for (let j = 0; j < n; j++) {
    const s = get(workIndex, get(top, j));
    const k = get(workNext, s);
    put(workNext, s, k + 1);
    put(columns, k, j);
    put(frontOf, j, s);
  }
  for (let s = 0; s < fronts; s++) {
    const above = get(parent, get(workTops, s));
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

/** The rows of `rowsOf`. */
export function listRows(
  n: i32,
  fronts: i32,
  columns: usize,
  frontOf: usize,
  below: usize,
  parentFront: usize,
  leaves: usize,
  lastLeaf: usize,
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
    for (let leaf = get(lastLeaf, j); leaf >= 0; leaf = get(leaves, leaf + 1)) {
      for (let s = get(frontOf, get(leaves, leaf)); get(workSeen, s) !== k; s = get(parentFront, s)) {
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
  unknowns: usize,
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
      put(source, e, get(start, get(unknowns, from + c)));
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
