/** Signed cosine coefficients about a magnet's axis: f(x) = sum amplitude[i] cos(order[i] pi x / polePitch). */
export interface Harmonics {
  readonly order: readonly number[];
  readonly amplitude: readonly number[];
}

/**
 * A periodic function of odd harmonics:
 *
 *   f(theta) = sum over i of cos[i] cos(order[i] theta) + sin[i] sin(order[i] theta)
 *
 * theta in electrical radians; orders odd and rising, so f(theta + pi) = -f(theta).
 */
export interface Series {
  readonly order: readonly number[];
  readonly cos: readonly number[];
  readonly sin: readonly number[];
}

/** f(theta). Neighbouring orders differ by 2 as a rule, so one rotation takes the place of a cosine and a sine. */
export function evaluate(series: Series, theta: number): number {
  const stepCos = Math.cos(2 * theta);
  const stepSin = Math.sin(2 * theta);
  let previous = Number.NaN;
  let c = 0;
  let s = 0;
  let sum = 0;
  for (let i = 0; i < series.order.length; i++) {
    const order = series.order[i];
    if (order === previous + 2) {
      const turned = c * stepCos - s * stepSin;
      s = s * stepCos + c * stepSin;
      c = turned;
    } else {
      c = Math.cos(order * theta);
      s = Math.sin(order * theta);
    }
    previous = order;
    sum += series.cos[i] * c + series.sin[i] * s;
  }
  return sum;
}

/** The function whose derivative by theta is f, without a constant. */
export function antiderivative({ order, cos, sin }: Series): Series {
  return { order, cos: sin.map((value, i) => -value / order[i]), sin: cos.map((value, i) => value / order[i]) };
}

/** Sum of factors[k] series[k]; all of the same orders. */
export function combine(series: readonly Series[], factors: readonly number[]): Series {
  const { order } = series[0];
  const total = (part: 'cos' | 'sin'): number[] =>
    order.map((_, i) => series.reduce((sum, one, k) => sum + factors[k] * one[part][i], 0));
  return { order, cos: total('cos'), sin: total('sin') };
}

/** Each harmonic of the series times its own factor. */
export function scaleEach({ order, cos, sin }: Series, factors: readonly number[]): Series {
  return { order, cos: cos.map((value, i) => value * factors[i]), sin: sin.map((value, i) => value * factors[i]) };
}

/** Peak value of each harmonic, unsigned. */
export function amplitudes({ cos, sin }: Series): readonly number[] {
  return cos.map((value, i) => Math.hypot(value, sin[i]));
}

/** Root mean square over a period. */
export function rms(series: Series): number {
  return Math.hypot(...amplitudes(series)) / Math.SQRT2;
}

/**
 * max |f|, between any samples: half a period is scanned (the other half mirrors it) at eight points or more per
 * wavelength of the highest order, then every peak of the scan is closed in on by golden section.
 */
export function peak(series: Series): number {
  const highest = Math.max(1, ...series.order);
  const steps = Math.max(360, 4 * highest);
  const height = (theta: number): number => Math.abs(evaluate(series, theta));
  const heights = Float64Array.from({ length: steps }, (_, i) => height((i * Math.PI) / steps));
  let best = 0;
  for (let i = 0; i < steps; i++) {
    const isTop = heights[i] >= heights[(i + steps - 1) % steps] && heights[i] >= heights[(i + 1) % steps];
    if (isTop) best = Math.max(best, highestWithin(height, ((i - 1) * Math.PI) / steps, ((i + 1) * Math.PI) / steps));
  }
  return best;
}

/** Golden-section search for the top of `height`, which has one peak between `from` and `to`. */
function highestWithin(height: (theta: number) => number, from: number, to: number): number {
  const golden = (Math.sqrt(5) - 1) / 2;
  let [low, high] = [from, to];
  let [left, right] = [high - golden * (high - low), low + golden * (high - low)];
  let [atLeft, atRight] = [height(left), height(right)];
  for (let i = 0; i < 40; i++) {
    if (atLeft > atRight) {
      [high, right, atRight] = [right, left, atLeft];
      left = high - golden * (high - low);
      atLeft = height(left);
    } else {
      [low, left, atLeft] = [left, right, atRight];
      right = low + golden * (high - low);
      atRight = height(right);
    }
  }
  return Math.max(atLeft, atRight);
}

/** Amplitude of one order, 0 where the harmonics do not hold it. */
export function amplitudeOf({ order, amplitude }: Harmonics, wanted: number): number {
  return amplitude[order.indexOf(wanted)] ?? 0;
}
