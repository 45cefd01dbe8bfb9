import type { Field, Point } from '@gapwright/fem-core';
import { buildLocator, fluxBetween, solveSection } from '@gapwright/fem-core';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { core, coreSetup, readerOf, STEEL } from './sections.js';

const [OUT, BACK] = [3e6, -3.75e6];
const field: Field = solveSection(
  { ...core, maxEdge: 0.004 },
  coreSetup(STEEL, { out: OUT, back: BACK, 'second out': 2e6 }),
);

/** Midpoint rule along a closed polygon of f . n ds (n outward for counter-clockwise) and f . dl. */
function round(
  corners: readonly Point[],
  pick: (x: number, y: number) => readonly [number, number],
): { out: number; along: number } {
  let [out, along] = [0, 0];
  corners.forEach(([x0, y0], i) => {
    const [x1, y1] = corners[(i + 1) % corners.length];
    const [dx, dy] = [(x1 - x0) / STEPS, (y1 - y0) / STEPS];
    for (let j = 0; j < STEPS; j++) {
      const [fx, fy] = pick(x0 + (j + 0.5) * dx, y0 + (j + 0.5) * dy);
      out += fx * dy - fy * dx;
      along += fx * dx + fy * dy;
    }
  });
  return { out, along };
}

/** Flux between the highest and the lowest A anywhere, Wb/m. */
const allFlux = Math.max(...field.potential) - Math.min(...field.potential);

/** Where a way passes from air into steel B jumps by about 1 T, within a step of up to 0.1 mm. */
const [STEPS, WITHIN] = [1500, 1e-2 * allFlux];

const place: fc.Arbitrary<Point> = fc.tuple(
  fc.double({ min: 0.001, max: 0.159, noNaN: true }),
  fc.double({ min: 0.001, max: 0.119, noNaN: true }),
);

describe('flux', () => {
  const at = readerOf(field);
  const locator = buildLocator(field.mesh);

  test('no net flux leaves any closed polygon, through air, coils and steel alike', () => {
    fc.assert(
      fc.property(fc.array(place, { minLength: 3, maxLength: 6 }), (corners) => {
        const { out } = round(corners, (x, y) => [at(x, y).bx, at(x, y).by]);
        expect(Math.abs(out)).toBeLessThan(WITHIN);
      }),
      { numRuns: 25, seed: 11, endOnFailure: true },
    );
  });

  test('the flux between two points is the normal component of B summed along any way from one to the other', () => {
    fc.assert(
      fc.property(place, place, place, (from, by, to) => {
        let sum = 0;
        for (const [[x0, y0], [x1, y1]] of [
          [from, by],
          [by, to],
        ] as const) {
          for (let j = 0; j < STEPS; j++) {
            const s = (j + 0.5) / STEPS;
            const { bx, by: b } = at(x0 + s * (x1 - x0), y0 + s * (y1 - y0));
            sum += (b * (x1 - x0) - bx * (y1 - y0)) / STEPS;
          }
        }
        const flux = fluxBetween(field, locator, from, to) ?? Number.NaN;
        expect(Math.abs(sum - flux)).toBeLessThan(WITHIN);
      }),
      { numRuns: 25, seed: 12, endOnFailure: true },
    );
  });
});

test("Ampere's law: H round a closed way is the current within", () => {
  const at = readerOf(field);
  const strength = (x: number, y: number): readonly [number, number] => [at(x, y).hx, at(x, y).hy];
  const around = (x0: number, y0: number, x1: number, y1: number): number => {
    const corners: Point[] = [
      [x0, y0],
      [x1, y0],
      [x1, y1],
      [x0, y1],
    ];
    return round(corners, strength).along;
  };
  const [first, second] = [OUT * 0.01 * 0.04, 2e6 * 0.008 * 0.02];
  const within = 0.02 * first; // tangential H is raw: the elements hold Ampere's law in the mean
  // through air alone round the outer side; through steel and window; round nothing
  expect(Math.abs(around(0.025, 0.035, 0.0399, 0.085) - first)).toBeLessThan(within);
  expect(Math.abs(around(0.055, 0.035, 0.075, 0.085) + first)).toBeLessThan(within);
  expect(Math.abs(around(0.02, 0.01, 0.09, 0.11))).toBeLessThan(within);
  expect(Math.abs(around(0.1195, 0.07, 0.135, 0.1) - second)).toBeLessThan(within);
});
