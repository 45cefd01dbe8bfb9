/**
 * How the numbers of a front lie in memory. A front has `width` columns, whose rows are first the columns themselves, then
 * `below` others. Everything is in tiles of four rows, filled up with zero rows; within a tile a column's four numbers lie
 * together, the columns one after another.
 *
 * Its block, the part of the factor: row tile I of the triangle has min(4 I + 4, width) columns, after them come the tiles
 * of the rows below, of all columns. The diagonal holds reciprocals.
 *
 * Its update, what it hands to its parent: the lower triangle of the rows below among themselves, by panels of four
 * columns, each column from the panel's diagonal tile down.
 */

/** Tiles that hold so many rows. */
export const tileCount = (rows: number): number => (rows + 3) >> 2;

/** Where row tile I of a block's triangle starts. */
export const triangleStart = (tile: number): number => 8 * tile * (tile + 1);

/** Numbers in the triangle of a block: the rows below start there. */
export const triangleSize = (width: number): number => triangleStart(width >> 2) + ((width & 3) === 0 ? 0 : 4 * width);

export const blockSize = (width: number, below: number): number => triangleSize(width) + 4 * width * tileCount(below);

/** Where row `row` of a block lies, its first column; later columns follow at steps of four. */
export function rowStartInBlock(row: number, width: number): number {
  if (row < width) return triangleStart(row >> 2) + (row & 3);
  const q = row - width;
  return triangleSize(width) + 4 * width * (q >> 2) + (q & 3);
}

/** Where panel J of an update of so many tiles starts; its columns are 4 (tiles - J) apart. */
export const panelStart = (panel: number, tiles: number): number => 16 * tiles * panel - 8 * panel * (panel - 1);

export const updateSize = (below: number): number => panelStart(tileCount(below), tileCount(below));
