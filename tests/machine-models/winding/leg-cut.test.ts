import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Opening } from '../../../packages/machine-models/src/machine.js';
import { coilEdges, legCut, openingSide } from '../../../packages/machine-models/src/winding/leg-cut.js';
import { hutHydro, overlappedHydro, withWinding } from '../../helpers/machines.js';

/** Distance of the point (r, angle) outside the straight line through the opening's two right corners. */
function outsideSide(opening: Opening, radius: number, angle: number): number {
  const [u0, v0, u1, v1] = [opening.innerRadius, opening.innerWidth / 2, opening.outerRadius, opening.outerWidth / 2];
  const [u, v] = [radius * Math.cos(angle), radius * Math.sin(angle)];
  return ((v - v0) * (u1 - u0) - (u - u0) * (v1 - v0)) / Math.hypot(u1 - u0, v1 - v0);
}

const openings = fc
  .record({
    innerRadius: fc.double({ min: 0.05, max: 0.1, noNaN: true }),
    height: fc.double({ min: 0.04, max: 0.08, noNaN: true }),
    innerWidth: fc.double({ min: 0.001, max: 0.03, noNaN: true }),
    outerWidth: fc.double({ min: 0.001, max: 0.05, noNaN: true }),
  })
  .map(
    ({ innerRadius, height, innerWidth, outerWidth }): Opening => ({
      innerRadius,
      outerRadius: innerRadius + height,
      innerWidth,
      outerWidth,
    }),
  );
const radii = fc.double({ min: 0.08, max: 0.2, noNaN: true });

describe('concentrated coils', () => {
  test('the leg lies between the side of the opening, prolonged, and a parallel one leg width outside', () => {
    fc.assert(
      fc.property(openings, radii, (opening, radius) => {
        const { inner, outer } = coilEdges({ legWidth: 0.015, legShape: 'parallel' }, opening, 0.1, radius);
        expect(outsideSide(opening, radius, inner)).toBeCloseTo(0, 12);
        expect(outsideSide(opening, radius, outer)).toBeCloseTo(0.015, 12);
        expect(outer).toBeGreaterThan(inner);
      }),
    );
  });

  test('the corners of the opening stand on the inner edge', () => {
    const { opening, legShape, legWidth } = hutHydro().winding;
    for (const [u, width] of [
      [opening.innerRadius, opening.innerWidth],
      [opening.outerRadius, opening.outerWidth],
    ]) {
      const { inner } = coilEdges({ legShape, legWidth }, opening, 0.128, Math.hypot(u, width / 2));
      expect(inner).toBeCloseTo(Math.atan2(width / 2, u), 12);
    }
  });

  test('a tapered leg is as wide as a parallel one at the mean radius, and in proportion to the radius elsewhere', () => {
    fc.assert(
      fc.property(openings, radii, (opening, radius) => {
        const tapered = coilEdges({ legWidth: 0.012, legShape: 'tapered' }, opening, 0.1, radius);
        expect(outsideSide(opening, radius, tapered.outer)).toBeCloseTo(0.012 * (radius / 0.1), 12);
      }),
    );
    const machine = hutHydro();
    expect(legCut(withWinding(machine, { legShape: 'tapered' }).winding, 16, 0.128, 0.128)).toEqual(
      legCut(machine.winding, 16, 0.128, 0.128),
    );
  });

  test('a tapered leg beside a radial side keeps its angle at every radius', () => {
    const slope = 0.1;
    const opening = { innerRadius: 0.1, outerRadius: 0.15, innerWidth: 2 * slope * 0.1, outerWidth: 2 * slope * 0.15 };
    const edges = [0.09, 0.12, 0.16].map((r) => coilEdges({ legWidth: 0.01, legShape: 'tapered' }, opening, 0.125, r));
    for (const { inner, outer } of edges) {
      expect(inner).toBeCloseTo(Math.atan(slope), 12);
      expect(outer - inner).toBeCloseTo(Math.asin(0.01 / 0.125), 12);
    }
    expect(openingSide(opening).distance).toBeCloseTo(0, 12);
  });

  test('a coil k times as large has the same angles and k times the width', () => {
    const { winding } = hutHydro();
    const k = 1e3;
    const { innerRadius, outerRadius, innerWidth, outerWidth } = winding.opening;
    const large = {
      ...winding,
      legWidth: k * winding.legWidth,
      opening: {
        innerRadius: k * innerRadius,
        outerRadius: k * outerRadius,
        innerWidth: k * innerWidth,
        outerWidth: k * outerWidth,
      },
    };
    const [one, other] = [legCut(winding, 16, 0.128, 0.11), legCut(large, 16, k * 0.128, k * 0.11)];
    expect(other.halfSpan).toBeCloseTo(one.halfSpan, 12);
    expect(other.width / k).toBeCloseTo(one.width, 12);
  });

  test('a leg that is not radial is cut longer than its width', () => {
    const { winding } = hutHydro();
    for (const radius of [0.1005, 0.128, 0.1555]) {
      const { width } = legCut(winding, 16, 0.128, radius);
      expect(width).toBeGreaterThan(winding.legWidth);
      expect(width).toBeLessThan(1.1 * winding.legWidth);
    }
  });

  test('a circle that the far side does not reach is refused, not turned into NaN', () => {
    const { winding } = hutHydro();
    expect(() => legCut({ ...winding, legWidth: 0.2 }, 16, 0.128, 0.1)).toThrow(/0\.1 m does not cross/);
  });
});

describe('overlapped legs', () => {
  const { winding } = overlappedHydro();

  test('a parallel leg is as wide as stated, measured straight across its axis', () => {
    for (const radius of [0.05, 0.1, 0.2]) {
      const { width } = legCut(winding, 16, 0.128, radius);
      expect(2 * radius * Math.sin(width / radius / 2)).toBeCloseTo(winding.legWidth, 12);
    }
  });

  test('a tapered leg keeps its angle, and its width at the mean radius', () => {
    const tapered = { ...winding, legShape: 'tapered' as const };
    const angles = [0.1, 0.128, 0.16].map((radius) => legCut(tapered, 16, 0.128, radius).width / radius);
    for (const angle of angles) expect(angle).toBeCloseTo(angles[0], 12);
    expect(legCut(tapered, 16, 0.128, 0.128).width).toBeCloseTo(legCut(winding, 16, 0.128, 0.128).width, 12);
  });

  test('the legs of a coil stand one pole pitch apart at every radius', () => {
    for (const radius of [0.1, 0.16]) expect(2 * legCut(winding, 16, 0.128, radius).halfSpan).toBe((2 * Math.PI) / 16);
  });
});
