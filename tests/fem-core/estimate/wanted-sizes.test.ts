import { triangleCount } from '@gapwright/fem-core/mesh';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { wantedSizes } from '../../../packages/fem-core/src/estimate/wanted-sizes.js';
import { straightMesh } from '../field/made-fields.js';

const m = triangleCount(straightMesh);

const longest = Float64Array.from({ length: m }, (_, t) => {
  const { xy, triangles } = straightMesh;
  const corner = (k: number): number => 2 * triangles[3 * t + (k % 3)];
  return Math.max(
    ...[0, 1, 2].map((k) => Math.hypot(xy[corner(k)] - xy[corner(k + 1)], xy[corner(k) + 1] - xy[corner(k + 1) + 1])),
  );
});

/** An element asked for a longest edge ends up shorter; the wish allows for it by this factor. */
const ALLOWANCE = 1.15;
const SMALLEST = 0.25;

/** By what ratio each triangle is asked to shrink; Infinity where it is not. */
const ratios = (shares: Float64Array, target: number): Float64Array =>
  wantedSizes(straightMesh, shares, target).map((wanted, t) => wanted / (ALLOWANCE * longest[t]));

const sumOf = (values: Float64Array): number => values.reduce((sum, value) => sum + value, 0);

/** Shares of error over several decades, some of them none. */
const someShares = fc
  .array(
    fc.oneof(
      fc.constant(0),
      fc.double({ min: -6, max: 0, noNaN: true }).map((e) => 10 ** e),
    ),
    {
      minLength: m,
      maxLength: m,
    },
  )
  .map((shares) => Float64Array.from(shares));
const runs = { numRuns: 30 };

test('where all triangles share alike and all must shrink, the predicted total is the target', () => {
  const shares = new Float64Array(m).fill(3e-3);
  for (const part of [0.4, 0.1, 0.02]) {
    const target = part * sumOf(shares);
    const r = ratios(shares, target);
    // quadratic elements: a share falls with the fourth power of size
    const predicted = shares.reduce((sum, share, t) => sum + share * r[t] ** 4, 0);
    expect(predicted / target).toBeCloseTo(1, 9);
  }
});

test('whatever the shares, the predicted total is the target, but for wishes too mild to ask and the smallest ratio', () => {
  fc.assert(
    fc.property(someShares, fc.double({ min: 0.02, max: 0.9, noNaN: true }), (shares, part) => {
      const total = sumOf(shares);
      fc.pre(total > 0);
      const target = part * total;
      const r = ratios(shares, target);
      const atLeast = shares.reduce((sum, share, t) => sum + share * Math.min(r[t], 0.85) ** 4, 0);
      const atMost = shares.reduce((sum, share, t) => sum + share * Math.min(r[t], 1) ** 4, 0);
      expect(atLeast).toBeLessThan(target * (1 + 1e-9));
      expect(atMost).toBeGreaterThan(target * (1 - 1e-9));
    }),
    runs,
  );
});

test('triangles that shrink are left with equal shares per new triangle: share r^6 is one constant', () => {
  fc.assert(
    fc.property(someShares, (shares) => {
      const r = ratios(shares, 0.1 * sumOf(shares));
      const levels = Array.from(shares, (share, t) => share * r[t] ** 6).filter(
        (_, t) => r[t] > SMALLEST * 1.0001 && r[t] < Infinity,
      );
      for (const level of levels) expect(level / levels[0]).toBeCloseTo(1, 9);
    }),
    runs,
  );
});

test('no triangle is asked to shrink below the smallest ratio, even for no error at all', () => {
  fc.assert(
    fc.property(someShares, fc.constantFrom(0, 1e-9, 1e-3, 0.3), (shares, part) => {
      for (const r of ratios(shares, part * sumOf(shares))) expect(r).toBeGreaterThan(SMALLEST * (1 - 1e-12));
    }),
    runs,
  );
  const toNothing = ratios(new Float64Array(m).fill(1), 0);
  for (const r of toNothing) expect(r).toBeCloseTo(SMALLEST, 9);
});

test('where the target is met already, nothing is asked', () => {
  fc.assert(
    fc.property(someShares, fc.double({ min: 1, max: 10, noNaN: true }), (shares, times) => {
      expect(wantedSizes(straightMesh, shares, times * sumOf(shares)).every((wanted) => wanted === Infinity)).toBe(
        true,
      );
    }),
    runs,
  );
  expect(wantedSizes(straightMesh, new Float64Array(m), 0).every((wanted) => wanted === Infinity)).toBe(true);
});

test('triangles without a share of the error keep their size', () => {
  fc.assert(
    fc.property(someShares, (shares) => {
      const wanted = wantedSizes(straightMesh, shares, 0.01 * sumOf(shares));
      wanted.forEach((size, t) => {
        if (shares[t] === 0) expect(size).toBe(Infinity);
      });
    }),
    runs,
  );
});

test('the larger its share, the smaller a triangle becomes; the smaller the target, the smaller all', () => {
  fc.assert(
    fc.property(someShares, (shares) => {
      const r = ratios(shares, 0.2 * sumOf(shares));
      const order = Array.from(shares.keys()).sort((p, q) => shares[p] - shares[q]);
      for (let i = 1; i < m; i++) {
        // compared with room for rounding where the wish is the same
        expect(r[order[i]]).toBeLessThanOrEqual(r[order[i - 1]] * (1 + 1e-12));
      }
      const stricter = ratios(shares, 0.05 * sumOf(shares));
      stricter.forEach((ratio, t) => {
        expect(ratio).toBeLessThanOrEqual(r[t] * (1 + 1e-12));
      });
    }),
    runs,
  );
});

test('shares and target in another unit ask for the same sizes', () => {
  fc.assert(
    fc.property(someShares, (shares) => {
      const target = 0.1 * sumOf(shares);
      const scaled = wantedSizes(
        straightMesh,
        shares.map((share) => 1024 * share),
        1024 * target,
      );
      expect(scaled).toEqual(wantedSizes(straightMesh, shares, target));
    }),
    runs,
  );
});
