import { arenaLayout } from './arena-layout.js';
import type { Couplings } from './elimination-tree.js';
import { columnCounts, eliminationTree, postorder, reorderedCouplings, sumUp } from './elimination-tree.js';
import { blockSize, rowStartInBlock, tileCount, updateSize } from './front-layout.js';
import type { Fronts } from './fronts.js';
import { gatherFronts } from './fronts.js';
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

/**
 * @param wanted  Int32Array(n): unknowns in the order of elimination. Kept but for moves that change no entry and no
 *                operation: subtrees of the elimination tree are brought together.
 */
export function analyse(pattern: SymmetricPattern, wanted: Int32Array = minimumDegreeOrder(pattern)): Analysis {
  const { n } = pattern;
  const wantedPlace = inverseOf(wanted);
  const couplings = reorderedCouplings(pattern, wantedPlace);
  const parent = eliminationTree(n, couplings);
  const post = postorder(parent);
  const count = columnCounts(couplings, parent, post);
  const fronts = gatherFronts(parent, post, count);
  const { first, below } = fronts;
  const order = new Int32Array(n);
  for (let j = 0; j < n; j++) order[fronts.place[j]] = wanted[j];
  const { rowStart, rows } = rowsOf(fronts, couplings);
  const { child, sibling } = childrenOf(fronts.parent);
  const blockStart = new Int32Array(below.length + 1);
  const blocksEnd = placeBlocks(first, below, blockStart);
  const shape = {
    pattern,
    order,
    place: inverseOf(order),
    ...{ first, below, child, sibling, rowStart, rows, blockStart },
    relative: relativeRows(fronts, child, sibling, rowStart, rows),
    ...entriesOf(pattern, wanted, fronts, couplings, { rowStart, rows, blockStart }),
    ...placeUpdates(fronts),
    blockSize: blocksEnd,
    ...totals(count),
  };
  return { ...shape, peakBytes: arenaLayout(shape).end };
}

function totals(count: Int32Array): { factorEntries: number; flops: number } {
  let factorEntries = 0;
  let flops = 0;
  for (let j = 0; j < count.length; j++) {
    factorEntries += count[j];
    flops += count[j] * count[j];
  }
  return { factorEntries, flops };
}

function inverseOf(order: Int32Array): Int32Array {
  const inverse = new Int32Array(order.length);
  for (let k = 0; k < order.length; k++) inverse[order[k]] = k;
  return inverse;
}

/** Writes where each block starts and returns where the last ends, which alone is right beyond 2^31. */
function placeBlocks(first: Int32Array, below: Int32Array, blockStart: Int32Array): number {
  let end = 0;
  for (let s = 0; s < below.length; s++) {
    end += blockSize(first[s + 1] - first[s], below[s]);
    blockStart[s + 1] = end;
  }
  return end;
}

function childrenOf(parent: Int32Array): { child: Int32Array; sibling: Int32Array } {
  const child = new Int32Array(parent.length).fill(-1);
  const sibling = new Int32Array(parent.length).fill(-1);
  for (let s = parent.length - 1; s >= 0; s--) {
    if (parent[s] < 0) continue;
    sibling[s] = child[parent[s]];
    child[parent[s]] = s;
  }
  return { child, sibling };
}

/**
 * Rows of all fronts at once: place k is a row of the fronts of its earlier couplings and of all on the way from there to its
 * own. Taken in rising order, so that each front's rows rise.
 */
function rowsOf(fronts: Fronts, couplings: Couplings): { rowStart: Int32Array; rows: Int32Array } {
  const { place, frontOf, below, parent } = fronts;
  const { earlierStart, earlier } = couplings;
  const n = place.length;
  const frontCount = below.length;
  const rowStart = new Int32Array(frontCount + 1);
  for (let s = 0; s < frontCount; s++) rowStart[s + 1] = 4 * tileCount(below[s]);
  sumUp(rowStart);
  const rows = new Int32Array(rowStart[frontCount]).fill(n);
  const next = rowStart.slice(0, frontCount);
  const seen = new Int32Array(frontCount).fill(-1);
  const columns = inverseOf(place);
  for (let k = 0; k < n; k++) {
    const j = columns[k];
    seen[frontOf[j]] = k;
    for (let p = earlierStart[j]; p < earlierStart[j + 1]; p++) {
      for (let s = frontOf[earlier[p]]; seen[s] !== k; s = parent[s]) {
        rows[next[s]++] = k;
        seen[s] = k;
      }
    }
  }
  return { rowStart, rows };
}

