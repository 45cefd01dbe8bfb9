/**
 * Multifrontal Cholesky factorisation and its triangular solves; src/sparse/cholesky-plain.ts is the twin in TypeScript
 * and gives the same bits. Built a second time with fused products (see `less`), which halve the work of the inner tiles and
 * round once in place of twice: those answers differ from the twin's in the last bits. All arguments named after arrays are byte addresses; the layout of a front's block and of its
 * update is told in src/sparse/front-layout.ts, that of a record below in src/sparse/arena.ts.
 */

// A record: unsigned 32-bit words about one front.
const RECORD: usize = 48;
const WIDTH: usize = 0; // columns
const BELOW: usize = 4; // rows below them
const BLOCK: usize = 8; // address of the block
const UPDATE: usize = 12; // address of the update
const RELATIVE: usize = 16; // address of the places of the rows below among the parent's rows, times eight
const ROWS: usize = 20; // address of the rows below, to a multiple of four
const ENTRIES: usize = 24; // entries of the matrix in the block
const CHILD: usize = 28; // address of the record of the first child, or 0
const SIBLING: usize = 32; // of the next child of the same parent, or 0
const UNDER: usize = 36; // address of the block's rows below
const SHARED: usize = 40; // how many of the rows below are columns of the parent
const OFFSETS: usize = 44; // address of the bytes from the parent's block to each of the rows below

/** Bytes of a row of tiles that may stay in the nearest cache while others run past it. */
const CHUNK: i32 = 24576;

/** How far beyond the present front blocks are cleared at most, bytes: what comes next is to wait in a near cache. */
const AHEAD: usize = 65536;
/** Bytes cleared ahead at each tile of an update. */
const STEP: usize = 256;

/** c - a b, in one rounding where the build has fused products (relaxed SIMD). */
function less(c: v128, a: v128, b: v128): v128 {
  return ASC_FEATURE_RELAXED_SIMD ? f64x2.relaxed_nmadd(a, b, c) : f64x2.sub(c, f64x2.mul(a, b));
}

/** c + a b, likewise. */
function plus(c: v128, a: v128, b: v128): v128 {
  return ASC_FEATURE_RELAXED_SIMD ? f64x2.relaxed_madd(a, b, c) : f64x2.add(c, f64x2.mul(a, b));
}

function word(count: i32): usize {
  return (<usize>count) << 2;
}

function number(count: i32): usize {
  return (<usize>count) << 3;
}

/** Bytes from the block's start to row tile `tile` of its triangle. */
function triangleAt(tile: i32): usize {
  return (<usize>(8 * tile * (tile + 1))) << 3;
}

/**
 * Makes of the places of each front's rows among its parent's, as they stand in memory for once, what the factorisation
 * needs: eight times the places, the offsets in the parent's block, and how many are columns of the parent.
 */
export function placeRows(records: usize, frontCount: i32): void {
  const end = records + <usize>frontCount * RECORD;
  for (let front = records; front < end; front += RECORD) {
    const width = load<i32>(front + WIDTH);
    const under = <usize>load<u32>(front + UNDER) - <usize>load<u32>(front + BLOCK);
    for (let child = <usize>load<u32>(front + CHILD); child !== 0; child = <usize>load<u32>(child + SIBLING)) {
      const below = load<i32>(child + BELOW);
      let relative = <usize>load<u32>(child + RELATIVE);
      let offset = <usize>load<u32>(child + OFFSETS);
      let shared = 0;
      for (const last = relative + word(below); relative < last; relative += 4, offset += 4) {
        const row = load<i32>(relative);
        const q = row - width;
        const at = q < 0 ? triangleAt(row >> 2) + number(row & 3) : under + number(4 * width * (q >> 2) + (q & 3));
        store<u32>(relative, (<u32>row) << 3);
        store<u32>(offset, <u32>at);
        if (q < 0) shared++;
      }
      store<i32>(child + SHARED, shared);
    }
  }
}

/**
 * Factors all fronts, children before parents.
 *
 * @param records  a record a front
 * @param source   Int32 an entry, grouped by front: its place in `values`
 * @param target   Int32 an entry: its place in `blocks`, counted in numbers
 * @param blocksEnd  blocks end there, one after another; a tile's room beyond may be written
 * @returns -1, or the column whose pivot is not positive; the pivot stands on the diagonal
 */
export function factorise(
  records: usize,
  frontCount: i32,
  source: usize,
  target: usize,
  values: usize,
  blocks: usize,
  blocksEnd: usize,
): i32 {
  const end = records + <usize>frontCount * RECORD;
  let column = 0;
  let entry: usize = 0;
  let cleared = blocks;
  for (let front = records; front < end; front += RECORD) {
    const width = load<i32>(front + WIDTH);
    const below = load<i32>(front + BELOW);
    const block = <usize>load<u32>(front + BLOCK);
    const under = <usize>load<u32>(front + UNDER);
    const tiles = (below + 3) >> 2;
    const blockEnd = under + ((<usize>(tiles * width)) << 5);
    clear(cleared, blockEnd);
    cleared = max(cleared, blockEnd);
    const last = entry + ((<usize>load<u32>(front + ENTRIES)) << 2);
    for (; entry < last; entry += 4) {
      const to = blocks + ((<usize>load<u32>(target + entry)) << 3);
      store<f64>(to, load<f64>(values + ((<usize>load<u32>(source + entry)) << 3)));
    }
    for (let child = <usize>load<u32>(front + CHILD); child !== 0; child = <usize>load<u32>(child + SIBLING)) {
      addToColumns(child, block);
    }
    const failed = factorTriangle(block, width);
    if (failed >= 0) return column + failed;
    if (tiles > 0) {
      const update = <usize>load<u32>(front + UPDATE);
      solveBelow(block, under, width, tiles);
      cleared = formUpdate(under, update, width, below, cleared, min(blockEnd + AHEAD, blocksEnd));
      for (let child = <usize>load<u32>(front + CHILD); child !== 0; child = <usize>load<u32>(child + SIBLING)) {
        addToUpdate(child, width, update, tiles);
      }
    }
    column += width;
  }
  return -1;
}

