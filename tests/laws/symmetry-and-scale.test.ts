import type { Field, Material, Point, Section, Setup } from '@gapwright/fem-core';
import { energiesOf, forceOn, meanOver, solveSection } from '@gapwright/fem-core';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { AIR, box, readerOf, relativeError, STEEL } from './sections.js';

const SIZE = 0.03;

/** A magnet above a steel plate, both drawn as polygons so that the whole can be moved, turned and scaled. */
function drawPair(move: (p: Point) => Point, scale: number): Section {
  const polygon = (corners: readonly Point[]): { kind: 'polygon'; corners: Point[] } => ({
    kind: 'polygon',
    corners: corners.map(move),
  });
  const rectangle = (x0: number, y0: number, x1: number, y1: number): readonly Point[] => [
    [x0, y0],
    [x1, y0],
    [x1, y1],
    [x0, y1],
  ];
  return {
    outline: polygon(rectangle(-SIZE, -SIZE, SIZE, SIZE)),
    background: 'air',
    maxEdge: 0.006 * scale,
    regions: [
      {
        name: 'magnet',
        shape: polygon(rectangle(-0.008, 0.002, 0.006, 0.008)),
        maxEdge: 0.0014 * scale,
      },
      {
        name: 'plate',
        shape: polygon(rectangle(-0.012, -0.007, 0.012, -0.002)),
        maxEdge: 0.0014 * scale,
      },
    ],
  };
}

function setupPair(remanence: Point, plate: Material = { kind: 'linear', muR: 500 }): Setup {
  return { materials: { air: AIR, magnet: { kind: 'magnet', recoil: 1.05, remanence }, plate } };
}

const PLACES: readonly Point[] = [
  [0, 0],
  [0.004, 0.0005],
  [-0.01, 0.012],
  [0.015, -0.004],
];

describe('scale: all lengths times s leave B as it is, for magnets and steel by a curve alike', () => {
  const setup = setupPair([0, 1.2], STEEL);
  const one = solveSection(
    drawPair((p) => p, 1),
    setup,
  );

  /** Largest difference of B and of A/s from the unscaled field at some places, as shares of 1 T and of 1 T x 10 mm. */
  function compare(s: number): { b: number; a: number; energy: number; force: number } {
    const scaled = solveSection(
      drawPair(([x, y]) => [s * x, s * y], s),
      setup,
    );
    expect(scaled.report.converged).toBe(true);
    const [at, scaledAt] = [readerOf(one), readerOf(scaled)];
    let [b, a] = [0, 0];
    for (const [x, y] of PLACES) {
      const [value, other] = [at(x, y), scaledAt(s * x, s * y)];
      b = Math.max(b, Math.hypot(other.bx - value.bx, other.by - value.by));
      a = Math.max(a, Math.abs(other.a / s - value.a) / 0.01);
    }
    // Per metre of depth: energy goes with the area, force with the length.
    const energy = relativeError(energiesOf(scaled).energy, s * s * energiesOf(one).energy);
    const force = relativeError(forceOn(scaled, ['magnet']).fy, s * forceOn(one, ['magnet']).fy);
    return { b, a, energy, force };
  }

  test.each([2 ** -10, 2 ** 10])('s = %s: a power of two rounds nothing, so the mesh is the same too', (s) => {
    const { b, a, energy, force } = compare(s);
    expect(Math.max(b, a, energy, force)).toBeLessThan(1e-9);
  });

  test.each([1e-3, 0.1, 7, 1e3])('s = %s: alike to what another mesh does', (s) => {
    const { b, a, energy, force } = compare(s);
    expect(b).toBeLessThan(3e-2);
    expect(Math.max(a, energy)).toBeLessThan(1e-3);
    expect(force).toBeLessThan(5e-3);
  });
});

