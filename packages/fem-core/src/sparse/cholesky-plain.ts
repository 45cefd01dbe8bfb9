/**
 * Multifrontal Cholesky factorisation and its triangular solves in plain TypeScript: the twin of wasm/cholesky.ts, for hosts
 * without SIMD and for systems too small to be worth an instance. Sums run in the same order in both, so that they give
 * the same bits.
 */
import type { Analysis } from './analysis.js';
import { panelStart, rowStartInBlock, tileCount, triangleSize, triangleStart } from './front-layout.js';

/** Numbers of a row of tiles that may stay in the nearest cache while others run past it. */
const CHUNK = 3072;

/** @returns -1, or the place whose pivot is not positive; the pivot stands on the diagonal */
export function factorPlain(
  analysis: Analysis,
  values: Float64Array,
  blocks: Float64Array,
  updates: Float64Array,
): number {
  const { first, below, child, sibling, blockStart, updateStart } = analysis;
  const places = placesFor(below);
  for (let s = 0; s < below.length; s++) {
    const width = first[s + 1] - first[s];
    const block = blockStart[s];
    blocks.fill(0, block, blockStart[s + 1]);
    placeEntries(analysis, s, values, blocks);
    for (let c = child[s]; c >= 0; c = sibling[c]) addToColumns(analysis, c, width, block, places, updates, blocks);
    const failed = factorTriangle(blocks, block, width);
    if (failed >= 0) return first[s] + failed;
    if (below[s] === 0) continue;
    const under = block + triangleSize(width);
    solveBelow(blocks, block, under, width, tileCount(below[s]));
    formUpdate(blocks, under, updates, updateStart[s], width, below[s]);
    for (let c = child[s]; c >= 0; c = sibling[c]) addToUpdate(analysis, c, width, s, places, updates);
  }
  return -1;
}

/** Puts the entries of the matrix that belong to front s into its block. */
function placeEntries(
  { entryStart, source, target }: Analysis,
  s: number,
  values: Float64Array,
  blocks: Float64Array,
): void {
  for (let e = entryStart[s], end = entryStart[s + 1]; e < end; e++) blocks[target[e]] = values[source[e]];
}

/** Where a child's update goes in its parent: row i of column j to columns[j] + rows[i]. */
interface Places {
  readonly rows: Int32Array;
  readonly columns: Int32Array;
}

/** Room for the longest update. */
function placesFor(below: Int32Array): Places {
  const most = below.reduce((longest, rows) => Math.max(longest, rows), 0);
  return { rows: new Int32Array(most), columns: new Int32Array(most) };
}

/** Adds to the parent's columns the columns of a child's update that belong there. */
function addToColumns(
  { below, rowStart, relative, updateStart }: Analysis,
  child: number,
  width: number,
  block: number,
  places: Places,
  updates: Float64Array,
  blocks: Float64Array,
): void {
  const map = rowStart[child];
  const rows = below[child];
  const shared = rowsBefore(width, relative, map, rows);
  if (shared === 0) return;
  for (let i = 0; i < rows; i++) places.rows[i] = rowStartInBlock(relative[map + i], width);
  for (let j = 0; j < shared; j++) places.columns[j] = block + 4 * relative[map + j];
  addColumns(updates, updateStart[child], rows, 0, shared, places, blocks);
}

/** Adds the rest of a child's update to the parent's. */
function addToUpdate(
  { below, rowStart, relative, updateStart }: Analysis,
  child: number,
  width: number,
  parent: number,
  places: Places,
  updates: Float64Array,
): void {
  const map = rowStart[child];
  const rows = below[child];
  const parentTiles = tileCount(below[parent]);
  const shared = rowsBefore(width, relative, map, rows);
  for (let j = shared; j < rows; j++) {
    const row = relative[map + j] - width;
    places.rows[j] = row;
    places.columns[j] = updateStart[parent] + columnStart(row, parentTiles);
  }
  addColumns(updates, updateStart[child], rows, shared, rows, places, updates);
}

/** How many of the rows of a child are columns of its parent, which has `width` of them: they come first. */
function rowsBefore(width: number, relative: Int32Array, map: number, rows: number): number {
  let count = 0;
  while (count < rows && relative[map + count] < width) count++;
  return count;
}