/** Zeros from `at` to `end`, a multiple of 32 bytes. */
function clear(at: usize, end: usize): void {
  const zero = f64x2.splat(0);
  for (; at < end; at += 32) {
    v128.store(at, zero);
    v128.store(at, zero, 16);
  }
}

/** Adds to the parent's columns the columns of a child's update that belong there. */
function addToColumns(child: usize, block: usize): void {
  const below = load<i32>(child + BELOW);
  const relative = <usize>load<u32>(child + RELATIVE);
  const offsets = <usize>load<u32>(child + OFFSETS);
  const own = <usize>load<u32>(child + UPDATE);
  const end = load<i32>(child + SHARED);
  const tiles = (below + 3) >> 2;
  let j = 0;
  for (; j + 4 <= end; j += 4) {
    addFour(
      columnAt(own, j, tiles),
      columnAt(own, j + 1, tiles),
      columnAt(own, j + 2, tiles),
      columnAt(own, j + 3, tiles),
      j,
      below,
      offsets,
      columnInBlock(block, relative, j),
      columnInBlock(block, relative, j + 1),
      columnInBlock(block, relative, j + 2),
      columnInBlock(block, relative, j + 3),
    );
  }
  for (; j < end; j++) addColumn(columnAt(own, j, tiles), j, below, offsets, columnInBlock(block, relative, j));
}

/** Adds the rest of a child's update to the parent's. */
function addToUpdate(child: usize, width: i32, update: usize, parentTiles: i32): void {
  const below = load<i32>(child + BELOW);
  const relative = <usize>load<u32>(child + RELATIVE);
  const tiles = (below + 3) >> 2;
  const own = <usize>load<u32>(child + UPDATE);
  let j = load<i32>(child + SHARED);
  for (; j + 4 <= below; j += 4) {
    addFour(
      columnAt(own, j, tiles),
      columnAt(own, j + 1, tiles),
      columnAt(own, j + 2, tiles),
      columnAt(own, j + 3, tiles),
      j,
      below,
      relative,
      columnInUpdate(update, relative, j, width, parentTiles),
      columnInUpdate(update, relative, j + 1, width, parentTiles),
      columnInUpdate(update, relative, j + 2, width, parentTiles),
      columnInUpdate(update, relative, j + 3, width, parentTiles),
    );
  }
  for (; j < below; j++) {
    addColumn(columnAt(own, j, tiles), j, below, relative, columnInUpdate(update, relative, j, width, parentTiles));
  }
}

/** Address of column j of an update, as if it began at row 0. */
function columnAt(update: usize, j: i32, tiles: i32): usize {
  const J = j >> 2;
  return update + number(16 * tiles * J - 8 * J * (J - 1) + (j & 3) * 4 * (tiles - J)) - number(4 * J);
}

/** Address of the column in the parent's block that column j of the child goes to. */
function columnInBlock(block: usize, relative: usize, j: i32): usize {
  return block + ((<usize>load<u32>(relative + word(j))) << 2);
}

/** The same in the parent's update, as if it began at the first row of the front. */
function columnInUpdate(update: usize, relative: usize, j: i32, width: i32, tiles: i32): usize {
  return columnAt(update, (load<i32>(relative + word(j)) >> 3) - width, tiles) - number(width);
}

/** to[offsets[i]] += from[i] for i = first ... end - 1; offsets in bytes. */
function addColumn(from: usize, first: i32, end: i32, offsets: usize, to: usize): void {
  let at = offsets + word(first);
  from += number(first);
  const last = offsets + word(end);
  for (; at + 4 < last; at += 8, from += 16) {
    const a = to + <usize>load<u32>(at);
    const b = to + <usize>load<u32>(at, 4);
    const x = load<f64>(a) + load<f64>(from);
    const y = load<f64>(b) + load<f64>(from, 8);
    store<f64>(a, x);
    store<f64>(b, y);
  }
  if (at < last) addNumber(to + <usize>load<u32>(at), from);
}

/**
 * `addColumn` for four columns, the first of which begins at row `first`, and each of the others a row later. One number at
 * a time: adding rows that lie side by side in pairs was no faster.
 */
