import { bytes } from '../kernels/cholesky.wasm.js';
import { bytes as fusedBytes } from '../kernels/cholesky-fused.wasm.js';
import type { CompiledKernels } from '../kernels/instantiate.js';
import { compileKernels } from '../kernels/instantiate.js';
import type { Analysis } from './analysis.js';
import type { Arena } from './arena.js';
import { arenaFor } from './arena.js';
import { factorPlain, solvePlain } from './cholesky-plain.js';
import { rowStartInBlock } from './front-layout.js';

/** A = L L^T in the order of the analysis. Serves until its memory is given to another. */
export interface Factor {
  /** It was made by. */
  readonly analysis: Analysis;
  /** Float64Array(blockSize): L by fronts, as `front-layout.ts` tells, the diagonal by its reciprocals. */
  readonly blocks: Float64Array;
  /** For `factor` and the solves alone. */
  readonly memory: FactorMemory;
}

/** What a factor lives in. Only `factor` and the solves look into it. */
interface FactorMemory {
  /** Given on to another factor: this one is void. */
  given: boolean;
  /** Undefined where the plain twin serves. */
  readonly arena: Arena | undefined;
  /** Of the plain twin. */
  readonly updates: Float64Array;
}

/** Why there is no factor: the matrix is not positive definite. */
export interface NotPositive {
  /** The unknown whose pivot was the first found not above 0. */
  readonly unknown: number;
  /** That pivot; NaN where the matrix holds what is no number. */
  readonly pivot: number;
}

/** In what memory a factor is made, and by what. */
export interface FactorOptions {
  /** A factor no longer needed: its memory serves the new one, and it is void from now on. */
  readonly reuse?: Factor | undefined;
  /** Without WebAssembly; the answers are those of `unfusedKernels` to the bit. */
  readonly plain?: boolean;
  /** Kernels to use in place of the fastest the host has. */
  readonly kernels?: CompiledKernels | undefined;
}

/** With fused products where the host has them: twice the arithmetic a cycle, and one rounding where others take two. */
const fastest = compileKernels(fusedBytes) ?? compileKernels(bytes);

/** Kernels that round each product and each sum, as the plain twin does. Undefined where the host has no SIMD. */
export function unfusedKernels(): CompiledKernels | undefined {
  return compileKernels(bytes);
}

/**
 * Operations below which making an instance takes longer than the factorisation. The matrix alone decides, not whether there
 * is one already: the same matrix gives the same bits whatever came before it.
 */
const SMALL = 30_000;

/**
 * Numeric factorisation.
 *
 * @param values  Float64Array(z): the lower triangle in the order of the pattern
 * @returns the factor, or where the matrix was found not positive definite
 * @throws RangeError where that takes more memory than 32-bit addresses reach, or than the host can give, and Error where the
 * memory to be used again was given to another factor before
 */
export function factor(analysis: Analysis, values: Float64Array, options: FactorOptions = {}): Factor | NotPositive {
  const { reuse, kernels = fastest, plain = analysis.flops < SMALL } = options;
  expectRoom(analysis);
  if (reuse !== undefined) {
    expectHeld(reuse);
    reuse.memory.given = true;
  }
  if (plain || kernels === undefined) return factorInNumbers(analysis, values, reuse);
  const arena = arenaFor(kernels, analysis, reuse?.memory.arena);
  const { layout, instance } = arena;
  const memory = instance.buffer();
  new Float64Array(memory, layout.values, values.length).set(values);
  const failed = instance.exports.factorise(
    layout.records,
    analysis.below.length,
    layout.source,
    layout.target,
    layout.values,
    layout.blocks,
    layout.blocks + 8 * analysis.blockSize,
  );
  const blocks = new Float64Array(memory, layout.blocks, analysis.blockSize);
  if (failed >= 0) return notPositive(analysis, blocks, failed);
  return { analysis, blocks, memory: { given: false, arena, updates: new Float64Array(0) } };
}

/** Bytes; a little below the 4 GiB that 32-bit addresses reach. */
const MOST_BYTES = 3.9 * 2 ** 30;

function expectRoom({ pattern, peakBytes }: Analysis): void {
  if (peakBytes <= MOST_BYTES) return;
  const gib = (peakBytes / 2 ** 30).toFixed(1);
  throw new RangeError(`the factor of ${pattern.n} unknowns takes ${gib} GiB of memory; at most 3.9 GiB can be had`);
}

