import type { Analysis } from './analysis.js';

/** A = L L^T in the order of the analysis: the dense blocks of L. */
export interface Factor {
  readonly analysis: Analysis;
  /** Float64Array(blockSize): see `Analysis`. Above the diagonal of a block the content has no meaning. */
  readonly blocks: Float64Array;
}

/** Column (in the order of the matrix) at which the factorisation met a pivot that is not positive, and that pivot. */
export interface NotPositive {
  readonly unknown: number;
  readonly pivot: number;
}

/**
 * Left-looking supernodal Cholesky factorisation (Ng, Peyton, Block sparse Cholesky algorithms on advanced uniprocessor
 * computers, 1993): each block gathers the outer products of the blocks before it, then is factored as a dense one.
 *
 * @param values  Float64Array(z): the lower triangle in the order of the pattern
 * @param blocks  Float64Array(analysis.blockSize) to be overwritten; made if absent
 * @returns the factor, or where the matrix was found not positive definite
 */
export function factor(
  analysis: Analysis,
  values: Float64Array,
  blocks = new Float64Array(analysis.blockSize),
): Factor | NotPositive {
  const { first, rowStart, rows, blockStart, supernodeOf, target, order, pattern } = analysis;
  const superCount = first.length - 1;
  blocks.fill(0);
  for (let p = 0; p < target.length; p++) blocks[target[p]] += values[p];

  // For each supernode the earlier ones whose next unused row lies in it.
  const head = new Int32Array(superCount).fill(-1);
  const next = new Int32Array(superCount).fill(-1);
  const used = new Int32Array(superCount);
  const position = new Int32Array(pattern.n);
  const tallest = Array.from({ length: superCount }, (_, s) => rowStart[s + 1] - rowStart[s]).reduce(
    (a, b) => Math.max(a, b),
    0,
  );
  const strip = new Float64Array(2 * tallest);

  for (let s = 0; s < superCount; s++) {
    const height = rowStart[s + 1] - rowStart[s];
    const width = first[s + 1] - first[s];
    for (let r = 0; r < height; r++) position[rows[rowStart[s] + r]] = r;
    for (let k = head[s]; k >= 0; ) {
      const following = next[k];
      used[k] = addUpdate(analysis, blocks, s, k, used[k], position, strip);
      enqueue(k);
      k = following;
    }
    const bad = factorBlock(blocks, blockStart[s], height, width);
    if (bad >= 0) {
      return { unknown: order[first[s] + bad], pivot: blocks[blockStart[s] + bad * (height + 1)] };
    }
    used[s] = width;
    enqueue(s);
  }
  return { analysis, blocks };

  function enqueue(k: number): void {
    const at = rowStart[k] + used[k];
    if (at >= rowStart[k + 1]) return;
    const s = supernodeOf[rows[at]];
    next[k] = head[s];
    head[s] = k;
  }
}

/**
 * Subtracts from block s the outer product of the rows of block k from `from` on, as far as they meet the columns of s.
 * Columns are taken in pairs, gathered in `strip` and spread by `position`. Returns the first row of k beyond block s.
 */
function addUpdate(
  analysis: Analysis,
  blocks: Float64Array,
  s: number,
  k: number,
  from: number,
  position: Int32Array,
  strip: Float64Array,
): number {
  const { first, rowStart, rows, blockStart } = analysis;
  const heightK = rowStart[k + 1] - rowStart[k];
  const widthK = first[k + 1] - first[k];
  const heightS = rowStart[s + 1] - rowStart[s];
  const baseK = blockStart[k];
  const rowsK = rowStart[k];
  let end = from;
  while (end < heightK && rows[rowsK + end] < first[s + 1]) end++;
  for (let c = from; c < end; c += 2) {
    const two = c + 1 < end;
    outerColumns(blocks, baseK, heightK, widthK, c, two, strip);
    const size = heightK - c;
    spread(blocks, blockStart[s] + (rows[rowsK + c] - first[s]) * heightS, rows, rowsK + c, size, position, strip, 0);
    if (two) {
      spread(
        blocks,
        blockStart[s] + (rows[rowsK + c + 1] - first[s]) * heightS,
        rows,
        rowsK + c + 1,
        size - 1,
        position,
        strip,
        size + 1,
      );
    }
  }
  return end;
}

