import type { Field, Setup } from '@gapwright/fem-core';
import { solveSection } from '@gapwright/fem-core';
import { describe, expect, test } from 'vitest';
import { solveFineSlice } from '../../../packages/machine-models/src/demagnetisation/fine-slice.js';
import {
  fieldStrength,
  magnetSamples,
  worstPoint,
} from '../../../packages/machine-models/src/demagnetisation/magnet-samples.js';
import type { Machine } from '../../../packages/machine-models/src/machine.js';
import { hutHydro, MU0, relativeError } from '../../helpers/machines.js';

const magnet = (recoil: number, remanence: readonly [number, number]): Setup => ({
  materials: { air: { kind: 'linear', muR: 1 }, bar: { kind: 'magnet', recoil, remanence } },
});

describe('magnets in air', () => {
  test('a round bar across its axis works at Br/(1 + m) throughout, whichever way it points', () => {
    const [recoil, br] = [1.05, 1.2];
    for (const angle of [0.4, 2.1]) {
      const shape = { kind: 'circle', centre: [0, 0], radius: 0.01 } as const;
      const field = solveSection(
        {
          outline: { kind: 'circle', centre: [0, 0], radius: 0.02 },
          background: 'air',
          open: true,
          regions: [{ name: 'bar', shape, maxEdge: 0.001 }],
        },
        magnet(recoil, [br * Math.cos(angle), br * Math.sin(angle)]),
      );
      const samples = magnetSamples(field, 'bar');
      const { b, h } = worstPoint(samples);
      expect(relativeError(b, br / (1 + recoil))).toBeLessThan(3e-3);
      expect(relativeError(h, (b - br) / (MU0 * recoil))).toBeLessThan(1e-12);
      expect(relativeError(samples.remanence, br)).toBeLessThan(1e-12);
      expect(
        relativeError(
          samples.area.reduce((sum, part) => sum + part),
          Math.PI * 1e-4,
        ),
      ).toBeLessThan(1e-3);
    }
  });

  test('a rectangle: the worst hundredth is that of its charged sheets, counted on a fine grid', () => {
    const [w, h, br] = [0.03, 0.01, 1.25];
    const corners = [-1, 1].flatMap((i) => [-1, 1].map((j) => [(i * w) / 2, (j * h) / 2] as const));
    const field = solveSection(
      {
        outline: { kind: 'circle', centre: [0, 0], radius: 0.03 },
        background: 'air',
        open: true,
        regions: [
          { name: 'bar', shape: { kind: 'rectangle', from: [-w / 2, -h / 2], to: [w / 2, h / 2] }, maxEdge: h / 6 },
        ],
        sizeAt: corners.map((at) => ({ at, maxEdge: h / 30 })),
      },
      magnet(1, [0, br]),
    );
    // By of current sheets at the two sides.
    const sheet = (x: number, y: number): number => Math.atan((y + h / 2) / x) - Math.atan((y - h / 2) / x);
    const by = (x: number, y: number): number => (br / (2 * Math.PI)) * (sheet(x + w / 2, y) - sheet(x - w / 2, y));
    const grid: number[] = [];
    const n = 400;
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) grid.push(by(((i + 0.5) / n - 0.5) * w, ((j + 0.5) / n - 0.5) * h));
    }
    grid.sort((a, b) => a - b);
    const { b, x, y } = worstPoint(magnetSamples(field, 'bar'));
    expect(Math.abs(b - (grid[0.01 * n * n] ?? Number.NaN))).toBeLessThan(0.004 * br);
    expect(Math.abs(x)).toBeLessThan(0.1 * w); // by the middle of a face, where it is thin against its width
    expect(Math.abs(Math.abs(y) - h / 2)).toBeLessThan(0.1 * h);
  });
});

test('a wide magnet between ideal discs works as in one dimension: Br h/(h + m g)', () => {
  const machine = hutHydro();
  const { thickness, meanRadius, material, temperature } = machine.rotor.magnets;
  const wide: Machine = {
    ...machine,
    materials: { ...machine.materials, plate: { kind: 'steel', muR: 1e7, source: 'ideal' } },
    rotor: {
      ...machine.rotor,
      poles: 2,
      magnets: { shape: 'sector', arc: 0.7, length: 0.055, segments: 1, thickness, meanRadius, material, temperature },
    },
  };
  const samples = magnetSamples(solveFineSlice(wide, 0.2).field, 'upper magnet');
  const b = (1.3 * 0.024) / (0.024 + 1.05 * 0.019);
  samples.along.forEach((along, i) => {
    if ((samples.x[i] ?? 1) > 0.1) return; // the edge is at 0.22 m
    expect(relativeError(along, b)).toBeLessThan(1e-4);
    expect(relativeError(fieldStrength(samples, along), -(1.3 - b) / (MU0 * 1.05))).toBeLessThan(2e-4);
  });
});

test('what is no magnet of one direction is refused', () => {
  const field = solveFineSlice(hutHydro(), 0.128).field satisfies Field;
  expect(() => magnetSamples(field, 'upper disc')).toThrow('no magnet');
});