/** By the plain twin. */
function factorInNumbers(analysis: Analysis, values: Float64Array, reuse: Factor | undefined): Factor | NotPositive {
  const old = reuse?.memory.arena === undefined ? reuse : undefined;
  const blocks = old?.blocks.length === analysis.blockSize ? old.blocks : new Float64Array(analysis.blockSize);
  const updates =
    old !== undefined && old.memory.updates.length >= analysis.updateSize
      ? old.memory.updates
      : new Float64Array(analysis.updateSize);
  const failed = factorPlain(analysis, values, blocks, updates);
  if (failed >= 0) return notPositive(analysis, blocks, failed);
  return { analysis, blocks, memory: { given: false, arena: undefined, updates } };
}

function notPositive({ order, first, blockStart }: Analysis, blocks: Float64Array, place: number): NotPositive {
  let s = 0;
  while (first[s + 1] <= place) s++;
  const column = place - first[s];
  const pivot = blocks[blockStart[s] + rowStartInBlock(column, first[s + 1] - first[s]) + 4 * column];
  return { unknown: order[place], pivot };
}

/**
 * Solves A x = b with the factor.
 * @param b  Float64Array(n); may be the same array as x
 * @param x  Float64Array(n); overwritten and returned
 * @throws Error for a factor whose memory was given to another
 */
export function solve(factored: Factor, b: Float64Array, x: Float64Array): Float64Array {
  expectHeld(factored);
  const { analysis, blocks, memory } = factored;
  const { order, pattern, below } = analysis;
  if (memory.arena === undefined) {
    const y = new Float64Array(pattern.n + 1);
    for (let k = 0; k < pattern.n; k++) y[k] = b[order[k]];
    solvePlain(analysis, blocks, y);
    for (let k = 0; k < pattern.n; k++) x[order[k]] = y[k];
    return x;
  }
  const { layout, instance } = memory.arena;
  const y = new Float64Array(instance.buffer(), layout.y, pattern.n + 1);
  y[pattern.n] = 0;
  for (let k = 0; k < pattern.n; k++) y[k] = b[order[k]];
  instance.exports.solveOne(layout.records, below.length, layout.y, layout.sums);
  for (let k = 0; k < pattern.n; k++) x[order[k]] = y[k];
  return x;
}

/**
 * Solves A X = B for several right-hand sides, four at a time.
 * @param b      Float64Array(count n): the right-hand sides one after another; may be the same array as x
 * @param x      Float64Array(count n): the solutions likewise; overwritten and returned
 * @throws Error for a factor whose memory was given to another
 */
export function solveMany(factored: Factor, b: Float64Array, x: Float64Array, count: number): Float64Array {
  expectHeld(factored);
  const { n } = factored.analysis.pattern;
  const { arena } = factored.memory;
  let done = 0;
  if (arena !== undefined) {
    for (; count - done > 1; done += Math.min(4, count - done)) {
      solveUpToFour(factored.analysis, arena, b, x, done, Math.min(4, count - done));
    }
  }
  for (; done < count; done++) {
    solve(factored, b.subarray(n * done, n * (done + 1)), x.subarray(n * done, n * (done + 1)));
  }
  return x;
}

/** Right-hand sides number `from` ... `from` + count - 1 of b, side by side in the arena's memory. */
function solveUpToFour(
  { order, pattern: { n }, below }: Analysis,
  { layout, instance }: Arena,
  b: Float64Array,
  x: Float64Array,
  from: number,
  count: number,
): void {
  const y = new Float64Array(instance.buffer(), layout.y, 4 * (n + 1)).fill(0);
  for (let r = 0; r < count; r++) {
    const at = n * (from + r);
    for (let k = 0; k < n; k++) y[4 * k + r] = b[at + order[k]];
  }
  instance.exports.solveFour(layout.records, below.length, layout.y);
  for (let r = 0; r < count; r++) {
    const at = n * (from + r);
    for (let k = 0; k < n; k++) x[at + order[k]] = y[4 * k + r];
  }
}

function expectHeld({ memory }: Factor): void {
  if (memory.given) throw new Error('the memory of this factor was given to another one');
}