function addFour(
  from0: usize,
  from1: usize,
  from2: usize,
  from3: usize,
  first: i32,
  end: i32,
  offsets: usize,
  to0: usize,
  to1: usize,
  to2: usize,
  to3: usize,
): void {
  let at = offsets + word(first);
  const last = offsets + word(end);
  let row = number(first);
  // The triangle at their beginning.
  const o0 = <usize>load<u32>(at);
  const o1 = <usize>load<u32>(at, 4);
  const o2 = <usize>load<u32>(at, 8);
  addNumber(to0 + o0, from0 + row);
  addNumber(to0 + o1, from0 + row + 8);
  addNumber(to1 + o1, from1 + row + 8);
  addNumber(to0 + o2, from0 + row + 16);
  addNumber(to1 + o2, from1 + row + 16);
  addNumber(to2 + o2, from2 + row + 16);
  for (at += 12, row += 24; at < last; at += 4, row += 8) {
    const o = <usize>load<u32>(at);
    addNumber(to0 + o, from0 + row);
    addNumber(to1 + o, from1 + row);
    addNumber(to2 + o, from2 + row);
    addNumber(to3 + o, from3 + row);
  }
}

function addNumber(to: usize, from: usize): void {
  store<f64>(to, load<f64>(to) + load<f64>(from));
}

/**
 * Cholesky factor of the triangle, reciprocals on its diagonal: row tiles take what comes from the left, a chunk of them at a
 * time. Returns -1, or the column that failed.
 */
function factorTriangle(block: usize, width: i32): i32 {
  const tiles = (width + 3) >> 2;
  const chunk = max(4, CHUNK / (32 * width));
  for (let first = 0; first < tiles; first += chunk) {
    const end = min(tiles, first + chunk);
    for (let K = 0; K < end; K++) {
      const pivots = block + triangleAt(K);
      const columns = min(4, width - 4 * K);
      if (K >= first) {
        if (K > 0) reduceTile(pivots, 4 * K, columns);
        const failed = factorTile(pivots + ((<usize>K) << 7), columns);
        if (failed >= 0) return 4 * K + failed;
      }
      const I = max(first, K + 1);
      solveTiles(block + triangleAt(I), (<usize>(I + 1)) << 7, 128, end - I, pivots, 4 * K, columns);
    }
  }
  return -1;
}

/** The same forward substitution for all row tiles below the triangle, a chunk of them at a time. */
function solveBelow(block: usize, under: usize, width: i32, tiles: i32): void {
  const chunk = max(4, CHUNK / (32 * width));
  const size = (<usize>width) << 5;
  for (let first = 0; first < tiles; first += chunk) {
    const end = min(tiles, first + chunk);
    for (let k = 0; k < width; k += 4) {
      const pivots = block + triangleAt(k >> 2);
      solveTiles(under + <usize>first * size, size, 0, end - first, pivots, k, min(4, width - k));
    }
  }
}

/**
 * update = - (rows below) (rows below)^T, its lower triangle by panels of four columns. Meanwhile clears blocks to come, from
 * `cleared` on but not beyond `limit`: that waits for memory while this keeps the arithmetic units at work. Returns how
 * far it came.
 */
function formUpdate(under: usize, update: usize, width: i32, below: i32, cleared: usize, limit: usize): usize {
  const tiles = (below + 3) >> 2;
  const full = (below + 1) >> 2; // row tiles with more than two rows
  const chunk = max(4, CHUNK / (32 * width));
  const size = (<usize>width) << 5;
  for (let first = 0; first < tiles; first += chunk) {
    const end = min(tiles, first + chunk);
    for (let J = 0; J < end; J++) {
      const stride = (<usize>(tiles - J)) << 5;
      const panel = update + number(16 * tiles * J - 8 * J * (J - 1));
      const b = under + <usize>J * size;
      if (J >= first) multiplyByItself(b, width, panel, stride);
      let I = max(first, J + 1);
      for (const last = min(end, full); I < last; I++) {
        multiplyTiles(under + <usize>I * size, b, width, panel + ((<usize>(I - J)) << 5), stride);
        if (cleared < limit) {
          clear(cleared, cleared + STEP);
          cleared += STEP;
        }
      }
      if (I < end) multiplyHalf(under + <usize>I * size, b, width, panel + ((<usize>(I - J)) << 5), stride);
    }
  }
  return cleared;
}

/** c = -(a b^T), 4 x 4, for row tiles of `count` columns; `stride` bytes lie between the columns of c. */
function multiplyTiles(a: usize, b: usize, count: i32, c: usize, stride: usize): void {
  let c00 = f64x2.splat(0);
  let c01 = f64x2.splat(0);
  let c10 = f64x2.splat(0);
  let c11 = f64x2.splat(0);
  let c20 = f64x2.splat(0);
  let c21 = f64x2.splat(0);
  let c30 = f64x2.splat(0);
  let c31 = f64x2.splat(0);
  const end = a + ((<usize>count) << 5);
  for (; a < end; a += 32, b += 32) {
    const a0 = v128.load(a);
    const a1 = v128.load(a, 16);
    const b0 = v128.load64_splat(b);
    c00 = less(c00, a0, b0);
    c01 = less(c01, a1, b0);
    const b1 = v128.load64_splat(b, 8);
    c10 = less(c10, a0, b1);
    c11 = less(c11, a1, b1);
    const b2 = v128.load64_splat(b, 16);
    c20 = less(c20, a0, b2);
    c21 = less(c21, a1, b2);
    const b3 = v128.load64_splat(b, 24);
    c30 = less(c30, a0, b3);
    c31 = less(c31, a1, b3);
  }
  v128.store(c, c00);
  v128.store(c, c01, 16);
  c += stride;
  v128.store(c, c10);
  v128.store(c, c11, 16);
  c += stride;
  v128.store(c, c20);
  v128.store(c, c21, 16);
  c += stride;
  v128.store(c, c30);
  v128.store(c, c31, 16);
}

