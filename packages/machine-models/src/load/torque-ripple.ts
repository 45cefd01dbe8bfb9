const GOLDEN = (Math.sqrt(5) - 1) / 2;

/**
 * Highest less lowest value of a piecewise smooth function of the electrical angle: looked at eight times or more in each
 * wavelength and in each piece, then closed in on by golden section next to the extreme looks of each piece.
 *
 * @param pieces neighbouring angles between which the function is smooth
 * @param highest order of the waves that make it up
 */
export function range(
  value: (theta: number, piece: number) => number,
  pieces: readonly (readonly [from: number, to: number])[],
  highest: number,
): number {
  let [bottom, top] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  pieces.forEach(([from, to], piece) => {
    const looks = Math.ceil(8 + (8 * highest * (to - from)) / (2 * Math.PI));
    const at = (i: number): number => (i >= looks ? to : from + ((to - from) * Math.max(i, 0)) / looks);
    const heights = Array.from({ length: looks + 1 }, (_, i) => value(at(i), piece));
    const high = heights.indexOf(Math.max(...heights));
    const low = heights.indexOf(Math.min(...heights));
    top = Math.max(
      top,
      topWithin((theta) => value(theta, piece), at(high - 1), at(high + 1)),
    );
    bottom = Math.min(bottom, -topWithin((theta) => -value(theta, piece), at(low - 1), at(low + 1)));
  });
  return top - bottom;
}

function topWithin(height: (theta: number) => number, from: number, to: number): number {
  let [low, high] = [from, to];
  let best = Math.max(height(low), height(high));
  for (let i = 0; i < 24; i++) {
    const left = high - GOLDEN * (high - low);
    const right = low + GOLDEN * (high - low);
    const [atLeft, atRight] = [height(left), height(right)];
    best = Math.max(best, atLeft, atRight);
    if (atLeft > atRight) high = right;
    else low = left;
  }
  return best;
}
