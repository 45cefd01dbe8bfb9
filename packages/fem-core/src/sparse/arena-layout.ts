/** 32-bit words that tell the kernels of a front. */
export const RECORD_WORDS = 12;
/** What the kernels may read beyond a tile that is not full. */
const SLACK = 256;

/** Where things lie in the memory of an arena, bytes. */
export interface ArenaLayout {
  readonly records: number;
  readonly rows: number;
  readonly relative: number;
  readonly offsets: number;
  readonly source: number;
  readonly target: number;
  readonly values: number;
  /** Room for four right-hand sides. */
  readonly y: number;
  /** Two numbers a column of the widest front. */
  readonly sums: number;
  readonly blocks: number;
  readonly updates: number;
  readonly end: number;
}

/** What of an `Analysis` decides about memory. */
interface Sizes {
  readonly first: Int32Array;
  readonly below: Int32Array;
  readonly rows: Int32Array;
  readonly source: Int32Array;
  readonly blockSize: number;
  readonly updateSize: number;
}

/** Pure arithmetic: also tells how much memory a factorisation takes. */
export function arenaLayout(sizes: Sizes): ArenaLayout {
  const { first, below, rows, source, blockSize, updateSize } = sizes;
  const n = first[below.length];
  let end = 0;
  const take = (bytes: number): number => {
    const at = end;
    end = 16 * Math.ceil((end + bytes) / 16);
    return at;
  };
  let widest = 0;
  for (let s = 0; s < below.length; s++) widest = Math.max(widest, first[s + 1] - first[s]);
  return {
    records: take(16 + 4 * RECORD_WORDS * below.length) + 16, // no record stands at 0, which says that there is none
    rows: take(4 * rows.length),
    relative: take(4 * rows.length),
    offsets: take(4 * rows.length),
    source: take(4 * source.length),
    target: take(4 * source.length),
    values: take(8 * source.length),
    y: take(32 * (n + 1)),
    sums: take(16 * widest),
    blocks: take(8 * blockSize + SLACK),
    updates: take(8 * updateSize),
    end,
  };
}