/** The first two rows of the same. */
function multiplyHalf(a: usize, b: usize, count: i32, c: usize, stride: usize): void {
  let c0 = f64x2.splat(0);
  let c1 = f64x2.splat(0);
  let c2 = f64x2.splat(0);
  let c3 = f64x2.splat(0);
  const end = a + ((<usize>count) << 5);
  for (; a < end; a += 32, b += 32) {
    const a0 = v128.load(a);
    c0 = less(c0, a0, v128.load64_splat(b));
    c1 = less(c1, a0, v128.load64_splat(b, 8));
    c2 = less(c2, a0, v128.load64_splat(b, 16));
    c3 = less(c3, a0, v128.load64_splat(b, 24));
  }
  v128.store(c, c0);
  c += stride;
  v128.store(c, c1);
  c += stride;
  v128.store(c, c2);
  c += stride;
  v128.store(c, c3);
}

/** The same for a tile on the diagonal, where a = b: the upper two rows of the last two columns have no meaning. */
function multiplyByItself(a: usize, count: i32, c: usize, stride: usize): void {
  let c00 = f64x2.splat(0);
  let c01 = f64x2.splat(0);
  let c10 = f64x2.splat(0);
  let c11 = f64x2.splat(0);
  let c2 = f64x2.splat(0);
  let c3 = f64x2.splat(0);
  for (const end = a + ((<usize>count) << 5); a < end; a += 32) {
    const a0 = v128.load(a);
    const a1 = v128.load(a, 16);
    const b0 = v128.load64_splat(a);
    c00 = less(c00, a0, b0);
    c01 = less(c01, a1, b0);
    const b1 = v128.load64_splat(a, 8);
    c10 = less(c10, a0, b1);
    c11 = less(c11, a1, b1);
    c2 = less(c2, a1, v128.load64_splat(a, 16));
    c3 = less(c3, a1, v128.load64_splat(a, 24));
  }
  v128.store(c, c00);
  v128.store(c, c01, 16);
  c += stride;
  v128.store(c, c10);
  v128.store(c, c11, 16);
  c += stride;
  v128.store(c, c2, 16);
  c += stride;
  v128.store(c, c3, 16);
}

/**
 * So many row tiles from `tile` on have their first `count` columns solved; takes their product with those of `pivots` from
 * the next `columns` columns (one to four) and solves these by the triangle that stands there in `pivots`. The tiles are
 * `stride` bytes apart, each by `growth` more than the one before.
 */
function solveTiles(
  tile: usize,
  stride: usize,
  growth: usize,
  many: i32,
  pivots: usize,
  count: i32,
  columns: i32,
): void {
  const size = (<usize>count) << 5;
  for (; many > 0; many--) {
    let b = pivots;
    const at = tile + size;
    let c00 = v128.load(at);
    let c01 = v128.load(at, 16);
    let c10 = v128.load(at, 32);
    let c11 = v128.load(at, 48);
    let c20 = v128.load(at, 64);
    let c21 = v128.load(at, 80);
    let c30 = v128.load(at, 96);
    let c31 = v128.load(at, 112);
    for (let a = tile; a < at; a += 32, b += 32) {
      const a0 = v128.load(a);
      const a1 = v128.load(a, 16);
      const b0 = v128.load64_splat(b);
      c00 = less(c00, a0, b0);
      c01 = less(c01, a1, b0);
      const b1 = v128.load64_splat(b, 8);
      c10 = less(c10, a0, b1);
      c11 = less(c11, a1, b1);
      const b2 = v128.load64_splat(b, 16);
      c20 = less(c20, a0, b2);
      c21 = less(c21, a1, b2);
      const b3 = v128.load64_splat(b, 24);
      c30 = less(c30, a0, b3);
      c31 = less(c31, a1, b3);
    }
    // b stands at the triangle now: column c of it at b + 32 c, its row r at + 8 r; the diagonal holds reciprocals.
    const d0 = v128.load64_splat(b);
    c00 = f64x2.mul(c00, d0);
    c01 = f64x2.mul(c01, d0);
    v128.store(at, c00);
    v128.store(at, c01, 16);
    if (columns > 1) {
      const l10 = v128.load64_splat(b, 8);
      const d1 = v128.load64_splat(b, 40);
      c10 = f64x2.mul(less(c10, c00, l10), d1);
      c11 = f64x2.mul(less(c11, c01, l10), d1);
      v128.store(at, c10, 32);
      v128.store(at, c11, 48);
    }
    if (columns > 2) {
      const l20 = v128.load64_splat(b, 16);
      c20 = less(c20, c00, l20);
      c21 = less(c21, c01, l20);
      const l21 = v128.load64_splat(b, 48);
      const d2 = v128.load64_splat(b, 80);
      c20 = f64x2.mul(less(c20, c10, l21), d2);
      c21 = f64x2.mul(less(c21, c11, l21), d2);
      v128.store(at, c20, 64);
      v128.store(at, c21, 80);
    }
    if (columns > 3) {
      const l30 = v128.load64_splat(b, 24);
      c30 = less(c30, c00, l30);
      c31 = less(c31, c01, l30);
      const l31 = v128.load64_splat(b, 56);
      c30 = less(c30, c10, l31);
      c31 = less(c31, c11, l31);
      const l32 = v128.load64_splat(b, 88);
      const d3 = v128.load64_splat(b, 120);
      c30 = f64x2.mul(less(c30, c20, l32), d3);
      c31 = f64x2.mul(less(c31, c21, l32), d3);
      v128.store(at, c30, 96);
      v128.store(at, c31, 112);
    }
    tile += stride;
    stride += growth;
  }
}