/** Where column j of an update of so many tiles would start if it had the rows above its panel, too. */
function columnStart(j: number, tiles: number): number {
  const panel = j >> 2;
  return panelStart(panel, tiles) + (j & 3) * 4 * (tiles - panel) - 4 * panel;
}

/** Adds columns `first` ... `end` - 1 of the update at `start`: whole panels where it can, which reads a row's place once. */
function addColumns(
  source: Float64Array,
  start: number,
  rows: number,
  first: number,
  end: number,
  places: Places,
  target: Float64Array,
): void {
  const tiles = tileCount(rows);
  for (let j = first; j < end; ) {
    const from = start + columnStart(j, tiles);
    if ((j & 3) === 0 && j + 4 <= end) {
      addPanel(source, from, 4 * tiles - j, j, rows, places, target);
      j += 4;
    } else {
      addColumn(source, from, j, rows, places, target);
      j++;
    }
  }
}

/** Adds column j of an update, row i of which stands at `from` + i. */
function addColumn(
  source: Float64Array,
  from: number,
  j: number,
  end: number,
  { rows, columns }: Places,
  target: Float64Array,
): void {
  const to = columns[j];
  for (let i = j; i < end; i = (i + 1) | 0) target[(to + rows[i]) | 0] += source[(from + i) | 0];
}

/** Adds the four columns from j on, `stride` apart. */
function addPanel(
  source: Float64Array,
  from: number,
  stride: number,
  j: number,
  end: number,
  { rows, columns }: Places,
  target: Float64Array,
): void {
  const to0 = columns[j];
  const to1 = columns[j + 1];
  const to2 = columns[j + 2];
  const to3 = columns[j + 3];
  const from1 = from + stride;
  const from2 = from1 + stride;
  const from3 = from2 + stride;
  // The triangle at their beginning.
  const row1 = rows[j + 1];
  const row2 = rows[j + 2];
  target[to0 + rows[j]] += source[from + j];
  target[to0 + row1] += source[from + j + 1];
  target[to0 + row2] += source[from + j + 2];
  target[to1 + row1] += source[from1 + j + 1];
  target[to1 + row2] += source[from1 + j + 2];
  target[to2 + row2] += source[from2 + j + 2];
  for (let i = (j + 3) | 0; i < end; i = (i + 1) | 0) {
    const row = rows[i];
    target[(to0 + row) | 0] += source[(from + i) | 0];
    target[(to1 + row) | 0] += source[(from1 + i) | 0];
    target[(to2 + row) | 0] += source[(from2 + i) | 0];
    target[(to3 + row) | 0] += source[(from3 + i) | 0];
  }
}

/**
 * Cholesky factor of the triangle, reciprocals on its diagonal: row tiles take what comes from the left, a chunk of them at a
 * time. Returns -1, or the column that failed.
 */
function factorTriangle(blocks: Float64Array, block: number, width: number): number {
  const tiles = tileCount(width);
  const chunk = Math.max(4, (CHUNK / (4 * width)) | 0);
  for (let first = 0; first < tiles; first += chunk) {
    const end = Math.min(tiles, first + chunk);
    for (let K = 0; K < end; K++) {
      const pivots = block + triangleStart(K);
      if (K >= first) {
        const columns = Math.min(4, width - 4 * K);
        const at = pivots + 16 * K;
        for (let c = 0; c < columns; c++) reduceColumn(blocks, pivots, pivots + c, 4 * K, at + 4 * c, 1);
        const failed = factorTile(blocks, at, columns);
        if (failed >= 0) return 4 * K + failed;
      }
      const I = Math.max(first, K + 1);
      if (I < end) solveTiles(blocks, block + triangleStart(I), 16 * (I + 1), 16, end - I, pivots, 4 * K);
    }
  }
  return -1;
}

/** The same forward substitution for all row tiles below the triangle, a chunk of them at a time. */
function solveBelow(blocks: Float64Array, block: number, under: number, width: number, tiles: number): void {
  const chunk = Math.max(4, (CHUNK / (4 * width)) | 0);
  const size = 4 * width;
  for (let first = 0; first < tiles; first += chunk) {
    const many = Math.min(tiles, first + chunk) - first;
    const tile = under + size * first;
    let k = 0;
    for (; k + 4 <= width; k += 4) solveTiles(blocks, tile, size, 0, many, block + triangleStart(k >> 2), k);
    const row = block + triangleStart(k >> 2) - k;
    for (; k < width; k++) solveColumn(blocks, tile, size, many, row + k, k);
  }
}

