import { describe, expect, test } from 'vitest';
import type { TriangleRule } from '../../../packages/fem-core/src/elements/quadrature.js';
import { RULE_2, RULE_5, subdivided } from '../../../packages/fem-core/src/elements/quadrature.js';

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

describe.each([1, 2, 3, 7])('a rule on each of %i x %i equal triangles', (cuts) => {
  const rule = subdivided(RULE_5, cuts);

  test('has its points inside, and as many times over', () => {
    expect(rule.weights).toHaveLength(RULE_5.weights.length * cuts * cuts);
    for (let q = 0; q < rule.weights.length; q++) {
      const [xi, eta] = [rule.points[2 * q], rule.points[2 * q + 1]];
      expect(Math.min(xi, eta, 1 - xi - eta)).toBeGreaterThan(0);
      expect(rule.weights[q]).toBeGreaterThan(0);
    }
  });

  test('is as exact', () => {
    for (let degree = 0; degree <= RULE_5.degree; degree++) {
      for (const [a, b] of powers(degree)) expect(apply(rule, a, b)).toBeCloseTo(exact(a, b), 14);
    }
  });
});

test('cut finer, a wave of many lengths is integrated with the sixth order', () => {
  const k = 12;
  // Integral of sin(k xi) over the reference triangle: 1/k - sin(k)/k^2.
  const error = (cuts: number): number => {
    const { points, weights } = subdivided(RULE_5, cuts);
    const sum = weights.reduce((total, w, q) => total + w * Math.sin(k * points[2 * q]), 0);
    return Math.abs(sum - (1 / k - Math.sin(k) / (k * k)));
  };
  expect(Math.log2(error(6) / error(12))).toBeGreaterThan(5.5);
  expect(error(12)).toBeLessThan(1e-7);
});
