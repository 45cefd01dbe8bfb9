/** Abscissae between -1 and 1, and their weights (sum 2). */
export interface GaussPoints {
  readonly at: readonly number[];
  readonly weight: readonly number[];
}

/**
 * Points of Gauss and Legendre: zeros of P(n) by Newton's method from cos(pi (i + 3/4)/(n + 1/2)), weights
 * 2/((1 - x^2) P'(n)^2). Textbook.
 */
export function gaussPoints(count: number): GaussPoints {
  const at: number[] = [];
  const weight: number[] = [];
  for (let i = count - 1; i >= 0; i--) {
    let x = Math.cos((Math.PI * (i + 0.75)) / (count + 0.5));
    let slope = 1;
    for (let step = 0; step < 8; step++) {
      let [previous, value] = [1, x];
      for (let n = 2; n <= count; n++) [previous, value] = [value, ((2 * n - 1) * x * value - (n - 1) * previous) / n];
      slope = (count * (previous - x * value)) / (1 - x * x);
      x -= value / slope;
    }
    at.push(x);
    weight.push(2 / ((1 - x * x) * slope * slope));
  }
  return { at, weight };
}