/** update = - (rows below) (rows below)^T, its lower triangle by panels of four columns. */
function formUpdate(
  blocks: Float64Array,
  under: number,
  updates: Float64Array,
  update: number,
  width: number,
  below: number,
): void {
  const tiles = tileCount(below);
  const full = (below + 1) >> 2; // row tiles with more than two rows
  const size = 4 * width;
  const chunk = Math.max(4, (CHUNK / (4 * width)) | 0);
  for (let first = 0; first < tiles; first += chunk) {
    const end = Math.min(tiles, first + chunk);
    for (let J = 0; J < end; J++) {
      const panel = update + panelStart(J, tiles);
      const b = under + size * J;
      const stride = 4 * (tiles - J);
      if (J >= first) multiplyByItself(blocks, b, width, updates, panel, stride);
      const I = Math.max(first, J + 1);
      const last = Math.min(end, full);
      if (I < last) multiplyTiles(blocks, under + size * I, last - I, b, width, updates, panel + 4 * (I - J), stride);
      if (I <= full && full < end)
        multiplyHalf(blocks, under + size * full, b, width, updates, panel + 4 * (full - J), stride);
    }
  }
}

/**
 * c = -(a b^T), 4 x 4, for each of `many` row tiles from `tile` on and the one row tile `other`, all of `count` columns; the
 * columns of a c are `stride` apart, its neighbour begins four numbers later.
 *
 * V8 keeps half of the sixteen sums in memory. Still smaller tiles, which fit the registers, or two columns a turn were no
 * faster (4.1 to 4.7 Gflop/s where this runs at 4.7 and scalar arithmetic ends at 6): more loads, each with its check of
 * the bounds, cost as much. Here and below `| 0` spares the check that an index is still a 32-bit integer, a fifth of the
 * time.
 */
function multiplyTiles(
  m: Float64Array,
  tile: number,
  many: number,
  other: number,
  count: number,
  c: Float64Array,
  target: number,
  stride: number,
): void {
  const size = (4 * count) | 0;
  let end = tile | 0;
  let to = target | 0;
  let a = tile | 0;
  for (let t = 0; t < many; t = (t + 1) | 0, to = (to + 4) | 0) {
    let c00 = 0;
    let c01 = 0;
    let c02 = 0;
    let c03 = 0;
    let c10 = 0;
    let c11 = 0;
    let c12 = 0;
    let c13 = 0;
    let c20 = 0;
    let c21 = 0;
    let c22 = 0;
    let c23 = 0;
    let c30 = 0;
    let c31 = 0;
    let c32 = 0;
    let c33 = 0;
    end = (end + size) | 0;
    for (let b = other | 0; a < end; a = (a + 4) | 0, b = (b + 4) | 0) {
      const a0 = m[a];
      const a1 = m[(a + 1) | 0];
      const a2 = m[(a + 2) | 0];
      const a3 = m[(a + 3) | 0];
      const b0 = m[b];
      c00 -= a0 * b0;
      c01 -= a1 * b0;
      c02 -= a2 * b0;
      c03 -= a3 * b0;
      const b1 = m[(b + 1) | 0];
      c10 -= a0 * b1;
      c11 -= a1 * b1;
      c12 -= a2 * b1;
      c13 -= a3 * b1;
      const b2 = m[(b + 2) | 0];
      c20 -= a0 * b2;
      c21 -= a1 * b2;
      c22 -= a2 * b2;
      c23 -= a3 * b2;
      const b3 = m[(b + 3) | 0];
      c30 -= a0 * b3;
      c31 -= a1 * b3;
      c32 -= a2 * b3;
      c33 -= a3 * b3;
    }
    let p = to | 0;
    c[p] = c00;
    c[(p + 1) | 0] = c01;
    c[(p + 2) | 0] = c02;
    c[(p + 3) | 0] = c03;
    p = (p + stride) | 0;
    c[p] = c10;
    c[(p + 1) | 0] = c11;
    c[(p + 2) | 0] = c12;
    c[(p + 3) | 0] = c13;
    p = (p + stride) | 0;
    c[p] = c20;
    c[(p + 1) | 0] = c21;
    c[(p + 2) | 0] = c22;
    c[(p + 3) | 0] = c23;
    p = (p + stride) | 0;
    c[p] = c30;
    c[(p + 1) | 0] = c31;
    c[(p + 2) | 0] = c32;
    c[(p + 3) | 0] = c33;
  }
}

