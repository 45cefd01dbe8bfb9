import type { Field, Section, Setup } from '@gapwright/fem-core';
import { buildLocator, energiesOf, forceOn, MU0, meanOver, solveSection, valuesAlong } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';
import { stressThrough } from '@gapwright/fem-core/goals';
import { describe, expect, test } from 'vitest';
import { AIR, box, relativeError, STEEL } from './sections.js';

/** Two magnets of unlike size, the upper one shifted by (dx, dy); fine enough that differences of energies mean something. */
function drawMagnets(dx: number, dy: number): Section {
  return {
    outline: { kind: 'rectangle', from: [-0.05, -0.045], to: [0.05, 0.05] },
    background: 'air',
    maxEdge: 0.006,
    regions: [
      box('room', -0.02, -0.014, 0.042, 0.034, 0.0012),
      box('lower', -0.01, -0.008, 0.02, 0.006, 0.0012),
      box('upper', -0.006 + dx, 0.003 + dy, 0.014, 0.006, 0.0012),
    ],
  };
}

const magnets: Setup = {
  materials: {
    air: AIR,
    room: AIR,
    lower: { kind: 'magnet', recoil: 1.05, remanence: [0, 1.2] },
    upper: { kind: 'magnet', recoil: 1.1, remanence: [0.3, 1] },
  },
};

describe('two magnets', () => {
  const field = solveSection(drawMagnets(0, 0), magnets);
  const upper = forceOn(field, ['upper']);
  const size = Math.hypot(upper.fx, upper.fy);

  test('the force by stress is what the stored energy gives up when the upper one moves: F = -dW/dx', () => {
    const step = 1e-3;
    const energyAt = (dx: number, dy: number): number => energiesOf(solveSection(drawMagnets(dx, dy), magnets)).energy;
    // Five-point differences: the field changes over a few steps.
    const slope = (along: (s: number) => number): number =>
      (8 * (along(step) - along(-step)) - (along(2 * step) - along(-2 * step))) / (12 * step);
    const fx = -slope((s) => energyAt(s, 0));
    const fy = -slope((s) => energyAt(0, s));
    expect(Math.abs(upper.fx - fx) / size).toBeLessThan(1e-2);
    expect(Math.abs(upper.fy - fy) / size).toBeLessThan(1e-2);
    expect(fy).toBeLessThan(0); // they attract
  });

  test('what pulls the one pulls the other', () => {
    const lower = forceOn(field, ['lower']);
    // The closed outline carries a little of the balance: it mirrors the magnets far away.
    expect(Math.hypot(lower.fx + upper.fx, lower.fy + upper.fy) / size).toBeLessThan(3e-2);
  });

  test('the torque goes with the point it is taken about', () => {
    const about = forceOn(field, ['upper'], [0.02, -0.01]);
    const expected = upper.torque - 0.02 * upper.fy - 0.01 * upper.fx;
    expect(Math.abs(about.torque - expected)).toBeLessThan(1e-9 * size);
  });
});

test('a current by a steel plate: stress on the wire is J x B, at constant current F = +d(coenergy)/dy', () => {
  const density = 5e6;
  const draw = (dy: number): Section => ({
    outline: { kind: 'rectangle', from: [-0.05, -0.04], to: [0.05, 0.05] },
    background: 'air',
    maxEdge: 0.006,
    regions: [
      box('room', -0.014, -0.004, 0.028, 0.024, 0.0012),
      box('plate', -0.02, -0.012, 0.04, 0.008, 0.003),
      box('wire', -0.004, 0.004 + dy, 0.008, 0.005, 0.0012),
    ],
  });
  const setup: Setup = {
    materials: { air: AIR, room: AIR, plate: STEEL, wire: AIR },
    currentDensity: { wire: density },
  };
  const field = solveSection(draw(0), setup);
  let [lorentzX, lorentzY] = [0, 0];
  forEachSample(field, ['wire'], (s) => {
    lorentzX -= s.area * density * s.by;
    lorentzY += s.area * density * s.bx;
  });
  const byStress = forceOn(field, ['wire']);
  const size = Math.hypot(lorentzX, lorentzY);
  expect(Math.abs(byStress.fy - lorentzY) / size).toBeLessThan(2e-3);
  expect(Math.abs(byStress.fx - lorentzX) / size).toBeLessThan(2e-3);
  const step = 5e-4;
  const coenergyAt = (dy: number): number => energiesOf(solveSection(draw(dy), setup)).coenergy;
  const byWork = (coenergyAt(step) - coenergyAt(-step)) / (2 * step);
  expect(Math.abs(byWork - lorentzY) / size).toBeLessThan(1e-2);
  expect(lorentzY).toBeLessThan(0); // drawn to the steel
});

