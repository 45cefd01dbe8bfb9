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
  /** n unknowns, z entries; f fronts below. */
  readonly pattern: SymmetricPattern;
  /** Int32Array(n): order[k] is the unknown in place k. */
  readonly order: Int32Array;
  /** Int32Array(n): place[i] is where unknown i went. */
  readonly place: Int32Array;
  /** Int32Array(f + 1): the first column of each front, then n. */
  readonly first: Int32Array;
  /** Int32Array(f): number of rows below the columns of each front. */
  readonly below: Int32Array;
  /** Int32Array(f): first child of each front, -1 where there is none. */
  readonly child: Int32Array;
  /** Int32Array(f): next child of the same parent, -1 where there is none. */
  readonly sibling: Int32Array;
  /** Int32Array(f + 1): where the rows of each front start in `rows` and in `relative`. */
  readonly rowStart: Int32Array;
  /**
   * Rows below the columns of front s: rows[rowStart[s]] ... rows[rowStart[s] + below[s] - 1], rising, then n up to the next
   * multiple of four.
   */
  readonly rows: Int32Array;
  /** Beside each of `rows`, its place among the rows of the parent's front. */
  readonly relative: Int32Array;
  /** Int32Array(f + 1): where the entries of the matrix that belong to each front start in `source` and in `target`. */
  readonly entryStart: Int32Array;
  /** Int32Array(z): number of the entry in the pattern. */
  readonly source: Int32Array;
  /** Int32Array(z): where it goes in the blocks. */
  readonly target: Int32Array;
  /** Int32Array(f + 1): where the block of each front starts. */
  readonly blockStart: Int32Array;
  /** Int32Array(f): where its update starts; it lasts until its parent has taken it. */
  readonly updateStart: Int32Array;
  /** Numbers in all blocks, explicit zeros included. */
  readonly blockSize: number;
  /** Numbers in all updates that live at one time. */
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
 * The symbolic part of a factorisation.
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
      | 'arrange'
      | 'countCouplings'
      | 'startLists'
      | 'listEarlier'
      | 'eliminationTree'
      | 'postorder'
      | 'listLater'
      | 'columnCounts'
      | 'gatherSupernodes'
      | 'mergeChildren'
      | 'childrenOf'
      | 'listRows'
      | 'makeMaps',
      Step<void>
    >,
    Record<'numberFronts' | 'startRows' | 'placeBlocks' | 'placeUpdates' | 'sumOf' | 'sumOfSquares', Step<number>> {}

/**
 * One step after the other in the memory of one instance. Arrays no longer needed give their places to later ones, because
 * the first touch of fresh memory takes time: w0 ... w5 hold one thing after another, and the last maps go over them.
 */
function analyseByKernels(
  kernels: CompiledKernels,
  pattern: SymmetricPattern,
  wantedOrder: Int32Array,
): Omit<Analysis, 'peakBytes'> {
  const { n } = pattern;
  const entries = pattern.row.length;
  let end = 0;
  const take = (count: number): number => {
    const at = end;
    end += 8 * Math.ceil(count / 2);
    return at;
  };
  const takeSome = (many: number, count: number): number[] => Array.from({ length: many }, () => take(count));
  const [start, row] = [take(n + 1), take(entries)];
  const [byPost, byPlace, columns, frontOf, laterStart, lastLeaf] = takeSome(6, n + 1);
  const [first, below, parentFront, rowStart, blockStart, entryStart] = takeSome(6, n + 1);
  const [child, sibling, updateStart, nextRow, seen] = takeSome(5, n + 1);
  const [later, laterEntry] = takeSome(2, entries - n);
  const scratch = end;
  const [w0, w1, w2, w3, w4, w5] = takeSome(6, n + 1);
  const leaves = take(2 * (entries - n));
  const { exports: run, buffer, reserve } = instantiate<Kernels>(kernels, end);
  const put = (array: Int32Array, at: number): void => new Int32Array(buffer(), at, array.length).set(array);
  put(pattern.start, start);
  put(pattern.row, row);

  // The elimination tree.
  const [wanted, wantedPlace, nextEarlier, nextLater, earlierStart, earlier] = [w0, byPost, w1, w5, lastLeaf, later];
  put(wantedOrder, wanted);
  run.invert(n, wanted, wantedPlace);
  run.countCouplings(n, start, row, wantedPlace, nextEarlier, nextLater);
  run.startLists(n, wanted, nextEarlier, earlierStart);
  run.listEarlier(n, start, row, wantedPlace, nextEarlier, earlier);
  const tree = w1;
  run.eliminationTree(n, wanted, earlierStart, earlier, tree, w2);

  // From here on columns are numbered in the postorder, which brings what couples near together in memory.
  const [unknowns, postPlace, parent] = [byPost, byPlace, w3];
  run.postorder(n, wanted, tree, unknowns, parent, postPlace, w2, w4);
  run.startLists(n, unknowns, nextLater, laterStart);
  run.listLater(n, start, row, postPlace, nextLater, later, laterEntry);
  const count = w0;
  run.columnCounts(n, laterStart, later, parent, count, leaves, lastLeaf, w1, w2, w4);
  const [factorEntries, flops] = [run.sumOf(n, count), run.sumOfSquares(n, count)];

  // Fronts.
  const [top, width] = [w1, w2];
  run.gatherSupernodes(n, parent, count, top, width);
  run.mergeChildren(n, parent, count, top, width, columns, frontOf, w4);
  const f = run.numberFronts(
    ...[n, parent, count, top, width, columns, frontOf, first, below, parentFront],
    ...[w4, w5, byPlace],
  );
  const [order, place] = [byPlace, byPost];
  run.arrange(n, unknowns, columns, order);
  run.invert(n, order, place);
  run.childrenOf(f, parentFront, child, sibling);
  const blockSize = run.placeBlocks(f, first, below, blockStart);
  const updateSize = run.placeUpdates(f, below, parentFront, updateStart, w3, w4);

  // Maps.
  const rowCount = run.startRows(f, below, rowStart);
  if (scratch + 4 * rowCount <= leaves) end = scratch;
  const rows = take(rowCount);
  reserve(end);
  run.listRows(n, f, columns, frontOf, below, parentFront, leaves, lastLeaf, rowStart, rows, nextRow, seen);
  const [relative, source, target] = [take(rowCount), row, take(entries)];
  reserve(end);
  run.makeMaps(
    ...[f, start, order, columns, first, below, child, sibling, laterStart, later, laterEntry],
    ...[rowStart, rows, blockStart, relative, entryStart, source, target, frontOf, lastLeaf],
  );
  const memory = buffer();
  const copy = (at: number, length: number): Int32Array => new Int32Array(new Int32Array(memory, at, length));
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
    factorEntries,
    flops,
  };
}
