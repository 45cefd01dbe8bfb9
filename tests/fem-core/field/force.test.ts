import type { Field, Region, Section, Setup } from '@gapwright/fem-core';
import { energiesOf, forceOn, InputError, MU0, solveSection } from '@gapwright/fem-core';
import { stressThrough } from '@gapwright/fem-core/goals';
import { describe, expect, test } from 'vitest';
import { AIR } from './made-fields.js';

interface Rod {
  readonly name: string;
  readonly x: number;
  readonly y: number;
  readonly radius: number;
  readonly remanence: readonly [x: number, y: number];
}

const LEFT: Rod = { name: 'left', x: -0.013, y: 0.002, radius: 0.01, remanence: [0.5, 1.1] };
const RIGHT: Rod = { name: 'right', x: 0.011, y: -0.003, radius: 0.008, remanence: [-0.9, 0.7] };

const draw = (rod: Rod, maxEdge = 0.0015): Region => ({
  name: rod.name,
  shape: { kind: 'circle', centre: [rod.x, rod.y], radius: rod.radius },
  maxEdge,
});

/**
 * Outside a rod with remanence Br across it and recoil 1: A = (R^2/2) (Brx y - Bry x)/r^2, a line dipole of moment
 * pi R^2 Br/mu0 a metre (Laplace's equation in polar coordinates; derived here).
 */
function dipole({ x: x0, y: y0, radius, remanence: [rx, ry] }: Rod): (x: number, y: number) => number {
  return (x, y) => (0.5 * radius * radius * (rx * (y - y0) - ry * (x - x0))) / ((x - x0) ** 2 + (y - y0) ** 2);
}

/** Rods alone in the plane: the outline holds the exact potential. */
function solveRods(rods: readonly Rod[]): Field {
  const air: Region = {
    name: 'near',
    shape: { kind: 'rectangle', from: [-0.03, -0.02], to: [0.027, 0.02] },
    maxEdge: 0.002,
  };
  const section: Section = {
    outline: { kind: 'rectangle', from: [-0.04, -0.03], to: [0.04, 0.03] },
    background: 'air',
    maxEdge: 0.006,
    regions: [air, ...rods.map((rod) => draw(rod))],
  };
  const value = (x: number, y: number): number => rods.reduce((sum, rod) => sum + dipole(rod)(x, y), 0);
  const materials: Record<string, Setup['materials'][string]> = { air: AIR, near: AIR };
  for (const { name, remanence } of rods) materials[name] = { kind: 'magnet', recoil: 1, remanence };
  const side = { kind: 'potential', value } as const;
  return solveSection(section, { materials, edges: { left: side, right: side, top: side, bottom: side } });
}

/**
 * Force and torque (about its own axis) on rod q in the field of rod p: F = (m . grad) B, T = m x B, with
 * B = (1/2) Rp^2 conj(Br)/z^2 as Bx - i By, z from the axis of p.
 */
function exactForce(p: Rod, q: Rod): { readonly fx: number; readonly fy: number; readonly torque: number } {
  const bAt = (x: number, y: number): readonly [number, number] => {
    const d = 1e-6; // B = (dA/dy, -dA/dx) of the formula above
    const a = dipole(p);
    return [(a(x, y + d) - a(x, y - d)) / (2 * d), -(a(x + d, y) - a(x - d, y)) / (2 * d)];
  };
  const [mx, my] = q.remanence.map((br) => (Math.PI * q.radius ** 2 * br) / MU0);
  const energy = (x: number, y: number): number => mx * bAt(x, y)[0] + my * bAt(x, y)[1];
  const h = 1e-5;
  const [bx, by] = bAt(q.x, q.y);
  return {
    fx: (energy(q.x + h, q.y) - energy(q.x - h, q.y)) / (2 * h),
    fy: (energy(q.x, q.y + h) - energy(q.x, q.y - h)) / (2 * h),
    torque: mx * by - my * bx,
  };
}

