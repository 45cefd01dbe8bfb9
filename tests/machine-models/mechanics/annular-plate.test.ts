import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { AnnularPlate, RingLoad } from '../../../packages/machine-models/src/mechanics/annular-plate.js';
import {
  clampStress,
  plateDeflection,
  plateStiffness,
  radialMoment,
} from '../../../packages/machine-models/src/mechanics/annular-plate.js';
import { gaussPoints } from '../../../packages/machine-models/src/rotor/gauss-points.js';
import { MU0, relativeError } from '../../helpers/machines.js';

/** A pressure between two radii as rings at Gauss points: a plate's answer to a ring is smooth in the ring's radius. */
function pressed(from: number, to: number, pressure: number, count = 40): readonly RingLoad[] {
  const { at, weight } = gaussPoints(count);
  return at.map((x, i) => {
    const radius = (from + to) / 2 + ((to - from) / 2) * x;
    return { radius, force: pressure * 2 * Math.PI * radius * ((to - from) / 2) * weight[i] };
  });
}

const unit = (clampRadius: number): AnnularPlate => {
  const poisson = 0.3;
  return { clampRadius, outerRadius: 1, thickness: 1, young: 12 * (1 - poisson ** 2), poisson }; // stiffness 1
};

const disc: AnnularPlate = { clampRadius: 0.05, outerRadius: 0.15, thickness: 0.008, young: 200e9, poisson: 0.3 };
const magnets = pressed(0.1, 0.146, (12 * 0.046 * 0.03 * (0.6 ** 2 / (2 * MU0))) / (Math.PI * (0.146 ** 2 - 0.1 ** 2)));

describe('plate under even pressure, inner edge clamped, outer edge free: published coefficients', () => {
  test.each([
    [0.1, 0.075693, 0.964567],
    [0.2, 0.051634, 0.613535],
    [0.3, 0.031818, 0.410338],
    [0.4, 0.017636, 0.272188],
    [0.5, 0.008589, 0.173569],
    [0.6, 0.003508, 0.103013],
    [0.7, 0.001096, 0.054076],
    [0.8, 0.000212, 0.02253],
  ])('b/a = %f: K_y = %f, K_M = %f', (ratio, deflection, moment) => {
    const plate = unit(ratio);
    const loads = pressed(ratio, 1, 1);
    expect(plateStiffness(plate)).toBeCloseTo(1, 14);
    expect(Math.abs(plateDeflection(plate, loads, 1) - deflection)).toBeLessThan(5.1e-7);
    expect(Math.abs(radialMoment(plate, loads, ratio) - moment)).toBeLessThan(5.1e-7);
  });
});

describe('twelve magnets of 46 x 30 mm at 0.6 T on a disc of 8 mm', () => {
  test('2372 N bend the rim by 0.072954 mm and stress the clamp by 35.514 MPa', () => {
    expect(magnets.reduce((sum, { force }) => sum + force, 0)).toBeCloseTo(2372.045, 2);
    expect(plateDeflection(disc, magnets, 0.15) * 1e3).toBeCloseTo(0.072954, 6);
    expect(plateDeflection(disc, magnets, 0.123) * 1e3).toBeCloseTo(0.049556, 6);
    expect(clampStress(disc, magnets) / 1e6).toBeCloseTo(35.514, 3);
  });

  test('the same force spread over the whole plate bends it less: 0.053943 mm, 28.572 MPa', () => {
    const spread = pressed(0.05, 0.15, 2372.0451 / (Math.PI * (0.15 ** 2 - 0.05 ** 2)));
    expect(plateDeflection(disc, spread, 0.15) * 1e3).toBeCloseTo(0.053943, 5);
    expect(clampStress(disc, spread) / 1e6).toBeCloseTo(28.572, 2);
  });
});