/** strip = rows c ... of block k times its row c (and its row c + 1, in the second half of the strip). */
function outerColumns(
  blocks: Float64Array,
  base: number,
  height: number,
  width: number,
  c: number,
  two: boolean,
  strip: Float64Array,
): void {
  const size = height - c;
  strip.fill(0, 0, 2 * size);
  let j = 0;
  for (; j + 1 < width; j += 2) {
    const p = base + j * height + c;
    const q = p + height;
    const a0 = blocks[p];
    const b0 = blocks[q];
    if (two) {
      const a1 = blocks[p + 1];
      const b1 = blocks[q + 1];
      for (let i = 0; i < size; i++) {
        const x = blocks[p + i];
        const y = blocks[q + i];
        strip[i] += a0 * x + b0 * y;
        strip[size + i] += a1 * x + b1 * y;
      }
    } else for (let i = 0; i < size; i++) strip[i] += a0 * blocks[p + i] + b0 * blocks[q + i];
  }
  if (j < width) {
    const p = base + j * height + c;
    const a0 = blocks[p];
    const a1 = two ? blocks[p + 1] : 0;
    for (let i = 0; i < size; i++) {
      const x = blocks[p + i];
      strip[i] += a0 * x;
      if (two) strip[size + i] += a1 * x;
    }
  }
}

function spread(
  blocks: Float64Array,
  column: number,
  rows: Int32Array,
  rowsFrom: number,
  size: number,
  position: Int32Array,
  strip: Float64Array,
  stripFrom: number,
): void {
  for (let i = 0; i < size; i++) blocks[column + position[rows[rowsFrom + i]]] -= strip[stripFrom + i];
}

/** Dense Cholesky of the top square of a block and the triangular solve of what lies below; -1, or the failing column. */
function factorBlock(blocks: Float64Array, base: number, height: number, width: number): number {
  for (let j = 0; j < width; j++) {
    const column = base + j * height;
    let k = 0;
    for (; k + 1 < j; k += 2) {
      const p = base + k * height;
      const q = p + height;
      const a = blocks[p + j];
      const b = blocks[q + j];
      for (let i = j; i < height; i++) blocks[column + i] -= a * blocks[p + i] + b * blocks[q + i];
    }
    if (k < j) {
      const p = base + k * height;
      const a = blocks[p + j];
      for (let i = j; i < height; i++) blocks[column + i] -= a * blocks[p + i];
    }
    const pivot = blocks[column + j];
    if (!(pivot > 0)) return j;
    const scale = 1 / Math.sqrt(pivot);
    for (let i = j; i < height; i++) blocks[column + i] *= scale;
  }
  return -1;
}

/**
 * Solves A x = b with the factor.
 * @param b  Float64Array(n); may be the same array as x
 * @param x  Float64Array(n); overwritten and returned
 */
export function solve(factored: Factor, b: Float64Array, x: Float64Array): Float64Array {
  const { analysis, blocks } = factored;
  const { order, first, rowStart, rows, blockStart } = analysis;
  const y = Float64Array.from(order, (i) => b[i]);
  const superCount = first.length - 1;
  for (let s = 0; s < superCount; s++) {
    const height = rowStart[s + 1] - rowStart[s];
    for (let j = first[s], column = blockStart[s]; j < first[s + 1]; j++, column += height) {
      const d = j - first[s];
      const value = y[j] / blocks[column + d];
      y[j] = value;
      for (let r = d + 1; r < height; r++) y[rows[rowStart[s] + r]] -= blocks[column + r] * value;
    }
  }
  for (let s = superCount - 1; s >= 0; s--) {
    const height = rowStart[s + 1] - rowStart[s];
    for (let j = first[s + 1] - 1; j >= first[s]; j--) {
      const d = j - first[s];
      const column = blockStart[s] + d * height;
      let sum = y[j];
      for (let r = d + 1; r < height; r++) sum -= blocks[column + r] * y[rows[rowStart[s] + r]];
      y[j] = sum / blocks[column + d];
    }
  }
  order.forEach((i, k) => {
    x[i] = y[k];
  });
  return x;
}