describe('pull between two discs', () => {
  const [pitch, half, height, disc] = [0.05, 0.008, 0.01, 0.012];
  const side = { kind: 'reversing' } as const;
  const section: Section = {
    outline: { kind: 'rectangle', from: [-pitch / 2, -0.06], to: [pitch / 2, 0.06] },
    background: 'air',
    maxEdge: 0.008,
    matched: [['left', 'right']],
    regions: [
      box('upper layer', -pitch / 2, 0.003, pitch, 0.004, 0.0015),
      box('middle layer', -pitch / 2, -0.001, pitch, 0.004, 0.0015),
      box('lower layer', -pitch / 2, -0.007, pitch, 0.006, 0.0015),
      box('upper magnet', -0.018, half, 0.036, height, 0.0015),
      box('lower magnet', -0.018, -half - height, 0.036, height, 0.0015),
      box('upper disc', -pitch / 2, half + height, pitch, disc, 0.004),
      box('lower disc', -pitch / 2, -half - height - disc, pitch, disc, 0.004),
    ],
  };
  const magnet = { kind: 'magnet', recoil: 1.05, remanence: [0, 1.25] } as const;
  const field = solveSection(section, {
    materials: {
      air: AIR,
      'upper layer': AIR,
      'middle layer': AIR,
      'lower layer': AIR,
      'upper magnet': magnet,
      'lower magnet': magnet,
      'upper disc': STEEL,
      'lower disc': STEEL,
    },
    edges: { left: side, right: side },
  });
  const pullThrough = (layer: string, thickness: number): number =>
    -stressThrough(field, [layer], () => [0, 1 / thickness]).fy;

  test('the stress averaged through any layer of the gap is the same pull', () => {
    const middle = pullThrough('middle layer', 0.004);
    expect(middle).toBeGreaterThan(1000);
    expect(relativeError(pullThrough('upper layer', 0.004), middle)).toBeLessThan(1e-3);
    expect(relativeError(pullThrough('lower layer', 0.006), middle)).toBeLessThan(1e-3);
  });

  test('the layers of elements round the disc with its magnet feel it too', () => {
    const around = forceOn(field, ['upper magnet', 'upper disc']);
    expect(relativeError(-around.fy, pullThrough('middle layer', 0.004))).toBeLessThan(5e-3);
    expect(Math.abs(around.fx)).toBeLessThan(1e-3 * Math.abs(around.fy)); // aligned: no force along
  });

  test('on the mid-plane, where the field stands upright, the pull is the mean of By^2/(2 mu0)', () => {
    const values = valuesAlong(field, buildLocator(field.mesh), [-0.4999 * pitch, 0], [0.4999 * pitch, 0], 400);
    const mean = values.reduce((sum, value) => sum + (value?.by ?? Number.NaN) ** 2 / (2 * MU0), 0) / values.length;
    expect(relativeError(pitch * mean, pullThrough('middle layer', 0.004))).toBeLessThan(5e-3);
    expect(Math.abs(meanOver(field, ['middle layer']).bx)).toBeLessThan(1e-3);
  });
});

test('a body alone in its own field, far from everything, is not pushed', () => {
  const lone: Field = solveSection(
    {
      outline: { kind: 'circle', centre: [0, 0], radius: 0.08 },
      background: 'air',
      maxEdge: 0.01,
      regions: [box('magnet', -0.006, -0.004, 0.012, 0.008, 0.0007)],
    },
    { materials: { air: AIR, magnet: { kind: 'magnet', recoil: 1.05, remanence: [0.6, 1] } } },
  );
  const { fx, fy } = forceOn(lone, ['magnet']);
  const pressure = 1.2 ** 2 / (2 * MU0);
  expect(Math.hypot(fx, fy)).toBeLessThan(1e-4 * pressure * 0.012);
});