/** Takes from the diagonal tile at the end of row tile `a` the product of its first `count` columns with themselves. */
function reduceTile(a: usize, count: i32, columns: i32): void {
  const at = a + ((<usize>count) << 5);
  if (columns < 4) {
    for (let c: usize = 0; c < <usize>columns; c++) reduceColumn(a, a + (c << 3), at, at + (c << 5));
    return;
  }
  let c00 = v128.load(at);
  let c01 = v128.load(at, 16);
  let c10 = v128.load(at, 32);
  let c11 = v128.load(at, 48);
  let c20 = v128.load(at, 64);
  let c21 = v128.load(at, 80);
  let c30 = v128.load(at, 96);
  let c31 = v128.load(at, 112);
  for (; a < at; a += 32) {
    const a0 = v128.load(a);
    const a1 = v128.load(a, 16);
    const b0 = v128.load64_splat(a);
    c00 = less(c00, a0, b0);
    c01 = less(c01, a1, b0);
    const b1 = v128.load64_splat(a, 8);
    c10 = less(c10, a0, b1);
    c11 = less(c11, a1, b1);
    const b2 = v128.load64_splat(a, 16);
    c20 = less(c20, a0, b2);
    c21 = less(c21, a1, b2);
    const b3 = v128.load64_splat(a, 24);
    c30 = less(c30, a0, b3);
    c31 = less(c31, a1, b3);
  }
  v128.store(at, c00);
  v128.store(at, c01, 16);
  v128.store(at, c10, 32);
  v128.store(at, c11, 48);
  v128.store(at, c20, 64);
  v128.store(at, c21, 80);
  v128.store(at, c30, 96);
  v128.store(at, c31, 112);
}

/** Column at `to` -= the columns from `a` to `end` times those of the row at `b`. */
function reduceColumn(a: usize, b: usize, end: usize, to: usize): void {
  let low = v128.load(to);
  let high = v128.load(to, 16);
  for (; a < end; a += 32, b += 32) {
    const factor = v128.load64_splat(b);
    low = less(low, v128.load(a), factor);
    high = less(high, v128.load(a, 16), factor);
  }
  v128.store(to, low);
  v128.store(to, high, 16);
}

/**
 * Cholesky factor of the diagonal tile at `d`, reciprocals on its diagonal. Returns -1, or the column that failed. Column c
 * stands at d + 32 c, its row r at + 8 r. The next pivot waits for the reciprocal of the last one, but for no root.
 */
function factorTile(d: usize, columns: i32): i32 {
  const d0 = load<f64>(d);
  if (!(d0 > 0)) return 0;
  const i0 = 1 / d0;
  const r0 = sqrt(i0);
  const a10 = load<f64>(d, 8);
  const a20 = load<f64>(d, 16);
  const a30 = load<f64>(d, 24);
  store<f64>(d, r0);
  store<f64>(d, a10 * r0, 8);
  store<f64>(d, a20 * r0, 16);
  store<f64>(d, a30 * r0, 24);
  if (columns === 1) return -1;
  const m10 = a10 * i0;
  const d1 = load<f64>(d, 40) - a10 * m10;
  store<f64>(d, d1, 40);
  if (!(d1 > 0)) return 1;
  const i1 = 1 / d1;
  const r1 = sqrt(i1);
  const a21 = load<f64>(d, 48) - a20 * m10;
  const a31 = load<f64>(d, 56) - a30 * m10;
  store<f64>(d, r1, 40);
  store<f64>(d, a21 * r1, 48);
  store<f64>(d, a31 * r1, 56);
  if (columns === 2) return -1;
  const m20 = a20 * i0;
  const m21 = a21 * i1;
  const d2 = load<f64>(d, 80) - a20 * m20 - a21 * m21;
  store<f64>(d, d2, 80);
  if (!(d2 > 0)) return 2;
  const i2 = 1 / d2;
  const r2 = sqrt(i2);
  const a32 = load<f64>(d, 88) - a30 * m20 - a31 * m21;
  store<f64>(d, r2, 80);
  store<f64>(d, a32 * r2, 88);
  if (columns === 3) return -1;
  const d3 = load<f64>(d, 120) - a30 * (a30 * i0) - a31 * (a31 * i1) - a32 * (a32 * i2);
  store<f64>(d, d3, 120);
  if (!(d3 > 0)) return 3;
  store<f64>(d, sqrt(1 / d3), 120);
  return -1;
}

/**
 * Overwrites y with the solution of L L^T x = y, unknowns in the order of the factor.
 *
 * @param y     Float64 x (n + 1); what stands at n is of no account
 * @param sums  room for two Float64 a column of the widest front
 */
