/**
 * Slopes at the rows of a rising table y(x), for a piecewise cubic that rises on every piece: inside, the weighted harmonic
 * mean of the neighbouring chords (Fritsch, Butland, A method for constructing local monotone piecewise cubic interpolants,
 * SIAM J. Sci. Stat. Comput. 5, 1984); at either end, that of the parabola through the last three rows, kept between a
 * quarter and three times the last chord.
 *
 * @param x  Float64Array(k), strictly rising, k >= 2
 * @param y  Float64Array(k), strictly rising
 */
export function monotoneSlopes(x: Float64Array, y: Float64Array): Float64Array {
  const last = x.length - 1;
  const slope = new Float64Array(last + 1);
  const chord = (i: number): number => (y[i + 1] - y[i]) / (x[i + 1] - x[i]);
  for (let i = 1; i < last; i++) {
    const d0 = x[i] - x[i - 1];
    const d1 = x[i + 1] - x[i];
    const w0 = 2 * d1 + d0;
    const w1 = d1 + 2 * d0;
    slope[i] = (w0 + w1) / (w0 / chord(i - 1) + w1 / chord(i));
  }
  const end = (near: number, next: number, share: number): number =>
    Math.max(0.25 * near, Math.min(3 * near, near + share * (near - next)));
  const width = (i: number): number => x[i + 1] - x[i];
  slope[0] = last < 2 ? chord(0) : end(chord(0), chord(1), width(0) / (width(0) + width(1)));
  slope[last] =
    last < 2 ? chord(0) : end(chord(last - 1), chord(last - 2), width(last - 1) / (width(last - 1) + width(last - 2)));
  return slope;
}

/** A curve at one flux density. */
export interface CurvePoint {
  /** H, A/m. */
  h: number;
  /** dH/dB, m/H. */
  slope: number;
  /** Integral of H dB, J/m^3: from 0, of a magnet from its remanence. */
  energy: number;
}

/** Index of the piece that holds `at`, by bisection; the first or the last piece where `at` lies beyond. */
export function pieceOf(x: Float64Array, at: number): number {
  let low = 0;
  let high = x.length - 1;
  while (high - low > 1) {
    const middle = (low + high) >> 1;
    if (x[middle] <= at) low = middle;
    else high = middle;
  }
  return low;
}

/** Evaluates the Hermite piece of y = H(B) from row i to i + 1; `integrals` holds the integral up to each row. */
export function evaluatePiece(
  x: Float64Array,
  y: Float64Array,
  slopes: Float64Array,
  integrals: Float64Array,
  i: number,
  at: number,
  out: CurvePoint,
): CurvePoint {
  const d = x[i + 1] - x[i];
  const s = (at - x[i]) / d;
  const m0 = d * slopes[i];
  const m1 = d * slopes[i + 1];
  // y0 + s (m0 + s (c + s e)) with value and slope given at both ends.
  const c = 3 * (y[i + 1] - y[i]) - 2 * m0 - m1;
  const e = 2 * (y[i] - y[i + 1]) + m0 + m1;
  out.h = y[i] + s * (m0 + s * (c + s * e));
  out.slope = (m0 + s * (2 * c + 3 * s * e)) / d;
  out.energy = integrals[i] + d * s * (y[i] + s * (m0 / 2 + s * (c / 3 + (s * e) / 4)));
  return out;
}

/** Integral of the cubic from the first row to each row. */
export function integralsAtRows(x: Float64Array, y: Float64Array, slopes: Float64Array): Float64Array {
  const integrals = new Float64Array(x.length);
  for (let i = 1; i < x.length; i++) {
    const d = x[i] - x[i - 1];
    integrals[i] = integrals[i - 1] + d * (0.5 * (y[i - 1] + y[i]) + (d / 12) * (slopes[i - 1] - slopes[i]));
  }
  return integrals;
}
