import { gaussLegendre } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import type { TriangleRule } from '../../../packages/fem-core/src/elements/quadrature.js';
import { RULE_2, RULE_5 } from '../../../packages/fem-core/src/elements/quadrature.js';

const factorial = (n: number): number => (n < 2 ? 1 : n * factorial(n - 1));

/** Integral of xi^a eta^b over the reference triangle: a! b!/(a + b + 2)! (Dirichlet's formula). */
const exact = (a: number, b: number): number => (factorial(a) * factorial(b)) / factorial(a + b + 2);

const apply = ({ points, weights }: TriangleRule, a: number, b: number): number =>
  weights.reduce((sum, w, q) => sum + w * points[2 * q] ** a * points[2 * q + 1] ** b, 0);

const powers = (degree: number): [number, number][] => Array.from({ length: degree + 1 }, (_, a) => [a, degree - a]);

describe.each([
  ['Strang and Fix', RULE_2, 2],
  ['Radon', RULE_5, 5],
])('the rule of %s', (_, rule, degree) => {
  test('integrates all polynomials of its degree and below', () => {
    expect(rule.degree).toBe(degree);
    for (let d = 0; d <= degree; d++) {
      for (const [a, b] of powers(d)) expect(Math.abs(apply(rule, a, b) - exact(a, b))).toBeLessThan(1e-15);
    }
  });

  test('misses one of the next degree', () => {
    const misses = powers(degree + 1).map(([a, b]) => Math.abs(apply(rule, a, b) - exact(a, b)));
    expect(Math.max(...misses)).toBeGreaterThan(1e-5);
  });

  test('has its points inside and its weights above 0, summing to the area', () => {
    rule.weights.forEach((w, q) => {
      const [xi, eta] = [rule.points[2 * q], rule.points[2 * q + 1]];
      expect(Math.min(w, xi, eta, 1 - xi - eta)).toBeGreaterThan(0);
    });
    expect(apply(rule, 0, 0)).toBeCloseTo(0.5, 15);
  });

  test('looks the same from each corner', () => {
    for (const [a, b] of powers(degree + 1)) {
      expect(apply(rule, a, b)).toBeCloseTo(apply(rule, b, a), 15);
      const third = rule.weights.reduce(
        (sum, w, q) => sum + w * (1 - rule.points[2 * q] - rule.points[2 * q + 1]) ** a * rule.points[2 * q] ** b,
        0,
      );
      expect(third).toBeCloseTo(apply(rule, a, b), 15);
    }
  });
});

describe('Gauss-Legendre on [0, 1]', () => {
  const integrate = (n: number, power: number): number => {
    const { points, weights } = gaussLegendre(n);
    return weights.reduce((sum, w, q) => sum + w * points[q] ** power, 0);
  };

  test.each([2, 3, 4, 5, 6, 7, 8])('%i points are exact to degree 2 n - 1, and no further', (n) => {
    for (let power = 0; power < 2 * n; power++)
      expect(Math.abs(integrate(n, power) - 1 / (power + 1))).toBeLessThan(1e-15);
    // Error term of the rule on [0, 1] (Abramowitz, Stegun, 25.4.30; from memory): (n!)^4/((2n + 1) (2n)!^3) f^(2n),
    // with f^(2n) = (2n)!.
    const error = factorial(n) ** 4 / ((2 * n + 1) * factorial(2 * n) ** 2);
    expect(1 / (2 * n + 1) - integrate(n, 2 * n)).toBeCloseTo(error, 14);
    expect(error).toBeGreaterThan(1e-11);
  });

  test('two and three points are those of the textbook', () => {
    expect(gaussLegendre(2).points[0]).toBeCloseTo(0.5 - 0.5 / Math.sqrt(3), 15);
    expect(gaussLegendre(3).points[2]).toBeCloseTo(0.5 + 0.5 * Math.sqrt(0.6), 15);
    expect(gaussLegendre(3).points[1]).toBeCloseTo(0.5, 15);
    expect(gaussLegendre(3).weights[1]).toBeCloseTo(4 / 9, 15);
  });

  test('points rise, mirrored about the middle', () => {
    const { points, weights } = gaussLegendre(7);
    for (let i = 0; i < 7; i++) {
      if (i > 0) expect(points[i]).toBeGreaterThan(points[i - 1]);
      expect(points[i] + points[6 - i]).toBeCloseTo(1, 15);
      expect(weights[i]).toBeCloseTo(weights[6 - i], 15);
    }
  });
});