export function solveOne(records: usize, frontCount: i32, y: usize, sums: usize): void {
  const end = records + <usize>frontCount * RECORD;
  let x = y;
  for (let front = records; front < end; front += RECORD) {
    const width = load<i32>(front + WIDTH);
    forwardTriangle(<usize>load<u32>(front + BLOCK), x, width);
    forwardBelow(front, x, y, width);
    x += (<usize>width) << 3;
  }
  for (let front = end; front > records; ) {
    front -= RECORD;
    const width = load<i32>(front + WIDTH);
    x -= (<usize>width) << 3;
    backwardBelow(front, x, y, width, sums);
    backwardTriangle(<usize>load<u32>(front + BLOCK), x, width);
  }
}

function forwardTriangle(block: usize, x: usize, width: i32): void {
  for (let k = 0; k < width; k += 4) {
    const columns = min(4, width - k);
    let low = f64x2.splat(0);
    let high = f64x2.splat(0);
    const end = block + ((<usize>k) << 5);
    for (let from = x; block < end; block += 32, from += 8) {
      const value = v128.load64_splat(from);
      low = plus(low, v128.load(block), value);
      high = plus(high, v128.load(block, 16), value);
    }
    let at = x + ((<usize>k) << 3);
    const x0 = (load<f64>(at) - f64x2.extract_lane(low, 0)) * load<f64>(block);
    store<f64>(at, x0);
    if (columns > 1) {
      const x1 = (load<f64>(at, 8) - f64x2.extract_lane(low, 1) - load<f64>(block, 8) * x0) * load<f64>(block, 40);
      store<f64>(at, x1, 8);
      if (columns > 2) {
        const x2 =
          (load<f64>(at, 16) - f64x2.extract_lane(high, 0) - load<f64>(block, 16) * x0 - load<f64>(block, 48) * x1) *
          load<f64>(block, 80);
        store<f64>(at, x2, 16);
        if (columns > 3) {
          const x3 =
            (load<f64>(at, 24) -
              f64x2.extract_lane(high, 1) -
              load<f64>(block, 24) * x0 -
              load<f64>(block, 56) * x1 -
              load<f64>(block, 88) * x2) *
            load<f64>(block, 120);
          store<f64>(at, x3, 24);
        }
      }
    }
    block += (<usize>columns) << 5;
  }
}

/** y[rows below] -= block times x, two row tiles at a time. */
function forwardBelow(front: usize, x: usize, y: usize, width: i32): void {
  let tiles = (load<i32>(front + BELOW) + 3) >> 2;
  let rows = <usize>load<u32>(front + ROWS);
  const size = (<usize>width) << 5;
  let a = <usize>load<u32>(front + UNDER);
  const end = x + ((<usize>width) << 3);
  for (; tiles > 1; tiles -= 2) {
    let s0 = f64x2.splat(0);
    let s1 = f64x2.splat(0);
    let s2 = f64x2.splat(0);
    let s3 = f64x2.splat(0);
    let b = a + size;
    for (let from = x; from < end; from += 8, a += 32, b += 32) {
      const value = v128.load64_splat(from);
      s0 = plus(s0, v128.load(a), value);
      s1 = plus(s1, v128.load(a, 16), value);
      s2 = plus(s2, v128.load(b), value);
      s3 = plus(s3, v128.load(b, 16), value);
    }
    a = b;
    takePair(y, rows, s0);
    takePair(y, rows + 8, s1);
    takePair(y, rows + 16, s2);
    takePair(y, rows + 24, s3);
    rows += 32;
  }
  if (tiles > 0) {
    let s0 = f64x2.splat(0);
    let s1 = f64x2.splat(0);
    for (let from = x; from < end; from += 8, a += 32) {
      const value = v128.load64_splat(from);
      s0 = plus(s0, v128.load(a), value);
      s1 = plus(s1, v128.load(a, 16), value);
    }
    takePair(y, rows, s0);
    takePair(y, rows + 8, s1);
  }
}

/** y[rows[0]] -= sums[0], y[rows[1]] -= sums[1] */
function takePair(y: usize, rows: usize, sums: v128): void {
  const first = y + ((<usize>load<u32>(rows)) << 3);
  store<f64>(first, load<f64>(first) - f64x2.extract_lane(sums, 0));
  const second = y + ((<usize>load<u32>(rows, 4)) << 3);
  store<f64>(second, load<f64>(second) - f64x2.extract_lane(sums, 1));
}

/** x -= (rows below)^T y[rows below]; the products of even and of odd rows are summed apart. */
function backwardBelow(front: usize, x: usize, y: usize, width: i32, sums: usize): void {
  let tiles = (load<i32>(front + BELOW) + 3) >> 2;
  if (tiles === 0) return;
  let rows = <usize>load<u32>(front + ROWS);
  let a = <usize>load<u32>(front + UNDER);
  const end = sums + ((<usize>width) << 4);
  memory.fill(sums, 0, (<usize>width) << 4);
  const size = (<usize>width) << 5;
  for (; tiles > 1; tiles -= 2, rows += 32) {
    const y0 = pairOf(y, rows);
    const y1 = pairOf(y, rows + 8);
    const y2 = pairOf(y, rows + 16);
    const y3 = pairOf(y, rows + 24);
    let b = a + size;
    for (let sum = sums; sum < end; sum += 16, a += 32, b += 32) {
      const s = f64x2.add(f64x2.mul(v128.load(a), y0), f64x2.mul(v128.load(a, 16), y1));
      const t = f64x2.add(f64x2.mul(v128.load(b), y2), f64x2.mul(v128.load(b, 16), y3));
      v128.store(sum, f64x2.add(v128.load(sum), f64x2.add(s, t)));
    }
    a = b;
  }
  if (tiles > 0) {
    const y0 = pairOf(y, rows);
    const y1 = pairOf(y, rows + 8);
    for (let sum = sums; sum < end; sum += 16, a += 32) {
      const s = f64x2.add(f64x2.mul(v128.load(a), y0), f64x2.mul(v128.load(a, 16), y1));
      v128.store(sum, f64x2.add(v128.load(sum), s));
    }
  }
  for (let sum = sums; sum < end; sum += 16, x += 8) {
    store<f64>(x, load<f64>(x) - (load<f64>(sum) + load<f64>(sum, 8)));
  }
}