/** The first two rows of the same, for one row tile. */
function multiplyHalf(
  m: Float64Array,
  tile: number,
  other: number,
  count: number,
  c: Float64Array,
  to: number,
  stride: number,
): void {
  let c00 = 0;
  let c01 = 0;
  let c10 = 0;
  let c11 = 0;
  let c20 = 0;
  let c21 = 0;
  let c30 = 0;
  let c31 = 0;
  const end = (tile + 4 * count) | 0;
  for (let a = tile | 0, b = other | 0; a < end; a = (a + 4) | 0, b = (b + 4) | 0) {
    const a0 = m[a];
    const a1 = m[(a + 1) | 0];
    const b0 = m[b];
    c00 -= a0 * b0;
    c01 -= a1 * b0;
    const b1 = m[(b + 1) | 0];
    c10 -= a0 * b1;
    c11 -= a1 * b1;
    const b2 = m[(b + 2) | 0];
    c20 -= a0 * b2;
    c21 -= a1 * b2;
    const b3 = m[(b + 3) | 0];
    c30 -= a0 * b3;
    c31 -= a1 * b3;
  }
  let p = to | 0;
  c[p] = c00;
  c[(p + 1) | 0] = c01;
  p = (p + stride) | 0;
  c[p] = c10;
  c[(p + 1) | 0] = c11;
  p = (p + stride) | 0;
  c[p] = c20;
  c[(p + 1) | 0] = c21;
  p = (p + stride) | 0;
  c[p] = c30;
  c[(p + 1) | 0] = c31;
}

/** The same for a tile on the diagonal, where a = b: what stands above the diagonal of c is left. */
function multiplyByItself(
  m: Float64Array,
  tile: number,
  count: number,
  c: Float64Array,
  to: number,
  stride: number,
): void {
  let c00 = 0;
  let c01 = 0;
  let c02 = 0;
  let c03 = 0;
  let c11 = 0;
  let c12 = 0;
  let c13 = 0;
  let c22 = 0;
  let c23 = 0;
  let c33 = 0;
  for (let a = tile | 0, end = (tile + 4 * count) | 0; a < end; a = (a + 4) | 0) {
    const a0 = m[a];
    const a1 = m[(a + 1) | 0];
    const a2 = m[(a + 2) | 0];
    const a3 = m[(a + 3) | 0];
    c00 -= a0 * a0;
    c01 -= a1 * a0;
    c02 -= a2 * a0;
    c03 -= a3 * a0;
    c11 -= a1 * a1;
    c12 -= a2 * a1;
    c13 -= a3 * a1;
    c22 -= a2 * a2;
    c23 -= a3 * a2;
    c33 -= a3 * a3;
  }
  let p = to | 0;
  c[p] = c00;
  c[(p + 1) | 0] = c01;
  c[(p + 2) | 0] = c02;
  c[(p + 3) | 0] = c03;
  p = (p + stride) | 0;
  c[(p + 1) | 0] = c11;
  c[(p + 2) | 0] = c12;
  c[(p + 3) | 0] = c13;
  p = (p + stride) | 0;
  c[(p + 2) | 0] = c22;
  c[(p + 3) | 0] = c23;
  p = (p + stride) | 0;
  c[(p + 3) | 0] = c33;
}

/**
 * So many row tiles from `start` on have their first `count` columns solved; takes their product with those of `pivots` from
 * the next four columns and solves these by the triangle that stands there in `pivots`. The second tile comes `firstStep`
 * after the first, and each step is longer by `growth`.
 */
