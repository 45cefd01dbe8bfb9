/** Points and weights on the reference triangle (0,0) (1,0) (0,1); weights sum to its area, 1/2. */
export interface TriangleRule {
  /** Highest total degree integrated exactly. */
  readonly degree: number;
  /** Float64Array(2q): reference coordinates. */
  readonly points: Float64Array;
  /** Float64Array(q). */
  readonly weights: Float64Array;
}

function symmetricRule(degree: number, orbits: readonly (readonly [share: number, weight: number])[]): TriangleRule {
  const points: number[] = [];
  const weights: number[] = [];
  for (const [a, w] of orbits) {
    const b = 1 - 2 * a;
    if (Math.abs(a - b) < 1e-12) {
      points.push(a, a);
      weights.push(w / 2);
    } else {
      points.push(a, a, b, a, a, b);
      weights.push(w / 2, w / 2, w / 2);
    }
  }
  return { degree, points: Float64Array.from(points), weights: Float64Array.from(weights) };
}

const root15 = Math.sqrt(15);

/** The centroid: exact to degree 1. */
export const RULE_1 = symmetricRule(1, [[1 / 3, 1]]);

/** Strang, Fix, An Analysis of the Finite Element Method, 1973: three inner points, exact to degree 2. */
export const RULE_2 = symmetricRule(2, [[1 / 6, 1 / 3]]);

/** Radon, Zur mechanischen Kubatur, 1948: seven points, exact to degree 5. */
export const RULE_5 = symmetricRule(5, [
  [1 / 3, 9 / 40],
  [(6 - root15) / 21, (155 - root15) / 1200],
  [(6 + root15) / 21, (155 + root15) / 1200],
]);

/** The rule applied to each of the cuts^2 equal triangles the reference triangle falls into: for weights that oscillate. */
export function subdivided(rule: TriangleRule, cuts: number): TriangleRule {
  const points: number[] = [];
  const weights: number[] = [];
  const add = (x0: number, y0: number, sign: 1 | -1): void => {
    for (let q = 0; q < rule.weights.length; q++) {
      points.push((x0 + sign * rule.points[2 * q]) / cuts, (y0 + sign * rule.points[2 * q + 1]) / cuts);
      weights.push(rule.weights[q] / (cuts * cuts));
    }
  };
  for (let i = 0; i < cuts; i++) {
    for (let j = 0; i + j < cuts; j++) {
      add(i, j, 1);
      if (i + j < cuts - 1) add(i + 1, j + 1, -1); // the triangle turned over beside it
    }
  }
  return { degree: rule.degree, points: Float64Array.from(points), weights: Float64Array.from(weights) };
}