function pairOf(y: usize, rows: usize): v128 {
  const first = v128.load64_zero(y + ((<usize>load<u32>(rows)) << 3));
  return v128.load_lane<f64>(y + ((<usize>load<u32>(rows, 4)) << 3), first, 1);
}

/** Solves with the transposed triangle, row tiles from the last: each takes its part from the columns before it. */
function backwardTriangle(block: usize, x: usize, width: i32): void {
  for (let k = (width - 1) & ~3; k >= 0; k -= 4) {
    const columns = min(4, width - k);
    const tile = block + triangleAt(k >> 2);
    const d = tile + ((<usize>k) << 5);
    const at = x + ((<usize>k) << 3);
    let x1 = 0.0;
    let x2 = 0.0;
    let x3 = 0.0;
    if (columns > 3) {
      x3 = load<f64>(at, 24) * load<f64>(d, 120);
      store<f64>(at, x3, 24);
    }
    if (columns > 2) {
      x2 = (load<f64>(at, 16) - load<f64>(d, 88) * x3) * load<f64>(d, 80);
      store<f64>(at, x2, 16);
    }
    if (columns > 1) {
      x1 = (load<f64>(at, 8) - load<f64>(d, 48) * x2 - load<f64>(d, 56) * x3) * load<f64>(d, 40);
      store<f64>(at, x1, 8);
    }
    const x0 = (load<f64>(at) - load<f64>(d, 8) * x1 - load<f64>(d, 16) * x2 - load<f64>(d, 24) * x3) * load<f64>(d);
    store<f64>(at, x0);
    const low = f64x2.replace_lane(f64x2.splat(x0), 1, x1);
    const high = f64x2.replace_lane(f64x2.splat(x2), 1, x3);
    let from = tile;
    for (let to = x; to < at; to += 8, from += 32) {
      const s = f64x2.add(f64x2.mul(v128.load(from), low), f64x2.mul(v128.load(from, 16), high));
      store<f64>(to, load<f64>(to) - (f64x2.extract_lane(s, 0) + f64x2.extract_lane(s, 1)));
    }
  }
}

/**
 * As `solveOne`, for four right-hand sides at a time.
 *
 * @param y  Float64 x 4 (n + 1): the four numbers of an unknown together
 */
export function solveFour(records: usize, frontCount: i32, y: usize): void {
  const end = records + <usize>frontCount * RECORD;
  let x = y;
  for (let front = records; front < end; front += RECORD) {
    const width = load<i32>(front + WIDTH);
    const block = <usize>load<u32>(front + BLOCK);
    for (let k = 0; k < width; k += 4) forwardFour(block + triangleAt(k >> 2), x, k, min(4, width - k));
    forwardBelowFour(front, x, y, width);
    x += (<usize>width) << 5;
  }
  for (let front = end; front > records; ) {
    front -= RECORD;
    const width = load<i32>(front + WIDTH);
    const block = <usize>load<u32>(front + BLOCK);
    x -= (<usize>width) << 5;
    backwardBelowFour(front, x, y, width);
    for (let k = (width - 1) & ~3; k >= 0; k -= 4) backwardFour(block + triangleAt(k >> 2), x, k, min(4, width - k));
  }
}

/** y[0 ... 3] -= a x for a row tile `a` of `count` columns; the rows of y are at the four addresses. */
function takeTile(a: usize, x: usize, count: i32, y0: usize, y1: usize, y2: usize, y3: usize): void {
  let c00 = v128.load(y0);
  let c01 = v128.load(y0, 16);
  let c10 = v128.load(y1);
  let c11 = v128.load(y1, 16);
  let c20 = v128.load(y2);
  let c21 = v128.load(y2, 16);
  let c30 = v128.load(y3);
  let c31 = v128.load(y3, 16);
  const end = a + ((<usize>count) << 5);
  for (; a < end; a += 32, x += 32) {
    const x0 = v128.load(x);
    const x1 = v128.load(x, 16);
    const a0 = v128.load64_splat(a);
    c00 = less(c00, x0, a0);
    c01 = less(c01, x1, a0);
    const a1 = v128.load64_splat(a, 8);
    c10 = less(c10, x0, a1);
    c11 = less(c11, x1, a1);
    const a2 = v128.load64_splat(a, 16);
    c20 = less(c20, x0, a2);
    c21 = less(c21, x1, a2);
    const a3 = v128.load64_splat(a, 24);
    c30 = less(c30, x0, a3);
    c31 = less(c31, x1, a3);
  }
  v128.store(y0, c00);
  v128.store(y0, c01, 16);
  v128.store(y1, c10);
  v128.store(y1, c11, 16);
  v128.store(y2, c20);
  v128.store(y2, c21, 16);
  v128.store(y3, c30);
  v128.store(y3, c31, 16);
}