/** The rows of each front among those of its parent's. */
function relativeRows(
  { place, first, below }: Fronts,
  child: Int32Array,
  sibling: Int32Array,
  rowStart: Int32Array,
  rows: Int32Array,
): Int32Array {
  const relative = new Int32Array(rows.length);
  const among = new Int32Array(place.length + 1); // the row of the present front at each place
  for (let s = 0; s < below.length; s++) {
    if (child[s] < 0) continue;
    const width = first[s + 1] - first[s];
    for (let c = 0; c < width; c++) among[first[s] + c] = c;
    for (let i = 0; i < below[s]; i++) among[rows[rowStart[s] + i]] = width + i;
    for (let c = child[s]; c >= 0; c = sibling[c]) {
      for (let p = rowStart[c]; p < rowStart[c] + below[c]; p++) relative[p] = among[rows[p]];
    }
  }
  return relative;
}

/** Entries of the matrix by fronts and columns, and where each goes in the front's block. */
function entriesOf(
  pattern: SymmetricPattern,
  wanted: Int32Array,
  { place, first, below }: Fronts,
  { laterStart, later, laterEntry }: Couplings,
  { rowStart, rows, blockStart }: Pick<Analysis, 'rowStart' | 'rows' | 'blockStart'>,
): Pick<Analysis, 'entryStart' | 'source' | 'target'> {
  const entryStart = new Int32Array(first.length);
  const source = new Int32Array(pattern.row.length);
  const target = new Int32Array(pattern.row.length);
  const columns = inverseOf(place);
  const inBlock = new Int32Array(pattern.n); // by wanted places: where the row of the present front starts
  let e = 0;
  for (let s = 0; s < below.length; s++) {
    const width = first[s + 1] - first[s];
    for (let c = 0; c < width; c++) inBlock[columns[first[s] + c]] = rowStartInBlock(c, width);
    for (let i = 0; i < below[s]; i++) inBlock[columns[rows[rowStart[s] + i]]] = rowStartInBlock(width + i, width);
    for (let c = 0; c < width; c++) {
      const j = columns[first[s] + c];
      const column = blockStart[s] + 4 * c;
      source[e] = pattern.start[wanted[j]];
      target[e++] = column + inBlock[j];
      for (let q = laterStart[j]; q < laterStart[j + 1]; q++) {
        source[e] = laterEntry[q];
        target[e++] = column + inBlock[later[q]];
      }
    }
    entryStart[s + 1] = e;
  }
  return { entryStart, source, target };
}

/**
 * Updates stand on two stacks, one for the fronts at even and one for those at odd depth of the tree: when a front makes
 * its own, its children's are the uppermost of the other stack.
 */
function placeUpdates({ below, parent }: Fronts): { updateStart: Int32Array; updateSize: number } {
  const frontCount = below.length;
  const odd = new Uint8Array(frontCount);
  for (let s = frontCount - 1; s >= 0; s--) odd[s] = parent[s] < 0 ? 0 : 1 - odd[parent[s]];
  const updateStart = new Int32Array(frontCount);
  const childrens = new Float64Array(frontCount); // room the children's updates take
  const height = [0, 0];
  const highest = [0, 0];
  for (let s = 0; s < frontCount; s++) {
    const stack = odd[s];
    const size = updateSize(below[s]);
    updateStart[s] = height[stack];
    height[stack] += size;
    highest[stack] = Math.max(highest[stack], height[stack]);
    height[1 - stack] -= childrens[s];
    if (parent[s] >= 0) childrens[parent[s]] += size;
  }
  for (let s = 0; s < frontCount; s++) if (odd[s] === 1) updateStart[s] += highest[0];
  return { updateStart, updateSize: highest[0] + highest[1] };
}