function solveTiles(
  m: Float64Array,
  start: number,
  firstStep: number,
  growth: number,
  many: number,
  pivots: number,
  count: number,
): void {
  const size = (4 * count) | 0;
  const d = (pivots + size) | 0;
  const d0 = m[d];
  const l10 = m[(d + 1) | 0];
  const l20 = m[(d + 2) | 0];
  const l30 = m[(d + 3) | 0];
  const d1 = m[(d + 5) | 0];
  const l21 = m[(d + 6) | 0];
  const l31 = m[(d + 7) | 0];
  const d2 = m[(d + 10) | 0];
  const l32 = m[(d + 11) | 0];
  const d3 = m[(d + 15) | 0];
  let tile = start | 0;
  let step = firstStep | 0;
  for (let t = 0; t < many; t = (t + 1) | 0) {
    const at = (tile + size) | 0;
    let c00 = m[at];
    let c01 = m[(at + 1) | 0];
    let c02 = m[(at + 2) | 0];
    let c03 = m[(at + 3) | 0];
    let c10 = m[(at + 4) | 0];
    let c11 = m[(at + 5) | 0];
    let c12 = m[(at + 6) | 0];
    let c13 = m[(at + 7) | 0];
    let c20 = m[(at + 8) | 0];
    let c21 = m[(at + 9) | 0];
    let c22 = m[(at + 10) | 0];
    let c23 = m[(at + 11) | 0];
    let c30 = m[(at + 12) | 0];
    let c31 = m[(at + 13) | 0];
    let c32 = m[(at + 14) | 0];
    let c33 = m[(at + 15) | 0];
    for (let a = tile, b = pivots | 0; a < at; a = (a + 4) | 0, b = (b + 4) | 0) {
      const a0 = m[a];
      const a1 = m[(a + 1) | 0];
      const a2 = m[(a + 2) | 0];
      const a3 = m[(a + 3) | 0];
      const b0 = m[b];
      c00 -= a0 * b0;
      c01 -= a1 * b0;
      c02 -= a2 * b0;
      c03 -= a3 * b0;
      const b1 = m[(b + 1) | 0];
      c10 -= a0 * b1;
      c11 -= a1 * b1;
      c12 -= a2 * b1;
      c13 -= a3 * b1;
      const b2 = m[(b + 2) | 0];
      c20 -= a0 * b2;
      c21 -= a1 * b2;
      c22 -= a2 * b2;
      c23 -= a3 * b2;
      const b3 = m[(b + 3) | 0];
      c30 -= a0 * b3;
      c31 -= a1 * b3;
      c32 -= a2 * b3;
      c33 -= a3 * b3;
    }
    const x00 = c00 * d0;
    const x10 = (c10 - x00 * l10) * d1;
    const x20 = (c20 - x00 * l20 - x10 * l21) * d2;
    m[at] = x00;
    m[(at + 4) | 0] = x10;
    m[(at + 8) | 0] = x20;
    m[(at + 12) | 0] = (c30 - x00 * l30 - x10 * l31 - x20 * l32) * d3;
    const x01 = c01 * d0;
    const x11 = (c11 - x01 * l10) * d1;
    const x21 = (c21 - x01 * l20 - x11 * l21) * d2;
    m[(at + 1) | 0] = x01;
    m[(at + 5) | 0] = x11;
    m[(at + 9) | 0] = x21;
    m[(at + 13) | 0] = (c31 - x01 * l30 - x11 * l31 - x21 * l32) * d3;
    const x02 = c02 * d0;
    const x12 = (c12 - x02 * l10) * d1;
    const x22 = (c22 - x02 * l20 - x12 * l21) * d2;
    m[(at + 2) | 0] = x02;
    m[(at + 6) | 0] = x12;
    m[(at + 10) | 0] = x22;
    m[(at + 14) | 0] = (c32 - x02 * l30 - x12 * l31 - x22 * l32) * d3;
    const x03 = c03 * d0;
    const x13 = (c13 - x03 * l10) * d1;
    const x23 = (c23 - x03 * l20 - x13 * l21) * d2;
    m[(at + 3) | 0] = x03;
    m[(at + 7) | 0] = x13;
    m[(at + 11) | 0] = x23;
    m[(at + 15) | 0] = (c33 - x03 * l30 - x13 * l31 - x23 * l32) * d3;
    tile = (tile + step) | 0;
    step = (step + growth) | 0;
  }
}

/** Solves column `count` alone of row tiles that have those before it solved, by the row of the triangle at `row`. */
function solveColumn(m: Float64Array, start: number, step: number, many: number, row: number, count: number): void {
  const reciprocal = m[row + 4 * count];
  for (let t = 0, tile = start | 0; t < many; t = (t + 1) | 0, tile = (tile + step) | 0) {
    reduceColumn(m, tile, row, count, (tile + 4 * count) | 0, reciprocal);
  }
}

