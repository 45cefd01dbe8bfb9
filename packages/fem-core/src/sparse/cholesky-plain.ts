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
  const { first, below, child, sibling, entryStart, source, target, blockStart, updateStart } = analysis;
  const offsets = new Int32Array(below.reduce((most, rows) => Math.max(most, rows), 0));
  for (let s = 0; s < below.length; s++) {
    const width = first[s + 1] - first[s];
    const block = blockStart[s];
    blocks.fill(0, block, blockStart[s + 1]);
    for (let e = entryStart[s]; e < entryStart[s + 1]; e++) blocks[target[e]] = values[source[e]];
    for (let c = child[s]; c >= 0; c = sibling[c]) addToColumns(analysis, c, width, block, offsets, updates, blocks);
    const failed = factorTriangle(blocks, block, width);
    if (failed >= 0) return first[s] + failed;
    if (below[s] === 0) continue;
    const tiles = tileCount(below[s]);
    const under = block + triangleSize(width);
    solveBelow(blocks, block, under, width, tiles);
    formUpdate(blocks, under, updates, updateStart[s], width, tiles);
    for (let c = child[s]; c >= 0; c = sibling[c]) addToUpdate(analysis, c, width, updateStart[s], tiles, updates);
  }
  return -1;
}

/** Adds to the parent's columns the columns of a child's update that belong there. */
function addToColumns(
  { below, rowStart, relative, updateStart }: Analysis,
  child: number,
  width: number,
  block: number,
  offsets: Int32Array,
  updates: Float64Array,
  blocks: Float64Array,
): void {
  const rows = below[child];
  const map = rowStart[child];
  const tiles = tileCount(rows);
  for (let i = 0; i < rows; i++) offsets[i] = rowStartInBlock(relative[map + i], width);
  for (let j = 0; j < rows && relative[map + j] < width; j++) {
    const panel = j >> 2;
    const from = updateStart[child] + panelStart(panel, tiles) + (j & 3) * 4 * (tiles - panel) - 4 * panel;
    const to = block + 4 * relative[map + j];
    for (let i = j; i < rows; i++) blocks[(to + offsets[i]) | 0] += updates[(from + i) | 0];
  }
}

/** Adds the rest of a child's update to the parent's. */
function addToUpdate(
  { below, rowStart, relative, updateStart }: Analysis,
  child: number,
  width: number,
  update: number,
  parentTiles: number,
  updates: Float64Array,
): void {
  const rows = below[child];
  const map = rowStart[child];
  const tiles = tileCount(rows);
  for (let j = 0; j < rows; j++) {
    const column = relative[map + j] - width;
    if (column < 0) continue;
    const panel = j >> 2;
    const from = updateStart[child] + panelStart(panel, tiles) + (j & 3) * 4 * (tiles - panel) - 4 * panel;
    const J = column >> 2;
    const to = update + panelStart(J, parentTiles) + (column & 3) * 4 * (parentTiles - J) - 4 * J - width;
    for (let i = j; i < rows; i++) updates[(to + relative[(map + i) | 0]) | 0] += updates[(from + i) | 0];
  }
}

/**
 * Cholesky factor of the triangle, reciprocals on its diagonal: row tiles take what comes from the left, a chunk of them at a
 * time. Returns -1, or the column that failed.
 */
function factorTriangle(blocks: Float64Array, block: number, width: number): number {
  const tiles = tileCount(width);
  const chunk = Math.max(4, Math.floor(CHUNK / (4 * width)));
  for (let first = 0; first < tiles; first += chunk) {
    const end = Math.min(tiles, first + chunk);
    for (let K = 0; K < end; K++) {
      const pivots = block + triangleStart(K);
      if (K >= first) {
        const columns = Math.min(4, width - 4 * K);
        if (columns === 4) reduceTile(blocks, pivots, pivots, pivots + 16 * K);
        else for (let c = 0; c < columns; c++) reduceColumn(blocks, pivots, pivots + c, 4 * K, pivots + 16 * K + 4 * c);
        const failed = factorTile(blocks, pivots + 16 * K, columns);
        if (failed >= 0) return 4 * K + failed;
      }
      for (let I = Math.max(first, K + 1); I < end; I++) solveTile(blocks, block + triangleStart(I), pivots, 4 * K);
    }
  }
  return -1;
}