describe('the plate equation', () => {
  test('stepping theta out from the clamp by small steps gives the same rim (independent integration)', () => {
    // Two shots, with and without load; the free edge fixes their mix.
    const { clampRadius: b, outerRadius: a, poisson } = disc;
    const stiffness = plateStiffness(disc);
    const total = 2372.045;
    const outside = (r: number): number => {
      if (r <= 0.1) return total;
      return r >= 0.146 ? 0 : (total * (0.146 ** 2 - r * r)) / (0.146 ** 2 - 0.1 ** 2);
    };
    const shoot = (loaded: number, slope0: number): readonly [edge: number, deflection: number] => {
      const rate = (r: number, theta: number, slope: number): number =>
        (-loaded * outside(r)) / (2 * Math.PI * r * stiffness) - slope / r + theta / (r * r);
      const steps = 2000;
      const h = (a - b) / steps;
      let [theta, slope, w] = [0, slope0, 0];
      for (let i = 0; i < steps; i++) {
        const r = b + i * h;
        const k1 = [slope, rate(r, theta, slope)];
        const k2 = [slope + (h / 2) * k1[1], rate(r + h / 2, theta + (h / 2) * k1[0], slope + (h / 2) * k1[1])];
        const k3 = [slope + (h / 2) * k2[1], rate(r + h / 2, theta + (h / 2) * k2[0], slope + (h / 2) * k2[1])];
        const k4 = [slope + h * k3[1], rate(r + h, theta + h * k3[0], slope + h * k3[1])];
        w += h * theta + ((h * h) / 6) * (k1[0] + k2[0] + k3[0]);
        theta += (h / 6) * (k1[0] + 2 * k2[0] + 2 * k3[0] + k4[0]);
        slope += (h / 6) * (k1[1] + 2 * k2[1] + 2 * k3[1] + k4[1]);
      }
      return [slope + (poisson * theta) / a, w];
    };
    const [edgeLoaded, wLoaded] = shoot(1, 0);
    const [edgeFree, wFree] = shoot(0, 1);
    const mix = -edgeLoaded / edgeFree;
    expect(relativeError(plateDeflection(disc, magnets, a), wLoaded + mix * wFree)).toBeLessThan(1e-6);
    expect(relativeError(radialMoment(disc, magnets, b), stiffness * mix)).toBeLessThan(1e-6);
  });

  test('the work of the load is the strain energy  pi D integral (theta_1^2 + theta^2/r^2 + 2 nu theta theta_1/r) r dr', () => {
    const { clampRadius: b, outerRadius: a, poisson } = disc;
    const load = [{ radius: 0.11, force: 900 }];
    const stiffness = plateStiffness(disc);
    const energyBetween = (from: number, to: number): number => {
      const { at, weight } = gaussPoints(24);
      return at.reduce((sum, x, i) => {
        const r = (from + to) / 2 + ((to - from) / 2) * x;
        const h = 1e-6;
        const theta = (plateDeflection(disc, load, r + h) - plateDeflection(disc, load, r - h)) / (2 * h);
        const slope = radialMoment(disc, load, r) / stiffness - (poisson * theta) / r;
        const density = slope ** 2 + (theta / r) ** 2 + (2 * poisson * theta * slope) / r;
        return sum + ((to - from) / 2) * weight[i] * Math.PI * stiffness * density * r;
      }, 0);
    };
    const work = (900 * plateDeflection(disc, load, 0.11)) / 2;
    expect(relativeError(energyBetween(b, 0.11) + energyBetween(0.11, a), work)).toBeLessThan(1e-6);
  });

  const ratio = fc.double({ min: 0.05, max: 0.95, noNaN: true });
  const place = fc.double({ min: 0.001, max: 1, noNaN: true });

  test('Maxwell and Betti: a force at s bends r as much as the same force at r bends s', () => {
    fc.assert(
      fc.property(ratio, place, place, fc.double({ min: 0, max: 0.45, noNaN: true }), (b, x, y, poisson) => {
        const plate = { ...unit(b), poisson };
        const [r, s] = [b + x * (1 - b), b + y * (1 - b)];
        const there = plateDeflection(plate, [{ radius: s, force: 1 }], r);
        const back = plateDeflection(plate, [{ radius: r, force: 1 }], s);
        expect(Math.abs(there - back)).toBeLessThan(1e-13 + 1e-8 * Math.abs(there));
      }),
      { seed: 1, numRuns: 200 },
    );
  });

  test('loads add up, and the deflection goes as 1/(E t^3), the stress as 1/t^2', () => {
    const [one, two] = [[{ radius: 0.08, force: 300 }], [{ radius: 0.14, force: 200 }]];
    const both = plateDeflection(disc, [...one, ...two], 0.12);
    expect(relativeError(plateDeflection(disc, one, 0.12) + plateDeflection(disc, two, 0.12), both)).toBeLessThan(
      1e-12,
    );
    const thicker = { ...disc, thickness: 0.016, young: 100e9 };
    expect(relativeError(plateDeflection(thicker, one, 0.12) * 4, plateDeflection(disc, one, 0.12))).toBeLessThan(
      1e-12,
    );
    expect(relativeError(clampStress(thicker, one) * 4, clampStress(disc, one))).toBeLessThan(1e-12);
  });

  test('a ring much narrower than its radius bends as a strip: f L^3/(3 D), and f L at the clamp', () => {
    const narrow = unit(0.998);
    const [length, perMetre] = [0.002, 1 / (2 * Math.PI)];
    const load = [{ radius: 1, force: 1 }];
    expect(relativeError(plateDeflection(narrow, load, 1), (perMetre * length ** 3) / 3)).toBeLessThan(3e-3);
    expect(relativeError(radialMoment(narrow, load, 0.998), perMetre * length)).toBeLessThan(3e-3);
  });

  test('the moment is largest at the clamp, and none is left at the free edge', () => {
    const at = [0.05, 0.06, 0.08, 0.1, 0.11].map((r) => radialMoment(disc, magnets, r));
    for (let i = 1; i < at.length; i++) expect(at[i]).toBeLessThan(at[i - 1]);
    for (const r of [0.12, 0.13, 0.14]) expect(Math.abs(radialMoment(disc, magnets, r))).toBeLessThan(0.1 * at[0]);
    expect(Math.abs(radialMoment(disc, magnets, 0.15))).toBeLessThan(1e-10 * at[0]);
  });

  test('what presses on the clamp bends nothing', () => {
    const load = [{ radius: 0.04, force: 1e6 }];
    expect(plateDeflection(disc, load, 0.15)).toBe(0);
    expect(clampStress(disc, load)).toBe(0);
    expect(plateDeflection(disc, magnets, 0.05)).toBe(0);
  });
});