/** Takes from the column at `at` the product of the first `count` columns of its tile with the row at `row`; then scales it. */
function reduceColumn(m: Float64Array, tile: number, row: number, count: number, at: number, factor: number): void {
  let c0 = m[at];
  let c1 = m[(at + 1) | 0];
  let c2 = m[(at + 2) | 0];
  let c3 = m[(at + 3) | 0];
  const end = (tile + 4 * count) | 0;
  for (let a = tile | 0, b = row | 0; a < end; a = (a + 4) | 0, b = (b + 4) | 0) {
    const b0 = m[b];
    c0 -= m[a] * b0;
    c1 -= m[(a + 1) | 0] * b0;
    c2 -= m[(a + 2) | 0] * b0;
    c3 -= m[(a + 3) | 0] * b0;
  }
  m[at] = c0 * factor;
  m[(at + 1) | 0] = c1 * factor;
  m[(at + 2) | 0] = c2 * factor;
  m[(at + 3) | 0] = c3 * factor;
}

/**
 * Cholesky factor of the diagonal tile at `d`, reciprocals on its diagonal. Returns -1, or the column that failed. The next
 * pivot waits for the reciprocal of the last one, but for no root.
 */
function factorTile(m: Float64Array, d: number, columns: number): number {
  const d0 = m[d];
  if (!(d0 > 0)) return 0;
  const i0 = 1 / d0;
  const r0 = Math.sqrt(i0);
  const a10 = m[(d + 1) | 0];
  const a20 = m[(d + 2) | 0];
  const a30 = m[(d + 3) | 0];
  m[d] = r0;
  m[(d + 1) | 0] = a10 * r0;
  m[(d + 2) | 0] = a20 * r0;
  m[(d + 3) | 0] = a30 * r0;
  if (columns === 1) return -1;
  const m10 = a10 * i0;
  const d1 = m[(d + 5) | 0] - a10 * m10;
  m[(d + 5) | 0] = d1;
  if (!(d1 > 0)) return 1;
  const i1 = 1 / d1;
  const r1 = Math.sqrt(i1);
  const a21 = m[(d + 6) | 0] - a20 * m10;
  const a31 = m[(d + 7) | 0] - a30 * m10;
  m[(d + 5) | 0] = r1;
  m[(d + 6) | 0] = a21 * r1;
  m[(d + 7) | 0] = a31 * r1;
  if (columns === 2) return -1;
  const m20 = a20 * i0;
  const m21 = a21 * i1;
  const d2 = m[(d + 10) | 0] - a20 * m20 - a21 * m21;
  m[(d + 10) | 0] = d2;
  if (!(d2 > 0)) return 2;
  const i2 = 1 / d2;
  const r2 = Math.sqrt(i2);
  const a32 = m[(d + 11) | 0] - a30 * m20 - a31 * m21;
  m[(d + 10) | 0] = r2;
  m[(d + 11) | 0] = a32 * r2;
  if (columns === 3) return -1;
  const d3 = m[(d + 15) | 0] - a30 * (a30 * i0) - a31 * (a31 * i1) - a32 * (a32 * i2);
  m[(d + 15) | 0] = d3;
  if (!(d3 > 0)) return 3;
  m[(d + 15) | 0] = Math.sqrt(1 / d3);
  return -1;
}

/** Overwrites y with the solution of L L^T x = y, unknowns in the order of the factor; Float64Array(n + 1), 0 at n. */
export function solvePlain(analysis: Analysis, blocks: Float64Array, y: Float64Array): void {
  const { first, below, blockStart, rowStart } = analysis;
  const sums = new Float64Array(2 * first.reduce((most, f, s) => Math.max(most, s === 0 ? 0 : f - first[s - 1]), 0));
  for (let s = 0; s < below.length; s++) {
    const width = first[s + 1] - first[s];
    forwardTriangle(blocks, blockStart[s], y, first[s], width);
    forwardBelow(
      blocks,
      blockStart[s] + triangleSize(width),
      analysis.rows,
      rowStart[s],
      rowStart[s + 1],
      y,
      first[s],
      width,
    );
  }
  for (let s = below.length - 1; s >= 0; s--) {
    const width = first[s + 1] - first[s];
    const under = blockStart[s] + triangleSize(width);
    backwardBelow(blocks, under, analysis.rows, rowStart[s], rowStart[s + 1], y, first[s], width, sums);
    backwardTriangle(blocks, blockStart[s], y, first[s], width);
  }
}