/** The same forward substitution for all row tiles below the triangle, a chunk of them at a time. */
function solveBelow(blocks: Float64Array, block: number, under: number, width: number, tiles: number): void {
  const chunk = Math.max(4, Math.floor(CHUNK / (4 * width)));
  for (let first = 0; first < tiles; first += chunk) {
    const end = Math.min(tiles, first + chunk);
    for (let k = 0; k < width; k += 4) {
      const pivots = block + triangleStart(k >> 2);
      for (let I = first; I < end; I++) {
        const tile = under + 4 * width * I;
        if (k + 4 <= width) solveTile(blocks, tile, pivots, k);
        else solvePartOfTile(blocks, tile, pivots, k, width - k);
      }
    }
  }
}

/** update = - (rows below) (rows below)^T, its lower triangle by panels of four columns. */
function formUpdate(
  blocks: Float64Array,
  under: number,
  updates: Float64Array,
  update: number,
  width: number,
  tiles: number,
): void {
  const chunk = Math.max(4, Math.floor(CHUNK / (4 * width)));
  for (let first = 0; first < tiles; first += chunk) {
    const end = Math.min(tiles, first + chunk);
    for (let J = 0; J < end; J++) {
      const panel = update + panelStart(J, tiles);
      for (let I = Math.max(first, J); I < end; I++) {
        const to = panel + 4 * (I - J);
        multiplyTiles(blocks, under + 4 * width * I, under + 4 * width * J, width, updates, to, 4 * (tiles - J));
      }
    }
  }
}

/**
 * c = -(a b^T), 4 x 4, for row tiles of `count` columns; the columns of c are `stride` apart. Here and below `| 0` spares
 * the check that an index is still a 32-bit integer, a fifth of the time.
 */