describe('two magnet rods in free space, exact potential on the outline', () => {
  const field = solveRods([LEFT, RIGHT]);
  const [left, right] = [forceOn(field, ['left']), forceOn(field, ['right'])];
  const size = Math.hypot(right.fx, right.fy);

  test('the force is that between two line dipoles', () => {
    const exact = exactForce(LEFT, RIGHT);
    expect(Math.hypot(right.fx - exact.fx, right.fy - exact.fy) / size).toBeLessThan(2e-3);
  });

  test('action is reaction, in force and in torque about one point', () => {
    expect(Math.hypot(left.fx + right.fx, left.fy + right.fy) / size).toBeLessThan(2e-3);
    expect(Math.abs(left.torque + right.torque)).toBeLessThan(2e-3 * size * 0.024);
  });

  test("the torque about a rod's own axis is m x B", () => {
    const { torque } = forceOn(field, ['right'], [RIGHT.x, RIGHT.y]);
    expect(Math.abs(torque / exactForce(LEFT, RIGHT).torque - 1)).toBeLessThan(2e-3);
  });

  test('from one point to another the torque changes by the moment of the force: T2 = T1 - r x F', () => {
    for (const [px, py] of [
      [0.011, -0.003],
      [-0.2, 0.07],
      [1, -3],
    ]) {
      const moved = forceOn(field, ['right'], [px, py]);
      expect(moved.fx).toBe(right.fx);
      expect(moved.fy).toBe(right.fy);
      const expected = right.torque - (px * right.fy - py * right.fx);
      expect(Math.abs(moved.torque - expected)).toBeLessThan(1e-11 * size * Math.hypot(px, py));
    }
  });

  test('both together are not pushed by themselves', () => {
    const both = forceOn(field, ['left', 'right']);
    expect(Math.hypot(both.fx, both.fy) / size).toBeLessThan(2e-3);
  });

  test('air named as a body is pushed by nothing', () => {
    const patch: Region = {
      name: 'patch',
      shape: { kind: 'circle', centre: [0, 0.022], radius: 0.004 },
      maxEdge: 0.001,
    };
    const outline = { kind: 'rectangle', from: [-0.04, -0.03], to: [0.04, 0.03] } as const;
    const across = { kind: 'applied', field: [0.3, 0.8] } as const;
    const uniform = solveSection(
      { outline, background: 'air', maxEdge: 0.01, regions: [patch] },
      { materials: { air: AIR, patch: AIR }, edges: { left: across, right: across, top: across, bottom: across } },
    );
    const { fx, fy } = forceOn(uniform, ['patch']);
    expect(Math.hypot(fx, fy)).toBeLessThan(1e-8 * (0.73 / MU0) * 0.008);
  });
});

test('a body drawn in two parts is pushed as the same body drawn in one', () => {
  const core: Region = { name: 'core', shape: { kind: 'circle', centre: [RIGHT.x, RIGHT.y], radius: 0.004 } };
  const make = (parts: readonly Region[]): Field => {
    const materials: Record<string, Setup['materials'][string]> = { air: AIR };
    for (const rod of [LEFT, RIGHT]) materials[rod.name] = { kind: 'magnet', recoil: 1.05, remanence: rod.remanence };
    for (const part of parts) materials[part.name] = materials.right;
    return solveSection(
      {
        outline: { kind: 'circle', centre: [0, 0], radius: 0.05 },
        background: 'air',
        maxEdge: 0.006,
        regions: [draw(LEFT, 0.002), draw(RIGHT), ...parts],
      },
      { materials },
    );
  };
  const whole = forceOn(make([]), ['right']);
  const field = make([core]);
  const split = forceOn(field, ['right', 'core']);
  const size = Math.hypot(whole.fx, whole.fy);
  expect(Math.hypot(split.fx - whole.fx, split.fy - whole.fy) / size).toBeLessThan(2e-3);
  expect(Math.abs(split.torque - whole.torque)).toBeLessThan(2e-3 * size * 0.03);
  expect(forceOn(field, ['core', 'right'])).toEqual(split); // in whatever order
});

test('a steel rod drawn to a magnet rod: the force is what the field energy loses when it is moved', () => {
  const solveAt = (dx: number): Field =>
    solveSection(
      {
        outline: { kind: 'circle', centre: [0, 0], radius: 0.05 },
        background: 'air',
        maxEdge: 0.006,
        regions: [draw(LEFT, 0.002), draw({ ...RIGHT, x: RIGHT.x + dx }, 0.0015)],
      },
      {
        materials: {
          air: AIR,
          left: { kind: 'magnet', recoil: 1.05, remanence: LEFT.remanence },
          right: { kind: 'linear', muR: 300 },
        },
      },
    );
  const { fx } = forceOn(solveAt(0), ['right']);
  const step = 5e-4;
  const work = -(energiesOf(solveAt(step)).energy - energiesOf(solveAt(-step)).energy) / (2 * step);
  expect(Math.abs(fx / work - 1)).toBeLessThan(2e-2); // differences of energies on two meshes are no better
  expect(fx).toBeLessThan(0);
});