function forwardTriangle(m: Float64Array, block: number, y: Float64Array, x: number, width: number): void {
  for (let k = 0; k < width; k += 4) {
    const tile = block + triangleStart(k >> 2);
    const d = tile + 4 * k;
    for (let r = 0; r < 4 && k + r < width; r++) {
      let sum = 0;
      for (let c = 0; c < k; c++) sum += m[tile + 4 * c + r] * y[x + c];
      let value = y[x + k + r] - sum;
      for (let c = 0; c < r; c++) value -= m[d + 4 * c + r] * y[x + k + c];
      y[x + k + r] = value * m[d + 5 * r];
    }
  }
}

function forwardBelow(
  m: Float64Array,
  under: number,
  rows: Int32Array,
  rowsFrom: number,
  rowsEnd: number,
  y: Float64Array,
  x: number,
  width: number,
): void {
  let a = under;
  for (let p = rowsFrom; p < rowsEnd; p += 4) {
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    let s3 = 0;
    for (let c = x; c < x + width; c++, a += 4) {
      const value = y[c];
      s0 += m[a] * value;
      s1 += m[a + 1] * value;
      s2 += m[a + 2] * value;
      s3 += m[a + 3] * value;
    }
    y[rows[p]] -= s0;
    y[rows[p + 1]] -= s1;
    y[rows[p + 2]] -= s2;
    y[rows[p + 3]] -= s3;
  }
}

/** The products of even and of odd rows are summed apart, those of two tiles at a time. */
function backwardBelow(
  m: Float64Array,
  under: number,
  rows: Int32Array,
  rowsFrom: number,
  rowsEnd: number,
  y: Float64Array,
  x: number,
  width: number,
  sums: Float64Array,
): void {
  if (rowsFrom === rowsEnd) return;
  sums.fill(0, 0, 2 * width);
  let a = under;
  let p = rowsFrom;
  for (; p + 4 < rowsEnd; p += 8) {
    const y0 = y[rows[p]];
    const y1 = y[rows[p + 1]];
    const y2 = y[rows[p + 2]];
    const y3 = y[rows[p + 3]];
    const y4 = y[rows[p + 4]];
    const y5 = y[rows[p + 5]];
    const y6 = y[rows[p + 6]];
    const y7 = y[rows[p + 7]];
    let b = a + 4 * width;
    for (let sum = 0; sum < 2 * width; sum += 2, a += 4, b += 4) {
      sums[sum] += m[a] * y0 + m[a + 2] * y2 + (m[b] * y4 + m[b + 2] * y6);
      sums[sum + 1] += m[a + 1] * y1 + m[a + 3] * y3 + (m[b + 1] * y5 + m[b + 3] * y7);
    }
    a = b;
  }
  if (p < rowsEnd) {
    const y0 = y[rows[p]];
    const y1 = y[rows[p + 1]];
    const y2 = y[rows[p + 2]];
    const y3 = y[rows[p + 3]];
    for (let sum = 0; sum < 2 * width; sum += 2, a += 4) {
      sums[sum] += m[a] * y0 + m[a + 2] * y2;
      sums[sum + 1] += m[a + 1] * y1 + m[a + 3] * y3;
    }
  }
  for (let c = 0; c < width; c++) y[x + c] -= sums[2 * c] + sums[2 * c + 1];
}

/** Solves with the transposed triangle, row tiles from the last: each takes its part from the columns before it. */
function backwardTriangle(m: Float64Array, block: number, y: Float64Array, x: number, width: number): void {
  for (let k = (width - 1) & ~3; k >= 0; k -= 4) {
    const tile = block + triangleStart(k >> 2);
    const d = tile + 4 * k;
    const columns = Math.min(4, width - k);
    for (let c = columns - 1; c >= 0; c--) {
      let value = y[x + k + c];
      for (let r = c + 1; r < columns; r++) value -= m[d + 4 * c + r] * y[x + k + r];
      y[x + k + c] = value * m[d + 5 * c];
    }
    const x0 = y[x + k];
    const x1 = columns > 1 ? y[x + k + 1] : 0;
    const x2 = columns > 2 ? y[x + k + 2] : 0;
    const x3 = columns > 3 ? y[x + k + 3] : 0;
    for (let c = 0, a = tile; c < k; c++, a += 4)
      y[x + c] -= m[a] * x0 + m[a + 2] * x2 + (m[a + 1] * x1 + m[a + 3] * x3);
  }
}
