import { describe, expect, test } from 'vitest';
import { carriedStress, turningStress } from '../../../packages/machine-models/src/mechanics/rotating-disc.js';
import { relativeError } from '../../helpers/machines.js';

const ring = { innerRadius: 0.05, outerRadius: 0.15, density: 7850, poisson: 0.3 };
const w = (2 * Math.PI * 3000) / 60;

describe('a turning disc of 300 mm at 3000 rpm (textbook)', () => {
  test('with a hole of 100 mm: 14.720515 MPa there, 4.648584 at the rim, 3.195901 along the radius', () => {
    const { hole, rim, radial } = turningStress(ring, w);
    expect(hole / 1e6).toBeCloseTo(14.720515, 6);
    expect(rim / 1e6).toBeCloseTo(4.648584, 6);
    expect(radial / 1e6).toBeCloseTo(3.195901, 6);
  });

  test('solid: 7.190778 MPa at the centre, and a pinhole doubles it', () => {
    const solid = turningStress({ ...ring, innerRadius: 0 }, w).hole;
    expect(solid / 1e6).toBeCloseTo(7.190778, 6);
    expect(relativeError(turningStress({ ...ring, innerRadius: 1e-9 }, w).hole, 2 * solid)).toBeLessThan(1e-9);
  });

  test('a thin ring bears rho w^2 r^2 (17.432189 MPa) all through', () => {
    const { hole, rim } = turningStress({ ...ring, innerRadius: 0.15 - 1e-8 }, w);
    expect(hole / 1e6).toBeCloseTo(17.432189, 4);
    expect(rim / 1e6).toBeCloseTo(17.432189, 4);
  });

  test('half a ring in balance: the mean hoop stress of a ring of its own weight is its force/(2 pi) over its cut', () => {
    // Exact field: hoop = (3+nu)/8 rho w^2 (a^2 + b^2 + a^2 b^2/r^2 - (1+3nu)/(3+nu) r^2), averaged from b to a.
    const { innerRadius: b, outerRadius: a, density, poisson: nu } = ring;
    const integral =
      (a * a + b * b) * (a - b) + a * a * b * b * (1 / b - 1 / a) - (((1 + 3 * nu) / (3 + nu)) * (a ** 3 - b ** 3)) / 3;
    const mean = (((3 + nu) / 8) * density * w * w * integral) / (a - b);
    const thickness = 0.01;
    const force = (density * thickness * w * w * 2 * Math.PI * (a ** 3 - b ** 3)) / 3;
    expect(relativeError(carriedStress(force, { innerRadius: b, outerRadius: a, thickness }), mean)).toBeLessThan(
      1e-12,
    );
  });
});