test('a magnet by a closed wall is pushed off by its image, though it stands only a few elements away', () => {
  // A = 0 on y = 0: a magnet along y at height h has its reverse at -h. Force between line dipoles, derived above.
  const [radius, height, remanence] = [0.008, 0.011, 1.2];
  const rod: Rod = { name: 'rod', x: 0, y: height, radius, remanence: [0, remanence] };
  const image: Rod = { ...rod, y: -height, remanence: [0, -remanence] };
  const value = (x: number, y: number): number => dipole(rod)(x, y) + dipole(image)(x, y);
  const far = { kind: 'potential', value } as const;
  const field = solveSection(
    {
      outline: { kind: 'rectangle', from: [-0.05, 0], to: [0.05, 0.06] },
      background: 'air',
      maxEdge: 0.003,
      regions: [draw(rod, 0.002)],
    },
    {
      materials: { air: AIR, rod: { kind: 'magnet', recoil: 1, remanence: rod.remanence } },
      edges: { left: far, right: far, top: far, bottom: { kind: 'closed' } },
    },
  );
  const exact = (Math.PI * radius ** 4 * remanence ** 2) / (MU0 * (2 * height) ** 3);
  expect(exactForce(image, rod).fy / exact).toBeCloseTo(1, 3);
  const { fx, fy } = forceOn(field, ['rod']);
  expect(Math.abs(fy / exact - 1)).toBeLessThan(1e-2);
  expect(Math.abs(fx)).toBeLessThan(1e-2 * exact);
});

test('the stress through a ring round a body is its force: w falling from 1 within to 0 without', () => {
  const [inner, outer] = [0.009, 0.0115];
  const ring: Region = {
    name: 'ring',
    shape: { kind: 'circle', centre: [RIGHT.x, RIGHT.y], radius: outer },
    maxEdge: 0.001,
  };
  const gap: Region = { name: 'gap', shape: { kind: 'circle', centre: [RIGHT.x, RIGHT.y], radius: inner } };
  const magnet = (rod: Rod): Setup['materials'][string] => ({ kind: 'magnet', recoil: 1.05, remanence: rod.remanence });
  const field = solveSection(
    {
      outline: { kind: 'circle', centre: [0, 0], radius: 0.05 },
      background: 'air',
      maxEdge: 0.004,
      regions: [draw(LEFT, 0.0015), ring, gap, draw(RIGHT, 0.001)],
    },
    { materials: { air: AIR, ring: AIR, gap: AIR, left: magnet(LEFT), right: magnet(RIGHT) } },
  );
  const { fx, fy } = stressThrough(field, ['ring'], (x, y) => {
    const r = Math.hypot(x - RIGHT.x, y - RIGHT.y) * (inner - outer);
    return [(x - RIGHT.x) / r, (y - RIGHT.y) / r];
  });
  const force = forceOn(field, ['right']);
  expect(Math.hypot(fx - force.fx, fy - force.fy) / Math.hypot(fx, fy)).toBeLessThan(5e-3);
});

describe('where a force means nothing it is refused', () => {
  const section: Section = {
    outline: { kind: 'rectangle', from: [-0.03, -0.03], to: [0.03, 0.03] },
    background: 'air',
    maxEdge: 0.01,
    regions: [
      { name: 'magnet', shape: { kind: 'rectangle', from: [-0.01, -0.01], to: [0, 0.01] } },
      { name: 'plate', shape: { kind: 'rectangle', from: [0, -0.01], to: [0.005, 0.01] } },
      { name: 'coil', shape: { kind: 'rectangle', from: [0.012, 0], to: [0.02, 0.01] } },
      { name: 'frame', shape: { kind: 'rectangle', from: [0.012, 0.01], to: [0.02, 0.014] } },
      { name: 'hidden', shape: { kind: 'circle', centre: [-0.02, -0.02], radius: 0.003 } },
      { name: 'cover', shape: { kind: 'rectangle', from: [-0.025, -0.025], to: [-0.015, -0.015] } },
    ],
  };
  const field = solveSection(section, {
    materials: {
      air: AIR,
      magnet: { kind: 'magnet', recoil: 1.05, remanence: [0, 1] },
      plate: { kind: 'linear', muR: 100 },
      coil: AIR,
      frame: { kind: 'linear', muR: 50 },
      hidden: AIR,
      cover: AIR,
    },
    currentDensity: { coil: 1e6 },
  });
  const faultOf = (regions: readonly string[]) => {
    try {
      forceOn(field, regions);
    } catch (error) {
      if (error instanceof InputError) return error.faults[0];
      throw error;
    }
    return undefined;
  };

  test.each([['magnet'], ['plate'], ['coil'], ['frame']])('%s touches another body', (name) => {
    expect(faultOf([name])).toMatchObject({ code: 'no-force', key: name });
    expect(faultOf([name])?.wrong).toContain('touches another body');
  });

  test('named together they do not', () => {
    expect(faultOf(['magnet', 'plate'])).toBeUndefined();
    expect(faultOf(['coil', 'frame'])).toBeUndefined();
  });

  test.each([[['nowhere']], [['hidden']], [[]]])('%j names nothing', (regions) => {
    expect(faultOf(regions)).toMatchObject({ code: 'no-force' });
    expect(faultOf(regions)?.remedy).toContain('magnet');
  });
});
