/**
 * The steps of an analysis in plain TypeScript: the twin of wasm/analysis.ts, which gives the same numbers. What they are is
 * told at `Analysis`.
 */
import type { Counts } from './elimination-tree.js';
import {
  columnCounts,
  countCouplings,
  eliminationTree,
  listEarlier,
  listLater,
  postorder,
  startLists,
} from './elimination-tree.js';
import { blockSize, rowStartInBlock, tileCount, updateSize } from './front-layout.js';
import type { Fronts } from './fronts.js';
import { gatherFronts } from './fronts.js';
import type { SymmetricPattern } from './pattern.js';

/** All of an `Analysis` but how much memory it takes. */
export function analysePlain(pattern: SymmetricPattern, wanted: Int32Array) {
  const wantedPlace = inverseOf(wanted);
  const { earlierCount, laterCount } = countCouplings(pattern, wantedPlace);
  const earlierStart = startLists(wanted, earlierCount);
  const earlier = listEarlier(pattern, wantedPlace, earlierCount);
  const tree = eliminationTree(wanted, earlierStart, earlier);
  // From here on columns are numbered in the postorder, which brings what couples near together in memory.
  const { post, place, postParent } = postorder(wanted, tree);
  const laterStart = startLists(post, laterCount);
  const couplings = { laterStart, ...listLater(pattern, place, laterCount) };
  const counts = columnCounts(laterStart, couplings.later, postParent);
  const fronts = gatherFronts(postParent, counts.count);
  const { first, below } = fronts;
  const order = fronts.columns.map((j) => post[j]);
  const { rowStart, rows } = rowsOf(fronts, counts);
  const { child, sibling } = childrenOf(fronts.parent);
  const blockStart = new Int32Array(below.length + 1);
  const blocksEnd = placeBlocks(first, below, blockStart);
  return {
    pattern,
    order,
    place: inverseOf(order),
    ...{ first, below, child, sibling, rowStart, rows, blockStart },
    relative: relativeRows(fronts, child, sibling, rowStart, rows),
    ...entriesOf(pattern, order, fronts, couplings, { rowStart, rows, blockStart }),
    ...placeUpdates(fronts),
    blockSize: blocksEnd,
    ...totals(counts.count),
  };
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
 * Rows of all fronts at once: place k is a row of the fronts of its subtree's leaves and of all on the way from there to its
 * own. Taken in rising order, so that each front's rows rise.
 */
function rowsOf(
  { columns, frontOf, below, parent }: Fronts,
  { leaves, lastLeaf }: Counts,
): { rowStart: Int32Array; rows: Int32Array } {
  const n = columns.length;
  const frontCount = below.length;
  const rowStart = new Int32Array(frontCount + 1);
  for (let s = 0; s < frontCount; s++) rowStart[s + 1] = rowStart[s] + 4 * tileCount(below[s]);
  const rows = new Int32Array(rowStart[frontCount]).fill(n);
  const next = rowStart.slice();
  const seen = new Int32Array(frontCount).fill(-1); // the last row each front was met for
  for (let k = 0; k < n; k++) {
    const j = columns[k];
    seen[frontOf[j]] = k;
    for (let leaf = lastLeaf[j]; leaf >= 0; leaf = leaves[leaf + 1]) {
      for (let s = frontOf[leaves[leaf]]; seen[s] !== k; s = parent[s]) {
        rows[next[s]++] = k;
        seen[s] = k;
      }
    }
  }
  return { rowStart, rows };
}

/** The rows of each front among those of its parent's. */
function relativeRows(
  { columns, first, below }: Fronts,
  child: Int32Array,
  sibling: Int32Array,
  rowStart: Int32Array,
  rows: Int32Array,
): Int32Array {
  const relative = new Int32Array(rows.length);
  const among = new Int32Array(columns.length + 1); // the row of the present front at each place
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
  order: Int32Array,
  { columns, first, below }: Fronts,
  { laterStart, later, laterEntry }: { laterStart: Int32Array; later: Int32Array; laterEntry: Int32Array },
  { rowStart, rows, blockStart }: { rowStart: Int32Array; rows: Int32Array; blockStart: Int32Array },
): { entryStart: Int32Array; source: Int32Array; target: Int32Array } {
  const entryStart = new Int32Array(first.length);
  const source = new Int32Array(pattern.row.length);
  const target = new Int32Array(pattern.row.length);
  const inBlock = new Int32Array(pattern.n); // by columns: where the row of the present front starts
  let e = 0;
  for (let s = 0; s < below.length; s++) {
    const width = first[s + 1] - first[s];
    for (let c = 0; c < width; c++) inBlock[columns[first[s] + c]] = rowStartInBlock(c, width);
    for (let i = 0; i < below[s]; i++) inBlock[columns[rows[rowStart[s] + i]]] = rowStartInBlock(width + i, width);
    for (let c = 0; c < width; c++) {
      const j = columns[first[s] + c];
      const column = blockStart[s] + 4 * c;
      source[e] = pattern.start[order[first[s] + c]];
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