test('currents: lengths times s at the same current give B over s; at the same density B times s', () => {
  const draw = (s: number): Section => ({
    outline: { kind: 'rectangle', from: [0, 0], to: [0.04 * s, 0.04 * s] },
    background: 'air',
    regions: [box('bar', 0.01 * s, 0.015 * s, 0.01 * s, 0.006 * s)],
  });
  const solve = (s: number, density: number): number => {
    const setup = { materials: { air: AIR, bar: AIR }, currentDensity: { bar: density } };
    return readerOf(solveSection(draw(s), setup))(0.025 * s, 0.01 * s).by;
  };
  expect(relativeError(solve(50, 1e6 / 50 ** 2), solve(1, 1e6) / 50)).toBeLessThan(1e-8);
  expect(relativeError(solve(50, 1e6), solve(1, 1e6) * 50)).toBeLessThan(1e-8);
});

test('moved and turned: the field moves and turns along', () => {
  const still = solveSection(
    drawPair((p) => p, 1),
    setupPair([0, 1.2]),
  );
  const at = readerOf(still);
  const fields = fc.record({
    angle: fc.double({ min: 0, max: 2 * Math.PI, noNaN: true }),
    x: fc.double({ min: -0.1, max: 0.1, noNaN: true }),
    y: fc.double({ min: -0.1, max: 0.1, noNaN: true }),
  });
  fc.assert(
    fc.property(fields, ({ angle, x, y }) => {
      const [c, s] = [Math.cos(angle), Math.sin(angle)];
      const move = ([px, py]: Point): Point => [x + c * px - s * py, y + s * px + c * py];
      const moved = solveSection(drawPair(move, 1), setupPair([-1.2 * s, 1.2 * c]));
      const movedAt = readerOf(moved);
      // Another mesh, so alike to what the meshes do.
      expect(relativeError(energiesOf(moved).energy, energiesOf(still).energy)).toBeLessThan(3e-3);
      const [force, movedForce] = [forceOn(still, ['magnet']), forceOn(moved, ['magnet'])];
      expect(relativeError(c * movedForce.fy - s * movedForce.fx, force.fy)).toBeLessThan(1e-2);
      for (const place of PLACES) {
        const [value, other] = [at(...place), movedAt(...move(place))];
        expect(Math.abs(other.a - value.a)).toBeLessThan(2e-3 * 1.2 * 0.006);
      }
    }),
    { numRuns: 6, seed: 5 },
  );
});

