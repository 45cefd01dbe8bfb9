/** The grid has 2^12 cells a side at most, so that keys have 24 binary digits, sorted by half of them at a time. */
const MOST_DIGITS = 12;

/**
 * Order of places along Morton's curve, which takes the quarters of a square in turn and each of them the same way, so
 * that neighbours in the list are mostly neighbours in the plane (Morton, A computer oriented geodetic data base and a new
 * technique in file sequencing, IBM, 1966). Linear time: places in one cell of a grid, about as many cells a side as there
 * are places and 4096 at most, keep their order.
 * @param xy  Float64Array(2n), finite
 * @returns Int32Array(n): the numbers of the places, first to last
 */
export function zOrder(xy: Float64Array): Int32Array {
  const n = xy.length / 2;
  const digits = Math.min(MOST_DIGITS, 32 - Math.clz32(n));
  const keys = cellKeys(xy, 1 << digits);
  const order = new Int32Array(n);
  for (let i = 0; i < n; i++) order[i] = i;
  return sortedBy(keys, digits, digits, sortedBy(keys, 0, digits, order));
}

/** Int32Array(n): where on the curve through a grid of `side` by `side` cells each place lies. */
function cellKeys(xy: Float64Array, side: number): Int32Array {
  let x0 = Infinity;
  let x1 = -Infinity;
  let y0 = Infinity;
  let y1 = -Infinity;
  for (let i = 0; i < xy.length; i += 2) {
    const x = xy[i];
    const y = xy[i + 1];
    if (x < x0) x0 = x;
    if (x > x1) x1 = x;
    if (y < y0) y0 = y;
    if (y > y1) y1 = y;
  }
  const size = Math.max(x1 - x0, y1 - y0);
  const cells = size > 0 ? (side - 1) / size : 0;
  const keys = new Int32Array(xy.length / 2);
  for (let i = 0; i < keys.length; i++) {
    keys[i] = spread((xy[2 * i] - x0) * cells) | (spread((xy[2 * i + 1] - y0) * cells) << 1);
  }
  return keys;
}

/** The binary digits of the whole part of a number from 0 to 2^16, each moved to twice its place. */
function spread(value: number): number {
  let digits = value | 0;
  digits = (digits | (digits << 8)) & 0x00ff00ff;
  digits = (digits | (digits << 4)) & 0x0f0f0f0f;
  digits = (digits | (digits << 2)) & 0x33333333;
  return (digits | (digits << 1)) & 0x55555555;
}

/** The list sorted by so many binary digits of the keys, those from `shift` on; equal ones stay in order. */
function sortedBy(keys: Int32Array, shift: number, digits: number, list: Int32Array): Int32Array {
  const mask = (1 << digits) - 1;
  const start = new Int32Array(mask + 2);
  for (let i = 0; i < keys.length; i++) start[1 + ((keys[i] >> shift) & mask)]++;
  for (let d = 0; d < mask; d++) start[d + 1] += start[d];
  const sorted = new Int32Array(list.length);
  for (let i = 0; i < list.length; i++) sorted[start[(keys[list[i]] >> shift) & mask]++] = list[i];
  return sorted;
}