/** Row tile `a` of the triangle: takes the part of the k columns before it, then solves by the small triangle at its end. */
function forwardFour(a: usize, x: usize, k: i32, columns: i32): void {
  const at = x + ((<usize>k) << 5);
  const d = a + ((<usize>k) << 5);
  for (let r: usize = 0; r < <usize>columns; r++) takeRow(a + (r << 3), x, k, at + (r << 5));
  for (let r: usize = 0; r < <usize>columns; r++) {
    takeRow(d + (r << 3), at, <i32>r, at + (r << 5));
    scaleRow(at + (r << 5), d + 40 * r);
  }
}

/** y -= a x for one row of a row tile, `count` columns. */
function takeRow(a: usize, x: usize, count: i32, y: usize): void {
  let low = v128.load(y);
  let high = v128.load(y, 16);
  for (const end = x + ((<usize>count) << 5); x < end; x += 32, a += 32) {
    const l = v128.load64_splat(a);
    low = less(low, v128.load(x), l);
    high = less(high, v128.load(x, 16), l);
  }
  v128.store(y, low);
  v128.store(y, high, 16);
}

function scaleRow(y: usize, by: usize): void {
  const d = v128.load64_splat(by);
  v128.store(y, f64x2.mul(v128.load(y), d));
  v128.store(y, f64x2.mul(v128.load(y, 16), d), 16);
}

function forwardBelowFour(front: usize, x: usize, y: usize, width: i32): void {
  const tiles = (load<i32>(front + BELOW) + 3) >> 2;
  let rows = <usize>load<u32>(front + ROWS);
  let a = <usize>load<u32>(front + UNDER);
  for (let I = 0; I < tiles; I++, rows += 16, a += (<usize>width) << 5) {
    // The rows that fill up the last tile share one place in y; what they bring is zero.
    takeTile(a, x, width, rowOf(y, rows), rowOf(y, rows + 4), rowOf(y, rows + 8), rowOf(y, rows + 12));
  }
}

function rowOf(y: usize, rows: usize): usize {
  return y + ((<usize>load<u32>(rows)) << 5);
}

function backwardBelowFour(front: usize, x: usize, y: usize, width: i32): void {
  const tiles = (load<i32>(front + BELOW) + 3) >> 2;
  let rows = <usize>load<u32>(front + ROWS);
  let a = <usize>load<u32>(front + UNDER);
  for (let I = 0; I < tiles; I++, rows += 16, a += (<usize>width) << 5) {
    takeTransposed(a, x, width, rowOf(y, rows), rowOf(y, rows + 4), rowOf(y, rows + 8), rowOf(y, rows + 12));
  }
}

/** x -= a^T y for a row tile `a` of `count` columns; the rows of y are at the four addresses. */
function takeTransposed(a: usize, x: usize, count: i32, y0: usize, y1: usize, y2: usize, y3: usize): void {
  const c00 = v128.load(y0);
  const c01 = v128.load(y0, 16);
  const c10 = v128.load(y1);
  const c11 = v128.load(y1, 16);
  const c20 = v128.load(y2);
  const c21 = v128.load(y2, 16);
  const c30 = v128.load(y3);
  const c31 = v128.load(y3, 16);
  for (const end = a + ((<usize>count) << 5); a < end; a += 32, x += 32) {
    const a0 = v128.load64_splat(a);
    const a1 = v128.load64_splat(a, 8);
    const a2 = v128.load64_splat(a, 16);
    const a3 = v128.load64_splat(a, 24);
    const low = f64x2.add(
      f64x2.add(f64x2.mul(c00, a0), f64x2.mul(c10, a1)),
      f64x2.add(f64x2.mul(c20, a2), f64x2.mul(c30, a3)),
    );
    const high = f64x2.add(
      f64x2.add(f64x2.mul(c01, a0), f64x2.mul(c11, a1)),
      f64x2.add(f64x2.mul(c21, a2), f64x2.mul(c31, a3)),
    );
    v128.store(x, f64x2.sub(v128.load(x), low));
    v128.store(x, f64x2.sub(v128.load(x, 16), high), 16);
  }
}

function backwardFour(a: usize, x: usize, k: i32, columns: i32): void {
  const at = x + ((<usize>k) << 5);
  const d = a + ((<usize>k) << 5);
  for (let c = columns - 1; c >= 0; c--) {
    const own = at + ((<usize>c) << 5);
    for (let r = c + 1; r < columns; r++)
      takeRow(d + ((<usize>c) << 5) + ((<usize>r) << 3), at + ((<usize>r) << 5), 1, own);
    scaleRow(own, d + 40 * <usize>c);
  }
  for (let r = 0; r < columns; r++) {
    const from = at + ((<usize>r) << 5);
    const low = v128.load(from);
    const high = v128.load(from, 16);
    let l = a + ((<usize>r) << 3);
    for (let to = x; to < at; to += 32, l += 32) {
      const value = v128.load64_splat(l);
      v128.store(to, less(v128.load(to), low, value));
      v128.store(to, less(v128.load(to, 16), high, value), 16);
    }
  }
}
