/** Digits of the grid: 2^12 cells a side, so that keys have 24 bits and two passes of 12 sort them. */
const LEVELS = 12;
const DIGITS = 1 << LEVELS;

/**
 * Order of places along the Hilbert curve over the square that holds them all (Hilbert, Ueber die stetige Abbildung einer
 * Linie auf ein Flaechenstueck, Math. Ann. 38, 1891): neighbours in the list are neighbours in the plane. Linear time;
 * places in one cell of a grid of 4096 a side keep the order they came in.
 * @param xy  Float64Array(2n), finite
 * @returns Int32Array(n): the numbers of the places, first to last
 */
export function hilbertOrder(xy: Float64Array): Int32Array {
  const keys = hilbertKeys(xy);
  const order = new Int32Array(keys.length);
  for (let i = 0; i < order.length; i++) order[i] = i;
  return sortedBy(keys, LEVELS, sortedBy(keys, 0, order));
}

/** Int32Array(n): distance along the curve of the cell each place lies in. */
function hilbertKeys(xy: Float64Array): Int32Array {
  let x0 = Infinity;
  let x1 = -Infinity;
  let y0 = Infinity;
  let y1 = -Infinity;
  for (let i = 0; i < xy.length; i += 2) {
    x0 = Math.min(x0, xy[i]);
    x1 = Math.max(x1, xy[i]);
    y0 = Math.min(y0, xy[i + 1]);
    y1 = Math.max(y1, xy[i + 1]);
  }
  const size = Math.max(x1 - x0, y1 - y0);
  const scale = size > 0 ? (DIGITS * (1 - 1e-9)) / size : 0;
  const keys = new Int32Array(xy.length / 2);
  for (let i = 0; i < keys.length; i++) {
    keys[i] = hilbertKey(((xy[2 * i] - x0) * scale) | 0, ((xy[2 * i + 1] - y0) * scale) | 0);
  }
  return keys;
}

/** Distance along the curve of cell (x, y): quarter by quarter, each turned so that its curve looks like the whole one. */
function hilbertKey(x: number, y: number): number {
  let key = 0;
  for (let side = DIGITS >> 1; side > 0; side >>= 1) {
    const right = (x & side) === 0 ? 0 : 1;
    const upper = (y & side) === 0 ? 0 : 1;
    key = 4 * key + ((3 * right) ^ upper);
    if (upper === 1) continue;
    const flip = right === 1 ? DIGITS - 1 : 0;
    const across = x ^ flip;
    x = y ^ flip;
    y = across;
  }
  return key;
}

/** The list sorted by one digit of the keys, stably. */
function sortedBy(keys: Int32Array, shift: number, list: Int32Array): Int32Array {
  const start = new Int32Array(DIGITS + 1);
  for (let i = 0; i < keys.length; i++) start[1 + ((keys[i] >> shift) & (DIGITS - 1))]++;
  for (let d = 0; d < DIGITS; d++) start[d + 1] += start[d];
  const sorted = new Int32Array(list.length);
  for (let i = 0; i < list.length; i++) sorted[start[(keys[list[i]] >> shift) & (DIGITS - 1)]++] = list[i];
  return sorted;
}
