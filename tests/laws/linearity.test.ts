import type { Field, Material } from '@gapwright/fem-core';
import { forEachSample } from '@gapwright/fem-core/field';
import { meshSection, solveOnMesh } from '@gapwright/fem-core/mesh';
import { expect, test } from 'vitest';
import { core, coreSetup, relativeError } from './sections.js';

const steel: Material = { kind: 'linear', muR: 800 };
const mesh = meshSection(core);
const solve = (currents: Readonly<Record<string, number>>): Field =>
  solveOnMesh(mesh, coreSetup(steel, currents), { tolerance: 1e-12 }).field;

/** Areas of the coils' sides: unit current each is a density of one over the area. */
const FIRST = { out: 1 / (0.01 * 0.04), back: -1 / (0.008 * 0.04) };
const SECOND = { 'second out': 1 / (0.008 * 0.02), 'second back': -1 / (0.008 * 0.005) };

/** Linkage of a coil of one turn: A weighted by the coil's density at 1 A. */
function linkage(field: Field, coil: Readonly<Record<string, number>>): number {
  let sum = 0;
  for (const [region, density] of Object.entries(coil)) {
    forEachSample(field, [region], (s) => {
      sum += s.area * density * s.a;
    });
  }
  return sum;
}

test('reciprocity: either coil links the flux of the other alike', () => {
  const [first, second] = [solve(FIRST), solve(SECOND)];
  const mutual = linkage(first, SECOND);
  expect(Math.abs(mutual)).toBeGreaterThan(1e-9);
  expect(relativeError(linkage(second, FIRST), mutual)).toBeLessThan(1e-8);
  expect(mutual ** 2).toBeLessThan(linkage(first, FIRST) * linkage(second, SECOND)); // coupling below 1
});

test('superposition: the field of both currents is the sum of the fields', () => {
  const [first, second, both] = [solve(FIRST), solve(SECOND), solve({ ...FIRST, ...SECOND })];
  const scale = both.potential.reduce((most, a) => Math.max(most, Math.abs(a)), 0);
  both.potential.forEach((a, i) => {
    expect(Math.abs(a - first.potential[i] - second.potential[i])).toBeLessThan(1e-10 * scale);
  });
});

test('ten times the current is ten times the field', () => {
  const times = (factor: number): Record<string, number> =>
    Object.fromEntries(Object.entries(FIRST).map(([name, density]) => [name, factor * density]));
  const [one, ten] = [solve(FIRST), solve(times(10))];
  const scale = ten.potential.reduce((most, a) => Math.max(most, Math.abs(a)), 0);
  ten.potential.forEach((a, i) => {
    expect(Math.abs(a - 10 * one.potential[i])).toBeLessThan(1e-11 * scale);
  });
});