describe('mirror symmetry', () => {
  const wide = { name: 'magnet', shape: { kind: 'rectangle', from: [-0.008, 0.002], to: [0.008, 0.008] } } as const;
  const plate = { name: 'plate', shape: { kind: 'rectangle', from: [-0.012, -0.007], to: [0.012, -0.002] } } as const;
  const whole: Section = {
    outline: { kind: 'rectangle', from: [-SIZE, -SIZE], to: [SIZE, SIZE] },
    background: 'air',
    maxEdge: 0.002,
    regions: [wide, plate],
  };
  const places: readonly Point[] = [
    [0.003, 0],
    [0.009, 0.001],
    [0.02, 0.01],
    [0.005, -0.005],
  ];
  const half: Section = {
    ...whole,
    outline: { kind: 'rectangle', from: [0, -SIZE], to: [SIZE, SIZE] },
    regions: [wide, plate].map(({ name, shape }) => ({
      name,
      shape: { ...shape, from: [0, shape.from[1]] as const },
    })),
  };
  const compare = (field: Field, sign: 1 | -1): void => {
    const at = readerOf(field);
    const scale = 1.2 * 0.008;
    for (const [x, y] of places) expect(Math.abs(at(-x, y).a - sign * at(x, y).a)).toBeLessThan(5e-4 * scale);
  };

  test('a magnet that points along the axis of symmetry: A is odd, and a half with a closed cut says the same', () => {
    const field = solveSection(whole, setupPair([0, 1.2]));
    compare(field, -1);
    const part = solveSection(half, setupPair([0, 1.2]));
    expect(relativeError(2 * energiesOf(part).energy, energiesOf(field).energy)).toBeLessThan(2e-3);
    const [at, partAt] = [readerOf(field), readerOf(part)];
    for (const [x, y] of places) expect(Math.abs(at(x, y).a - partAt(x, y).a)).toBeLessThan(5e-4 * 1.2 * 0.008);
  });

  test('a magnet that points across it: A is even, and a half with a crossing cut says the same', () => {
    const field = solveSection(whole, setupPair([1.2, 0]));
    compare(field, 1);
    const part = solveSection(half, { ...setupPair([1.2, 0]), edges: { left: { kind: 'crossing' } } });
    expect(relativeError(2 * energiesOf(part).energy, energiesOf(field).energy)).toBeLessThan(2e-3);
    expect(relativeError(meanOver(part, ['magnet']).bx, meanOver(field, ['magnet']).bx)).toBeLessThan(2e-3);
  });

  test('turning all magnets and currents round turns the field round, whatever the steel', () => {
    const solve = (sign: 1 | -1): Field =>
      solveSection(
        { ...whole, regions: [...whole.regions, box('wire', 0.015, 0.01, 0.003, 0.003)] },
        {
          materials: { ...setupPair([0.3 * sign, sign], STEEL).materials, wire: AIR },
          currentDensity: { wire: sign * 5e6 },
        },
        { tolerance: 1e-11 },
      );
    const [forth, back] = [solve(1), solve(-1)];
    const scale = forth.potential.reduce((most, a) => Math.max(most, Math.abs(a)), 0);
    forth.potential.forEach((a, i) => {
      expect(Math.abs(a + back.potential[i])).toBeLessThan(1e-9 * scale);
    });
  });
});

test('repeating and reversing sides: two pole pitches with repeating sides are one with reversing sides', () => {
  const [pitch, height] = [0.03, 0.02];
  const row = (poles: number): Section => ({
    outline: { kind: 'rectangle', from: [-pitch / 2, 0], to: [(poles - 0.5) * pitch, height] },
    background: 'air',
    maxEdge: 0.0015,
    matched: [['left', 'right']],
    regions: Array.from({ length: poles }, (_, i) => box(`magnet ${i}`, (i - 0.3) * pitch, 0.005, 0.6 * pitch, 0.006)),
  });
  const magnet = (sign: 1 | -1): Material => ({ kind: 'magnet', recoil: 1.05, remanence: [0.2 * sign, 1.1 * sign] });
  const two = solveSection(row(2), {
    materials: { air: AIR, 'magnet 0': magnet(1), 'magnet 1': magnet(-1) },
    edges: { left: { kind: 'repeating' }, right: { kind: 'repeating' } },
  });
  const one = solveSection(row(1), {
    materials: { air: AIR, 'magnet 0': magnet(1) },
    edges: { left: { kind: 'reversing' }, right: { kind: 'reversing' } },
  });
  expect(relativeError(energiesOf(two).energy, 2 * energiesOf(one).energy)).toBeLessThan(2e-3);
  const [twoAt, oneAt] = [readerOf(two), readerOf(one)];
  for (const x of [-0.012, -0.004, 0.003, 0.0149]) {
    for (const y of [0.002, 0.008, 0.015]) {
      const value = oneAt(x, y).a;
      expect(Math.abs(twoAt(x, y).a - value)).toBeLessThan(5e-4 * 1.1 * 0.6 * pitch);
      expect(Math.abs(twoAt(x + pitch, y).a + value)).toBeLessThan(5e-4 * 1.1 * 0.6 * pitch);
    }
  }
  // Across the seam the field goes on, turned round.
  for (const y of [0.004, 0.008, 0.012]) {
    const [left, right] = [oneAt(-pitch / 2, y), oneAt(pitch / 2, y)];
    expect(Math.abs(left.a + right.a)).toBeLessThan(1e-12);
  }
});
