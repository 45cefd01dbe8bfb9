import { bytes } from '../kernels/analysis.wasm.js';
import type { CompiledKernels } from '../kernels/instantiate.js';
import { compileKernels, instantiate } from '../kernels/instantiate.js';
import { analysePlain } from './analysis-plain.js';
import { arenaLayout } from './arena-layout.js';
import { minimumDegreeOrder } from './minimum-degree.js';
import type { SymmetricPattern } from './pattern.js';

/**
 * Everything about a factor that depends on the pattern alone; serves any number of factorisations. Plain data.
 *
 * The factor is made front by front, children before parents (multifrontal method; Duff, Reid, The multifrontal solution of
 * indefinite sparse symmetric linear equations, 1983): front s eliminates the places first[s] ... first[s + 1] - 1 of the
 * reordered matrix, has below[s] rows more, and leaves its block of the factor and an update for its parent, laid out as
 * `front-layout.ts` tells.
 */
export interface Analysis {
  readonly pattern: SymmetricPattern;
  /** Int32Array(n): order[k] is the unknown in place k. */
  readonly order: Int32Array;
  /** Int32Array(n): place[i] is where unknown i went. */
  readonly place: Int32Array;
  /** Int32Array(f + 1) and Int32Array(f): columns of each front, and the number of rows below them. */
  readonly first: Int32Array;
  readonly below: Int32Array;
  /** Int32Array(f): first child of each front and next child of the same parent, -1 where there is none. */
  readonly child: Int32Array;
  readonly sibling: Int32Array;
  /**
   * Rows below the columns of front s: rows[rowStart[s]] ... rows[rowStart[s] + below[s] - 1], rising, then n up to the next
   * multiple of four; and, beside each, its place among the rows of the parent's front.
   */
  readonly rowStart: Int32Array;
  readonly rows: Int32Array;
  readonly relative: Int32Array;
  /** Entries of the matrix by fronts, entryStart[s] ...: number in the pattern, and where it goes in the blocks. */
  readonly entryStart: Int32Array;
  readonly source: Int32Array;
  readonly target: Int32Array;
  /** Int32Array(f + 1): where the block of each front starts. */
  readonly blockStart: Int32Array;
  /** Int32Array(f): where its update starts; it lasts until its parent has taken it. */
  readonly updateStart: Int32Array;
  /** Numbers in all blocks, explicit zeros included, and room for the updates that live at one time. */
  readonly blockSize: number;
  readonly updateSize: number;
  /** Entries of the factor's lower triangle that are not zero but by cancellation. */
  readonly factorEntries: number;
  /** Multiplications and additions that these take: the sum of the squares of the columns' entries. */
  readonly flops: number;
  /** Memory a factorisation works in: maps, factor and updates. `factor` refuses what 32-bit addresses cannot reach. */
  readonly peakBytes: number;
}

const compiled = compileKernels(bytes);

/**
 * @param wanted  Int32Array(n): unknowns in the order of elimination. Kept but for moves that change no entry and no
 *                operation: subtrees of the elimination tree are brought together.
 */
export function analyse(pattern: SymmetricPattern, wanted: Int32Array = minimumDegreeOrder(pattern)): Analysis {
  if (compiled === undefined) return plainAnalyse(pattern, wanted);
  const shape = analyseByKernels(compiled, pattern, wanted);
  return { ...shape, peakBytes: arenaLayout(shape).end };
}

/** The same analysis without WebAssembly. */
export function plainAnalyse(pattern: SymmetricPattern, wanted: Int32Array): Analysis {
  const shape = analysePlain(pattern, wanted);
  return { ...shape, peakBytes: arenaLayout(shape).end };
}

/** A kernel of wasm/analysis.ts: first a count or two, then byte addresses. */
type Step<Result> = (...sizesAndAddresses: number[]) => Result;
interface Kernels
  extends Record<
      | 'invert'
      | 'reorder'
      | 'eliminationTree'
      | 'postorder'
      | 'columnCounts'
      | 'gatherSupernodes'
      | 'mergeChildren'
      | 'arrange'
      | 'childrenOf'
      | 'listRows'
      | 'makeMaps',
      Step<void>
    >,
    Record<'numberFronts' | 'startRows' | 'placeBlocks' | 'placeUpdates' | 'sumOf' | 'sumOfSquares', Step<number>> {}