function multiplyTiles(
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
  const end = (tile + 4 * count) | 0;
  for (let a = tile | 0, b = other | 0; a < end; a = (a + 4) | 0, b = (b + 4) | 0) {
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
  let p = to;
  c[p] = c00;
  c[p + 1] = c01;
  c[p + 2] = c02;
  c[p + 3] = c03;
  p += stride;
  c[p] = c10;
  c[p + 1] = c11;
  c[p + 2] = c12;
  c[p + 3] = c13;
  p += stride;
  c[p] = c20;
  c[p + 1] = c21;
  c[p + 2] = c22;
  c[p + 3] = c23;
  p += stride;
  c[p] = c30;
  c[p + 1] = c31;
  c[p + 2] = c32;
  c[p + 3] = c33;
}

/**
 * Row tile `tile` has its first `count` columns solved; takes their product with those of `pivots` from the next four columns
 * and solves these by the triangle that stands there in `pivots`.
 */
function solveTile(m: Float64Array, tile: number, pivots: number, count: number): void {
  const at = (tile + 4 * count) | 0;
  if (count > 0) reduceTile(m, tile, pivots, at);
  solveFour(m, at, pivots + 4 * count);
}

/** Solves the four columns at `at` by the triangle at `d`, whose diagonal holds reciprocals: row by row. */
function solveFour(m: Float64Array, at: number, d: number): void {
  const d0 = m[d];
  const l10 = m[d + 1];
  const l20 = m[d + 2];
  const l30 = m[d + 3];
  const d1 = m[d + 5];
  const l21 = m[d + 6];
  const l31 = m[d + 7];
  const d2 = m[d + 10];
  const l32 = m[d + 11];
  const d3 = m[d + 15];
  for (let p = at | 0, end = (at + 4) | 0; p < end; p = (p + 1) | 0) {
    const x0 = m[p] * d0;
    const x1 = (m[(p + 4) | 0] - x0 * l10) * d1;
    const x2 = (m[(p + 8) | 0] - x0 * l20 - x1 * l21) * d2;
    m[(p + 12) | 0] = (m[(p + 12) | 0] - x0 * l30 - x1 * l31 - x2 * l32) * d3;
    m[p] = x0;
    m[(p + 4) | 0] = x1;
    m[(p + 8) | 0] = x2;
  }
}

/** Four columns at `at` -= the columns of `tile` before them times those of `pivots`. */
function reduceTile(m: Float64Array, tile: number, pivots: number, at: number): void {
  let c00 = m[at];
  let c01 = m[at + 1];
  let c02 = m[at + 2];
  let c03 = m[at + 3];
  let c10 = m[at + 4];
  let c11 = m[at + 5];
  let c12 = m[at + 6];
  let c13 = m[at + 7];
  let c20 = m[at + 8];
  let c21 = m[at + 9];
  let c22 = m[at + 10];
  let c23 = m[at + 11];
  let c30 = m[at + 12];
  let c31 = m[at + 13];
  let c32 = m[at + 14];
  let c33 = m[at + 15];
  for (let a = tile | 0, b = pivots | 0; a < at; a = (a + 4) | 0, b = (b + 4) | 0) {
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
  m[at] = c00;
  m[at + 1] = c01;
  m[at + 2] = c02;
  m[at + 3] = c03;
  m[at + 4] = c10;
  m[at + 5] = c11;
  m[at + 6] = c12;
  m[at + 7] = c13;
  m[at + 8] = c20;
  m[at + 9] = c21;
  m[at + 10] = c22;
  m[at + 11] = c23;
  m[at + 12] = c30;
  m[at + 13] = c31;
  m[at + 14] = c32;
  m[at + 15] = c33;
}

/** The same for the last one to three columns. */
function solvePartOfTile(m: Float64Array, tile: number, pivots: number, count: number, columns: number): void {
  const at = tile + 4 * count;
  for (let c = 0; c < columns; c++) reduceColumn(m, tile, pivots + c, count, at + 4 * c);
  solveColumns(m, at, pivots + 4 * count, columns);
}

/** Column at `to` -= the first `count` columns of row tile `a` times row `b` of another. */
function reduceColumn(m: Float64Array, tile: number, other: number, count: number, to: number): void {
  let c0 = m[to];
  let c1 = m[to + 1];
  let c2 = m[to + 2];
  let c3 = m[to + 3];
  for (let a = tile, b = other, end = tile + 4 * count; a < end; a += 4, b += 4) {
    const b0 = m[b];
    c0 -= m[a] * b0;
    c1 -= m[a + 1] * b0;
    c2 -= m[a + 2] * b0;
    c3 -= m[a + 3] * b0;
  }
  m[to] = c0;
  m[to + 1] = c1;
  m[to + 2] = c2;
  m[to + 3] = c3;
}

/** The same for one to three columns. */
function solveColumns(m: Float64Array, at: number, d: number, columns: number): void {
  for (let c = 0; c < columns; c++) {
    let c0 = m[at + 4 * c];
    let c1 = m[at + 4 * c + 1];
    let c2 = m[at + 4 * c + 2];
    let c3 = m[at + 4 * c + 3];
    for (let k = 0; k < c; k++) {
      const a = (at + 4 * k) | 0;
      const l = m[d + 4 * k + c];
      c0 -= m[a] * l;
      c1 -= m[(a + 1) | 0] * l;
      c2 -= m[(a + 2) | 0] * l;
      c3 -= m[(a + 3) | 0] * l;
    }
    const reciprocal = m[d + 5 * c];
    m[at + 4 * c] = c0 * reciprocal;
    m[at + 4 * c + 1] = c1 * reciprocal;
    m[at + 4 * c + 2] = c2 * reciprocal;
    m[at + 4 * c + 3] = c3 * reciprocal;
  }
}

/**
 * Cholesky factor of the diagonal tile at `d`, reciprocals on its diagonal. Returns -1, or the column that failed. The next
 * pivot waits for the reciprocal of the last one, but for no root.
 */
function factorTile(m: Float64Array, d: number, columns: number): number {
  for (let c = 0; c < columns; c++) {
    const own = d + 4 * c;
    const pivot = m[own + c];
    if (!(pivot > 0)) return c;
    const inverse = 1 / pivot;
    for (let k = c + 1; k < columns; k++) {
      const multiple = m[own + k] * inverse;
      for (let r = k; r < 4; r++) m[d + 4 * k + r] -= m[own + r] * multiple;
    }
    const reciprocal = Math.sqrt(inverse);
    m[own + c] = reciprocal;
    for (let r = c + 1; r < 4; r++) m[own + r] *= reciprocal;
  }
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