/**
 * One step after the other in the memory of one instance, which grows as lengths become known. Arrays no longer needed give
 * their places to later ones, because the first touch of fresh memory takes time.
 */
function analyseByKernels(
  kernels: CompiledKernels,
  pattern: SymmetricPattern,
  wantedOrder: Int32Array,
): Omit<Analysis, 'peakBytes'> {
  const { n, start, row } = pattern;
  const entries = row.length;
  let end = 0;
  const take = (count: number): number => {
    const at = end;
    end += 8 * Math.ceil(count / 2);
    return at;
  };
  const takeSome = (many: number, count: number): number[] => Array.from({ length: many }, () => take(count));
  const [starts, patternRows] = [take(n + 1), take(entries)];
  const [later, laterEntry, earlier] = takeSome(3, entries);
  const [laterStart, earlierStart, wanted, columns, parent, post, count, frontOf] = takeSome(8, n + 2);
  const [first, below, parentFront, top, width, w0, w1, w2, w3, w4] = takeSome(10, n + 1);
  const time = take(2 * n);
  const { exports: run, buffer, reserve } = instantiate<Kernels>(kernels, end);
  const put = (array: Int32Array, at: number): void => new Int32Array(buffer(), at, array.length).set(array);
  put(start, starts);
  put(row, patternRows);
  put(wantedOrder, wanted);

  run.invert(n, wanted, w0);
  run.reorder(n, starts, patternRows, w0, earlierStart, earlier, laterStart, later, laterEntry);
  run.eliminationTree(n, earlierStart, earlier, parent, w0);
  run.postorder(n, parent, post, w0, w1);
  run.columnCounts(n, laterStart, later, parent, post, count, w0, w1, w2, w3);
  run.gatherSupernodes(n, parent, post, count, top, width);
  run.mergeChildren(n, parent, post, count, top, width, w0, w1, time);
  const placeOf = time;
  const f = run.numberFronts(
    ...[n, parent, post, count, top, width, placeOf, frontOf, first, below, parentFront],
    ...[w0, w1, w2, w3, w4],
  );
  run.invert(n, placeOf, columns);
  const [order, place] = [post, placeOf];
  run.arrange(n, wanted, columns, order);
  run.invert(n, order, place);

  const [child, sibling, rowStart, blockStart, entryStart, updateStart] = takeSome(6, f + 1);
  const room = take(2 * f);
  reserve(end);
  const rowCount = run.startRows(f, below, rowStart);
  const [rows, relative] = takeSome(2, rowCount);
  reserve(end);
  run.childrenOf(f, parentFront, child, sibling);
  const blockSize = run.placeBlocks(f, first, below, blockStart);
  run.listRows(n, f, columns, frontOf, below, parentFront, earlierStart, earlier, rowStart, rows, w0, w1);
  const [source, target] = [earlier, patternRows];
  run.makeMaps(
    ...[f, starts, wanted, columns, first, below, child, sibling, laterStart, later, laterEntry],
    ...[rowStart, rows, blockStart, relative, entryStart, source, target, w0, w1],
  );
  const updateSize = run.placeUpdates(f, below, parentFront, updateStart, w0, room);
  const memory = buffer();
  const copy = (at: number, length: number): Int32Array => new Int32Array(memory, at, length).slice();
  return {
    pattern,
    order: copy(order, n),
    place: copy(place, n),
    first: copy(first, f + 1),
    below: copy(below, f),
    child: copy(child, f),
    sibling: copy(sibling, f),
    rowStart: copy(rowStart, f + 1),
    rows: copy(rows, rowCount),
    relative: copy(relative, rowCount),
    entryStart: copy(entryStart, f + 1),
    source: copy(source, entries),
    target: copy(target, entries),
    blockStart: copy(blockStart, f + 1),
    updateStart: copy(updateStart, f),
    blockSize,
    updateSize,
    factorEntries: run.sumOf(n, count),
    flops: run.sumOfSquares(n, count),
  };
}
